import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
  copyFileSync,
  cpSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  rmSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { galewake, inFolder } from './run.js';

const COMMAND = resolve(import.meta.dirname, '../../dist/cli/main.js');
const set = execFileSync(
  process.execPath,
  [resolve(import.meta.dirname, '../../scripts/make-events.js'), '--events', '12', '--years', '30'],
  { encoding: 'utf8' },
);
const grid = ['--bounds=-90,5,-30,45', '--cell', '1deg', '--shards', '6'];

const digest = (bytes: Buffer): string => createHash('sha256').update(bytes).digest('hex');

/** Everything that a run has written, manifests without machine and time. */
function contents(run: string): Record<string, string> {
  const found: Record<string, string> = {};
  for (const name of readdirSync(join(run, 'shards'))) {
    const bytes = readFileSync(join(run, 'shards', name));
    found[name] = name.endsWith('.json')
      ? JSON.stringify({ ...JSON.parse(bytes.toString('utf8')), seconds: 0, host: '' })
      : digest(bytes);
  }
  for (const name of readdirSync(run))
    if (name.startsWith('return-')) found[name] = digest(readFileSync(join(run, name)));
  return found;
}

/** A small file system of its own, in a name space of its own, that goes when the script ends. */
const mountable = spawnSync('unshare', ['-rm', 'sh', '-c', 'mount -t tmpfs -o size=64k tmpfs /mnt']).status === 0;

