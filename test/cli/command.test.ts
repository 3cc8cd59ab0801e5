import { execFile, spawn } from 'node:child_process';
import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { checkRfc7946 } from '../rfc7946.js';
import { FIXTURES, galewake, inFolder } from './run.js';

const demo = join(FIXTURES, 'demo-quillon.csv');
const coarse = ['--cell', '0.1deg'];

describe('the command', () => {
  it('prints its version, and help that defers to the authorities', async () => {
    const { version } = JSON.parse(readFileSync(resolve(import.meta.dirname, '../../package.json'), 'utf8')) as {
      version: string;
    };
    expect(await galewake(['--version'])).toMatchObject({ code: 0, stdout: `${version}\n`, stderr: '' });
    const help = await galewake(['--help']);
    expect(help.code).toBe(0);
    expect(help.stdout).toMatch(/no warning service/);
    for (const command of ['tracks', 'profile', 'swath', 'sites', 'recipe']) {
      const one = await galewake([command, '--help']);
      expect(one.code).toBe(0);
      expect(one.stdout).toMatch(/no warning service/i);
    }
  });

  it('takes a track from standard input and writes every file whole', async () => {
    await inFolder(async (folder) => {
      const run = await galewake(['swath', '-', ...coarse, '--out', 'o', '--formats', 'geojson,cog,csv'], {
        cwd: folder,
        input: readFileSync(demo),
      });
      expect(run.code).toBe(0);
      expect(readdirSync(join(folder, 'o')).sort()).toEqual([
        'isotachs.geojson',
        'peak.csv',
        'peak.tif',
        'summary.json',
        'track.geojson',
      ]);
      expect(checkRfc7946(JSON.parse(readFileSync(join(folder, 'o/isotachs.geojson'), 'utf8')))).toEqual([]);
      expect(checkRfc7946(JSON.parse(readFileSync(join(folder, 'o/track.geojson'), 'utf8')))).toEqual([]);
    });
  });

  it('--json puts one document on standard output, and nothing else', async () => {
    await inFolder(async (folder) => {
      const run = await galewake(['swath', demo, ...coarse, '--json', '--out', 'o'], { cwd: folder });
      const summary = JSON.parse(run.stdout) as Record<string, unknown>;
      expect(summary).toMatchObject({
        schema: 'galewake-summary/1',
        storm: { id: 'QN-01', name: 'Quillon' },
        averaging_s: 60,
        gust_duration_s: 3,
      });
      expect(JSON.parse(readFileSync(join(folder, 'o/summary.json'), 'utf8'))).toEqual(summary);
      // identity: the peak of the swath is the strongest fix, 110 kt, less what falls between cell centres
      const { wind_mps } = summary['peak'] as { wind_mps: number };
      expect(wind_mps).toBeGreaterThan(0.97 * 110 * 0.514444);
      expect(wind_mps).toBeLessThan(1.01 * 110 * 0.514444);
      for (const words of [
        ['tracks', demo],
        ['tracks', demo, '--storm', 'QN-01'],
        ['profile', '--vmax', '90kt'],
        ['recipe'],
      ]) {
        const one = await galewake([...words, '--json']);
        expect(one.code).toBe(0);
        expect(() => JSON.parse(one.stdout)).not.toThrow();
      }
    });
  });

  it('--quiet says nothing on standard error', async () => {
    const run = await galewake(['tracks', demo, '--storm', 'QN-01', '--quiet']);
    expect(run).toMatchObject({ code: 0, stderr: '' });
    expect(run.stdout).toMatch(/2031-09-04T12:00Z/);
  });

  it('replaces files only with --force', async () => {
    await inFolder(async (folder) => {
      const words = ['swath', demo, ...coarse, '--out', 'o', '--formats', 'geojson'];
      expect((await galewake(words, { cwd: folder })).code).toBe(0);
      expect((await galewake(words, { cwd: folder })).code).toBe(3);
      expect((await galewake([...words, '--force'], { cwd: folder })).code).toBe(0);
    });
  });

  it('ends quietly when the reader of a pipe goes away', async () => {
    await inFolder(async (folder) => {
      const rows = Array.from({ length: 20_000 }, (_, i) => `S${i},2031-09-03T00:00Z,20,-60,60,60`);
      writeFileSync(join(folder, 'many.csv'), ['storm,time,lat_deg,lon_deg,vmax_kt,averaging_s', ...rows].join('\n'));
      const command = resolve(import.meta.dirname, '../../dist/cli/main.js');
      const outcome = await new Promise<{ code: number | null; stderr: string }>((done) => {
        const child = spawn('sh', ['-c', `"${process.execPath}" "${command}" tracks many.csv; echo "code $?" >&2`], {
          cwd: folder,
          stdio: ['ignore', 'pipe', 'pipe'],
        });
        let stderr = '';
        child.stderr.on('data', (chunk) => (stderr += chunk));
        child.stdout.once('data', () => child.stdout.destroy());
        child.on('close', (code) => done({ code, stderr }));
      });
      expect(outcome.stderr).toBe('code 0\n');
    });
  });

  it('an interrupt leaves nothing behind and ends with 130', async () => {
    await inFolder(async (folder) => {
      const command = resolve(import.meta.dirname, '../../dist/cli/main.js');
      const child = execFile(process.execPath, [command, 'swath', demo, '--cell', '0.004deg', '--out', 'o'], {
        cwd: folder,
      });
      // the folder of the results is there before the work begins
      const watch = setInterval(() => {
        if (readdirSync(folder).length === 0) return;
        clearInterval(watch);
        setTimeout(() => child.kill('SIGINT'), 100);
      }, 20);
      const code = await new Promise((done) => child.on('close', (exit) => done(exit)));
      clearInterval(watch);
      expect(code).toBe(130);
      expect(readdirSync(folder)).toEqual([]);
    });
  });

  it('tracks converts without loss', async () => {
    const csv = await galewake(['tracks', demo, '--to', 'csv', '--quiet']);
    const again = await galewake(['tracks', '-', '--to', 'csv', '--quiet'], { input: csv.stdout });
    expect(csv.code).toBe(0);
    expect(again.stdout).toBe(csv.stdout);
    const geojson = await galewake(['tracks', demo, '--to', 'geojson', '--quiet']);
    const back = await galewake(['tracks', '-', '--to', 'csv', '--quiet'], { input: geojson.stdout });
    expect(back.stdout).toBe(csv.stdout);
  });

  it('a recipe that it prints is one that it reads', async () => {
    await inFolder(async (folder) => {
      const printed = await galewake(['recipe', '--json', '--set', 'vortex.profile=rankine']);
      writeFileSync(join(folder, 'r.json'), printed.stdout);
      const again = await galewake(['recipe', '--json', '--recipe', 'r.json'], { cwd: folder });
      expect(again.stdout).toBe(printed.stdout);
      expect(JSON.parse(again.stdout)).toMatchObject({ vortex: { profile: 'rankine' } });
    });
  });
});
