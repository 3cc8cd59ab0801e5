import { createRequire } from 'node:module';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { EARTH_RADIUS_M } from '../../src/earth.js';
import { cellAreasM2, cellsAtOrAboveM2, polygonsAreaM2, ringAreaM2 } from '../../src/isotach/area.js';
import { type Isotach, isotachs } from '../../src/isotach/isotachs.js';
import { type Grid, gridOver } from '../../src/swath/grid.js';
import { isotachsGeojson } from '../../src/write/isotachs-geojson.js';
import { checkRfc7946 } from '../rfc7946.js';

const validation = createRequire(import.meta.url)('geojson-validation') as {
  valid: (value: unknown, list: true) => string[];
};

const written = (list: readonly Isotach[]) =>
  JSON.parse(isotachsGeojson({ isotachs: list, context: { quantity: 'wind', averagingS: 60 } })) as {
    bbox?: number[];
    features: { bbox: number[]; properties: Record<string, unknown> }[];
  };

/** Problems found in what the writer makes of them. */
function problemsOf(list: readonly Isotach[]): string[] {
  const document = written(list);
  return [...checkRfc7946(document), ...(document.features.length > 0 ? validation.valid(document, true) : [])];
}

const geographic = (west: number, south: number, cell: number, nx: number, ny: number): Grid => ({
  crs: 'EPSG:4326',
  geographic: true,
  nx,
  ny,
  cell,
  bounds: [west, south, west + nx * cell, south + ny * cell],
});
const projected = (crs: string, west: number, south: number, cell: number, nx: number, ny: number): Grid => ({
  ...geographic(west, south, cell, nx, ny),
  crs,
  geographic: false,
});

/** A round hill on the sphere: value falls with the great-circle distance from its top, degrees. */
function hill(
  grid: Grid,
  top: { lonDeg: number; latDeg: number },
  inverse = (x: number, y: number) => [x, y] as readonly [number, number],
): Float64Array {
  const field = new Float64Array(grid.nx * grid.ny);
  const rad = Math.PI / 180;
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      const [lon, lat] = inverse(grid.bounds[0] + (column + 0.5) * grid.cell, grid.bounds[3] - (row + 0.5) * grid.cell);
      const cosine =
        Math.sin(lat * rad) * Math.sin(top.latDeg * rad) +
        Math.cos(lat * rad) * Math.cos(top.latDeg * rad) * Math.cos((lon - top.lonDeg) * rad);
      field[k] = 100 - Math.acos(Math.min(1, cosine)) / rad;
    }
  }
  return field;
}

/** Area of a spherical cap (identity). */
const capM2 = (radiusDeg: number) => 2 * Math.PI * EARTH_RADIUS_M ** 2 * (1 - Math.cos((radiusDeg * Math.PI) / 180));

const LEVELS = [0.5, 1, 1.5, 2, 2.25];
const values = {
  smooth: fc.double({ min: 0, max: 3, noNaN: true }),
  plateaus: fc.constantFrom(0, 0.5, 1, 1.5, 2, 2.25, 3, Number.NaN),
  harsh: fc.constantFrom(0, 1, 3, Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY),
};
/** A grid of one of many kinds with a field on it. */
const cases = fc
  .record({
    nx: fc.integer({ min: 1, max: 11 }),
    ny: fc.integer({ min: 1, max: 11 }),
    kind: fc.integer({ min: 0, max: 9 }),
    offset: fc.double({ min: 0, max: 1, noNaN: true }),
    values: fc.constantFrom(...Object.values(values)),
  })
  .chain(({ nx, ny, kind, offset, values: value }) => {
    const grids: (() => Grid)[] = [
      () => geographic(-70.1, 12, 0.02, nx, ny),
      () => geographic(180 - nx * offset, -20, 1, nx, ny),
      () => geographic(-185 + offset, 80 - ny, 1, nx, ny),
      () => gridOver({ crs: 'EPSG:4326', bounds: [-180 + 200 * offset, -90, 180 + 200 * offset, 90], cell: 36 }),
      () => gridOver({ crs: 'EPSG:4326', bounds: [0, -90, 360, 90], cell: 47 }),
      () => projected('EPSG:3031', -nx * 25_000 * 0.5, -ny * 25_000 * offset, 25_000, nx, ny),
      () => projected('EPSG:3995', -nx * 2000 * 0.5, -ny * 2000 * 0.5, 2000, nx, ny),
      () => projected('EPSG:32660', 800_000, 1_000_000, 5000, nx, ny),
      () => projected('EPSG:3857', -20_037_508.342789244, -1e7, (2 * 20_037_508.342789244) / 8, 8, 4),
      () => projected('EPSG:6933', -21e6, -12e6, 3e6, 14, 8),
    ];
    const grid = grids[kind]!();
    const cells = grid.nx * grid.ny;
    return fc.record({ grid: fc.constant(grid), field: fc.array(value, { minLength: cells, maxLength: cells }) });
  });

