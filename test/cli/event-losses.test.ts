import { execFileSync } from 'node:child_process';
import { readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { parquetReadObjects } from 'hyparquet';
import { describe, expect, it } from 'vitest';
import { handMadeRun } from '../io/hand-made-run.js';
import { galewake, inFolder } from './run.js';

const ASSETS = `name,lat_deg,lon_deg,sum,people
House,0.8,0.1,1000,2
Barn,0.9,0.2,500,0
Mill,0.2,0.7,2000,5
Away,40,40,7,1
`;
/** Ratio 0 up to 20 m/s, 0.5 at 40, 1 at 60, straight between. */
const CURVE = 'wind_mps_60s,ratio\n20,0\n40,0.5\n60,1\n';
const RATES = [0.01, 0.02, 0.05, 0.1];
// House and Barn stand in cell 0, the Mill in cell 5
const ROWS = [
  { cell: 0, event: 0, wind: 60 },
  { cell: 5, event: 0, wind: 40 },
  { cell: 0, event: 1, wind: 30 },
  { cell: 5, event: 2, wind: 30 },
  { cell: 0, event: 3, wind: 18 },
  { cell: 7, event: 3, wind: 70 },
];

describe('galewake events losses', () => {
  it('gives event losses, annual average and curves, all worked out by hand', () =>
    inFolder(async (cwd) => {
      await handMadeRun(cwd, { rates: RATES, rows: ROWS, shards: 2 });
      writeFileSync(join(cwd, 'assets.csv'), ASSETS);
      writeFileSync(join(cwd, 'curve.csv'), CURVE);
      const words = ['events', 'losses', 'run', '--assets', 'assets.csv', '--curve', 'curve.csv', '--curve-of', 'wind'];
      const ran = await galewake([...words, '--out', 'out', '--formats', 'csv,parquet,json', '--json'], { cwd });
      expect(ran.stderr).toMatch(/1 of 4 assets lie outside the grid of the run, such as 'Away'/);
      expect(ran.stderr).toMatch(/Event sets ignore land/);
      expect(ran.stderr).toMatch(/licensed engineers/);
      expect(ran.code).toBe(0);
      // by hand: E0 1500·1 + 2000·0.5 = 2500; E1 1500·0.25 = 375; E2 2000·0.25 = 500; E3 0
      // people: E0 2·1 + 5·0.5 = 4.5; E1 2·0.25 = 0.5; E2 5·0.25 = 1.25
      expect(readFileSync(join(cwd, 'out/event-losses.csv'), 'utf8')).toBe(
        'event,rate_per_year,assets,loss_of_sum,loss_of_people\nE0,0.01,3,2500,4.5\nE1,0.02,2,375,0.5\nE2,0.05,1,500,1.25\nE3,0.1,2,0,0\n',
      );
      const bytes = readFileSync(join(cwd, 'out/event-losses.parquet'));
      const rows = await parquetReadObjects({
        file: bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer,
      });
      expect(rows[2]).toEqual({ event: 'E2', rate_per_year: 0.05, assets: 1, loss_of_sum: 500, loss_of_people: 1.25 });
      const document = JSON.parse(ran.stdout);
      expect(JSON.parse(readFileSync(join(cwd, 'out/summary.json'), 'utf8'))).toEqual(document);
      expect([document.events_with_loss, document.assets, document.assets_outside]).toEqual([3, 4, 1]);
      const [sum, people] = document.columns;
      // by hand: AAL = 0.01·2500 + 0.02·375 + 0.05·500 = 57.5
      expect(sum.average_annual_loss).toBe(57.5);
      expect(people.average_annual_loss).toBe(0.12);
      // √(0.01·2500² + 0.02·375² + 0.05·500²) = √77812.5
      expect(sum.annual_loss_standard_deviation).toBe(Number(Math.sqrt(77812.5).toFixed(2)));
      expect(sum.value).toBe(3500);
      // by hand: λ 0.01 for 2500, 0.06 for 500, 0.08 for 375; 1 in 100.5, 17.2 and 13.0 years
      const occurrence = sum.return_periods.map((one: { return_period_years: number; occurrence_loss: number }) => [
        one.return_period_years,
        one.occurrence_loss,
      ]);
      expect(occurrence).toEqual([
        [2, 0],
        [5, 0],
        [10, 0],
        [25, 500],
        [50, 500],
        [100, 500],
        [250, 2500],
        [500, 2500],
        [1000, 2500],
      ]);
      const curves = readFileSync(join(cwd, 'out/loss-curves.csv'), 'utf8').split('\n');
      // 1 − e^(−0.01) = 0.00995017, 1/that = 100.50083
      expect(curves[1]).toBe('sum,occurrence,2500,0.0099501663,100.50083,0.01');
      expect(curves[2]).toBe('sum,occurrence,500,0.058235466,17.171666,0.06');
      // by hand: the sum of a year is never below its largest loss; 1000 years: P(at least 2500) is about 0.01
      const aggregate = sum.return_periods.map((one: { aggregate_loss: number }) => one.aggregate_loss);
      expect(aggregate.every((loss: number, i: number) => loss >= occurrence[i][1])).toBe(true);
      // 2500 + 500 in one year has the probability 0.01·0.05 = 0.0005, 500 twice 0.00125: 1000 falls behind 2500
      expect(aggregate.slice(6)).toEqual([2500, 2500, 2500]);
      expect(document.aggregate.random_numbers).toMatch(/xoshiro128\*\*/);
      expect(document.cautions.join(' ')).toMatch(/once in 100 years: losses of 250, 500, 1000 years/);
      // the same once more, and without files
      const again = await galewake([...words, '--loss-of', 'people', '--currency', 'persons'], { cwd });
      expect(again.stdout).toMatch(/3 of 4 events with a loss \(persons\)/);
      expect(again.stdout).toMatch(/average annual loss +0\.12/);
    }));

  it('is the same for any number of shards, and whatever the folder’s name means elsewhere', () =>
    inFolder(async (cwd) => {
      const rows = Array.from({ length: 400 }, (_, i) => ({
        cell: i % 8,
        event: Math.floor(i / 8),
        wind: 18 + ((i * 37) % 53),
      }));
      const rates = Array.from({ length: 50 }, (_, i) => 0.01 + i / 1000);
      writeFileSync(join(cwd, 'assets.csv'), ASSETS);
      const documents: unknown[] = [];
      for (const shards of [1, 7]) {
        await inFolder(async (at) => {
          await handMadeRun(at, { rates, rows, shards });
          const name = join(at, shards === 1 ? 'run' : "r[1]*?'; drop table assets; --");
          renameSync(join(at, 'run'), name);
          const { stdout } = await galewake(
            ['events', 'losses', name, '--assets', 'assets.csv', '--cubic', '25,60', '--json', '--quiet'],
            { cwd },
          );
          const { plan: _, ...document } = JSON.parse(stdout);
          documents.push(document);
        });
      }
      expect(documents[1]).toEqual(documents[0]);
    }));

  it('agrees with exposure where assets stand in the middle of their cells', () =>
    inFolder(async (cwd) => {
      const text = execFileSync(
        process.execPath,
        [resolve(import.meta.dirname, '../../scripts/make-events.js'), '--events', '2', '--years', '10'],
        { encoding: 'utf8' },
      );
      writeFileSync(join(cwd, 'set.csv'), text);
      const [heading, ...rows] = text.trimEnd().split('\n');
      const own = rows.filter((row) => row.startsWith('E1,')).map((row) => row.split(',').slice(0, 6));
      const track = [heading!.replace('event', 'storm').replace(',rate', ''), ...own.map((cells) => cells.join(','))];
      writeFileSync(join(cwd, 'storm.csv'), `${track.join('\n')}\n`);
      const middle = (value: number): string => (Math.floor(value * 4) / 4 + 0.125).toFixed(3);
      const assets = own.flatMap((cells, i) =>
        [0, 0.5, -0.5].map(
          (off, k) => `A${i}-${k},${middle(Number(cells[2]) + off)},${middle(Number(cells[3]))},100000`,
        ),
      );
      writeFileSync(join(cwd, 'assets.csv'), `name,lat_deg,lon_deg,sum\n${assets.join('\n')}\n`);
      await galewake(
        ['events', 'run', 'set.csv', '--out', 'run', '--bounds=-90,5,-30,45', '--cell', '0.25', '--jobs', '1'],
        { cwd },
      );
      const curve = ['--cubic', '20,60', '--json', '--quiet'];
      const alone = await galewake(['exposure', 'storm.csv', 'assets.csv', ...curve], { cwd });
      const inSet = await galewake(['events', 'losses', 'run', '--assets', 'assets.csv', '--out', 'out', ...curve], {
        cwd,
      });
      expect(inSet.code).toBe(0);
      const loss = JSON.parse(alone.stdout).totals.losses.sum;
      const line = /^E1,0\.1,\d+,(.*)$/m.exec(readFileSync(join(cwd, 'out/event-losses.csv'), 'utf8'))![1];
      // independent: the wind at the point itself; fast cells are right to 0.03 m/s
      expect(loss).toBeGreaterThan(10_000);
      expect(Math.abs(Number(line) / loss - 1)).toBeLessThan(0.005);
    }));

  it('says what is wrong', () =>
    inFolder(async (cwd) => {
      const setAside = [{ event: 'E3', row: 5, why: 'odd' }];
      await handMadeRun(cwd, { rates: RATES, rows: ROWS, setAside });
      writeFileSync(join(cwd, 'assets.csv'), ASSETS);
      writeFileSync(join(cwd, 'bare.csv'), 'name,lat_deg,lon_deg\nHouse,0.8,0.1\n');
      writeFileSync(join(cwd, 'away.csv'), 'name,lat_deg,lon_deg,sum\nAway,40,40,7\n');
      const curve = ['--cubic', '25,60'];
      const cases: [string[], number, RegExp][] = [
        [[...curve], 2, /--assets/],
        [['--assets', 'assets.csv'], 2, /need a damage curve/],
        [['--assets', 'no.csv', ...curve], 3, /no\.csv/],
        [['--assets', 'bare.csv', ...curve], 3, /no column of values.*--values/],
        [['--assets', 'away.csv', ...curve], 3, /1 of 1 assets lie outside.*larger --bounds/],
        [['--assets', 'assets.csv', ...curve, '--strict'], 3, /lie outside/],
        [['--assets', 'assets.csv', ...curve, '--loss-of', 'sums'], 2, /did you mean sum/],
        [['--assets', 'assets.csv', ...curve, '--simulate', '10'], 2, /--simulate.*at least 1000/],
        [['--assets', 'assets.csv', ...curve], 0, /1 event was set aside, such as 'E3' \(row 5\)/],
        [['--assets', 'assets.csv', '--cubic', '10,60'], 0, /losses at winds that the run does not keep \(below 17\.5/],
      ];
      for (const [words, code, says] of cases) {
        const ended = await galewake(['events', 'losses', 'run', ...words], { cwd });
        expect([words.join(' '), ended.code]).toEqual([words.join(' '), code]);
        expect(ended.stderr).toMatch(says);
      }
    }));
});
