import { createHash, randomBytes } from 'node:crypto';
import { open, rename, rm, stat } from 'node:fs/promises';
import { hostname } from 'node:os';
import { basename, dirname, join } from 'node:path';
import { unwritable } from './unwritable.js';

const HOST = createHash('sha256').update(hostname()).digest('hex').slice(0, 8);
const TEMPORARY = /^\.([0-9a-f]{8})-(\d+)-[0-9a-f]+\.part$/;
/** Age from which a temporary file of another machine is no longer being written, ms. */
const ABANDONED_MS = 3_600_000;

/** Whether a file is a temporary one whose writer has gone: told by its process here, by its age on another machine. */
export async function isLeftOver(path: string): Promise<boolean> {
  const [, host, pid] = TEMPORARY.exec(basename(path)) ?? [];
  if (host === undefined) return false;
  if (host === HOST) {
    try {
      process.kill(Number(pid), 0);
    } catch (error) {
      return (error as NodeJS.ErrnoException).code === 'ESRCH';
    }
  }
  const found = await stat(path).catch(() => null);
  return found !== null && Date.now() - found.mtimeMs > ABANDONED_MS;
}

/**
 * Writes a file from pieces, durably as {@link writeDurably} does; its name may depend on what was written.
 * @param fill writes the pieces
 * @param nameOf the file's name in the folder, by the SHA-256 of its content
 */
export async function writeDurablyInPieces(
  folder: string,
  fill: (write: (piece: string) => Promise<void>) => Promise<void>,
  nameOf: (sha256: string) => string,
): Promise<{ readonly path: string; readonly sha256: string }> {
  const temporary = join(folder, `.${HOST}-${process.pid}-${randomBytes(9).toString('hex')}.part`);
  const hash = createHash('sha256');
  let path = temporary;
  try {
    const file = await open(temporary, 'wx').catch((error: unknown) => {
      throw unwritable(temporary, error);
    });
    try {
      await fill(async (piece) => {
        hash.update(piece);
        await file.appendFile(piece).catch((error: unknown) => {
          throw unwritable(temporary, error);
        });
      });
      await file.sync();
    } finally {
      await file.close();
    }
    const sha256 = hash.digest('hex');
    path = join(folder, nameOf(sha256));
    await rename(temporary, path);
    await syncFolder(folder);
    return { path, sha256 };
  } catch (error) {
    await rm(temporary, { force: true });
    throw error;
  }
}

async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/**
 * Writes a file so that it is whole or not there, also after a loss of power: temporary file, fsync, rename, fsync of the folder.
 * @throws InputError `io.*`: disk full, no permission …
 */
export async function writeDurably(path: string, content: Uint8Array | string): Promise<void> {
  const folder = dirname(path);
  const temporary = join(folder, `.${HOST}-${process.pid}-${randomBytes(9).toString('hex')}.part`);
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
    throw unwritable(path, error);
  }
  await syncFolder(folder);
}