describe('properties of any field on any grid', () => {
  it('polygons at or above and bands follow RFC 7946', () => {
    fc.assert(
      fc.property(cases, fc.boolean(), ({ grid, field }, bands) => {
        const problems = problemsOf(isotachs(Float64Array.from(field), grid, { levelsMps: LEVELS, bands }));
        expect(problems).toEqual([]);
      }),
      { numRuns: 700, seed: 7946 },
    );
  });

  it('a higher isotach lies inside the lower one: as rings of one polygon they are valid', () => {
    fc.assert(
      fc.property(cases, ({ grid, field }) => {
        const list = isotachs(Float64Array.from(field), grid, { levelsMps: LEVELS });
        for (let i = 1; i < list.length; i++)
          expect(list[i]!.areaM2).toBeLessThanOrEqual(list[i - 1]!.areaM2 * (1 + 1e-6) + 1e3);
        if (!grid.geographic) return;
        // away from the border of the grid no vertex of the higher lies on or outside the lower
        const [low, high] = [list[1]!, list[2]!];
        const [west, south, east, north] = grid.bounds;
        const middle = {
          west: west + grid.cell,
          east: east - grid.cell,
          south: south + grid.cell,
          north: north - grid.cell,
        };
        for (const polygon of high.polygons) {
          for (const [lon, lat] of polygon.flat()) {
            if (Math.abs(lon) > 179.99 || lat < middle.south || lat > middle.north) continue;
            const turn = lon < west ? lon + 360 : lon > east ? lon - 360 : lon;
            if (turn < middle.west || turn > middle.east) continue;
            expect(insideAny(low, lon, lat)).toBe(true);
          }
        }
      }),
      { numRuns: 200, seed: 2 },
    );
  });

  it('the bands above a level add up to the area at or above it', () => {
    fc.assert(
      fc.property(cases, ({ grid, field }) => {
        const data = Float64Array.from(field);
        const above = isotachs(data, grid, { levelsMps: LEVELS });
        const bands = isotachs(data, grid, { levelsMps: LEVELS, bands: true });
        // a tip that just touches the antimeridian is kept 2e-6° off it; straight edges on a projected grid's border are
        // divided at different places, a small part of a cell
        const across = grid.bounds[0] < -180 || grid.bounds[2] > 180;
        const tolerance = grid.geographic ? (across ? 1e-5 : 1e-9) : 3e-3;
        for (let i = 0; i < LEVELS.length; i++) {
          const sum = bands.slice(i).reduce((total, band) => total + band.areaM2, 0);
          expect(Math.abs(sum - above[i]!.areaM2)).toBeLessThanOrEqual(tolerance * above[0]!.areaM2);
        }
        expect(bands.map((band) => band.upperMps)).toEqual([1, 1.5, 2, 2.25, null]);
      }),
      { numRuns: 200, seed: 3 },
    );
  });

  it('a mirrored field gives mirrored polygons', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...Object.values(values)).chain((value) => fc.array(value, { minLength: 63, maxLength: 63 })),
        (list) => {
          const grid = geographic(-4.5, -3.5, 1, 9, 7);
          const field = Float64Array.from(list);
          const flipped = field.map((_, k) => field[(6 - Math.floor(k / 9)) * 9 + (k % 9)]!);
          const turned = field.map((_, k) => field[Math.floor(k / 9) * 9 + 8 - (k % 9)]!);
          const vertices = (data: Float64Array, sign: (lon: number, lat: number) => string) =>
            isotachs(data, grid, { levelsMps: LEVELS }).map(({ polygons }) =>
              polygons
                .flatMap((polygon) => polygon.flatMap((ring) => ring.slice(1).map(([lon, lat]) => sign(lon, lat))))
                .sort(),
            );
          const plain = vertices(field, (lon, lat) => `${lon},${lat}`);
          expect(vertices(flipped, (lon, lat) => `${lon},${0 - lat}`)).toEqual(plain);
          expect(vertices(turned, (lon, lat) => `${0 - lon},${lat}`)).toEqual(plain);
        },
      ),
      { numRuns: 150, seed: 4 },
    );
  });

  it('a grid round the Earth gives the same areas wherever it begins', () => {
    fc.assert(
      fc.property(
        fc.array(values.plateaus, { minLength: 48, maxLength: 48 }),
        fc.integer({ min: 0, max: 11 }),
        (list, shift) => {
          const field = Float64Array.from(list);
          const rolled = field.map((_, k) => field[Math.floor(k / 12) * 12 + (((k % 12) + shift) % 12)]!);
          const areas = (data: Float64Array, west: number) =>
            isotachs(data, geographic(west, -60, 30, 12, 4), { levelsMps: LEVELS }).map((one) => one.areaM2);
          const plain = areas(field, -180);
          areas(rolled, -180 + 30 * shift).forEach((area, i) => {
            expect(Math.abs(area - plain[i]!)).toBeLessThanOrEqual(1e-9 * plain[0]!);
          });
        },
      ),
      { numRuns: 100, seed: 5 },
    );
  });
});

