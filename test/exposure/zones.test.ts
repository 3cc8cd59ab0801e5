import * as turf from '@turf/turf';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { zonesOfGeojson } from '../../src/exposure/zone-geojson.js';
import {
  type Ring,
  sharesAbove,
  type Zone,
  zoneAreaM2,
  zoneSamples,
  zoneShape,
  zoneTest,
} from '../../src/exposure/zones.js';
import { seeded } from './seeded.js';

const R = 6371008.8;
const rad = Math.PI / 180;
const zone = (...polygons: Ring[][]): Zone => ({ name: 'Z', polygons, values: {} });
const box = (w: number, s: number, e: number, n: number): Ring => [
  [w, s],
  [e, s],
  [e, n],
  [w, n],
  [w, s],
];
/** a star-shaped ring, so that it never crosses itself */
function star(random: () => number, { lon, lat }: { lon: number; lat: number }): [number, number][] {
  const corners = 5 + Math.floor(random() * 20);
  const ring = Array.from({ length: corners }, (_, i): [number, number] => {
    const angle = (2 * Math.PI * i) / corners;
    const size = 0.4 + 1.6 * random();
    return [lon + size * Math.cos(angle), lat + size * Math.sin(angle)];
  });
  return [...ring, ring[0]!];
}

describe('area of a zone', () => {
  it('is that of a spherical quadrangle between parallels, less its hole', () => {
    // identity: R² Δλ (sin φ₂ − sin φ₁)
    const quadrangle = (w: number, s: number, e: number, n: number): number =>
      R * R * (e - w) * rad * (Math.sin(n * rad) - Math.sin(s * rad));
    expect(zoneAreaM2(zone([box(-50, 20, -40, 30)])) / quadrangle(-50, 20, -40, 30)).toBeCloseTo(1, 12);
    const holed = zone([box(-50, 20, -40, 30), box(-46, 24, -44, 26)]);
    expect(zoneAreaM2(holed) / (quadrangle(-50, 20, -40, 30) - quadrangle(-46, 24, -44, 26))).toBeCloseTo(1, 12);
    // across ±180°, written either way
    for (const ring of [box(175, -20, 185, -15), box(175, -20, -175, -15)])
      expect(zoneAreaM2(zone([ring])) / quadrangle(175, -20, 185, -15)).toBeCloseTo(1, 12);
    // a cap, led along ±180° and the pole: 2πR²(1 − sin φ)
    const cap = zone([box(-180, 80, 180, 90)]);
    expect(zoneAreaM2(cap) / (2 * Math.PI * R * R * (1 - Math.sin(80 * rad)))).toBeCloseTo(1, 12);
  });

  it('agrees with another library on random small polygons', () => {
    const random = seeded(11);
    for (let n = 0; n < 50; n++) {
      const ring = star(random, { lon: 300 * random() - 150, lat: 100 * random() - 50 });
      // independent: @turf/area, on a sphere of 6371008.8 m with a quadrature of its own
      const judge = turf.area(turf.polygon([ring]));
      expect(zoneAreaM2(zone([ring])) / judge).toBeCloseTo(1, 2);
    }
  });
});

describe('places in a zone', () => {
  it('agree with another library, holes and ±180° too', () => {
    const random = seeded(5);
    for (let n = 0; n < 20; n++) {
      const lon = n % 2 === 0 ? 0 : 180;
      const [cx, cy] = [lon, 40 * random()];
      const shell = star(random, { lon: cx, lat: cy });
      const hole = box(cx - 0.1, cy - 0.1, cx + 0.1, cy + 0.1) as [number, number][];
      const wrap = (x: number): number => (x > 180 ? x - 360 : x);
      const inside = zoneTest(zoneShape(zone([shell.map(([x, y]): [number, number] => [wrap(x), y]), hole])));
      const judge = turf.polygon([shell, hole]);
      for (let i = 0; i < 400; i++) {
        const [x, y] = [lon + 5 * (random() - 0.5), cy + 5 * (random() - 0.5)];
        // independent: @turf/boolean-point-in-polygon
        expect([n, x, y, inside(wrap(x), y)]).toEqual([n, x, y, turf.booleanPointInPolygon([x, y], judge)]);
      }
    }
  });

  it('on a common border lie in one of two neighbours', () => {
    const west = zoneTest(zoneShape(zone([box(0, 0, 1, 1)])));
    const east = zoneTest(zoneShape(zone([box(1, 0, 2, 1)])));
    const north = zoneTest(zoneShape(zone([box(0, 1, 1, 2)])));
    for (const y of [0, 0.25, 0.999]) expect([west(1, y), east(1, y)]).toEqual([false, true]);
    for (const x of [0, 0.5]) expect([west(x, 1), north(x, 1)]).toEqual([false, true]);
    expect([west(0, 0), west(0.5, 0), west(-0.001, 0.5)]).toEqual([true, true, false]);
  });

  it('lie in a zone as in its mirror image and wherever it is turned to', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1e6 }), fc.double({ min: -360, max: 360, noNaN: true }), (seed, turn) => {
        const random = seeded(seed);
        const ring = star(random, { lon: 10, lat: 20 });
        const [x, y] = [10 + 4 * (random() - 0.5), 20 + 4 * (random() - 0.5)];
        const here = zoneTest(zoneShape(zone([ring])))(x, y);
        const turned = ring.map(([lon, lat]): [number, number] => [lon + turn, lat]);
        const mirror = ring.map(([lon, lat]): [number, number] => [lon, -lat]);
        expect(zoneTest(zoneShape(zone([turned])))(x + turn, y)).toBe(here);
        expect(zoneTest(zoneShape(zone([mirror])))(x, -y)).toBe(here);
      }),
      { numRuns: 60, seed: 4 },
    );
  });
});

