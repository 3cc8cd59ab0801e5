import { execFileSync } from 'node:child_process';
import { existsSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { galewake, inFolder } from './run.js';

const set = execFileSync(
  process.execPath,
  [resolve(import.meta.dirname, '../../scripts/make-events.js'), '--events', '3', '--years', '30'],
  { encoding: 'utf8' },
);
const grid = ['--bounds=-90,5,-30,45', '--cell', '1deg'];

describe('galewake events', () => {
  it('runs a set to its maps, finds what is missing, and shows one event', () =>
    inFolder(async (cwd) => {
      writeFileSync(join(cwd, 'set.csv'), set);
      const ran = await galewake(
        ['events', 'run', 'set.csv', '--out', 'run', ...grid, '--shards', '2', '--jobs', '1'],
        { cwd },
      );
      expect(ran.code).toBe(0);
      expect(ran.stdout).toMatch(
        /3 events, 0 set aside\nrun\/return-wind\.tif\nrun\/return-gust\.tif\nrun\/return-periods\.nc/,
      );
      expect(ran.stderr).toMatch(/once in 30 years; the maps of 50, 100/);
      expect(ran.stderr).toMatch(/Event sets ignore land/);
      expect((await galewake(['events', 'missing', 'run'], { cwd })).code).toBe(0);
      writeFileSync(join(cwd, 'run/shards/000001.json'), '{');
      const missing = await galewake(['events', 'missing', 'run'], { cwd });
      expect([missing.code, missing.stdout]).toEqual([3, '1\n']);
      expect((await galewake(['events', 'reduce', 'run'], { cwd })).code).toBe(3);
      // the index by a batch engine
      expect((await galewake(['events', 'shard', 'run'], { cwd, env: { JOB_COMPLETION_INDEX: '1' } })).code).toBe(0);
      expect((await galewake(['events', 'reduce', 'run'], { cwd })).code).toBe(0);
      const shown = await galewake(['events', 'show', 'run', 'E1', '--out', 'one', '--formats', 'geojson'], { cwd });
      expect(shown.code).toBe(0);
      expect(shown.stderr).toMatch(/Event sets ignore land/);
      expect(existsSync(join(cwd, 'one/isotachs.geojson'))).toBe(true);
    }));

  it('says what is wrong, and to a batch engine whether to try again', () =>
    inFolder(async (cwd) => {
      writeFileSync(join(cwd, 'set.csv'), set);
      writeFileSync(join(cwd, 'bad.csv'), set.replace(/^(E1,[^,]*,)[^,]*/m, '$195'));
      const cases: [string[], number, RegExp][] = [
        [['plan', 'set.csv', '--out', 'run'], 2, /--bounds W,S,E,N/],
        [['plan', 'no.csv', '--out', 'run', ...grid], 3, /no\.csv: there is no such file/],
        [
          ['plan', 'set.csv', '--out', 'run', ...grid, '--years', '10'],
          2,
          /the set's column rate and --years: an event has one rate/,
        ],
        [['plan', 'set.csv', '--out', 'run', ...grid, '--set', 'surface.motion=georgiou-1985'], 2, /fast tables/],
        [['shard', 'run', '0'], 65, /there is no plan\.json/],
        [['plan', 'set.csv', '--out', 'run', ...grid], 0, /^$/],
        [['shard', 'run', '7'], 64, /shard 7.*not in this plan/],
        [['shard', 'run'], 64, /no shard index/],
        [['plan', 'set.csv', '--out', 'run', ...grid, '--least', '50kt'], 3, /another plan/],
        [['run', 'bad.csv', '--out', 'bad', ...grid], 3, /event 'E1' \(from row 19\).*95/],
        [['show', 'run', 'E9'], 3, /no event 'E9'; did you mean/],
        [['submit', 'pbs', 'run'], 2, /slurm and kubernetes; other engines/],
        [['submit', 'kubernetes', 'run'], 2, /add --dry-run/],
        [['submit', 'kubernetes', 'run', '--dry-run'], 0, /^$/],
      ];
      for (const [words, code, says] of cases) {
        const { code: ended, stderr } = await galewake(['events', ...words], { cwd });
        expect([words.join(' '), ended]).toEqual([words.join(' '), code]);
        expect(stderr).toMatch(says);
      }
    }));
});