/** Even-odd over all rings. */
function insideAny(isotach: Isotach, lon: number, lat: number): boolean {
  let inside = false;
  for (const polygon of isotach.polygons) {
    for (const ring of polygon) {
      for (let i = 1; i < ring.length; i++) {
        const [x1, y1] = ring[i - 1]!;
        const [x2, y2] = ring[i]!;
        if (y1 > lat !== y2 > lat && x1 + ((lat - y1) / (y2 - y1)) * (x2 - x1) > lon) inside = !inside;
      }
    }
  }
  return inside;
}

describe('areas', () => {
  it('identity: the sphere, a hemisphere, a quadrant', () => {
    const sphere = 4 * Math.PI * EARTH_RADIUS_M ** 2;
    const ring = [
      [-180, -90],
      [0, -90],
      [180, -90],
      [180, 90],
      [0, 90],
      [-180, 90],
      [-180, -90],
    ];
    expect(ringAreaM2(ring) / sphere).toBeCloseTo(1, 12);
    expect(
      ringAreaM2([
        [0, 0],
        [90, 0],
        [90, 90],
        [0, 90],
        [0, 0],
      ]) / sphere,
    ).toBeCloseTo(1 / 8, 12);
    expect(ringAreaM2(ring.toReversed()) / sphere).toBeCloseTo(-1, 12);
  });

  it('identity: an edge straight in longitude and latitude, against a fine sum', () => {
    // triangle (0,0) (40,0) (40,60): ∫ sin(1.5 λ) dλ over 0–40°
    const exact = (2 / 3) * (1 - Math.cos(Math.PI / 3)) * EARTH_RADIUS_M ** 2;
    expect(
      ringAreaM2([
        [0, 0],
        [40, 0],
        [40, 60],
        [0, 0],
      ]) / exact,
    ).toBeCloseTo(1, 12);
  });

  it.each(['EPSG:3031', 'EPSG:32618', 'EPSG:6933'])(
    'identity: the cells of a grid in %s add up to its outline',
    (crs) => {
      const grid = projected(crs, crs === 'EPSG:32618' ? 3e5 : 1e6, 1e6, 20_000, 30, 20);
      const { per, areasM2 } = cellAreasM2(grid);
      expect(per).toBe('cell');
      const [whole] = isotachs(new Float32Array(600).fill(1), grid, { levelsMps: [1] });
      expect(areasM2.reduce((a, b) => a + b, 0) / whole!.areaM2).toBeCloseTo(1, 4);
    },
  );

  it('a field at or above the level everywhere gives the bounds of the grid', () => {
    const grid = geographic(10, 20, 0.5, 6, 4);
    const [whole] = isotachs(new Float32Array(24).fill(5), grid, { levelsMps: [5] });
    expect(whole!.polygons).toEqual([
      [
        [
          [10, 20],
          [13, 20],
          [13, 22],
          [10, 22],
          [10, 20],
        ],
      ],
    ]);
    const { areasM2 } = cellAreasM2(grid);
    expect(whole!.areaM2 / (6 * areasM2.reduce((a, b) => a + b, 0))).toBeCloseTo(1, 12);
  });

  const round: [string, Grid, { lonDeg: number; latDeg: number }][] = [
    ['in the tropics', geographic(-70, 5, 0.05, 480, 480), { lonDeg: -58, latDeg: 17 }],
    ['across the antimeridian', geographic(168.03, -30, 0.05, 480, 480), { lonDeg: 179.9, latDeg: -18 }],
    ['on the equator', geographic(40, -12, 0.05, 480, 480), { lonDeg: 52, latDeg: 0 }],
    ['over the pole', geographic(-180, 76, 0.1, 3600, 140), { lonDeg: 30, latDeg: 88.5 }],
  ];
  it.each(round)('identity: a round hill %s gives spherical caps, and as much as its cells', (_, grid, top) => {
    const field = hill(grid, top);
    const levels = [90, 93.3, 96, 98];
    const list = isotachs(field, grid, { levelsMps: levels });
    for (const one of list) {
      expect(one.areaM2 / capM2(100 - one.thresholdMps)).toBeCloseTo(1, 3);
      // cells are counted whole: areas of a few thousand cells are compared, so that their edge does not tell
      expect(Math.abs(cellsAtOrAboveM2(field, grid, one) / one.areaM2 - 1)).toBeLessThan(0.005);
      expect(polygonsAreaM2(one.polygons)).toBe(one.areaM2);
    }
    expect(problemsOf(list)).toEqual([]);
  });
});

