import { randomBytes } from 'node:crypto';
import { rmdirSync, unlinkSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { InputError } from '../errors.js';
import { batches, type Chunks, writeAll } from './batches.js';
import { type Disk, localDisk } from './disk.js';
import { makeFolders, removeFolders } from './folders.js';
import { settle, type Unfinished, uninterrupted, watch } from './unfinished.js';
import { unwritable } from './unwritable.js';

export interface OutputOptions {
  /** existing files may be replaced */
  readonly force: boolean;
  /** ends the work; nothing stays behind */
  readonly signal?: AbortSignal;
  readonly disk?: Disk;
}

export interface FolderOptions extends OutputOptions {
  /** the name was made from the input and not typed by a person: a symbolic link of that name is refused */
  readonly derived?: boolean;
}

/**
 * Writes a file whole or not at all: to a temporary file in the same folder, then under its name.
 * @throws InputError `io.*`: exists (without `force`), is a link or no plain file, no folder, no permission, disk full …
 */
export async function writeWhole(path: string, chunks: Chunks, options: OutputOptions): Promise<void> {
  const folder = await OutputFolder.open(dirname(path), { ...options, existing: true });
  try {
    await folder.write(basename(path), chunks);
    await folder.commit();
  } finally {
    await folder.discard();
  }
}

interface Written {
  readonly name: string;
  readonly temporary: string;
}

/**
 * The files of one run: each goes to a temporary file in the folder, {@link OutputFolder.commit} gives all of them
 * their names at once. After any failure, an interrupt, or {@link OutputFolder.discard} nothing new is left, neither a
 * file nor a folder that was made for it; a file that was there is as it was.
 */
export class OutputFolder {
  readonly path: string;
  private readonly options: OutputOptions;
  private readonly disk: Disk;
  private readonly written: Written[] = [];
  /** temporary files, kept names included, for the moment in which the process is ended */
  private readonly temporaries = new Set<string>();
  private readonly madeFolders: readonly string[];
  private readonly unfinished: Unfinished;
  private done = false;

  private constructor(path: string, made: readonly string[], options: OutputOptions) {
    this.path = path;
    this.options = options;
    this.disk = options.disk ?? localDisk;
    this.madeFolders = made;
    this.unfinished = { remove: () => this.removeNow(), patient: options.signal !== undefined };
    watch(this.unfinished);
  }

  /**
   * Makes the folder where it is missing (unless `existing`) and sees whether it may be written to.
   * @throws InputError `io.*`
   */
  static async open(path: string, options: FolderOptions & { readonly existing?: boolean }): Promise<OutputFolder> {
    const disk = options.disk ?? localDisk;
    try {
      const link = await disk.inspect(path);
      if (link?.isSymbolicLink() && options.derived) {
        throw new InputError('io.link', `${path}: it is a symbolic link; name the folder yourself or remove the link`, {
          fields: { path },
        });
      }
      const there = await disk.inspectTarget(path);
      if (there && !there.isDirectory()) {
        throw new InputError('io.not-a-folder', `${path}: it is no folder; choose another path`, { fields: { path } });
      }
      if (link && !there) {
        throw new InputError(
          'io.link',
          `${path}: it is a symbolic link to nothing; remove it or make what it points to`,
          { fields: { path } },
        );
      }
      if (!there && options.existing) throw Object.assign(new Error('no such folder'), { code: 'ENOENT' });
      const made = there ? [] : await makeFolders(path, disk);
      try {
        await disk.checkWritable(path);
      } catch (error) {
        await removeFolders(made, disk);
        throw error;
      }
      return new OutputFolder(path, made, options);
    } catch (error) {
      throw unwritable(path, error);
    }
  }

  /**
   * Refuses names that could not be written at the end, before any work is done.
   * @throws InputError `io.exists`, `io.link`, `io.is-a-folder`, `io.not-a-file`
   */
  async check(names: readonly string[]): Promise<void> {
    for (const name of names) await this.freeOrReplaceable(name);
  }

  /**
   * Writes a file of the run under a temporary name.
   * @throws InputError `io.*`; an error of `chunks` itself comes through as it is
   */
  async write(name: string, chunks: Chunks): Promise<void> {
    const target = join(this.path, name);
    if (name !== basename(name) || name === '' || name === '.' || name === '..')
      throw new InputError('io.name', `${target}: '${name}' is no name of a file`);
    if (this.written.some((one) => one.name === name)) throw new Error(`${target} is written twice in one run`);
    await this.freeOrReplaceable(name);
    const temporary = join(this.path, `.galewake-${process.pid}-${randomBytes(6).toString('hex')}.part`);
    try {
      // known before it exists: an interrupt between the two finds it
      this.temporaries.add(temporary);
      const file = await this.attempt(target, () => this.disk.create(temporary));
      let closed = false;
      try {
        for await (const batch of batches(chunks)) {
          this.goOn();
          await this.attempt(target, () => writeAll(file, batch));
        }
        await this.attempt(target, () => file.sync());
        closed = true;
        await this.attempt(target, () => file.close());
      } finally {
        if (!closed) await file.close().catch(() => undefined);
      }
      this.goOn();
      this.written.push({ name, temporary });
    } catch (error) {
      await this.discard();
      // one of several files in work: what came after the others were given up goes too
      await this.disk.remove(temporary).catch(() => undefined);
      await removeFolders(this.madeFolders, this.disk);
      throw error;
    }
  }

  /**
   * Gives all files their names. Should one fail, those before it are taken back.
   * @throws InputError `io.*`
   */
  async commit(): Promise<void> {
    try {
      this.options.signal?.throwIfAborted();
      await uninterrupted(() => this.placeAll());
    } catch (error) {
      await this.discard();
      throw error;
    }
  }

  /** Removes everything that was not committed. Does nothing after {@link OutputFolder.commit}. */
  async discard(): Promise<void> {
    if (this.done) return;
    this.done = true;
    for (const temporary of this.temporaries) await this.disk.remove(temporary).catch(() => undefined);
    await removeFolders(this.madeFolders, this.disk);
    settle(this.unfinished);
  }

  private goOn(): void {
    this.options.signal?.throwIfAborted();
    if (this.done) throw new Error('the other files of this run were given up');
  }

  private async placeAll(): Promise<void> {
    const undo: (() => Promise<void>)[] = [];
    const kept: string[] = [];
    try {
      for (const { name, temporary } of this.written) {
        const target = join(this.path, name);
        await this.attempt(target, async () => {
          const before = await this.freeOrReplaceable(name);
          if (!before) {
            await this.placeNew(temporary, target);
            undo.push(() => this.disk.remove(target));
          } else {
            const old = `${temporary}.old`;
            const keeps = await this.disk.link(target, old).then(
              () => true,
              () => false,
            );
            if (keeps) {
              this.temporaries.add(old);
              kept.push(old);
            }
            await this.disk.rename(temporary, target);
            if (keeps) {
              undo.push(async () => {
                // should even this fail, the old file stays beside under its temporary name
                this.temporaries.delete(old);
                await this.disk.rename(old, target);
              });
            }
          }
          this.temporaries.delete(temporary);
        });
      }
    } catch (error) {
      for (const back of undo.reverse()) await back().catch(() => undefined);
      throw error;
    }
    this.done = true;
    for (const old of kept) await this.disk.remove(old).catch(() => undefined);
    // some systems cannot sync a folder: the files are there all the same
    await this.disk.syncFolder(this.path).catch(() => undefined);
    settle(this.unfinished);
  }

  /** A hard link never replaces a file that came into being meanwhile, a renaming would. */
  private async placeNew(temporary: string, target: string): Promise<void> {
    try {
      await this.disk.link(temporary, target);
    } catch (error) {
      // not every file system has hard links
      if ((error as NodeJS.ErrnoException).code === 'EEXIST') throw error;
      if (await this.disk.inspect(target)) throw Object.assign(new Error('it exists'), { code: 'EEXIST' });
      await this.disk.rename(temporary, target);
      return;
    }
    await this.disk.remove(temporary).catch(() => undefined);
  }

  /** @returns whether there is a file, which may be replaced */
  private async freeOrReplaceable(name: string): Promise<boolean> {
    const path = join(this.path, name);
    const there = await this.attempt(path, () => this.disk.inspect(path));
    if (!there) return false;
    const refuse = (code: string, why: string): InputError =>
      new InputError(code, `${path}: ${why}`, { fields: { path } });
    if (there.isSymbolicLink())
      throw refuse('io.link', 'it is a symbolic link, which is not followed; remove it or choose another name');
    if (there.isDirectory()) throw refuse('io.is-a-folder', 'it is a folder; choose another name');
    if (!there.isFile()) throw refuse('io.not-a-file', 'it is a device or a pipe; choose another name');
    if (!this.options.force)
      throw refuse('io.exists', 'it exists already; choose another name or allow replacing with --force');
    return true;
  }

  private async attempt<T>(path: string, work: () => Promise<T>): Promise<T> {
    try {
      return await work();
    } catch (error) {
      throw unwritable(path, error);
    }
  }

  private removeNow(): void {
    for (const temporary of this.temporaries) quietly(() => unlinkSync(temporary));
    for (const folder of this.madeFolders) quietly(() => rmdirSync(folder));
  }
}

function quietly(work: () => void): void {
  try {
    work();
  } catch {
    // there is nobody left to tell
  }
}
