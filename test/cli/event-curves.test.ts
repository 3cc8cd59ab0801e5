import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { handMadeRun } from '../io/hand-made-run.js';
import { galewake, inFolder } from './run.js';

const RATES = [0.001, 0.002, 0.004, 0.005, 0.01, 0.02, 0.03, 0.04, 0.05, 0.1, 0.2, 0.5];
const PLACES =
  'name,lat_deg,lon_deg\nNorth,0.8,0.1\n"=South, A",0.2,0.7\nFar,40,40\nCalm,0.8,1.7\nNorth again,0.6,-359.6\n';

describe('galewake events curves', () => {
  it('gives each place the curve of its cell, worked out by hand', () =>
    inFolder(async (cwd) => {
      // cell 0: 70, 65 … 15 m/s, the rarer the stronger; cell 5: three events, two of the same wind
      const rows = [
        ...RATES.map((_, event) => ({ cell: 0, event, wind: 70 - 5 * event })),
        { cell: 5, event: 1, wind: 40 },
        { cell: 5, event: 4, wind: 40 },
        { cell: 5, event: 9, wind: 30 },
      ];
      await handMadeRun(cwd, { rates: RATES, rows, shards: 3 });
      writeFileSync(join(cwd, 'places.csv'), PLACES);
      const { code, stdout, stderr } = await galewake(
        ['events', 'curves', 'run', '--places', 'places.csv', '--out', 'out', '--json'],
        { cwd },
      );
      expect(stderr).toMatch(/1 of 5 places lie outside the grid of the run, such as 'Far'/);
      expect(stderr).toMatch(/no event reaches 1 of 4 places, such as 'Calm'/);
      expect(stderr).toMatch(/gamma interval of a sum of unequal rates/);
      expect(stderr).toMatch(/Event sets ignore land/);
      expect(code).toBe(0);
      expect(readdirSync(join(cwd, 'out')).sort()).toEqual([
        'curves.csv',
        'curves.svg',
        'return-values.csv',
        'summary.json',
      ]);
      const lines = readFileSync(join(cwd, 'out/curves.csv'), 'utf8').trimEnd().split('\n');
      expect(lines[0]).toBe(
        'name,lat_deg,lon_deg,event,wind_mps,events_at_or_above,exceedance_rate_per_year,rate_lower_per_year,rate_upper_per_year,return_period_years,annual_probability',
      );
      expect(lines).toHaveLength(1 + 12 + 2 + 12);
      // by hand: running rates .001 .003 .007 .012 …; 1 − e^(−0.003) = 0.0029955; 1/0.003 = 333.333
      const cells = lines.slice(1).map((line) => line.split(/,(?=[^ ])/));
      const running = [0.001, 0.003, 0.007, 0.012, 0.022, 0.042, 0.072, 0.112, 0.162, 0.262, 0.462, 0.962];
      for (const [i, rate] of running.entries()) {
        expect([cells[i]![0], cells[i]![3], cells[i]![4]]).toEqual(['North', `E${i}`, String(70 - 5 * i)]);
        expect(Number(cells[i]![6])).toBeCloseTo(rate, 8);
        expect(Number(cells[i]![7])).toBeLessThan(rate);
        expect(Number(cells[i]![8])).toBeGreaterThan(rate);
        expect(cells[14 + i]!.slice(3)).toEqual(cells[i]!.slice(3));
      }
      expect([cells[1]![9], cells[1]![10]]).toEqual(['333.333', '0.0029955']);
      // two events share 40 m/s, the first is named; the name cannot run as a formula
      expect(cells[12]!.slice(0, 7)).toEqual([`"'=South, A"`, '0.2', '0.7', 'E1', '40', '2', '0.012']);
      expect(cells[13]!.slice(3, 7)).toEqual(['E9', '30', '3', '0.112']);
      const document = JSON.parse(stdout);
      // by hand, as in the maps: 35 45 50 55 60 65 70
      const values = document.places.map((place: { return_values: { value_mps: number }[] }) =>
        place.return_values.map((one) => one.value_mps),
      );
      expect(values[0]).toEqual([35, 45, 50, 55, 60, 65, 70]);
      // .012 and .112: 40 from 83 years on, 30 from 9
      expect(values[1]).toEqual([30, 30, 30, 40, 40, 40, 40]);
      expect(values[2]).toEqual([0, 0, 0, 0, 0, 0, 0]);
      expect(document.set_years).toBe(1000);
      expect(document.cautions.join(' ')).not.toMatch(/only the highest/);
      expect(document.surface).toMatch(/ignore land/);
      const svg = readFileSync(join(cwd, 'out/curves.svg'), 'utf8');
      expect(svg.match(/class="place"/g)).toHaveLength(4);
      expect(svg).not.toMatch(/NaN|Infinity/);
      expect(svg).toContain('no event comes here');
    }));

  it('takes exact intervals for equal rates, and a tail with its caution', () =>
    inFolder(async (cwd) => {
      // 60 events of 200 years; quantiles of an exponential excess of mean 6 above 20
      const rates = Array.from({ length: 60 }, () => 0.005);
      const rows = rates.map((_, event) => ({ cell: 0, event, wind: 20 - 6 * Math.log((event + 0.5) / 60) }));
      await handMadeRun(cwd, { rates, rows });
      writeFileSync(join(cwd, 'places.csv'), 'name,lat_deg,lon_deg\nNorth,0.8,0.1\n');
      const words = ['events', 'curves', 'run', '--places', 'places.csv', '--tail', 'gpd'];
      const ran = await galewake([...words, '--threshold', '19.9', '--of', 'wind', '--json'], { cwd });
      expect(ran.code).toBe(0);
      const { places, set_years, interval, cautions } = JSON.parse(ran.stdout);
      expect(set_years).toBe(200);
      expect(interval).toMatch(/exact Poisson.*Garwood/);
      expect(cautions.join(' ')).toMatch(/200 years: values of 250, 500, 1000 years.*extrapolated/);
      const { tail, return_values: values } = places[0];
      expect(tail.events_above).toBe(60);
      expect(tail.rate_above_per_year).toBeCloseTo(0.3, 6);
      // identity: an exponential sample has the shape 0, within two of its standard errors
      expect(Math.abs(tail.shape)).toBeLessThan(2 * tail.shape_error);
      expect(Math.abs(tail.scale_mps - 6)).toBeLessThan(2 * tail.scale_error_mps);
      // exact: the highest of 200 years is that of one event, e^(−λ)-limits of the count 1
      expect(values[3].lower_mps).toBeLessThan(values[3].value_mps);
      expect(values[4].upper_mps).toBeNull();
      expect(values.map((one: { beyond_the_set: boolean }) => one.beyond_the_set)).toEqual([
        ...[false, false, false, false],
        ...[true, true, true],
      ]);
      // without a threshold: the 51st value from the top
      const usual = JSON.parse((await galewake([...words, '--json'], { cwd })).stdout).places[0].tail;
      expect(usual.events_above).toBe(50);
      expect(usual.threshold_rule).toMatch(/event 51 of 60/);
      const shown = await galewake(words, { cwd });
      expect(shown.stdout).toMatch(/place +events +10 y +interval .*shape +tail 100 y/);
    }));

  it('says what is wrong', () =>
    inFolder(async (cwd) => {
      await handMadeRun(cwd, { rates: [0.1, 0.1], rows: [{ cell: 0, event: 0, wind: 20 }] });
      writeFileSync(join(cwd, 'places.csv'), PLACES);
      writeFileSync(join(cwd, 'far.csv'), 'name,lat_deg,lon_deg\nFar,40,40\n');
      const cases: [string[], number, RegExp][] = [
        [[], 2, /--places/],
        [['--places', 'no.csv'], 3, /no\.csv/],
        [['--places', 'far.csv'], 3, /far\.csv: 1 of 1 places lie outside the grid.*larger --bounds/],
        [['--places', 'places.csv', '--strict'], 3, /lie outside/],
        [['--places', 'places.csv', '--confidence', '20'], 2, /50 to 99\.9/],
        [['--places', 'places.csv', '--threshold', '30'], 2, /--tail gpd/],
        [['--places', 'places.csv', '--tail', 'gpd', '--threshold', '10'], 2, /keeps no wind below 17\.50/],
        [['--places', 'places.csv', '--tail', 'gpd', '--threshold', '18', '--of', 'gust'], 2, /no gust below 19\.4/],
        [['--places', 'places.csv', '--tail', 'gpd'], 0, /1 events lie above|have no tail/],
        [['--places', 'places.csv', '--formats', 'csv'], 2, /go with --out/],
      ];
      for (const [words, code, says] of cases) {
        const ended = await galewake(['events', 'curves', 'run', ...words], { cwd });
        expect([words.join(' '), ended.code]).toEqual([words.join(' '), code]);
        expect(ended.stderr).toMatch(says);
      }
      writeFileSync(join(cwd, 'run/shards/000000.json'), '{');
      const missing = await galewake(['events', 'curves', 'run', '--places', 'places.csv'], { cwd });
      expect([missing.code, missing.stdout]).toEqual([3, '0\n']);
    }));
});