describe('the antimeridian and the poles', () => {
  it('cuts at ±180° in two halves that meet there, with a box from west to east across', () => {
    const grid = geographic(175, -22, 0.05, 200, 160);
    const list = isotachs(hill(grid, { lonDeg: -179.98, latDeg: -18 }), grid, { levelsMps: [98] });
    const [only] = list;
    expect(only!.polygons).toHaveLength(2);
    const at = only!.polygons.map((polygon) =>
      polygon[0]!.filter(([lon]) => Math.abs(lon) === 180).map(([, lat]) => lat),
    );
    expect(new Set(at[0])).toEqual(new Set(at[1]));
    const document = written(list);
    expect(document.bbox![0]).toBeGreaterThan(177);
    expect(document.bbox![2]).toBeLessThan(-177);
    expect(problemsOf(list)).toEqual([]);
  });

  it('a storm moved across the antimeridian keeps its areas', () => {
    const areas = (lonDeg: number) => {
      const grid = geographic(lonDeg - 5, -22, 0.05, 200, 160);
      return isotachs(hill(grid, { lonDeg, latDeg: -18 }), grid, { levelsMps: [97, 98, 99] }).map((one) => one.areaM2);
    };
    const plain = areas(-60);
    for (const lonDeg of [180, 179.975, -180, 182.51, -179.99, 184, 175.01]) {
      for (const [i, area] of areas(lonDeg).entries()) expect(Math.abs(area / plain[i]! - 1)).toBeLessThan(1e-6);
    }
  });

  it.each([
    ['EPSG:3995', 90],
    ['EPSG:3031', -90],
  ] as const)('a polar grid in %s: the polygon reaches the pole and has its area', async (crs, pole) => {
    const { projection } = await import('../../src/swath/grid.js');
    for (const [nx, ny] of [
      [300, 300],
      [301, 300],
      [301, 301],
    ] as const) {
      const grid = projected(crs, (-nx / 2) * 10_000, (-ny / 2) * 10_000, 10_000, nx, ny);
      const field = hill(grid, { lonDeg: 20, latDeg: pole * 0.97 }, projection(crs).inverse);
      const list = isotachs(field, grid, { levelsMps: [92, 97.2, 98.5] });
      expect(problemsOf(list)).toEqual([]);
      const lat = list.map((one) =>
        one.polygons
          .flat(2)
          .map((position) => position[1])
          .reduce((a, b) => (Math.abs(a) > Math.abs(b) ? a : b)),
      );
      expect(lat[0]).toBe(pole);
      expect(lat[1]).toBe(pole);
      expect(Math.abs(lat[2]!)).toBeLessThan(89);
      for (const one of list) {
        expect(Math.abs(one.areaM2 / capM2(100 - one.thresholdMps) - 1)).toBeLessThan(0.005);
        expect(Math.abs(cellsAtOrAboveM2(field, grid, one) / one.areaM2 - 1)).toBeLessThan(0.005);
      }
    }
  });

  it('a hole round the pole', () => {
    const grid = projected('EPSG:3995', -60 * 25_000, -60 * 25_000, 25_000, 120, 120);
    const field = new Float64Array(120 * 120);
    for (let k = 0; k < field.length; k++) {
      const away = Math.hypot((k % 120) - 59.5, Math.floor(k / 120) - 59.5);
      field[k] = 40 - Math.abs(away - 30);
    }
    const list = isotachs(field, grid, { levelsMps: [20], bands: true });
    expect(problemsOf(list)).toEqual([]);
    expect(Math.abs(cellsAtOrAboveM2(field, grid, list[0]!) / list[0]!.areaM2 - 1)).toBeLessThan(0.005);
    // polar stereographic with true scale at 71°: 50 cells from the pole is about 78°, 10 cells about 87.7°
    expect(insideAny(list[0]!, 10, 89)).toBe(false);
    expect(insideAny(list[0]!, 10, 83)).toBe(true);
  });
});

