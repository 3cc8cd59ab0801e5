import { isotachs } from '../../src/isotach/isotachs.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { type WindModel, windModel } from '../../src/model/wind.js';
import type { MapInput } from '../../src/picture/map-svg.js';
import { exactSwath } from '../../src/swath/exact.js';
import { gridOver } from '../../src/swath/grid.js';
import type { Swath } from '../../src/swath/swath.js';
import { bareFix, type Track } from '../../src/track/track.js';
import { knots } from '../../src/units.js';
import { peakOf } from '../../src/write/summary.js';

/** An invented storm: rows of latitude, longitude and wind in knots. */
export function inventedTrack(name: string, rows: readonly (readonly [number, number, number])[], stepH = 12): Track {
  const start = Date.UTC(2031, 8, 3);
  return {
    id: 'XX-01',
    name,
    basin: null,
    kind: 'drawn',
    format: 'csv',
    cautions: [],
    fixes: rows.map(([latDeg, lonDeg, kt], i) => ({
      ...bareFix({ timeMs: start + i * stepH * 3_600_000, latDeg, lonDeg, line: i + 2 }),
      maxWindMps: knots(kt),
    })),
  };
}

interface InventedStorm {
  readonly track: Track;
  readonly bounds: readonly [number, number, number, number];
  readonly cell: number;
}

export const STORMS = {
  open: {
    track: inventedTrack('Quillon', [
      [23.6, -38.9, 45],
      [26.1, -43.5, 90],
      [30.2, -46.1, 100],
      [36.3, -43.6, 60],
    ]),
    bounds: [-50, 20, -36, 40],
    cell: 0.25,
  },
  antimeridian: {
    track: inventedTrack('Tessaly', [
      [-13, 176, 45],
      [-16.4, 178.9, 100],
      [-20.9, -177.5, 95],
      [-23.6, -174.5, 70],
    ]),
    bounds: [171, -28, 190, -9],
    cell: 0.25,
  },
  polar: {
    track: inventedTrack(
      'Nivose',
      [
        [72.5, 12, 40],
        [75.2, 26, 55],
        [75, 44, 38],
      ],
      6,
    ),
    bounds: [-5, 68, 65, 80],
    cell: 0.5,
  },
  pole: {
    track: inventedTrack('Zenith', [
      [86.5, 10, 45],
      [89.3, 140, 50],
      [87.5, 170, 45],
    ]),
    bounds: [-180, 80, 180, 90],
    cell: 1,
  },
  oneFix: { track: inventedTrack('Lone', [[14.2, -108.3, 80]]), bounds: [-112, 10.5, -104, 18], cell: 0.2 },
  weak: {
    track: inventedTrack('Faint', [
      [12.2, 62.3, 22],
      [13.2, 58.3, 24],
    ]),
    bounds: [54, 9, 66, 17],
    cell: 0.3,
  },
  south: {
    track: inventedTrack('Tarrabel', [
      [-12.4, 88.2, 40],
      [-16.3, 81.8, 90],
      [-20.9, 80.5, 60],
    ]),
    bounds: [75, -26, 93, -8],
    cell: 0.25,
  },
} as const satisfies Record<string, InventedStorm>;

export type StormKey = keyof typeof STORMS;

export interface Made {
  readonly track: Track;
  readonly model: WindModel;
  readonly swath: Swath;
  readonly input: MapInput;
}

const made = new Map<string, Made>();

/** A storm with its swath on a coarse grid and the input of its map. */
export function madeStorm(key: StormKey, name?: string): Made {
  const found = made.get(`${key}|${name}`);
  if (found) return found;
  const storm: InventedStorm = STORMS[key];
  const track = name === undefined ? storm.track : { ...storm.track, name };
  const model = windModel(track, makeRecipe());
  const grid = gridOver({ crs: 'EPSG:4326', bounds: storm.bounds, cell: storm.cell });
  const swath = exactSwath(model, grid, { stepS: 3600 });
  const peak = peakOf(swath);
  const input: MapInput = {
    storm: { id: track.id, name: track.name },
    fixes: model.completed.fixes.map((fix) => ({ ...fix, maxWindMps: fix.maxWindMps.value })),
    isotachs: isotachs(swath.windMps, grid, { levelsMps: [34, 50, 64, 83, 96, 113, 137].map(knots) }),
    quantity: 'wind',
    averagingS: 60,
    gustDurationS: 3,
    peak: {
      windMps: peak.wind_mps,
      gustMps: peak.gust_mps,
      lonDeg: peak.lon_deg!,
      latDeg: peak.lat_deg!,
      timeMs: Date.parse(peak.time!),
    },
    recipe: 'holland-1980',
    version: '0.0.0',
    coast: null,
    centreAt: (timeMs) => model.path.at(timeMs),
  };
  const result = { track, model, swath, input };
  made.set(`${key}|${name}`, result);
  return result;
}
