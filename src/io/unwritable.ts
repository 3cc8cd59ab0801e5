import { InputError } from '../errors.js';

/** Error codes of the operating system: the stable code, what is wrong, how to mend it. */
const CAUSES: Readonly<Record<string, readonly [code: string, message: string]>> = {
  ENOSPC: ['io.full', 'the disk is full; free some space or write to another folder'],
  EDQUOT: ['io.full', 'your quota on this disk is used up; free some space or write to another folder'],
  EFBIG: [
    'io.too-large',
    'the file would be larger than this disk or your limits allow; take a larger cell or smaller bounds',
  ],
  EACCES: ['io.permission', 'you may not write here; change the permissions or write to another folder'],
  EPERM: ['io.permission', 'this is not permitted; change the permissions or write to another folder'],
  EROFS: ['io.read-only', 'the disk is read-only; write to another folder'],
  ENOTDIR: ['io.not-a-folder', 'a part of the path is a file, not a folder; choose another path'],
  EISDIR: ['io.is-a-folder', 'it is a folder; give the name of a file'],
  ENAMETOOLONG: ['io.name-too-long', 'the name is too long for this disk; choose a shorter one'],
  ENOENT: ['io.no-folder', 'the folder does not exist; make it first'],
  ELOOP: ['io.link', 'the path leads through too many symbolic links; choose another path'],
  EEXIST: ['io.exists', 'it exists already; choose another name or allow replacing with --force'],
  EMFILE: ['io.too-many-open', 'too many files are open; close some or raise the limit'],
  ENFILE: ['io.too-many-open', 'too many files are open on this machine; close some'],
};

/** Says what kept a file from being written and what to do. */
export function unwritable(path: string, error: unknown): InputError {
  if (error instanceof InputError) return error;
  const system = (error as NodeJS.ErrnoException | null)?.code;
  const [code, message] = CAUSES[system ?? ''] ?? [
    'io.write',
    `it cannot be written (${error instanceof Error ? error.message : String(error)})`,
  ];
  return new InputError(code, `${path}: ${message}`, { fields: { path, ...(system ? { system } : {}) }, cause: error });
}
