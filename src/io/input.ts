import { createHash } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { text } from 'node:stream/consumers';
import { InputError } from '../errors.js';

/** A file that was read, for the record: its name without folders and the SHA-256 of its bytes. */
export interface InputRecord {
  readonly name: string;
  readonly sha256: string;
}

/**
 * The text of a file; `-` is standard input.
 * @throws InputError `io.missing`, `io.read`
 */
export async function readInputText(path: string): Promise<string> {
  if (path === '-') return text(process.stdin);
  try {
    return await readFile(path, 'utf8');
  } catch (error) {
    throw unreadable(path, error);
  }
}

/** The bytes of a file. */
export async function readInputBytes(path: string): Promise<Uint8Array> {
  try {
    return await readFile(path);
  } catch (error) {
    throw unreadable(path, error);
  }
}

/** Says what kept a file from being read and what to do. */
export function unreadable(path: string, error: unknown): InputError {
  const { code } = error as NodeJS.ErrnoException;
  const why: Record<string, string> = {
    ENOENT: 'there is no such file; check the path',
    EISDIR: 'it is a folder; name a file in it',
    EACCES: 'it may not be read; check its permissions',
    ENOTDIR: 'a part of the path is not a folder',
  };
  return new InputError(
    code === 'ENOENT' ? 'io.missing' : 'io.read',
    `${path}: ${why[code ?? ''] ?? `cannot be read (${code ?? String(error)})`}`,
    { fields: { path }, cause: error },
  );
}

export function sha256Hex(bytes: Uint8Array | string): string {
  return createHash('sha256').update(bytes).digest('hex');
}
