import { mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { pointTable } from '../../src/exposure/point-table.js';
import { checkRfc7946 } from '../rfc7946.js';
import { FIXTURES, galewake, inFolder } from './run.js';

const storm = join(FIXTURES, 'demo-quillon.csv');
const assets = join(FIXTURES, 'demo-assets.csv');
const isles = join(FIXTURES, 'demo-isles.geojson');
const HEAD = 'name,lat_deg,lon_deg,sum';
const GOOD = 'Good,29.02,-44.95,100';

interface Document {
  readonly totals: { assets: number; values: Record<string, number>; losses?: Record<string, number> };
  readonly levels: readonly { threshold_kt: number; assets: number; values: Record<string, number> }[];
  readonly bands: readonly { assets: number; values: Record<string, number> }[];
  readonly classes: { scale: string; rows: readonly { assets: number }[] } | null;
  readonly zones: readonly {
    name: string;
    levels: readonly { area_share: number; values: Record<string, number> }[];
  }[];
  readonly skipped: { assets: { count: number; rows: readonly { line: number; reason: string }[] } };
  readonly curve: { conversion: string } | null;
  readonly cautions: readonly string[];
  readonly damage_caution?: string;
  readonly [key: string]: unknown;
}

/** one document about assets that are given as text */
async function exposed(text: string | Buffer, words: readonly string[] = []): Promise<Document> {
  const run = await galewake(['exposure', storm, '-', '--json', ...words], { input: text });
  expect(run.stderr).toBe('');
  expect(run.code).toBe(0);
  return JSON.parse(run.stdout) as Document;
}

describe('galewake exposure', () => {
  it('writes assets, zones and a summary that adds up', async () => {
    await inFolder(async (folder) => {
      const run = await galewake(
        [
          ...['exposure', storm, assets, '--zones', isles, '--cubic', '25.7,74.7', '--loss-of', 'insured_sum'],
          ...['--currency', 'crowns of 2031', '--out', 'o', '--formats', 'csv,geojson,json', '--json'],
        ],
        { cwd: folder },
      );
      expect(run.code).toBe(0);
      expect(readdirSync(join(folder, 'o')).sort()).toEqual([
        'assets.csv',
        'assets.geojson',
        'summary.json',
        'zones.csv',
        'zones.geojson',
      ]);
      const read = (name: string): string => readFileSync(join(folder, 'o', name), 'utf8');
      const document = JSON.parse(run.stdout) as Document;
      expect(JSON.parse(read('summary.json'))).toEqual(document);
      expect(document).toMatchObject({ schema: 'galewake-exposure/1', currency: 'crowns of 2031', averaging_s: 60 });
      expect(document.damage_caution).toMatch(/licensed engineers and local codes/);
      for (const name of ['assets.geojson', 'zones.geojson']) expect(checkRfc7946(JSON.parse(read(name)))).toEqual([]);
      const [heading, ...rows] = read('assets.csv')
        .trimEnd()
        .split('\n')
        .map((line) => line.split(','));
      const column = (name: string): number[] => rows.map((row) => Number(row[heading!.indexOf(name)]));
      const sum = (values: readonly number[]): number => values.reduce((a, b) => a + b, 0);
      // identity: totals are the sums of the rows
      expect(document.totals.values['insured_sum']).toBe(sum(column('insured_sum')));
      expect(document.totals.losses).toEqual({ insured_sum: expect.closeTo(sum(column('loss_insured_sum')), 6) });
      const winds = column('peak_wind_mps');
      for (const [k, level] of document.levels.entries()) {
        const threshold = Math.round(((level.threshold_kt * 1852) / 3600) * 1000) / 1000;
        const people = column('people').filter((_, i) => winds[i]! >= threshold);
        expect([level.assets, level.values['people']]).toEqual([people.length, sum(people)]);
        // identity: bands are the differences of levels
        const next = document.levels[k + 1];
        expect(document.bands[k + 1]!.values['people']).toBe(level.values['people']! - (next?.values['people'] ?? 0));
      }
      expect(sum(document.classes!.rows.map((row) => row.assets))).toBe(document.totals.assets);
      for (const zone of document.zones) {
        const shares = zone.levels.map((level) => level.area_share);
        for (let k = 1; k < shares.length; k++) expect(shares[k]).toBeLessThanOrEqual(shares[k - 1]!);
        // identity: a zone's values lie evenly over it; 41 200 people on Great Merrow, 6 300 on Little Merrow
        const people = zone.name === 'Great Merrow' ? 41200 : 6300;
        for (const level of zone.levels) expect(level.values['people']).toBeCloseTo(people * level.area_share, 2);
      }
    });
  });

  it('shows the sums to a person, with the cautions on standard error', async () => {
    const run = await galewake(['exposure', storm, assets, '--power', '25,80,3']);
    expect(run).toMatchObject({ code: 0 });
    expect(run.stdout).toMatch(/^Quillon \(QN-01\): 7 assets/);
    expect(run.stdout).toMatch(/loss of insured_sum/);
    expect(run.stderr).toMatch(/licensed engineers.*local codes/);
    expect(run.stderr).toMatch(/no warning service/);
  });

  it('replaces nothing without --force and leaves nothing behind after an error', async () => {
    await inFolder(async (folder) => {
      mkdirSync(join(folder, 'o'));
      writeFileSync(join(folder, 'o/summary.json'), 'mine');
      const kept = await galewake(['exposure', storm, assets, '--out', 'o'], { cwd: folder });
      expect(kept.code).toBe(3);
      expect(kept.stderr).toMatch(/summary\.json: it exists already/);
      const bad = await galewake(['exposure', storm, '-', '--strict', '--out', 'new'], {
        cwd: folder,
        input: `${HEAD}\nA,x,1,1\n`,
      });
      expect(bad.code).toBe(3);
      expect(readdirSync(folder)).toEqual(['o']);
      expect(readdirSync(join(folder, 'o'))).toEqual(['summary.json']);
      const forced = await galewake(['exposure', storm, assets, '--out', 'o', '--force', '--quiet'], { cwd: folder });
      expect(forced).toMatchObject({ code: 0, stderr: '' });
    });
  });

  it('reads semicolons, decimal commas, quotes, accents and GeoJSON to the same numbers', async () => {
    const plain = await exposed('name,lat_deg,lon_deg,sum\n"Zoë, ""Ä""",29.02,-44.95,1234.5\n');
    const comma = await exposed('\uFEFFname;lat_deg;lon_deg;sum\r\n"Zoë, ""Ä""";29,02;-44,95;1234,5\r\n');
    const geojson = await exposed(
      JSON.stringify({
        type: 'FeatureCollection',
        features: [
          {
            type: 'Feature',
            properties: { name: 'Zoë', sum: 1234.5 },
            geometry: { type: 'Point', coordinates: [-44.95, 29.02] },
          },
        ],
      }),
    );
    expect(plain.totals.values).toEqual({ sum: 1234.5 });
    for (const other of [comma, geojson]) {
      expect(other.totals).toEqual(plain.totals);
      expect(other.levels).toEqual(plain.levels);
    }
  });

  it('counts gusts where it is asked to, and classes of other scales', async () => {
    const wind = await exposed(readFileSync(assets));
    const gust = await exposed(readFileSync(assets), ['--of', 'gust', '--scale', 'beaufort']);
    for (const [k, level] of gust.levels.entries()) expect(level.assets).toBeGreaterThanOrEqual(wind.levels[k]!.assets);
    expect(gust.classes).toMatchObject({ scale: 'beaufort' });
    expect((await exposed(readFileSync(assets), ['--wind', '10min'])).classes).toBeNull();
  });

  it('converts the wind to the curve’s averaging period', async () => {
    await inFolder(async (folder) => {
      const path = join(folder, 'c.csv');
      writeFileSync(path, 'wind_kt_10min,ratio\n40,0\n140,1\n');
      // published: 0.93 from 1 to 10 minutes at sea [HarperKepertGinger2010], 1.03/1.11
      const ten = await exposed(readFileSync(assets), ['--curve', path, '--curve-of', 'wind']);
      expect(ten.curve!.conversion).toMatch(/× 0\.9279/);
      writeFileSync(path, 'gust_kt,ratio\n40,0\n140,1\n');
      const gust = await exposed(readFileSync(assets), ['--curve', path, '--curve-averaging', '3s']);
      expect(gust.curve!.conversion).toMatch(/the gust as it is/);
      expect(gust.totals.losses!['insured_sum']).toBeGreaterThan(ten.totals.losses!['insured_sum']!);
    });
  });
});

describe('odd assets are counted or named, never lost in silence', () => {
  const skipped: readonly [what: string, row: string, reason: RegExp][] = [
    ['missing coordinates', 'A,,,5', /coordinates are missing/],
    ['a missing latitude', 'A,,-45,5', /coordinates are missing/],
    ['coordinates that are text', 'A,north,west,5', /not numbers \('north', 'west'\)/],
    ['swapped coordinates', 'A,-144.95,29,5', /beyond the poles; are latitude and longitude swapped/],
    ['a longitude beyond 360', 'A,29,720,5', /longitude 720 is beyond ±360/],
    ['a value that is text', 'A,29,-45,plenty', /sum 'plenty' is not a number/],
    ['a value with a unit', 'A,29,-45,5 EUR', /sum '5 EUR' is not a number.*units/],
    ['a value with a separator', 'A,29,-45,"1,000"', /thousands separators/],
    ['a missing value', 'A,29,-45,', /sum '' is not a number/],
    ['a negative value', 'A,29,-45,-5', /'-5' is not a number of at least 0/],
    ['a hexadecimal value', 'A,29,-45,0x10', /'0x10' is not a number/],
    ['an endless value', 'A,29,-45,1e999', /is above 1000000000000000/],
    ['a value beyond belief', 'A,29,-45,1e18', /is above 1000000000000000; check the unit/],
    ['a row too short', 'A,29,-45', /3 cells, the heading 4/],
    ['a decimal comma between commas', 'A,29,02,-44,95,5', /6 cells, the heading 4 \(a decimal comma/],
    ['an empty name', ',29,-45,5', /the name is empty/],
  ];
  it('skips each with its line and reason', async () => {
    const text = `${HEAD}\n${GOOD}\n${skipped.map(([, row]) => row).join('\n')}\n`;
    const document = await exposed(text);
    expect(document.totals.assets).toBe(1);
    expect(document.skipped.assets.count).toBe(skipped.length);
    for (const [i, [what, , reason]] of skipped.entries())
      expect(document.skipped.assets.rows[i], what).toEqual({ line: i + 3, reason: expect.stringMatching(reason) });
    expect(document.cautions.join('\n')).toMatch(/16 rows were skipped: line 3/);
  });
  it('refuses each when strict', async () => {
    for (const [what, row, reason] of skipped) {
      const reader = pointTable({
        source: 'a.csv',
        strict: true,
        onPoint: () => undefined,
        onSkip: () => expect.unreachable(what),
      });
      reader.line(HEAD, 1);
      reader.line(GOOD, 2);
      expect(() => reader.line(row, 3), what).toThrow(reason);
      expect(() => reader.line(row, 3), what).toThrow(/^a\.csv:3: .*mend the row, or leave out --strict/);
    }
    const run = await galewake(['exposure', storm, '-', '--strict'], {
      input: `${HEAD}\n${GOOD}\n${skipped[0]![1]}\n`,
    });
    expect(run).toMatchObject({ code: 3, stdout: '' });
    expect(run.stderr).toMatch(/standard input:3: .*mend the row, or leave out --strict/);
  });

  const named: readonly [what: string, text: string, caution: RegExp][] = [
    ['a name twice', `${HEAD}\n${GOOD}\n${GOOD}\n`, /1 assets? ha.* a name that came before, such as 'Good'/],
    ['a place at 0, 0', `${HEAD}\n${GOOD}\nNowhere,0,0,5\n`, /at 0° N, 0° E; does that stand for a missing place/],
    ['nothing in reach', `${HEAD}\nFar,-40,100,5\n`, /no asset lies within \d+ km of the track/],
    ['all places swapped', `${HEAD}\nA,-44.95,29.02,5\nB,-44.9,29.98,5\n`, /exchanged some would: are they swapped/],
    ['no values', 'name,lat_deg,lon_deg\nA,29.02,-44.95\n', /no column of values/],
    ['a column that is not taken', `${HEAD},use\n${GOOD},mill\n`, /taken as values: sum; not taken.*: use\. --values/],
    ['no asset', `${HEAD}\n`, /there is no asset/],
  ];
  it('tells what is odd about the whole', async () => {
    const documents = await Promise.all(named.map(([, text]) => exposed(text)));
    for (const [i, document] of documents.entries())
      expect(document.cautions.join('\n'), named[i]![0]).toMatch(named[i]![2]);
  });

  it('tells when the wind goes beyond a curve', async () => {
    await inFolder(async (folder) => {
      const path = join(folder, 'c.csv');
      writeFileSync(path, 'wind_mps_1min,ratio\n30,0.1\n40,0.2\n');
      const { cautions } = await exposed(readFileSync(assets), ['--curve', path, '--curve-of', 'wind']);
      expect(cautions.join('\n')).toMatch(/\d assets? ha.* more wind than the curve's last row, 40\.0 m\/s/);
      expect(cautions.join('\n')).toMatch(/\d assets? ha.* less wind than the curve's first row, 30\.0 m\/s/);
    });
  });
});

describe('what cannot be right is refused', () => {
  const cases: readonly [what: string, input: string | Buffer, words: readonly string[], code: number, says: RegExp][] =
    [
      ['an empty file', '', [], 3, /is empty; give a table/],
      ['no latitude', 'name,y_m,lon_deg\nA,1,2\n', [], 3, /no heading lat_deg; found name, y_m, lon_deg/],
      ['a heading twice', `${HEAD},sum\n${GOOD},1\n`, [], 3, /two columns have the heading sum/],
      [
        'a value column that is not there',
        `${HEAD}\n${GOOD}\n`,
        ['--values', 'summ'],
        3,
        /no value column 'summ' \(did you mean sum\?\)/,
      ],
      ['a quote that is never closed', `${HEAD}\n"A,29,-45,5\n`, [], 3, /:2: a quoted cell is never closed/],
      ['another encoding', Buffer.from(`${HEAD}\nJos\xe9,29,-45,5\n`, 'latin1'), [], 3, /not UTF-8/],
      ['a spreadsheet', Buffer.from([0x50, 0x4b, 3, 4, 0]), [], 3, /spreadsheet.*export the sheet as CSV/],
      ['GeoJSON that is cut off', '{"type":"FeatureCollection","features":[{"type":"Fea', [], 3, /cut off/],
      ['a bare geometry', '{"type":"Point","coordinates":[1,2]}', [], 3, /no GeoJSON FeatureCollection/],
      ['two curves', GOOD, ['--cubic', '25,75', '--power', '25,75,3'], 2, /exclude each other/],
      ['half a cubic curve', GOOD, ['--cubic', '25.7'], 2, /two speeds.*no built-in pair/],
      ['a cubic curve upside down', GOOD, ['--cubic', '75,25'], 3, /half-loss speed above it/],
      ['a cubic curve of gusts', GOOD, ['--cubic', '25,75', '--curve-of', 'gust'], 2, /1-min sustained wind/],
      ['a statement without a curve', GOOD, ['--curve-averaging', '10min'], 2, /go with --curve or --power/],
      ['a power without exponent', GOOD, ['--power', '25,75'], 2, /THRESHOLD,TOTAL,EXPONENT/],
      ['a curve that is not there', GOOD, ['--curve', 'nowhere.csv'], 3, /nowhere\.csv: there is no such file/],
      ['losses without a curve', GOOD, ['--loss-of', 'sum'], 2, /--loss-of goes with a curve/],
      [
        'losses of nothing',
        `${HEAD}\n${GOOD}\n`,
        ['--cubic', '25,75', '--loss-of', 'sam'],
        2,
        /'sam' is no value column.*did you mean sum/,
      ],
      ['a scale that is none', GOOD, ['--scale', 'beaufrot'], 2, /did you mean beaufort/],
      ['formats without a folder', GOOD, ['--formats', 'csv'], 2, /go with --out/],
      ['a format that is none', GOOD, ['--out', 'o', '--formats', 'xls'], 2, /--formats: 'xls' is not one of/],
      ['a level that is none', GOOD, ['--levels', 'strong'], 2, /'strong' is not a quantity/],
      ['standard input twice', GOOD, ['--zones', '-'], 2, /only one of the files/],
      ['zones that are none', GOOD, ['--zones', storm], 3, /not valid JSON/],
    ];
  it('with a message that says where, what and how to mend it', async () => {
    const runs = await inFolder((folder) =>
      Promise.all(
        cases.map(([, input, words]) => galewake(['exposure', storm, '-', ...words], { input, cwd: folder })),
      ),
    );
    for (const [i, run] of runs.entries()) {
      const [what, , , code, says] = cases[i]!;
      expect(run.stderr, what).toMatch(says);
      expect([what, run.code, run.stdout]).toEqual([what, code, '']);
      expect(run.stderr).not.toMatch(/failure inside|\n\s+at /);
    }
  });
});
