import type { Stats } from 'node:fs';
import * as fs from 'node:fs/promises';

/** An open file, as far as writing needs it. */
export interface OpenFile {
  write(bytes: Uint8Array, offset: number, length: number): Promise<{ bytesWritten: number }>;
  sync(): Promise<void>;
  close(): Promise<void>;
}

/** What writing asks of a disk; tests put one in that fails. */
export interface Disk {
  /** creates a file that must not exist yet */
  create(path: string): Promise<OpenFile>;
  /** null where there is nothing; a symbolic link is not followed */
  inspect(path: string): Promise<Stats | null>;
  /** as {@link Disk.inspect}, but follows a symbolic link */
  inspectTarget(path: string): Promise<Stats | null>;
  checkWritable(folder: string): Promise<void>;
  makeFolder(path: string): Promise<void>;
  link(from: string, to: string): Promise<void>;
  rename(from: string, to: string): Promise<void>;
  remove(path: string): Promise<void>;
  removeFolder(path: string): Promise<void>;
  /** makes the names in a folder durable */
  syncFolder(path: string): Promise<void>;
}

const orNull = async (stats: Promise<Stats>): Promise<Stats | null> => {
  try {
    return await stats;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
};

/** The disk of this machine. */
export const localDisk: Disk = {
  create: (path) => fs.open(path, 'wx', 0o666),
  inspect: (path) => orNull(fs.lstat(path)),
  inspectTarget: (path) => orNull(fs.stat(path)),
  checkWritable: (folder) => fs.access(folder, fs.constants.W_OK | fs.constants.X_OK),
  makeFolder: (path) => fs.mkdir(path),
  link: (from, to) => fs.link(from, to),
  rename: (from, to) => fs.rename(from, to),
  remove: (path) => fs.unlink(path),
  removeFolder: (path) => fs.rmdir(path),
  syncFolder: async (path) => {
    const handle = await fs.open(path, 'r');
    try {
      await handle.sync();
    } finally {
      await handle.close();
    }
  },
};
