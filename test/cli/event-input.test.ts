import { copyFileSync, existsSync, mkdirSync, readdirSync, readFileSync, truncateSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parquetReadObjects } from 'hyparquet';
import { parquetWriteBuffer } from 'hyparquet-writer';
import { describe, expect, it } from 'vitest';
import { FIXTURES, galewake as galewakeOf, inFolder, type Outcome } from './run.js';

const galewake = (cwd: string, words: readonly string[]): Promise<Outcome> => galewakeOf(words, { cwd });
const GRID = ['--bounds=-80,5,-40,40', '--cell', '0.5deg', '--quiet'];
const HEAD = 'event,time,lat_deg,lon_deg,vmax_mps,rmax_km';
/** Three days of an invented storm. */
const rowsOf = (id: string, latDeg: number, wind: number): string[][] =>
  [0, 1, 2, 3].map((i) => [
    id,
    `2031-08-0${i + 1}T00:00Z`,
    String(latDeg + 2 * i),
    String(-55 - 2.5 * i),
    String(wind + 5 * i),
    '35',
  ]);
const SET = [...rowsOf('A', 12, 25), ...rowsOf('B', 15, 40), ...rowsOf('C', 20, 8)];
const csvOf = (rows: readonly (readonly string[])[], head = HEAD): string =>
  `${head}\n${rows.map((row) => row.join(',')).join('\n')}\n`;
const RATES = 'event,rate\nC,0.3\nA,0.01\nB,0.002\n';

function parquetOf(rows: readonly (readonly string[])[]): Uint8Array {
  const numbers = (at: number) => ({
    name: HEAD.split(',')[at]!,
    data: rows.map((row) => Number(row[at])),
    type: 'DOUBLE' as const,
  });
  return new Uint8Array(
    parquetWriteBuffer({
      columnData: [
        { name: 'event', data: rows.map((row) => row[0]!), type: 'STRING' },
        { name: 'time', data: rows.map((row) => new Date(row[1]!)), type: 'TIMESTAMP' },
        ...[2, 3, 4, 5].map(numbers),
      ],
    }),
  );
}

