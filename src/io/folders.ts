import { dirname, resolve } from 'node:path';
import type { Disk } from './disk.js';

/**
 * Makes a folder and those above it that are missing, all or none.
 * @returns the folders that were made, the deepest first
 */
export async function makeFolders(path: string, disk: Disk): Promise<string[]> {
  const missing: string[] = [];
  for (let folder = resolve(path); (await disk.inspectTarget(folder)) === null; folder = dirname(folder))
    missing.push(folder);
  const made: string[] = [];
  try {
    for (const folder of missing.reverse()) {
      try {
        await disk.makeFolder(folder);
        made.unshift(folder);
      } catch (error) {
        // another process may have made it meanwhile
        if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
        const there = await disk.inspectTarget(folder);
        if (!there?.isDirectory()) throw error;
      }
    }
  } catch (error) {
    await removeFolders(made, disk);
    throw error;
  }
  return made;
}

/** Removes folders, the deepest first, as far as they are empty. */
export async function removeFolders(folders: readonly string[], disk: Disk): Promise<void> {
  for (const folder of folders) await disk.removeFolder(folder).catch(() => undefined);
}