describe('larger fields', () => {
  /** three ridges and a wave over them */
  const ridges = (column: number, row: number): number =>
    12 + 9 * Math.sin(column / 31) + 9 * Math.cos(row / 23 + column / 57) + 4 * Math.sin((column + 2 * row) / 11);

  it('a field quantised to the levels, with plateaus and gaps', () => {
    const grid = geographic(176.41, -18, 0.02, 300, 250);
    const field = Float32Array.from({ length: 75_000 }, (_, k) => {
      const [column, row] = [k % 300, Math.floor(k / 300)];
      return (column * 7 + row * 13) % 499 === 0 || Math.hypot(column - 200, row - 90) < 25
        ? Number.NaN
        : Math.round(ridges(column, row) * 2) / 2;
    });
    const levels = [5, 10, 12.5, 15, 17.5, 20, 22.5, 25];
    for (const bands of [false, true])
      expect(problemsOf(isotachs(field, grid, { levelsMps: levels, bands }))).toEqual([]);
  });

  it('independent: d3-contour gives the same areas in degrees and as many rings', async () => {
    const module = 'd3-contour';
    const { contours } = (await import(module)) as {
      contours: () => {
        size: (size: number[]) => { contour: (values: Float64Array, level: number) => { coordinates: number[][][][] } };
      };
    };
    const [nx, ny] = [220, 180];
    const grid = geographic(-60, 0, 0.01, nx, ny);
    // falls to nothing at the border, where the two have different conventions
    const field = Float64Array.from({ length: nx * ny }, (_, k) => {
      const [column, row] = [k % nx, Math.floor(k / nx)];
      return ridges(column, row) * Math.sin((Math.PI * column) / (nx - 1)) * Math.sin((Math.PI * row) / (ny - 1));
    });
    const planar = (polygons: readonly (readonly (readonly (readonly number[])[])[])[]): number =>
      polygons.flat().reduce((total, ring) => {
        let sum = 0;
        for (let i = 1; i < ring.length; i++) sum += ring[i - 1]![0]! * ring[i]![1]! - ring[i]![0]! * ring[i - 1]![1]!;
        return total + sum / 2;
      }, 0);
    for (const one of isotachs(field, grid, { levelsMps: [4, 9.3, 15.1, 21] })) {
      const other = contours().size([nx, ny]).contour(field, one.thresholdMps).coordinates;
      expect(one.polygons.flat()).toHaveLength(other.flat().length);
      expect(planar(one.polygons) / (Math.abs(planar(other)) * 1e-4)).toBeCloseTo(1, 4);
    }
  });
});

