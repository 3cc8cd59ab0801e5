import type { Grid } from '../swath/grid.js';
import { cellCentre, projection } from '../swath/grid.js';
import type { Swath } from '../swath/swath.js';
import type { CompletedTrack } from '../track/complete.js';
import { toKnots } from '../units.js';
import { CAUTION, type Provenance } from './provenance.js';

export const SUMMARY_SCHEMA = 'galewake-summary/1';

/** Seconds spent, by part of the work. */
export interface Timings {
  readonly read_s: number;
  readonly compute_s: number;
  readonly isotach_s: number;
  readonly write_s: number;
  readonly total_s: number;
}

/** The strongest wind of a swath, where and when. */
export interface Peak {
  readonly wind_mps: number;
  readonly gust_mps: number;
  readonly lon_deg: number | null;
  readonly lat_deg: number | null;
  /** ISO time; null for a calm grid */
  readonly time: string | null;
}

/** The cell with the highest wind; the gust is the highest of the grid. */
export function peakOf(swath: Swath): Peak {
  let best = 0;
  let gust = 0;
  for (let k = 0; k < swath.windMps.length; k++) {
    if (swath.windMps[k]! > swath.windMps[best]!) best = k;
    if (swath.gustMps[k]! > gust) gust = swath.gustMps[k]!;
  }
  const wind = swath.windMps[best] ?? 0;
  if (!(wind > 0)) return { wind_mps: 0, gust_mps: 0, lon_deg: null, lat_deg: null, time: null };
  const [x, y] = cellCentre(swath.grid, best % swath.grid.nx, Math.floor(best / swath.grid.nx));
  const [lon, lat] = projection(swath.grid.crs).inverse(x, y);
  return {
    wind_mps: round(wind, 3),
    gust_mps: round(gust, 3),
    lon_deg: round(lon > 180 ? lon - 360 : lon < -180 ? lon + 360 : lon, 6),
    lat_deg: round(lat, 6),
    time: new Date(swath.originMs + 1000 * swath.peakTimeS[best]!).toISOString(),
  };
}

const round = (value: number, digits: number): number => Number(value.toFixed(digits));

/** How many values of a track were filled in, by quantity and relation. */
export function estimatedValues(
  completed: CompletedTrack,
): { quantity: string; origin: string; by: string | null; fixes: number }[] {
  const counts = new Map<string, { quantity: string; origin: string; by: string | null; fixes: number }>();
  const quantities = [
    ['max_wind', 'maxWindMps'],
    ['central_pressure', 'centralPressurePa'],
    ['ambient_pressure', 'ambientPressurePa'],
    ['radius_of_max_wind', 'radiusOfMaxWindM'],
    ['holland_b', 'hollandB'],
  ] as const;
  for (const [quantity, key] of quantities) {
    for (const fix of completed.fixes) {
      const { origin, by } = fix[key];
      if (origin === 'given' && by === null) continue;
      const id = `${quantity}|${origin}|${by}`;
      const entry = counts.get(id) ?? { quantity, origin, by, fixes: 0 };
      entry.fixes++;
      counts.set(id, entry);
    }
  }
  return [...counts.values()];
}

/** The grid as the summary states it. */
export function gridDocument(grid: Grid): Record<string, unknown> {
  return { crs: grid.crs, nx: grid.nx, ny: grid.ny, cell: grid.cell, bounds: grid.bounds };
}

/** The summary document, also what `--json` prints. */
export function summaryDocument(parts: {
  provenance: Provenance;
  swath: Swath;
  completed: CompletedTrack;
  levels: readonly { readonly thresholdMps: number; readonly upperMps: number | null; readonly areaM2: number }[];
  quantity: 'wind' | 'gust';
  cautions: readonly string[];
  notes: readonly string[];
  files: readonly string[];
  timings: Timings;
}): Record<string, unknown> {
  const { provenance, swath, completed } = parts;
  return {
    schema: SUMMARY_SCHEMA,
    version: provenance.version,
    storm: {
      id: provenance.storm,
      name: provenance.stormName ?? null,
      kind: completed.track.kind,
      first: new Date(provenance.period.startMs).toISOString(),
      last: new Date(provenance.period.endMs).toISOString(),
    },
    inputs: provenance.inputs,
    recipe: provenance.recipe,
    grid: gridDocument(swath.grid),
    averaging_s: swath.averagingS,
    gust_duration_s: swath.gustDurationS,
    peak: peakOf(swath),
    areas: parts.levels.map((level) => ({
      quantity: parts.quantity,
      threshold_mps: round(level.thresholdMps, 4),
      threshold_kt: round(toKnots(level.thresholdMps), 2),
      upper_mps: level.upperMps === null ? null : round(level.upperMps, 4),
      area_km2: round(level.areaM2 / 1e6, 3),
    })),
    estimated: estimatedValues(completed),
    notes: parts.notes,
    cautions: parts.cautions,
    caution: CAUTION,
    files: parts.files,
    timings: parts.timings,
  };
}
