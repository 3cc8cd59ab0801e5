import { bareFix, type Track } from '../../src/track/track.js';
import { knots } from '../../src/units.js';
import type { IsotachContext, IsotachShape } from '../../src/write/isotach-attributes.js';

const shell = (west: number, south: number, east: number, north: number): number[][] => [
  [west, south],
  [east, south],
  [east, north],
  [west, north],
  [west, south],
];
const hole = (...box: [number, number, number, number]): number[][] => shell(...box).reverse();

/** Isotachs across the antimeridian: one with a hole, one inside it, one that is empty. */
export const exampleIsotachs: readonly IsotachShape[] = [
  {
    thresholdMps: knots(34),
    upperMps: null,
    polygons: [[shell(175, -20, 180, -10), hole(176, -12, 177, -11)], [shell(-180, -20, -178, -10)]],
    areaM2: 1.234567891e12,
  },
  { thresholdMps: knots(50), upperMps: null, polygons: [[shell(177, -18, 179, -14)]], areaM2: 9e10 },
  { thresholdMps: knots(64), upperMps: null, polygons: [], areaM2: 0 },
];

export const exampleContext: IsotachContext = {
  quantity: 'wind',
  averagingS: 60,
  classOf: (thresholdMps) => (thresholdMps > 30 ? '1' : null),
};

export const exampleTrack: Track = {
  id: 'EX012031',
  name: '<img src=x onerror=alert(1)> & "Ærin"\u0007',
  basin: 'SP',
  kind: 'drawn',
  format: 'csv',
  cautions: [],
  fixes: [
    {
      ...bareFix({ timeMs: Date.UTC(2031, 1, 5, 6), latDeg: -12, lonDeg: 178, line: 2 }),
      maxWindMps: 30,
      centralPressurePa: 97512,
    },
    { ...bareFix({ timeMs: Date.UTC(2031, 1, 5, 12), latDeg: -14, lonDeg: -179, line: 3 }), status: '<TY>' },
  ],
};
