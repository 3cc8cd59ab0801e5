import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { checkRfc7946 } from '../rfc7946.js';
import { FIXTURES, galewake, inFolder } from './run.js';

const storm = join(FIXTURES, 'demo-quillon.csv');
const places = join(FIXTURES, 'demo-places.csv');

interface Sites {
  readonly sites: readonly {
    name: string;
    peak_wind_mps: number;
    peak_gust_mps: number;
    levels: { hours: number; first: string | null }[];
    closest: { distance_km: number; side: string | null };
    series?: { time: string; wind_mps: number; pressure_hpa: number | null }[];
  }[];
  readonly skipped: { count: number };
  readonly cautions: readonly string[];
}

describe('galewake sites', () => {
  it('has the same numbers as JSON, CSV, GeoJSON and for a person', async () => {
    const [json, csv, geojson, shown] = await Promise.all([
      galewake(['sites', storm, places, '--json']),
      galewake(['sites', storm, places, '--as', 'csv', '--quiet']),
      galewake(['sites', storm, places, '--as', 'geojson', '--quiet']),
      galewake(['sites', storm, places]),
    ]);
    for (const run of [json, csv, geojson, shown]) expect(run.code).toBe(0);
    const { sites } = JSON.parse(json.stdout) as Sites;
    expect(sites.map(({ name }) => name)).toEqual(['Port Ansel', 'Cape Dorry', 'Halse', 'West Light']);
    const [heading, ...rows] = csv.stdout
      .trimEnd()
      .split('\n')
      .map((line) => line.split(','));
    const column = (name: string): string[] => rows.map((row) => row[heading!.indexOf(name)]!);
    expect(column('peak_wind_mps').map(Number)).toEqual(sites.map((site) => site.peak_wind_mps));
    expect(column('hours_34kt_h').map(Number)).toEqual(sites.map((site) => site.levels[0]!.hours));
    expect(column('closest_side')).toEqual(sites.map((site) => site.closest.side ?? ''));
    const collection = JSON.parse(geojson.stdout) as { features: { properties: Record<string, unknown> }[] };
    expect(checkRfc7946(collection)).toEqual([]);
    expect(collection.features.map(({ properties }) => properties['peak_gust_mps'])).toEqual(
      sites.map((site) => site.peak_gust_mps),
    );
    expect(shown.stdout).toContain('Port Ansel');
    expect(shown.stderr).toMatch(/no warning service/);
    // identity: the track passes east of West Light and west of Port Ansel, going north
    expect(sites[0]!.closest.side).toBe('right');
  });

  it('gives the series between two times at an interval', async () => {
    const run = await galewake([
      ...['sites', storm, places, '--json', '--every', '30min'],
      ...['--from', '2031-09-04T06:00Z', '--to', '2031-09-04T12:00Z'],
    ]);
    const { sites } = JSON.parse(run.stdout) as Sites;
    for (const { series, peak_wind_mps } of sites) {
      expect(series!.length).toBe(13);
      expect([series![0]!.time, series![12]!.time]).toEqual(['2031-09-04T06:00:00.000Z', '2031-09-04T12:00:00.000Z']);
      for (const row of series!) expect(row.wind_mps).toBeLessThanOrEqual(peak_wind_mps);
    }
  });

  it('draws the series to a file, and replaces none', async () => {
    await inFolder(async (folder) => {
      const words = ['sites', storm, places, '--as', 'svg', '--out', 's.svg'];
      expect((await galewake(words, { cwd: folder })).code).toBe(0);
      expect(readFileSync(join(folder, 's.svg'), 'utf8')).toMatch(/^<svg|^<\?xml/);
      const again = await galewake(words, { cwd: folder });
      expect(again).toMatchObject({ code: 3 });
      expect(again.stderr).toMatch(/s\.svg: it exists already/);
    });
  });

  it('skips rows and says so, refuses them when strict, tells of names that come twice', async () => {
    const input = 'name,lat,lon\nA,29,-45\nA,29.5,-45\nB,north,-45\n';
    const run = await galewake(['sites', storm, '-', '--json'], { input });
    const document = JSON.parse(run.stdout) as Sites;
    expect(document.skipped.count).toBe(1);
    expect(document.cautions.join('\n')).toMatch(/stand more than once, such as 'A'/);
    expect(document.cautions.join('\n')).toMatch(/1 row.* skipped: line 4/);
    const strict = await galewake(['sites', storm, '-', '--strict'], { input });
    expect(strict).toMatchObject({ code: 3, stdout: '' });
    expect(strict.stderr).toMatch(/standard input:4: the coordinates are missing or not numbers/);
  });
});
