import { describe, expect, it } from 'vitest';
import { assetStore } from '../../src/exposure/asset-columns.js';
import { cubicCurve } from '../../src/exposure/curve.js';
import { assetOutcomes, type ExposureMeasures, exposureTotals, type Tally } from '../../src/exposure/exposure.js';
import type { PointWinds } from '../../src/exposure/wind-at-points.js';
import { type Zone, zoneShape } from '../../src/exposure/zones.js';
import { assetsCsv, assetsGeojson } from '../../src/write/exposure-rows.js';
import { seeded } from './seeded.js';

const square = (name: string, w: number, e: number): Zone => ({
  name,
  polygons: [
    [
      [
        [w, 0],
        [e, 0],
        [e, 2],
        [w, 2],
        [w, 0],
      ],
    ],
  ],
  values: { people: 100 },
});

function windsOf(windMps: readonly number[], hours: readonly (readonly number[])[] = []): PointWinds {
  return {
    windMps: Float32Array.from(windMps),
    windFromDeg: Float32Array.from(windMps, () => 90),
    peakTimeS: Float32Array.from(windMps, (_, i) => 60 * i),
    hours: hours.map((one) => Float32Array.from(one)),
    originMs: Date.UTC(2031, 8, 3),
    cautions: [],
  };
}

const numbers = (tally: Tally) => ({
  assets: tally.assets,
  values: tally.values.map((sum) => sum.value()),
  losses: tally.losses.map((sum) => sum?.value() ?? null),
});

describe('five assets and two zones by hand', () => {
  // name, place, value, wind: two zones of 2° × 2° side by side, the fifth asset in neither
  const rows = [
    { name: 'a', lonDeg: 0.5, latDeg: 1, values: [1000, 2], wind: 15 },
    { name: 'b', lonDeg: 1.5, latDeg: 1, values: [2000.5, 0], wind: 20 },
    { name: 'c', lonDeg: 2.5, latDeg: 1, values: [4000, 5], wind: 40 },
    { name: 'd', lonDeg: 3.5, latDeg: 1, values: [8000.25, 1], wind: 60 },
    { name: 'e', lonDeg: 9, latDeg: 1, values: [16000, 3], wind: 50 },
  ];
  const store = assetStore();
  for (const [i, row] of rows.entries()) store.add({ ...row, line: i + 2 });
  const assets = store.columns();
  const zones = [square('west', 0, 2), square('east', 2, 4)];
  const curve = cubicCurve({ thresholdMps: 25.7, halfMps: 74.7 });
  const measures: ExposureMeasures = {
    levelsMps: [18, 33, 50],
    of: 'wind',
    gustFactor: 1.5,
    classes: { of: 'wind', boundsMps: [0, 17, 33, 58] },
    damage: { curve, windOf: (wind) => wind, columns: [0] },
    zones: zones.map(zoneShape),
  };
  const outcomes = assetOutcomes(
    assets,
    windsOf(
      rows.map((row) => row.wind),
      [[], [], []],
    ),
    measures,
  );
  const totals = exposureTotals(assets, outcomes, { levels: 3, classes: 4, zones: 2 });
  // F(40), F(60), F(50) of the formula with six decimals, by hand: v = 14.3/49, 34.3/49, 24.3/49
  const cube = (v: number): number => Math.round((v ** 3 / (1 + v ** 3)) * 1e6) / 1e6;
  const [f40, f60, f50] = [cube(14.3 / 49), cube(34.3 / 49), cube(24.3 / 49)];

  it('levels, classes and zones of each', () => {
    expect([...outcomes.level]).toEqual([-1, 0, 1, 2, 2]);
    expect([...outcomes.classIndex]).toEqual([0, 1, 2, 3, 2]);
    expect([...outcomes.zone]).toEqual([0, 0, 1, 1, -1]);
    expect([...outcomes.gustMps]).toEqual([22.5, 30, 60, 90, 75]);
    expect([...outcomes.ratio]).toEqual([0, 0, f40, f60, f50]);
    // 4000 × 0.024252 = 97.008, 8000.25 × 0.255398 = 2043.248, 16000 × 0.108706 = 1739.296
    expect([...outcomes.losses[0]!]).toEqual([0, 0, 97.01, 2043.25, 1739.3]);
    expect(outcomes.losses[1]).toBeNull();
  });

  it('sums by level, band and class', () => {
    const loss = 97.01 + 2043.25 + 1739.3;
    expect(numbers(totals.all)).toEqual({ assets: 5, values: [31000.75, 11], losses: [3879.56, null] });
    expect(loss).toBeCloseTo(3879.56, 9);
    expect(totals.levels.map(numbers)).toEqual([
      { assets: 4, values: [30000.75, 9], losses: [3879.56, null] },
      { assets: 3, values: [28000.25, 9], losses: [3879.56, null] },
      { assets: 2, values: [24000.25, 4], losses: [3782.55, null] },
    ]);
    expect(totals.bands.map(numbers)).toEqual([
      { assets: 1, values: [1000, 2], losses: [0, null] },
      { assets: 1, values: [2000.5, 0], losses: [0, null] },
      { assets: 1, values: [4000, 5], losses: [97.01, null] },
      { assets: 2, values: [24000.25, 4], losses: [3782.55, null] },
    ]);
    expect(totals.classes.map((tally) => numbers(tally).values[0])).toEqual([1000, 2000.5, 20000, 8000.25]);
  });

  it('sums by zone', () => {
    expect(totals.zones.map((zone) => numbers(zone.all))).toEqual([
      { assets: 2, values: [3000.5, 2], losses: [0, null] },
      { assets: 2, values: [12000.25, 6], losses: [2140.26, null] },
    ]);
    expect(totals.zones[1]!.levels.map((tally) => numbers(tally).values[0])).toEqual([12000.25, 12000.25, 8000.25]);
  });
});

