import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { distanceM } from '../../src/earth.js';
import type { Fix, Track, WindRadii } from '../../src/track/track.js';
import { knots, NAUTICAL_MILE_M } from '../../src/units.js';
import { tracksToCsv } from '../../src/write/track-csv.js';
import { tracksToFeatures, tracksToGeojson } from '../../src/write/track-geojson.js';
import { bare, readFixture, readText } from '../track/read/read-text.js';

const FILES = [
  'hurdat2_AL112017_IRMA.txt',
  'hurdat2_CP032015_KILO.txt',
  'hurdat2_odd_rows.txt',
  'bdeck_bsh052021_YASA.dat',
  'ibtracs_v04r00_ACTIVE_list_original.csv',
  'ibtracs_v04r01_2022_SP_CODY.csv',
  'demo-tarrabel.csv',
];

/** Any number of the range, or a round one in some unit, or none. */
const quantity = (min: number, max: number, unit: number): fc.Arbitrary<number | null> =>
  fc.oneof(
    fc.constant(null),
    fc.double({ min, max, noNaN: true }),
    fc.integer({ min: Math.ceil(min / unit), max: Math.floor(max / unit) }).map((n) => n * unit),
  );
const plainZero = (value: number): number => value + 0;
const text = fc
  .oneof(
    fc.string({ unit: 'grapheme', maxLength: 8 }),
    fc.constantFrom('=1+1', '+x', '-', '@a', "'=x", "''@", '-12', 'a,"b"', 'x;y', '=', '＝1', '＠', 'NA', "'tis"),
  )
  .map((s) => s.replace(/[\u0000-\u001f\u007f-\u009f]+/g, ' ').trim());
const word = text.map((s) => s || null);

const radii = (thresholdMps: number): fc.Arbitrary<WindRadii> =>
  fc
    .tuple(
      ...([0, 1, 2, 3].map(() => quantity(0, 2e6, NAUTICAL_MILE_M)) as [
        fc.Arbitrary<number | null>,
        fc.Arbitrary<number | null>,
        fc.Arbitrary<number | null>,
        fc.Arbitrary<number | null>,
      ]),
    )
    .map((radiiM) => ({
      thresholdMps,
      radiiM: radiiM.map((r) => (r === null ? null : plainZero(r))) as unknown as WindRadii['radiiM'],
    }))
    .filter(({ radiiM }) => radiiM.some((radiusM) => radiusM !== null));

const windRadii = fc
  .subarray([knots(34), 17.5, knots(50), 25.12345678901234, knots(64), knots(33.4)])
  .chain((thresholds) => fc.tuple(...thresholds.toSorted((a, b) => a - b).map(radii)));

const fixes = fc
  .uniqueArray(
    fc.oneof(
      fc.integer({ min: Date.UTC(1800, 0), max: Date.UTC(9999, 11) }),
      fc.integer({ min: -80_000_000, max: 80_000_000 }).map((minutes) => minutes * 60_000),
    ),
    { minLength: 1, maxLength: 6 },
  )
  .chain((times) =>
    fc.tuple(
      ...times
        .toSorted((a, b) => a - b)
        .map(
          (timeMs): fc.Arbitrary<Fix> =>
            fc.record({
              timeMs: fc.constant(timeMs),
              latDeg: fc
                .oneof(
                  fc.double({ min: -90, max: 90, noNaN: true }),
                  fc.integer({ min: -900, max: 900 }).map((n) => n / 10),
                )
                .map(plainZero),
              lonDeg: fc
                .oneof(
                  fc.double({ min: -180, max: 180, maxExcluded: true, noNaN: true }),
                  fc.integer({ min: -1800, max: 1799 }).map((n) => n / 10),
                )
                .map(plainZero),
              maxWindMps: quantity(0, 150, knots(1)).map((v) => v && plainZero(v)),
              averagingS: fc.oneof(fc.constantFrom(60, 120, 180, 600), fc.double({ min: 1, max: 3600, noNaN: true })),
              centralPressurePa: quantity(80_000, 110_000, 100),
              ambientPressurePa: quantity(80_000, 110_000, 100),
              outerIsobarPa: quantity(80_000, 110_000, 50),
              outerIsobarRadiusM: quantity(0, 3e6, NAUTICAL_MILE_M).map((v) => v && plainZero(v)),
              radiusOfMaxWindM: quantity(1, 2e6, 1000),
              hollandB: fc.option(fc.double({ min: 1e-3, max: 10, noNaN: true })),
              windRadii,
              status: word,
              record: word,
              line: fc.constant(0),
            }),
        ),
    ),
  );

const tracks: fc.Arbitrary<Track[]> = fc
  .uniqueArray(
    text.filter((id) => id !== ''),
    { minLength: 1, maxLength: 3 },
  )
  .chain((ids) =>
    fc.tuple(
      ...ids.map((id) =>
        fc.record({
          id: fc.constant(id),
          name: word.filter((name) => !/^(invest|unnamed|nameless|noname|not[_ ]named)$/i.test(name ?? '')),
          basin: fc.constantFrom(null, 'NA', 'SP'),
          kind: fc.constantFrom('best', 'forecast', 'drawn', 'synthetic'),
          format: fc.constant('made'),
          fixes,
          cautions: fc.constant([]),
        }),
      ),
    ),
  ) as fc.Arbitrary<Track[]>;

const same = (written: string, given: readonly Track[]): void => {
  expect(readText(written).map(bare)).toEqual(given.map(bare));
};