describe('what is asked for', () => {
  it('islands, lakes and islands in lakes', () => {
    const field = new Float32Array(81);
    const ring = (distance: number, value: number) => {
      for (let k = 0; k < 81; k++)
        if (Math.max(Math.abs((k % 9) - 4), Math.abs(Math.floor(k / 9) - 4)) === distance) field[k] = value;
    };
    ring(0, 2);
    ring(3, 2);
    const [one] = isotachs(field, geographic(0, 0, 1, 9, 9), { levelsMps: [1] });
    expect(one!.polygons.map((polygon) => polygon.length).sort()).toEqual([1, 2]);
  });

  it('levels in any order, each once; levels that are not reached stay empty and are not written', () => {
    const list = isotachs(Float32Array.of(1, 2, 3, 4), geographic(0, 0, 1, 2, 2), { levelsMps: [9, 2, 2] });
    expect(list.map((one) => [one.thresholdMps, one.polygons.length, one.areaM2 > 0])).toEqual([
      [2, 1, true],
      [9, 0, false],
    ]);
    const document = written(list);
    expect(document.features.map((feature) => feature.properties['threshold_mps'])).toEqual([2]);
    expect(checkRfc7946(written(isotachs(Float32Array.of(1), geographic(0, 0, 1, 1, 1), { levelsMps: [9] })))).toEqual(
      [],
    );
  });

  it('a field of nothing but NaN has no isotach', () => {
    const [one] = isotachs(new Float32Array(9).fill(Number.NaN), geographic(0, 0, 1, 3, 3), { levelsMps: [-5] });
    expect(one!.polygons).toEqual([]);
  });

  it('refuses levels, fields and cells that cannot be', () => {
    const grid = geographic(0, 0, 1, 2, 2);
    const codeOf = (action: () => unknown): string => {
      try {
        action();
      } catch (error) {
        return (error as { code: string }).code;
      }
      return 'none';
    };
    expect(codeOf(() => isotachs(new Float32Array(4), grid, { levelsMps: [] }))).toBe('isotach.levels');
    expect(codeOf(() => isotachs(new Float32Array(4), grid, { levelsMps: [Number.NaN] }))).toBe('isotach.levels');
    expect(
      codeOf(() => isotachs(new Float32Array(4), grid, { levelsMps: Array.from({ length: 300 }, (_, i) => i) })),
    ).toBe('isotach.levels');
    expect(codeOf(() => isotachs(new Float32Array(5), grid, { levelsMps: [1] }))).toBe('isotach.field');
    expect(codeOf(() => isotachs(new Float32Array(4), geographic(0, 0, 1e-5, 2, 2), { levelsMps: [1, 2, 3] }))).toBe(
      'isotach.cell',
    );
    expect(
      codeOf(() => isotachs(new Float32Array(4), projected('EPSG:32618', 5e5, 1e6, 2, 2, 2), { levelsMps: [1] })),
    ).toBe('isotach.cell');
  });

  it('the writer: attributes, boxes and the caution', () => {
    const list = isotachs(Float32Array.of(1, 2, 30, 40), geographic(-60, 10, 1, 2, 2), {
      levelsMps: [10, 20],
      bands: true,
    });
    const document = JSON.parse(
      isotachsGeojson({
        isotachs: list,
        context: { quantity: 'gust', averagingS: 3, classOf: (thresholdMps) => (thresholdMps > 15 ? 'strong' : null) },
      }),
    );
    expect(document.schema).toMatch(/isotachs\/1$/);
    expect(document.caution).toMatch(/no warning service/);
    expect(document.features[0].properties).toMatchObject({
      threshold_mps: 10,
      threshold_kt: 19.438,
      upper_mps: 20,
      quantity: 'gust',
      averaging_s: 3,
      class: null,
    });
    expect(document.features[1].properties.class).toBe('strong');
    expect(document.features[0].properties.area_km2).toBeCloseTo(list[0]!.areaM2 / 1e6, 3);
    expect(checkRfc7946(document)).toEqual([]);
  });
});