describe('the input of an event set', () => {
  it(
    'is a CSV or a Parquet file with rates in it or beside it: the same results',
    () =>
      inFolder(async (folder) => {
        writeFileSync(join(folder, 'set.csv'), csvOf(SET));
        writeFileSync(join(folder, 'set.parquet'), parquetOf(SET));
        writeFileSync(join(folder, 'rates.csv'), RATES);
        writeFileSync(
          join(folder, 'own.csv'),
          csvOf(
            SET.map((row) => [...row, { A: '0.01', B: '0.002', C: '0.3' }[row[0]!]!, 'the file’s own']),
            `${HEAD.replace('event', 'EVENT_NO').replace('vmax_mps', 'wind')},rate,storm`,
          ),
        );
        const more = ['--places', 'places.csv', ...GRID];
        writeFileSync(join(folder, 'places.csv'), 'name,lat_deg,lon_deg\n"Port, north",18,-61\n');
        for (const words of [
          ['set.csv', '--rates', 'rates.csv', '--shards', '1', '--out', 'a'],
          ['set.parquet', '--rates', 'rates.csv', '--shards', '3', '--out', 'b'],
          ['own.csv', '--columns', 'event=EVENT_NO,vmax_mps=wind', '--shards', '2', '--out', 'c'],
        ]) {
          const { code, stderr } = await galewake(folder, ['events', 'run', ...words, ...more]);
          expect([code, stderr]).toEqual([0, expect.any(String)]);
        }
        for (const name of ['events.csv', 'events.parquet'])
          for (const other of ['b', 'c'])
            expect(readFileSync(join(folder, other, name)).equals(readFileSync(join(folder, 'a', name)))).toBe(true);
        const [head, a, , c] = readFileSync(join(folder, 'a', 'events.csv'), 'utf8').split('\n');
        expect(head).toMatch(
          /^event,number,rate,peak_wind_mps,.*,cells_34kt,area_34kt_km2,.*,closest_1_km,closest_1_time$/,
        );
        expect(a).toMatch(/^A,0,0\.01,\d/);
        // too weak for any cell
        expect(c).toMatch(/^C,2,0\.3,\d|^C,2,0\.3,,,,/);
      }),
    60_000,
  );

  it(
    'is a folder of track files of any format, each storm an event',
    () =>
      inFolder(async (folder) => {
        mkdirSync(join(folder, 'tracks'));
        for (const name of ['hurdat2_AL112017_IRMA.txt', 'demo-quillon.csv'])
          copyFileSync(join(FIXTURES, name), join(folder, 'tracks', name));
        const run = (out: string) =>
          galewake(folder, [
            'events',
            'run',
            'tracks',
            '--years',
            '50',
            '--landfalls',
            'natural-earth',
            '--json',
            '--out',
            out,
            ...GRID,
          ]);
        const first = await run('a');
        expect(first.code).toBe(0);
        expect(first.stdout).toMatch(/observed wind radii shape the fields of this set/);
        const bytes = readFileSync(join(folder, 'a', 'events.parquet'));
        const file = bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer;
        const events = (await parquetReadObjects({ file })) as Record<string, unknown>[];
        expect(events.map(({ event }) => event)).toEqual(['QN-01', 'AL112017']);
        // published (HURDAT2, AL112017): the best track has 914 hPa at the lowest, and its first landfall on Barbuda at 05:45 UTC of 6 September
        expect(events[1]!['lowest_pressure_hpa']).toBe(914);
        expect(events[1]!['landfall_time']).toMatch(/^2017-09-06T0[5-6]:/);
        copyFileSync(join(FIXTURES, 'demo-quillon.csv'), join(folder, 'tracks', 'again.csv'));
        const again = await run('b');
        expect(again.code).toBe(3);
        expect(again.stderr).toMatch(/demo-quillon\.csv: storm 'QN-01' stands in again\.csv too.*rename one/);
      }),
    60_000,
  );

  it(
    'takes ids as data, whatever they say',
    () =>
      inFolder(async (folder) => {
        const ids = ["'; drop table rates; --", '../../escaped', 'a[1]*?', '$1', '-rf'];
        const rows = ids.flatMap((id, i) => rowsOf(id, 12 + i, 30));
        mkdirSync(join(folder, 'work'));
        writeFileSync(join(folder, 'work', "odd ' [1].parquet"), parquetOf(rows));
        const work = join(folder, 'work');
        const run = await galewake(work, [
          'events',
          'run',
          "odd ' [1].parquet",
          '--years',
          '5',
          '--out',
          "it's *",
          ...GRID,
        ]);
        expect([run.code, run.stderr]).toEqual([0, expect.any(String)]);
        expect(readdirSync(folder)).toEqual(['work']);
        const show = await galewake(work, [
          'events',
          'show',
          "it's *",
          '../../escaped',
          '--formats',
          'geojson',
          '--quiet',
        ]);
        expect(show.code).toBe(0);
        expect(readdirSync(folder)).toEqual(['work']);
        expect(existsSync(join(folder, 'escaped'))).toBe(false);
      }),
    60_000,
  );

  it.each([
    ['a comma in an id', ['set.parquet'], /set\.parquet, row 2, event: "A,B" holds a comma/],
    ['a truncated Parquet file', ['cut.parquet'], /cut\.parquet: this is no Parquet file that can be read/],
    ['an empty folder', ['empty'], /empty: the folder holds no file/],
    ['a missing input', ['none.parquet'], /none\.parquet: there is no such file/],
    [
      'an event without a rate',
      ['set.csv', '--rates', 'few.csv'],
      /few\.csv: event 'C' \(row 10 of the set\) has no rate/,
    ],
    ['a rate of no event', ['set.csv', '--rates', 'more.csv'], /more\.csv, row 5: the set has no event 'X'/],
    ['a doubled rate', ['set.csv', '--rates', 'twice.csv'], /twice\.csv, row 5: event 'A' has a rate already in row 3/],
    ['a rate of zero', ['set.csv', '--rates', 'zero.csv'], /zero\.csv, row 2: 'A,0' is no event and rate above zero/],
    [
      'rates and years',
      ['set.csv', '--rates', 'rates.csv', '--years', '9'],
      /--years and --rates: an event has one rate/,
    ],
    [
      'an unknown key',
      ['set.csv', '--columns', 'evnt=event'],
      /'evnt' is no key of an event table \(did you mean event\?\)/,
    ],
    [
      'an unknown heading',
      ['set.csv', '--columns', 'event=evnt'],
      /set\.csv has no heading 'evnt' \(did you mean event\?\)/,
    ],
    ['places that are none', ['set.csv', '--places', 'rates.csv'], /rates\.csv/],
    ['land that is none', ['set.csv', '--landfalls', 'set.csv'], /set\.csv: this is no JSON/],
  ])('%s is refused with the place and the remedy', (_, words, says) =>
    inFolder(async (folder) => {
      writeFileSync(join(folder, 'set.csv'), csvOf(SET));
      writeFileSync(join(folder, 'set.parquet'), parquetOf(rowsOf('A,B', 12, 30)));
      writeFileSync(join(folder, 'cut.parquet'), parquetOf(SET));
      truncateSync(join(folder, 'cut.parquet'), 300);
      mkdirSync(join(folder, 'empty'));
      writeFileSync(join(folder, 'rates.csv'), RATES);
      writeFileSync(join(folder, 'few.csv'), 'event,rate\nA,1\nB,1\n');
      writeFileSync(join(folder, 'more.csv'), `${RATES}X,1\n`);
      writeFileSync(join(folder, 'twice.csv'), `${RATES}A,1\n`);
      writeFileSync(join(folder, 'zero.csv'), 'event,rate\nA,0\n');
      const { code, stderr } = await galewake(folder, ['events', 'plan', ...words, '--out', 'run', ...GRID]);
      expect(stderr).toMatch(says);
      expect(code === 2 || code === 3).toBe(true);
      expect(existsSync(join(folder, 'run', 'plan.json'))).toBe(false);
    }),
  );
});
