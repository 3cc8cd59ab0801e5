import { createReadStream } from 'node:fs';
import { GalewakeError, InputError } from '../errors.js';
import { lineSplitter } from '../track/read/lines.js';
import { unreadable } from './input.js';

/** What messages call a source: its path, or `standard input` for `-`. */
export const sourceName = (path: string): string => (path === '-' ? 'standard input' : path);

/** First bytes of files that people give by mistake, and what to do. */
const SIGNATURES: readonly (readonly [bytes: readonly number[], what: string, remedy: string])[] = [
  [[0x1f, 0x8b], 'compressed (gzip)', 'unpack it first, as with gunzip -c FILE'],
  [[0x50, 0x4b, 0x03, 0x04], 'a ZIP archive or a spreadsheet', 'unpack it, or export the sheet as CSV'],
  [[0xff, 0xfe], 'UTF-16 text', 'save it as UTF-8'],
  [[0xfe, 0xff], 'UTF-16 text', 'save it as UTF-8'],
  [[0x89, 0x48, 0x44, 0x46], 'a netCDF-4 or HDF5 file', 'give the CSV edition'],
  [[0x43, 0x44, 0x46], 'a netCDF file', 'give the CSV edition'],
  [[0x25, 0x50, 0x44, 0x46], 'a PDF', 'give a text file'],
  [[0x89, 0x50, 0x4e, 0x47], 'a picture', 'give a text file'],
];

/**
 * The text of a file, or of standard input for `-`, as it comes; a byte-order mark is left in.
 * @param options.onBytes sees the bytes as they are read: for a checksum
 * @throws InputError `io.missing`, `io.read`, `io.binary`, `io.encoding`
 */
export async function* readTextPieces(
  path: string,
  options: { readonly onBytes?: (bytes: Uint8Array) => void } = {},
): AsyncGenerator<string, void, undefined> {
  const source = sourceName(path);
  const stream = path === '-' ? process.stdin : createReadStream(path, { highWaterMark: 1 << 18 });
  const decoder = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true });
  let line = 1;
  let first = true;
  const decode = (bytes: Uint8Array | undefined): string => {
    try {
      return bytes ? decoder.decode(bytes, { stream: true }) : decoder.decode();
    } catch (cause) {
      const before = bytes ? new TextDecoder().decode(bytes).split('\uFFFD')[0]! : '';
      const at = line + lineEnds(before);
      throw new InputError(
        'io.encoding',
        `${source}:${at}: is not UTF-8 (an accented letter in an older encoding?); save the file as UTF-8`,
        {
          fields: { source, line: at },
          cause,
        },
      );
    }
  };
  try {
    for await (const chunk of stream as AsyncIterable<Uint8Array>) {
      if (first) refuseBinary(chunk, source);
      first = false;
      options.onBytes?.(chunk);
      if (chunk.includes(0)) {
        throw new InputError('io.binary', `${source}:${line}: holds bytes that no text has; give a text file`, {
          fields: { source, line },
        });
      }
      const piece = decode(chunk);
      line += lineEnds(piece);
      if (piece !== '') yield piece;
    }
  } catch (cause) {
    const ours = cause instanceof GalewakeError || typeof (cause as NodeJS.ErrnoException | null)?.code !== 'string';
    throw ours ? cause : unreadable(source, cause);
  }
  const rest = decode(undefined);
  if (rest !== '') yield rest;
}

function lineEnds(text: string): number {
  let count = 0;
  for (let at = text.indexOf('\n'); at !== -1; at = text.indexOf('\n', at + 1)) count++;
  return count;
}

/**
 * The lines of a text file, or of standard input for `-`, many at a time. A byte-order mark and carriage returns are
 * taken off.
 * @param options.onBytes sees the bytes as they are read: for a checksum
 * @throws InputError as {@link readTextPieces}; `track.line-length`
 */
export async function* readLineBatches(
  path: string,
  options: { readonly onBytes?: (bytes: Uint8Array) => void } = {},
): AsyncGenerator<readonly string[], void, undefined> {
  const splitter = lineSplitter(sourceName(path));
  for await (const piece of readTextPieces(path, options)) {
    const lines = splitter.push(piece);
    if (lines.length > 0) yield lines;
  }
  yield splitter.end();
}

/** The lines of a text file one by one; see {@link readLineBatches}. */
export async function* readLines(path: string): AsyncGenerator<string, void, undefined> {
  for await (const batch of readLineBatches(path)) yield* batch;
}

function refuseBinary(bytes: Uint8Array, source: string): void {
  const found = SIGNATURES.find(([signature]) => signature.every((byte, i) => bytes[i] === byte));
  if (found) {
    throw new InputError('io.binary', `${source}: is ${found[1]}, not a text file; ${found[2]}`, {
      fields: { source },
    });
  }
}