describe('a run of an event set', () => {
  it('names each damaged shard, does that one again and no other, and ends with the same bytes', () =>
    inFolder(async (cwd) => {
      writeFileSync(join(cwd, 'set.csv'), set);
      const made = await galewake(['events', 'run', 'set.csv', '--out', 'run', ...grid, '--jobs', '2'], { cwd });
      expect(made.code).toBe(0);
      const before = contents(join(cwd, 'run'));
      const data = (shard: number): string =>
        join(
          cwd,
          'run/shards',
          readdirSync(join(cwd, 'run/shards')).find(
            (name) => name.startsWith(`00000${shard}.`) && name.endsWith('.parquet'),
          )!,
        );
      const manifest = (shard: number): string => join(cwd, `run/shards/00000${shard}.json`);
      // a truncated shard, a flipped bit, a manifest of another plan, of another shard, and none at all
      truncateSync(data(0), 100);
      const bytes = readFileSync(data(1));
      bytes[bytes.length >> 1]! ^= 1;
      writeFileSync(data(1), bytes);
      writeFileSync(manifest(2), readFileSync(manifest(2), 'utf8').replace(/"planHash": "./, '"planHash": "x'));
      copyFileSync(manifest(5), manifest(3));
      rmSync(manifest(4));
      cpSync(join(cwd, 'run'), join(cwd, 'copy'), { recursive: true });
      const missing = await galewake(['events', 'missing', 'run'], { cwd });
      expect([missing.code, missing.stdout]).toEqual([3, '0,1,2,3,4\n']);
      for (const says of [
        /shard 0: 000000\.[0-9a-f]{12}\.parquet has 100 bytes instead of \d+; it is to be done again/,
        /shard 1: 000001\.[0-9a-f]{12}\.parquet has changed since it was written/,
        /shard 2: its manifest is of another plan/,
        /shard 3: its manifest is not one of this shard/,
      ])
        expect(missing.stderr).toMatch(says);
      // maps are not made of what is damaged
      const reduced = await galewake(['events', 'reduce', 'copy'], { cwd });
      expect([reduced.code, reduced.stdout]).toEqual([3, '0,1,2,3,4\n']);
      expect(reduced.stderr).toMatch(/shard 1: .* has changed.*\n.*\n.*\n.*5 of 6 shards are missing/);
      for (let index = 0; index < 5; index++) {
        const env = { SHARD_LIST: missing.stdout.trim(), JOB_COMPLETION_INDEX: String(index) };
        expect((await galewake(['events', 'shard', 'run'], { cwd, env })).stderr).toMatch(`shard ${index}: `);
      }
      expect((await galewake(['events', 'shard', 'run', '5'], { cwd })).stderr).toBe('shard 5: done already\n');
      expect((await galewake(['events', 'reduce', 'run'], { cwd })).code).toBe(0);
      expect(contents(join(cwd, 'run'))).toEqual(before);
    }));

  it('of another plan is refused, and its shards count as missing where the plan was exchanged', () =>
    inFolder(async (cwd) => {
      writeFileSync(join(cwd, 'set.csv'), set);
      const words = ['events', 'plan', 'set.csv', '--bounds=-90,5,-30,45', '--shards', '6'];
      await galewake([...words, '--cell', '2deg', '--out', 'run'], { cwd });
      await galewake(['events', 'shard', 'run', '0'], { cwd });
      await galewake([...words, '--cell', '3deg', '--out', 'other'], { cwd });
      const refused = await galewake([...words, '--cell', '3deg', '--out', 'run'], { cwd });
      expect([refused.code, refused.stderr]).toEqual([3, expect.stringMatching(/another plan.*name a new folder/)]);
      copyFileSync(join(cwd, 'other/plan.json'), join(cwd, 'run/plan.json'));
      const missing = await galewake(['events', 'missing', 'run', '--json'], { cwd });
      expect(JSON.parse(missing.stdout)).toEqual({
        schema: 'galewake-missing/1',
        shards: [0, 1, 2, 3, 4, 5],
        faults: { 0: 'its manifest is of another plan' },
      });
    }));

  it('stops at a file that cannot grow, leaves nothing half written, and goes on', () =>
    inFolder(async (cwd) => {
      writeFileSync(join(cwd, 'set.csv'), set);
      await galewake(['events', 'plan', 'set.csv', '--out', 'run', ...grid], { cwd });
      const limited = (blocks: number) =>
        spawnSync(
          'sh',
          ['-c', `ulimit -f ${blocks}; exec "$@"`, 'sh', process.execPath, COMMAND, 'events', 'shard', 'run', '0'],
          {
            cwd,
            encoding: 'utf8',
          },
        );
      const stopped = limited(1);
      expect(stopped.status).toBe(74);
      expect(stopped.stderr).toMatch(
        /000000\.[0-9a-f]{12}\.parquet: the file would be larger than this disk or your limits/,
      );
      expect(readdirSync(join(cwd, 'run/shards'))).toEqual([]);
      expect(limited(100_000).status).toBe(0);
    }));

  it.skipIf(!mountable)(
    'stops at a full disk, leaves nothing half written, and is mended by what is missing alone',
    () =>
      inFolder(async (cwd) => {
        writeFileSync(join(cwd, 'set.csv'), set);
        await galewake(['events', 'run', 'set.csv', '--out', 'whole', ...grid, '--jobs', '2'], { cwd });
        const largest = Math.max(
          ...readdirSync(join(cwd, 'whole/shards')).map((name) => readFileSync(join(cwd, 'whole/shards', name)).length),
        );
        mkdirSync(join(cwd, 'disk'));
        // room for the plan and some of the shards
        const script = `
        mount -t tmpfs -o size=${Math.ceil((largest * 2.5) / 4096) * 4 + 16}k tmpfs disk
        g() { "$NODE" "$COMMAND" events "$@"; echo "$* -> $?"; }
        g plan set.csv --out disk/run ${grid.join(' ')} --quiet
        for i in 0 1 2 3 4 5; do g shard disk/run $i; done
        find disk/run -name '*.part' | wc -l
        g missing disk/run
        mount -o remount,size=64m disk
        g run set.csv --out disk/run ${grid.join(' ')} --jobs 1
        cp -r disk/run mended`;
        const { stdout, stderr } = spawnSync('unshare', ['-rm', 'sh', '-c', script], {
          cwd,
          encoding: 'utf8',
          env: { ...process.env, NODE: process.execPath, COMMAND },
        });
        const codes = [...stdout.matchAll(/^shard disk\/run \d -> (\d+)$/gm)].map((match) => Number(match[1]));
        expect(codes).toHaveLength(6);
        expect(codes[0]).toBe(0);
        expect(codes.every((code) => code === 0 || code === 74)).toBe(true);
        expect(codes).toContain(74);
        expect(stderr).toMatch(/\.parquet: the disk is full; free some space/);
        const missing = codes.flatMap((code, shard) => (code === 0 ? [] : [shard])).join(',');
        expect(stdout).toContain(`\n0\n${missing}\nmissing disk/run -> 3\n`);
        expect(stdout).toMatch(/run set\.csv .* -> 0\n$/);
        expect(contents(join(cwd, 'mended'))).toEqual(contents(join(cwd, 'whole')));
      }),
  );
});
