import { randomBytes } from 'node:crypto';
import { open, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';

/** Writes a file so that it is whole or not there, also after a loss of power: temporary file, fsync, rename, fsync of the folder. */
export async function writeDurably(path: string, content: Uint8Array | string): Promise<void> {
  const folder = dirname(path);
  const temporary = join(folder, `.${randomBytes(9).toString('hex')}.part`);
  try {
    const file = await open(temporary, 'wx');
    try {
      await file.writeFile(content);
      await file.sync();
    } finally {
      await file.close();
    }
    await rename(temporary, path);
  } catch (error) {
    await rm(temporary, { force: true });
    throw error;
  }
  const handle = await open(folder, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}