describe('tracks that are written', () => {
  it.each(FILES)('%s: read back to the last bit', (name) => {
    const given = readFixture(name);
    same(tracksToCsv(given), given);
    same(tracksToGeojson(given), given);
  });

  it('as CSV read back to the last bit, whatever is in them', () => {
    fc.assert(
      fc.property(tracks, (given) => same(tracksToCsv(given), given)),
      { numRuns: 200 },
    );
  });

  it('as GeoJSON read back to the last bit, whatever is in them', () => {
    fc.assert(
      fc.property(tracks, (given) => same(tracksToGeojson(given), given)),
      { numRuns: 200 },
    );
  });
});

describe('the CSV of a track', () => {
  it('is in the units that the values came in', () => {
    const [heading, first] = tracksToCsv(readFixture('bdeck_bsh052021_YASA.dat')).split('\n');
    expect(heading).toBe(
      'storm,name,basin,kind,time,lat_deg,lon_deg,status,averaging_s,vmax_kt,pressure_hpa,outer_isobar_hpa,outer_isobar_radius_nmi,rmax_nmi,r34_ne_nmi,r34_se_nmi,r34_sw_nmi,r34_nw_nmi,r50_ne_nmi,r50_se_nmi,r50_sw_nmi,r50_nw_nmi,r64_ne_nmi,r64_se_nmi,r64_sw_nmi,r64_nw_nmi',
    );
    expect(first).toBe('SH052021,YASA,SP,best,2020-12-11T06:00Z,-12.9,168.4,DB,60,20,1004,1005,170,60,,,,,,,,,,,,');
    expect(tracksToCsv(readFixture('demo-tarrabel.csv')).split('\n')[0]).toContain('vmax_kt,rmax_km');
  });

  it('has no cell that a spreadsheet would run', () => {
    const given = readText('storm,time,lat_deg,lon_deg,status\n=1+1,2031-09-03T00:00Z,-15,-60,@x\n');
    expect(tracksToCsv(given).split('\n')[1]).toBe("'=1+1,drawn,2031-09-03T00:00Z,-15,-60,'@x,60");
  });
});

describe('the GeoJSON of a track', () => {
  const positions = (name: string): number[][] =>
    tracksToFeatures(readFixture(name)).features.flatMap(({ geometry }) =>
      geometry.type === 'Point'
        ? [geometry.coordinates]
        : geometry.type === 'LineString'
          ? geometry.coordinates
          : geometry.coordinates.flat(),
    );

  it.each(FILES)('%s: positions within ±180 and ±90, with at most 6 decimals', (name) => {
    for (const position of positions(name)) {
      expect(position).toHaveLength(2);
      const [lon, lat] = position as [number, number];
      expect(Math.abs(lon)).toBeLessThanOrEqual(180);
      expect(Math.abs(lat)).toBeLessThanOrEqual(90);
      for (const degrees of position) expect(String(degrees)).toMatch(/^-?\d+(\.\d{1,6})?$/);
    }
  });

  it.each([
    ['hurdat2_CP032015_KILO.txt', 2],
    ['bdeck_bsh052021_YASA.dat', 2],
    ['hurdat2_AL112017_IRMA.txt', 1],
  ])('%s: the line is cut at the antimeridian into %d parts that meet there', (name, count) => {
    const [line] = tracksToFeatures(readFixture(name)).features;
    const geometry = line!.geometry;
    const parts = geometry.type === 'MultiLineString' ? geometry.coordinates : [geometry.coordinates as number[][]];
    expect(parts).toHaveLength(count);
    for (const part of parts) {
      for (let i = 1; i < part.length; i++) expect(Math.abs(part[i]![0]! - part[i - 1]![0]!)).toBeLessThan(20);
    }
    for (let i = 1; i < parts.length; i++) {
      const [endLon, endLat] = parts[i - 1]!.at(-1)!;
      const [startLon, startLat] = parts[i]![0]!;
      expect([Math.abs(endLon!), endLat]).toEqual([180, startLat]);
      expect(startLon).toBe(-endLon!);
    }
  });

  // identity: the parts of a line are together as long as the line
  it('keeps the length of the line when it cuts it', () => {
    const [omeka] = readFixture('hurdat2_odd_rows.txt').filter(({ id }) => id === 'CP012010');
    const length = (points: readonly { latDeg: number; lonDeg: number }[]): number =>
      points.slice(1).reduce((sum, point, i) => sum + distanceM(points[i]!, point), 0);
    const { geometry } = tracksToFeatures([omeka!]).features[0]!;
    const parts = geometry.type === 'MultiLineString' ? geometry.coordinates : [geometry.coordinates as number[][]];
    const cut = parts.reduce(
      (sum, part) => sum + length(part.map(([lonDeg, latDeg]) => ({ lonDeg: lonDeg!, latDeg: latDeg! }))),
      0,
    );
    // two crossings: the straight line of the map is a little longer than the great circle
    expect(cut).toBeGreaterThanOrEqual(length(omeka!.fixes));
    expect(cut - length(omeka!.fixes)).toBeLessThan(1);
  });

  it('has no line for a storm of one fix', () => {
    const rita = readFixture('ibtracs_v04r01_2022_SP_CODY.csv').slice(0, 1);
    expect(tracksToFeatures(rita).features.map(({ geometry }) => geometry.type)).toEqual(['Point']);
  });
});
