import { EARTH_RADIUS_M, RADIANS, wrapBearing } from '../earth.js';
import { type SurfaceMap, sectorValue } from '../land/surface-map.js';
import type { WindModel } from '../model/wind.js';
import type { Exposure } from '../surface/averaging.js';
import { gustMethod } from '../surface/gust-method.js';
import { SEA_Z0_M } from '../surface/roughness.js';
import { knots } from '../units.js';
import { cellCentre, type Grid, projection } from './grid.js';
import type { Swath } from './swath.js';

/** Winds whose hours are counted: 34, 50 and 64 kt. */
export const HOURS_THRESHOLDS_MPS: readonly number[] = [knots(34), knots(50), knots(64)];

export interface SwathOptions {
  /** part of the track; the whole by default */
  readonly fromMs?: number;
  readonly toMs?: number;
  /** what the surface makes of the wind over open sea; open sea everywhere by default */
  readonly surface?: SurfaceMap;
}

/** Steps of at most `stepS` from start to end, both included. */
export function stepTimes(startMs: number, endMs: number, stepS: number): number[] {
  const count = Math.max(1, Math.ceil((endMs - startMs) / (stepS * 1000) - 1e-9));
  return Array.from({ length: startMs === endMs ? 1 : count + 1 }, (_, i) => startMs + ((endMs - startMs) * i) / count);
}

/**
 * The swath by the plain model: every cell at every step, in double precision, no table, nothing skipped. Slow on
 * purpose; the judge of the fast one. Hours above a level take the wind as linear in time between steps.
 * With a surface the wind and the gust of a moment are those over open sea times the ratios of the cell for the direction
 * of that moment; the peak gust is the highest gust over time, which need not fall together with the peak wind.
 */
export function exactSwath(model: WindModel, grid: Grid, options: SwathOptions & { stepS?: number } = {}): Swath {
  const originMs = model.path.startMs;
  const times = stepTimes(options.fromMs ?? originMs, options.toMs ?? model.path.endMs, options.stepS ?? 60);
  const n = grid.nx * grid.ny;
  const places = cellPlaces(grid);
  const peak = new Float64Array(n);
  const peakGust = new Float64Array(n);
  const { surface } = options;
  const gustAtSea = gustFactorOf(model, 'at-sea');
  const peakTime = new Float64Array(n).fill(Number.NaN);
  const from = new Float64Array(n).fill(Number.NaN);
  const before = new Float64Array(n);
  const hours = HOURS_THRESHOLDS_MPS.map(() => new Float64Array(n));
  const direction = new Float64Array(2);
  const wind = new Float64Array(2);
  for (let step = 0; step < times.length; step++) {
    const field = model.fieldAt(times[step]!);
    const dtHours = step === 0 ? 0 : (times[step]! - times[step - 1]!) / 3_600_000;
    const centre = frameAt(field.state.latDeg, field.state.lonDeg);
    for (let k = 0; k < n; k++) {
      const seen = seenFrom(centre, places, k);
      let speed = 0;
      if (seen.radiusM < field.outerRadiusM) {
        direction[0] = seen.east;
        direction[1] = seen.north;
        field.onCircle(wind, seen.radiusM, direction);
        speed = Math.hypot(wind[0]!, wind[1]!);
        let gust = speed * gustAtSea;
        const row = surface?.rowOf[k] ?? 0;
        if (surface && row > 0) {
          const [east, north] = turned(wind, seen.turnDeg());
          gust = speed * sectorValue(surface.gustRatio, row, east, north);
          speed *= sectorValue(surface.windRatio, row, east, north);
        }
        if (gust > peakGust[k]!) peakGust[k] = gust;
        if (speed > peak[k]!) {
          peak[k] = speed;
          peakTime[k] = (times[step]! - originMs) / 1000;
          from[k] = wrapBearing(Math.atan2(-wind[0]!, -wind[1]!) / RADIANS + seen.turnDeg());
        }
      }
      for (let i = 0; i < hours.length; i++)
        hours[i]![k]! += dtHours * shareAbove(before[k]!, speed, HOURS_THRESHOLDS_MPS[i]!);
      before[k] = speed;
    }
  }
  return {
    grid,
    windMps: Float32Array.from(peak),
    gustMps: Float32Array.from(peakGust),
    windFromDeg: Float32Array.from(from),
    peakTimeS: Float32Array.from(peakTime),
    hoursAbove: HOURS_THRESHOLDS_MPS.map((thresholdMps, i) => ({ thresholdMps, hours: Float32Array.from(hours[i]!) })),
    originMs,
    averagingS: model.averagingS,
    gustDurationS: model.recipe['gust.duration_s'] as number,
    cautions: [...model.cautions, ...(surface?.cautions ?? [])],
  };
}

