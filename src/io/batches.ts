import type { OpenFile } from './disk.js';

/** Content in pieces: bytes, or text that is written as UTF-8. */
export type Chunks = Iterable<Uint8Array | string> | AsyncIterable<Uint8Array | string>;

/** Small pieces are gathered to this size, bytes. */
const BATCH = 1 << 20;

/** Gathers small pieces, so that many of them are one call to the disk; text becomes UTF-8. */
export async function* batches(chunks: Chunks): AsyncGenerator<Uint8Array> {
  let gathered: Uint8Array[] = [];
  let bytes = 0;
  for await (const chunk of chunks) {
    const piece = typeof chunk === 'string' ? Buffer.from(chunk, 'utf8') : chunk;
    gathered.push(piece);
    bytes += piece.length;
    if (bytes < BATCH) continue;
    yield gathered.length === 1 ? piece : Buffer.concat(gathered, bytes);
    gathered = [];
    bytes = 0;
  }
  if (bytes > 0) yield Buffer.concat(gathered, bytes);
}

/** Writes all bytes: a disk may take fewer at a time. */
export async function writeAll(file: OpenFile, bytes: Uint8Array): Promise<void> {
  for (let at = 0; at < bytes.length; ) {
    const { bytesWritten } = await file.write(bytes, at, bytes.length - at);
    at += bytesWritten;
  }
}