describe('share of a zone', () => {
  it('is 1 or 0 in a uniform wind, over random polygons', () => {
    const random = seeded(2);
    for (let n = 0; n < 10; n++) {
      const samples = zoneSamples(zoneShape(zone([star(random, { lon: 179, lat: -30 })])), { rows: 60 });
      const wind = new Float32Array(samples.share.length).fill(33);
      // identity
      expect(sharesAbove(samples, wind, [20, 33, 33.1])).toEqual([1, 1, 0]);
      expect(samples.share.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 10);
    }
  });

  it('is the analytic one where the wind changes along a meridian or a parallel', () => {
    const samples = zoneSamples(zoneShape(zone([box(-50, 10, -40, 50)])), { rows: 400 });
    const north = samples.latDeg.map((lat) => lat);
    // identity: the area north of φ₀ is (sin φ₂ − sin φ₀)/(sin φ₂ − sin φ₁)
    const expected = (Math.sin(50 * rad) - Math.sin(30.03 * rad)) / (Math.sin(50 * rad) - Math.sin(10 * rad));
    expect(Math.abs(sharesAbove(samples, north, [30.03])[0]! - expected)).toBeLessThan(1.5e-3);
    const east = samples.lonDeg.map((lon) => lon + 100);
    expect(Math.abs(sharesAbove(samples, east, [52.51])[0]! - 0.749)).toBeLessThan(1.5e-3);
  });

  it('is the analytic one for a disk in a square and for a share of a triangle', () => {
    const square = zoneSamples(zoneShape(zone([box(-1, -1, 1, 1)])), { rows: 400 });
    const inward = square.lonDeg.map((lon, i) => 2 - Math.hypot(lon, square.latDeg[i]!));
    // identity: π/4 of the square, which is flat to 5e-5 at the equator
    expect(Math.abs(sharesAbove(square, inward, [1])[0]! - Math.PI / 4)).toBeLessThan(5e-4);
    const triangle = zoneSamples(
      zoneShape(
        zone([
          [
            [0, 0],
            [2, 0],
            [0, 2],
            [0, 0],
          ],
        ]),
      ),
      { rows: 400 },
    );
    // identity: the smaller of two similar triangles has a quarter of the area
    expect(Math.abs(sharesAbove(triangle, triangle.latDeg, [1])[0]! - 0.25)).toBeLessThan(1.5e-3);
  });

  it('comes nearer with more samples', () => {
    const shape = zoneShape(zone([box(-1, -1, 1, 1)]));
    const off = (rows: number): number => {
      const samples = zoneSamples(shape, { rows });
      const inward = samples.lonDeg.map((lon, i) => 2 - Math.hypot(lon, samples.latDeg[i]!));
      return Math.abs(sharesAbove(samples, inward, [1])[0]! - Math.PI / 4);
    };
    expect(off(400)).toBeLessThan(off(20));
  });

  it('leaves a hole out', () => {
    const holed = zoneSamples(zoneShape(zone([box(0, 0, 4, 4), box(1, 1, 3, 3)])), { rows: 200 });
    for (let i = 0; i < holed.share.length; i++)
      expect(Math.max(Math.abs(holed.lonDeg[i]! - 2), Math.abs(holed.latDeg[i]! - 2))).toBeGreaterThan(1);
  });
});

const collection = (...features: unknown[]): string => JSON.stringify({ type: 'FeatureCollection', features });
const feature = (coordinates: unknown, properties: unknown = { name: 'A' }, type = 'Polygon'): unknown => ({
  type: 'Feature',
  properties,
  geometry: { type, coordinates },
});
const good = feature([box(0, 0, 1, 1)], { name: 'Good', people: 10 });