describe('an exposure', () => {
  const random = seeded(9);
  const store = assetStore();
  const winds: number[] = [];
  for (let i = 0; i < 3000; i++) {
    store.add({
      name: i % 7 === 0 ? '=SUM(A1)' : `Ä "${i}", ü`,
      lonDeg: 540 * random() - 180,
      latDeg: 170 * random() - 85,
      values: [Math.round(1e8 * random()) / 100, Math.round(1e12 * random()) / 1000],
      line: i + 2,
    });
    winds.push(80 * random());
  }
  const assets = store.columns();
  const measures: ExposureMeasures = {
    levelsMps: [17.4911111, 32.9244444, 49.387],
    of: 'gust',
    gustFactor: 1.11,
    classes: null,
    damage: { curve: cubicCurve({ thresholdMps: 20, halfMps: 60 }), windOf: (wind) => wind * 0.93, columns: [0, 1] },
    zones: [],
  };
  const outcomes = assetOutcomes(assets, windsOf(winds, [winds, winds, winds]), measures);
  const totals = exposureTotals(assets, outcomes, { levels: 3, classes: 0, zones: 0 });
  const exposed = {
    assets,
    outcomes,
    valueNames: ['sum', 'gust'],
    levelsMps: measures.levelsMps,
    of: 'gust' as const,
    classCodes: [],
    zoneNames: [],
  };

  it('adds up: totals are the sums of the rows as written, bands the differences of levels', () => {
    const [heading, ...lines] = [...assetsCsv(exposed)].join('').trimEnd().split('\n');
    const names = heading!.split(',');
    // names hold commas: cells are counted from the end
    const cell = (line: string, name: string): string => line.split(',').at(names.indexOf(name) - names.length)!;
    // independent: integers of the last decimal
    const sum = (name: string, decimals: number, some: readonly string[]): number =>
      Number(some.reduce((total, line) => total + BigInt(Math.round(Number(cell(line, name)) * 10 ** decimals)), 0n)) /
      10 ** decimals;
    expect(lines.length).toBe(3000);
    expect(totals.all.values.map((one) => one.value())).toEqual([sum('sum', 2, lines), sum('gust', 3, lines)]);
    expect(totals.all.losses.map((one) => one?.value())).toEqual([
      sum('loss_sum', 2, lines),
      sum('loss_gust', 3, lines),
    ]);
    for (const [k, level] of [17.491, 32.924, 49.387].entries()) {
      const above = lines.filter((line) => Number(cell(line, 'peak_gust_mps')) >= level);
      expect(totals.levels[k]!.assets).toBe(above.length);
      expect(totals.levels[k]!.values[0]!.value()).toBe(sum('sum', 2, above));
      const next = totals.levels[k + 1];
      expect(totals.bands[k + 1]!.assets).toBe(above.length - (next?.assets ?? 0));
      expect(totals.bands[k + 1]!.losses[1]!.units()).toBe(
        totals.levels[k]!.losses[1]!.units() - (next?.losses[1]?.units() ?? 0n),
      );
    }
  });

  it('writes rows that a spreadsheet does not run, with the same numbers in GeoJSON', () => {
    const lines = [...assetsCsv(exposed)].join('').trimEnd().split('\n');
    expect(lines[1]).toMatch(/^'=SUM\(A1\),/);
    expect(lines[2]).toMatch(/^"Ä ""1"", ü",/);
    expect(lines[0]).toContain('hours_gust_34kt_h');
    const { features } = JSON.parse([...assetsGeojson(exposed, { caution: 'c' })].join('')) as {
      features: { geometry: { coordinates: number[] }; properties: Record<string, unknown> }[];
    };
    expect(features.length).toBe(3000);
    expect(features[0]!.properties).toMatchObject({ name: '=SUM(A1)', peak_gust_mps: outcomes.gustMps[0] });
    for (const { geometry } of features) expect(Math.abs(geometry.coordinates[0]!)).toBeLessThanOrEqual(180);
  });

  it('finds names that stand more than once', () => {
    expect(assets.sameNames).toEqual({ count: Math.ceil(3000 / 7) - 1, example: '=SUM(A1)' });
  });

  it('counts assets beyond a curve', () => {
    const curve = { ...cubicCurve({ thresholdMps: 20, halfMps: 60 }), knownFromMps: 10, knownToMps: 50 };
    const found = assetOutcomes(assets, windsOf(winds), {
      ...measures,
      damage: { curve, windOf: (wind) => wind, columns: [0] },
    });
    const rounded = winds.map((wind) => Math.round(Math.fround(wind) * 1000) / 1000);
    expect(found.aboveCurve).toBe(rounded.filter((wind) => wind > 50).length);
    expect(found.belowCurve).toBe(rounded.filter((wind) => wind > 0 && wind < 10).length);
  });

  it('counts an asset in each of the zones that hold it', () => {
    const one = assetStore();
    one.add({ name: 'x', lonDeg: 1, latDeg: 1, values: [7], line: 2 });
    const both = [square('a', 0, 2), square('b', 0.5, 3)].map(zoneShape);
    const found = assetOutcomes(one.columns(), windsOf([30]), {
      ...measures,
      damage: null,
      zones: both,
      levelsMps: [18],
    });
    expect(found.furtherZones.get(0)).toEqual([1]);
    const sums = exposureTotals(one.columns(), found, { levels: 1, classes: 0, zones: 2 });
    expect(sums.zones.map((zone) => zone.all.assets)).toEqual([1, 1]);
    expect(sums.all.values[0]!.value()).toBe(7);
  });
});