/** The gust factor of a model's recipe for one exposure; `z0M` is the roughness length upwind, by default the sea's. */
export function gustFactorOf(model: WindModel, exposure: Exposure, z0M = SEA_Z0_M): number {
  const { recipe, averagingS: periodS } = model;
  const durationS = recipe['gust.duration_s'] as number;
  return gustMethod(recipe['gust.method']).factor({ exposure, z0M, durationS, periodS });
}

/** A vector [east, north] turned clockwise, as bearings grow. */
function turned(vector: Float64Array, degrees: number): readonly [number, number] {
  const [c, s] = [Math.cos(degrees * RADIANS), Math.sin(degrees * RADIANS)];
  return [c * vector[0]! + s * vector[1]!, c * vector[1]! - s * vector[0]!];
}

/** Share of a step during which a wind that runs from `a` to `b` in a straight line is at or above `threshold`. */
export function shareAbove(a: number, b: number, threshold: number): number {
  if (a >= threshold && b >= threshold) return 1;
  if (a < threshold && b < threshold) return 0;
  const crossing = (threshold - a) / (b - a);
  return b >= threshold ? 1 - crossing : crossing;
}

/** Unit vectors of all cell centres in double precision. */
interface Places {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

function cellPlaces(grid: Grid): Places {
  const n = grid.nx * grid.ny;
  const places = { x: new Float64Array(n), y: new Float64Array(n), z: new Float64Array(n) };
  const { inverse } = projection(grid.crs);
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      const [cx, cy] = cellCentre(grid, column, row);
      const [lon, lat] = inverse(cx, cy);
      places.x[k] = Math.cos(lat * RADIANS) * Math.cos(lon * RADIANS);
      places.y[k] = Math.cos(lat * RADIANS) * Math.sin(lon * RADIANS);
      places.z[k] = Math.sin(lat * RADIANS);
    }
  }
  return places;
}

/** The centre as a unit vector with its local east and north. */
interface Frame {
  readonly p: readonly [number, number, number];
  readonly e: readonly [number, number, number];
  readonly n: readonly [number, number, number];
}

function frameAt(latDeg: number, lonDeg: number): Frame {
  const [sla, cla] = [Math.sin(latDeg * RADIANS), Math.cos(latDeg * RADIANS)];
  const [slo, clo] = [Math.sin(lonDeg * RADIANS), Math.cos(lonDeg * RADIANS)];
  return { p: [cla * clo, cla * slo, sla], e: [-slo, clo, 0], n: [-sla * clo, -sla * slo, cla] };
}

/** Distance and direction of a cell seen from the centre, and by how much north turns on the way there. */
function seenFrom(frame: Frame, places: Places, k: number) {
  const [x, y, z] = [places.x[k]!, places.y[k]!, places.z[k]!];
  const east = x * frame.e[0] + y * frame.e[1] + z * frame.e[2];
  const north = x * frame.n[0] + y * frame.n[1] + z * frame.n[2];
  const up = x * frame.p[0] + y * frame.p[1] + z * frame.p[2];
  const size = Math.hypot(east, north);
  const radiusM = EARTH_RADIUS_M * Math.atan2(size, up);
  return {
    radiusM,
    east: size === 0 ? 0 : east / size,
    north: size === 0 ? 1 : north / size,
    /** bearing of travel at the cell minus that at the centre, degrees */
    turnDeg(): number {
      if (size === 0) return 0;
      // direction of travel at the cell: centre's direction carried along, i.e. −(centre as seen from the cell)
      const cosLat = Math.hypot(x, y);
      if (cosLat < 1e-12) return 0;
      const [slo, clo] = [y / cosLat, x / cosLat];
      const backEast = -frame.p[0] * slo + frame.p[1] * clo;
      const backNorth = -frame.p[0] * z * clo - frame.p[1] * z * slo + frame.p[2] * cosLat;
      return (Math.atan2(-backEast, -backNorth) - Math.atan2(east, north)) / RADIANS;
    },
  };
}
