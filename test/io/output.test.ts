import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { link, lstat, mkdir, mkdtemp, readdir, readFile, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { build } from 'vite';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.js';
import { type Disk, localDisk } from '../../src/io/disk.js';
import { OutputFolder, writeWhole } from '../../src/io/output.js';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'galewake-output-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

const fault = (code: string): Error => Object.assign(new Error(`${code}: simulated`), { code });
/** a disk that is full after so many bytes */
const fullAfter = (room: number): Disk => ({
  ...localDisk,
  create: async (path) => {
    const file = await localDisk.create(path);
    return {
      write: async (bytes, offset, length) => {
        // a disk that fills up takes a part first
        if (room === 0) throw fault('ENOSPC');
        const taken = Math.min(length, room);
        room -= taken;
        return file.write(bytes, offset, taken);
      },
      sync: () => file.sync(),
      close: () => file.close(),
    };
  },
});
const codeOf = async (work: Promise<unknown>): Promise<string> => {
  try {
    await work;
  } catch (error) {
    expect(error).toBeInstanceOf(InputError);
    return (error as InputError).code;
  }
  return 'done';
};
const KEEP = { force: false };
const FORCE = { force: true };

describe('a file', () => {
  it('is written whole, from text, bytes and generators', async () => {
    async function* pieces(): AsyncGenerator<string | Uint8Array> {
      for (let i = 0; i < 1000; i++) yield i % 2 ? 'é,' : new TextEncoder().encode(`${i};`);
    }
    await writeWhole(join(folder, 'a.txt'), pieces(), KEEP);
    const text = await readFile(join(folder, 'a.txt'), 'utf8');
    expect(text).toBe(Array.from({ length: 1000 }, (_, i) => (i % 2 ? 'é,' : `${i};`)).join(''));
    expect(await readdir(folder)).toEqual(['a.txt']);
    expect((await lstat(join(folder, 'a.txt'))).nlink).toBe(1);
  });

  it('may be empty', async () => {
    await writeWhole(join(folder, 'a.txt'), [], KEEP);
    expect(await readFile(join(folder, 'a.txt'), 'utf8')).toBe('');
  });

  it('replaces another only with force', async () => {
    const path = join(folder, 'a.txt');
    await writeFile(path, 'old');
    expect(await codeOf(writeWhole(path, ['new'], KEEP))).toBe('io.exists');
    expect(await readFile(path, 'utf8')).toBe('old');
    await writeWhole(path, ['new'], FORCE);
    expect(await readFile(path, 'utf8')).toBe('new');
    expect(await readdir(folder)).toEqual(['a.txt']);
  });

  it('does not replace one that came into being meanwhile', async () => {
    const path = join(folder, 'a.txt');
    async function* slow(): AsyncGenerator<string> {
      yield 'mine';
      await writeFile(path, 'theirs');
    }
    expect(await codeOf(writeWhole(path, slow(), KEEP))).toBe('io.exists');
    // between the last look and the link
    await rm(path);
    const racing: Disk = {
      ...localDisk,
      link: async (from, to) => {
        await writeFile(to, 'theirs');
        return localDisk.link(from, to);
      },
    };
    expect(await codeOf(writeWhole(path, ['mine'], { ...KEEP, disk: racing }))).toBe('io.exists');
    expect(await readFile(path, 'utf8')).toBe('theirs');
    expect(await readdir(folder)).toEqual(['a.txt']);
  });

  it('is written where there are no hard links', async () => {
    const path = join(folder, 'a.txt');
    const disk: Disk = { ...localDisk, link: () => Promise.reject(fault('EPERM')) };
    await writeWhole(path, ['one'], { ...KEEP, disk });
    expect(await codeOf(writeWhole(path, ['two'], { ...KEEP, disk }))).toBe('io.exists');
    await writeWhole(path, ['two'], { ...FORCE, disk });
    expect(await readFile(path, 'utf8')).toBe('two');
    expect(await readdir(folder)).toEqual(['a.txt']);
  });

  it('does not follow a symbolic link, even with force', async () => {
    await writeFile(join(folder, 'target'), 'precious');
    await symlink(join(folder, 'target'), join(folder, 'a.txt'));
    for (const options of [KEEP, FORCE])
      expect(await codeOf(writeWhole(join(folder, 'a.txt'), ['x'], options))).toBe('io.link');
    expect(await readFile(join(folder, 'target'), 'utf8')).toBe('precious');
  });

  it('is no folder, device or pipe', async () => {
    await mkdir(join(folder, 'sub'));
    expect(await codeOf(writeWhole(join(folder, 'sub'), ['x'], FORCE))).toBe('io.is-a-folder');
    if (existsSync('/dev/null'))
      expect(await codeOf(writeWhole('/dev/null', ['x'], FORCE))).toMatch(/^io\.(not-a-file|permission)$/);
  });

  it('needs its folder', async () => {
    expect(await codeOf(writeWhole(join(folder, 'none', 'a.txt'), ['x'], KEEP))).toBe('io.no-folder');
    await writeFile(join(folder, 'file'), '');
    expect(await codeOf(writeWhole(join(folder, 'file', 'a.txt'), ['x'], KEEP))).toBe('io.not-a-folder');
    expect(await codeOf(writeWhole(join(folder, 'file', 'sub', 'a.txt'), ['x'], KEEP))).toBe('io.not-a-folder');
  });

  it('has a name that the disk can hold', async () => {
    expect(await codeOf(writeWhole(join(folder, 'n'.repeat(300)), ['x'], KEEP))).toBe('io.name-too-long');
    expect(await readdir(folder)).toEqual([]);
  });

  it.each([
    ['ENOSPC', 'io.full'],
    ['EDQUOT', 'io.full'],
    ['EACCES', 'io.permission'],
    ['EROFS', 'io.read-only'],
    ['EMFILE', 'io.too-many-open'],
    ['EIO', 'io.write'],
  ])('%s is told as %s, with the path', async (system, code) => {
    const path = join(folder, 'a.txt');
    const disk: Disk = { ...localDisk, create: () => Promise.reject(fault(system)) };
    await expect(writeWhole(path, ['x'], { ...KEEP, disk })).rejects.toMatchObject({
      code,
      message: expect.stringContaining(path),
      fields: { path, system },
    });
    expect(await readdir(folder)).toEqual([]);
  });

  it.runIf(process.getuid?.() !== 0)('is refused in a folder that may not be written to', async () => {
    await mkdir(join(folder, 'closed'), { mode: 0o555 });
    expect(await codeOf(writeWhole(join(folder, 'closed', 'a.txt'), ['x'], KEEP))).toBe('io.permission');
  });

  it.each([0, 1, 5_000_000])('leaves nothing behind on a disk that is full after %i bytes', async (room) => {
    const path = join(folder, 'a.txt');
    await writeFile(path, 'old');
    const chunks = Array.from({ length: 8 }, () => new Uint8Array(1_000_000));
    expect(await codeOf(writeWhole(path, chunks, { ...FORCE, disk: fullAfter(room) }))).toBe('io.full');
    expect(await readFile(path, 'utf8')).toBe('old');
    expect(await readdir(folder)).toEqual(['a.txt']);
  });

  it('lets an error of its content through and leaves nothing behind', async () => {
    function* failing(): Generator<string> {
      yield 'x';
      throw new RangeError('inside');
    }
    await expect(writeWhole(join(folder, 'a.txt'), failing(), KEEP)).rejects.toThrow(RangeError);
    expect(await readdir(folder)).toEqual([]);
  });
});

describe('the files of a run', () => {
  it('get their names together', async () => {
    const out = await OutputFolder.open(join(folder, 'a', 'b'), KEEP);
    await out.write('one', ['1']);
    await out.write('two', ['2']);
    expect((await readdir(out.path)).every((name) => name.endsWith('.part'))).toBe(true);
    await out.commit();
    await out.discard();
    expect((await readdir(out.path)).sort()).toEqual(['one', 'two']);
  });

  it('are given up together, with the folders made for them', async () => {
    const out = await OutputFolder.open(join(folder, 'a', 'b'), KEEP);
    await out.write('one', ['1']);
    await out.discard();
    expect(await readdir(folder)).toEqual([]);
  });

  it('leave a folder that was there or that others use', async () => {
    await mkdir(join(folder, 'mine'));
    const first = await OutputFolder.open(join(folder, 'mine'), KEEP);
    await first.discard();
    const second = await OutputFolder.open(join(folder, 'shared'), KEEP);
    await writeFile(join(folder, 'shared', 'theirs'), '');
    await second.discard();
    expect((await readdir(folder)).sort()).toEqual(['mine', 'shared']);
  });

  it('are checked before the work', async () => {
    await writeFile(join(folder, 'one'), 'old');
    const out = await OutputFolder.open(folder, KEEP);
    expect(await codeOf(out.check(['two', 'one']))).toBe('io.exists');
    await out.discard();
    const forced = await OutputFolder.open(folder, FORCE);
    await forced.check(['two', 'one']);
    await forced.discard();
  });

  it.each(['../x', 'a/b', '', '.', '..'])('have plain names, not %j', async (name) => {
    const out = await OutputFolder.open(folder, KEEP);
    expect(await codeOf(out.write(name, ['x']))).toBe('io.name');
    await out.discard();
  });

  it('are all as they were when the last one cannot be placed', async () => {
    await writeFile(join(folder, 'old'), 'old');
    const disk: Disk = {
      ...localDisk,
      link: (from, to) => (to.endsWith('last') ? Promise.reject(fault('EIO')) : localDisk.link(from, to)),
      rename: (from, to) => (to.endsWith('last') ? Promise.reject(fault('EIO')) : localDisk.rename(from, to)),
    };
    const out = await OutputFolder.open(folder, { ...FORCE, disk });
    for (const name of ['old', 'new', 'last']) await out.write(name, ['changed']);
    expect(await codeOf(out.commit())).toBe('io.write');
    expect(await readdir(folder)).toEqual(['old']);
    expect(await readFile(join(folder, 'old'), 'utf8')).toBe('old');
  });

  it('are given up when one of several in work fails', async () => {
    const out = await OutputFolder.open(join(folder, 'sub'), { ...KEEP, disk: fullAfter(3_000_000) });
    const megabytes = (count: number) => Array.from({ length: count }, () => new Uint8Array(1_000_000));
    const results = await Promise.allSettled(['a', 'b', 'c'].map((name) => out.write(name, megabytes(4))));
    expect(results.some((result) => result.status === 'rejected')).toBe(true);
    await out.discard();
    expect(await readdir(folder)).toEqual([]);
  });

  it('are given up on an abort', async () => {
    const stop = new AbortController();
    const out = await OutputFolder.open(join(folder, 'sub'), { ...KEEP, signal: stop.signal });
    await out.write('one', ['1']);
    stop.abort();
    await expect(out.write('two', ['2'])).rejects.toMatchObject({ name: 'AbortError' });
    expect(await readdir(folder)).toEqual([]);
  });

  it('go into a linked folder that a person named, not into one of a derived name', async () => {
    await mkdir(join(folder, 'real'));
    await symlink(join(folder, 'real'), join(folder, 'way'));
    const named = await OutputFolder.open(join(folder, 'way'), KEEP);
    await named.write('one', ['1']);
    await named.commit();
    expect(await readdir(join(folder, 'real'))).toEqual(['one']);
    expect(await codeOf(OutputFolder.open(join(folder, 'way'), { ...KEEP, derived: true }))).toBe('io.link');
    await symlink(join(folder, 'nowhere'), join(folder, 'dangling'));
    expect(await codeOf(OutputFolder.open(join(folder, 'dangling'), KEEP))).toBe('io.link');
    expect(existsSync(join(folder, 'nowhere'))).toBe(false);
  });

  it('need a folder and no file in its place', async () => {
    await writeFile(join(folder, 'file'), '');
    expect(await codeOf(OutputFolder.open(join(folder, 'file'), KEEP))).toBe('io.not-a-folder');
    expect(await codeOf(OutputFolder.open(join(folder, 'file', 'sub'), KEEP))).toBe('io.not-a-folder');
  });

  it('keep the hard links of an old file apart', async () => {
    await writeFile(join(folder, 'one'), 'old');
    await link(join(folder, 'one'), join(folder, 'backup'));
    await writeWhole(join(folder, 'one'), ['new'], FORCE);
    expect(await readFile(join(folder, 'backup'), 'utf8')).toBe('old');
  });
});

describe('an interrupt', () => {
  let bundle: string;
  beforeAll(async () => {
    bundle = await mkdtemp(join(tmpdir(), 'galewake-bundle-'));
    const entry = new URL('../../src/io/output.ts', import.meta.url).pathname;
    await build({ configFile: false, logLevel: 'silent', build: { ssr: entry, outDir: bundle, minify: false } });
  });
  afterAll(() => rm(bundle, { recursive: true, force: true }));

  /** Runs `body` as a process of its own and sends it `signal` when it prints `ready`. */
  const run = async (signal: NodeJS.Signals, body: string): Promise<{ code: number | null; out: string }> => {
    const script = join(bundle, 'run.mjs');
    await writeFile(script, `import { OutputFolder } from './output.js';\n${body}`);
    await writeFile(join(bundle, 'package.json'), '{"type":"module"}');
    const child = spawn(process.execPath, [script], { cwd: folder, stdio: ['ignore', 'pipe', 'inherit'] });
    let out = '';
    child.stdout.on('data', (data: Buffer) => {
      if (!out.includes('ready') && String(data).includes('ready')) child.kill(signal);
      out += data;
    });
    const code = await new Promise<number | null>((done) => child.on('close', done));
    return { code, out };
  };

  it.each([
    ['SIGINT', 130],
    ['SIGTERM', 143],
  ] as const)('by %s leaves nothing behind', async (signal, code) => {
    const body = `const out = await OutputFolder.open('made/for/it', { force: false });
await out.write('one', ['1']);
console.log('ready');
await new Promise((done) => setTimeout(done, 20000));`;
    expect((await run(signal, body)).code).toBe(code);
    expect(await readdir(folder)).toEqual([]);
  });

  it('is left to an abort signal that ends the work in order', async () => {
    const body = `const stop = new AbortController();
const alive = setInterval(() => {}, 1000);
process.once('SIGINT', () => stop.abort());
const out = await OutputFolder.open('made', { force: false, signal: stop.signal });
async function* slow() {
  yield 'x'.repeat(2_000_000);
  console.log('ready');
  await new Promise((done) => stop.signal.addEventListener('abort', done));
  yield 'y'.repeat(2_000_000);
}
try { await out.write('one', slow()); } catch (error) { console.log(error.name); process.exitCode = 7; }
clearInterval(alive);`;
    const { code, out } = await run('SIGINT', body);
    expect(out).toContain('AbortError');
    expect(code).toBe(7);
    expect(await readdir(folder)).toEqual([]);
  });

  it('waits while the files get their names', async () => {
    const body = `import { readdir } from 'node:fs/promises';
const out = await OutputFolder.open('made', { force: false });
for (let i = 0; i < 300; i++) await out.write('file' + i, ['x']);
process.kill(process.pid, 'SIGINT');
await out.commit();
await new Promise((done) => setTimeout(done, 20000));`;
    const { code } = await run('SIGINT', body);
    expect(code).toBe(130);
    // either none or all, never a part
    const names = existsSync(join(folder, 'made')) ? await readdir(join(folder, 'made')) : [];
    expect([0, 300]).toContain(names.length);
    expect(names.filter((name) => !/^file\d+$/.test(name))).toEqual([]);
  });
});