describe('zones of a file', () => {
  const read = (text: string, more: { strict?: boolean; values?: string[] } = {}) =>
    zonesOfGeojson(text, { source: 'z.geojson', ...more });

  it('takes polygons and their numbers', () => {
    const { zones, skipped, cautions } = read(
      collection(
        good,
        feature([[box(2, 0, 3, 1)], [box(4, 0, 5, 1)]], { zone: 'Twins', sum: 2.5, note: 'x' }, 'MultiPolygon'),
      ),
    );
    expect(zones.map(({ name, values, polygons }) => [name, values, polygons.length])).toEqual([
      ['Good', { people: 10 }, 1],
      ['Twins', { sum: 2.5 }, 2],
    ]);
    expect([skipped, cautions]).toEqual([[], []]);
  });

  const bow: Ring = [
    [0, 0],
    [1, 1],
    [1, 0],
    [0, 1],
    [0, 0],
  ];
  const odd: readonly [string, string, RegExp][] = [
    ['a ring that is not closed', collection(feature([box(0, 0, 1, 1).slice(0, 4)])), /zone 'A' .*not closed/],
    [
      'a border that crosses itself',
      collection(
        feature([
          [
            [0, 0],
            [2, 1],
            [2, 0],
            [0, 2],
            [0, 0],
          ],
        ]),
      ),
      /zone 'A' .*crosses itself near 1\.3333, 0\.6667/,
    ],
    ['a name twice', collection(good, good), /more than once.*Good/],
    ['a negative value', collection(feature([box(0, 0, 1, 1)], { name: 'A', people: -5 })), /people -5 is negative/],
  ];
  for (const [what, text, says] of odd) {
    it(`tells of ${what}; strict refuses it`, () => {
      const { zones, cautions } = read(text);
      expect(zones.length).toBeGreaterThan(0);
      expect(cautions.join('\n')).toMatch(says);
      expect(() => read(text, { strict: true })).toThrow(/z\.geojson: .*mend it, or leave out --strict/);
    });
  }

  const skippedOnes: readonly [string, unknown, RegExp][] = [
    ['a point', feature([0, 0], {}, 'Point'), /Point, not a Polygon/],
    ['no geometry', { type: 'Feature', properties: {}, geometry: null }, /missing, not a Polygon/],
    ['a bow whose halves cancel', feature([bow]), /no area/],
    [
      'two corners',
      feature([
        [
          [0, 0],
          [1, 1],
          [0, 0],
        ],
      ]),
      /2 corners; it needs three/,
    ],
    ['swapped coordinates', feature([box(20, 100, 21, 101)]), /latitude 100 is beyond the poles.*swapped/],
    [
      'text for a coordinate',
      feature([
        [
          ['a', 0],
          [1, 0],
          [1, 1],
          ['a', 0],
        ],
      ]),
      /no pair of numbers/,
    ],
    [
      'a ring around the pole',
      feature([
        [
          [0, 80],
          [90, 80],
          [180, 80],
          [-90, 80],
          [0, 80],
        ],
      ]),
      /around a pole/,
    ],
    ['an empty polygon', feature([]), /no ring|no coordinates/],
  ];
  for (const [what, one, reason] of skippedOnes) {
    it(`skips ${what} and says why; strict refuses it`, () => {
      const { zones, skipped } = read(collection(good, one));
      expect(zones.map(({ name }) => name)).toEqual(['Good']);
      expect(skipped).toEqual([{ line: 2, reason: expect.stringMatching(reason) }]);
      expect(() => read(collection(good, one), { strict: true })).toThrow(/feature 2/);
    });
  }

  const errors: readonly [string, string, RegExp][] = [
    ['no JSON', 'people,area', /z\.geojson: the file is not valid JSON/],
    ['a file that is cut off', collection(good).slice(0, -20), /cut off|not valid JSON/],
    [
      'a bare geometry',
      JSON.stringify({ type: 'Polygon', coordinates: [box(0, 0, 1, 1)] }),
      /no GeoJSON FeatureCollection/,
    ],
    ['no zone at all', collection(), /holds no zone/],
    [
      'projected coordinates',
      JSON.stringify({
        type: 'FeatureCollection',
        crs: { type: 'name', properties: { name: 'urn:ogc:def:crs:EPSG::3857' } },
        features: [good],
      }),
      /EPSG::3857.*convert/,
    ],
  ];
  for (const [what, text, says] of errors) it(`refuses ${what}`, () => expect(() => read(text)).toThrow(says));

  it('names the property that was probably meant', () => {
    expect(() => read(collection(good), { values: ['peple'] })).toThrow(
      /no zone has a number 'peple' \(did you mean people\?\)/,
    );
  });
});
