import { RADIANS } from '../../earth.js';
import type { WindModel } from '../../model/wind.js';
import { HOURS_THRESHOLDS_MPS } from '../exact.js';
import type { Grid } from '../grid.js';
import type { Arithmetic } from './arithmetic.js';
import { momentsFrom, type StormTables, stormTables } from './moments.js';
import { newTile, tileRunner } from './tile.js';
import { type Tiling, tilingOf } from './tiling.js';
import { type TimelineData, timelineData, timelineFrom, timelineOf } from './timeline.js';
import { twinArithmetic } from './twin.js';
import { wasmArithmetic } from './wasm.js';

/** Fields of a swath while it is made; each nx*ny. */
export interface SwathFields {
  readonly windMps: Float32Array;
  readonly windFromDeg: Float32Array;
  readonly peakTimeS: Float32Array;
  readonly hours: readonly Float32Array[];
}

/** @param shared whether several threads write into them */
export function newFields(cells: number, { shared }: { shared: boolean }): SwathFields {
  const field = (): Float32Array =>
    shared ? new Float32Array(new SharedArrayBuffer(4 * cells)) : new Float32Array(cells);
  return {
    windMps: field(),
    windFromDeg: field().fill(Number.NaN),
    peakTimeS: field().fill(Number.NaN),
    hours: HOURS_THRESHOLDS_MPS.map(field),
  };
}

/** All that is needed to make a swath, as plain data: every thread makes its part from the same tables. */
export interface SwathPlan {
  readonly grid: Grid;
  readonly timeline: TimelineData;
  readonly tables: StormTables;
  readonly outerRadiusM: number;
  /** from the track's first fix to the timeline's start, s */
  readonly offsetS: number;
  readonly hours: boolean;
}

export function swathPlan(
  model: WindModel,
  grid: Grid,
  options: { readonly fromMs?: number; readonly toMs?: number; readonly peakOnly?: boolean },
): SwathPlan {
  const fromMs = options.fromMs ?? model.path.startMs;
  const timeline = timelineOf(model, fromMs, options.toMs ?? model.path.endMs);
  return {
    grid,
    timeline: timelineData(timeline),
    tables: stormTables(model, timeline),
    outerRadiusM: model.outerRadiusM,
    offsetS: (fromMs - model.path.startMs) / 1000,
    hours: options.peakOnly !== true,
  };
}

/** A swath cut into rows of tiles that can be done in any order. */
export interface SwathWork {
  readonly tiling: Tiling;
  readonly runRow: (row: number, fields: SwathFields) => void;
  /** gives the kernel's memory back for the next swath */
  readonly done: () => void;
}

/** Kernels that no swath is using: their memory is kept. */
const idle: Arithmetic[] = [];

export function swathWork(plan: SwathPlan, given?: Arithmetic): SwathWork {
  const timeline = timelineFrom(plan.timeline);
  const arithmetic = given ?? idle.pop() ?? wasmArithmetic() ?? twinArithmetic();
  arithmetic.release();
  const moments = momentsFrom(plan.tables, timeline, arithmetic);
  const tiling = tilingOf(plan.grid);
  const tile = newTile();
  const runner = tileRunner(timeline, moments, arithmetic, {
    outerRadiusM: plan.outerRadiusM,
    thresholdsMps: HOURS_THRESHOLDS_MPS,
    hours: plan.hours,
  });
  return {
    tiling,
    done: () => {
      if (!given) idle.push(arithmetic);
    },
    runRow(row, fields) {
      for (let column = 0; column < tiling.columns; column++) {
        const bounds = tiling.load(tile, arithmetic.arrays, { column, row });
        if (!runner.run(tile, bounds)) continue;
        const { cells } = bounds;
        const { arrays } = arithmetic;
        if (plan.hours)
          for (let h = 0; h < fields.hours.length; h++) {
            const [from, to] = [arrays.hours[h]!, fields.hours[h]!];
            for (let i = 0; i < tile.count; i++) to[cells[i]!] = from[i]!;
          }
        for (let i = 0; i < tile.count; i++) {
          const k = cells[i]!;
          const wind = tile.windMps[i]!;
          if (!(wind > 0)) continue;
          fields.windMps[k] = wind;
          fields.peakTimeS[k] = plan.offsetS + tile.peakS[i]!;
          fields.windFromDeg[k] = directionAt(
            arrays.x[i]!,
            arrays.y[i]!,
            arrays.z[i]!,
            timeline.frame(tile.peakIndex[i]!),
            tile.eastMps[i]!,
            tile.northMps[i]!,
          );
        }
      }
    },
  };
}

/**
 * Direction that a wind blows from at a cell, degrees, its parts given in the frame at the centre: north turns on the way
 * there by as much as the outward direction does.
 */
function directionAt(x: number, y: number, z: number, frame: Float64Array, eastMps: number, northMps: number): number {
  const east = x * frame[3]! + y * frame[4]!;
  const north = x * frame[5]! + y * frame[6]! + z * frame[7]!;
  const cosLat = Math.sqrt(x * x + y * y);
  let u = eastMps;
  let v = northMps;
  if (cosLat > 1e-7) {
    const slo = y / cosLat;
    const clo = x / cosLat;
    const outEast = frame[0]! * slo - frame[1]! * clo;
    const outNorth = frame[0]! * z * clo + frame[1]! * z * slo - frame[2]! * cosLat;
    // the cosine and sine of the turn, times the lengths of both vectors
    const cosine = east * outEast + north * outNorth;
    const sine = east * outNorth - north * outEast;
    // so near that the direction back drowns in rounding, nothing has turned yet
    if (outEast * outEast + outNorth * outNorth > 1e-7) {
      u = cosine * eastMps - sine * northMps;
      v = sine * eastMps + cosine * northMps;
    }
  }
  const degrees = Math.atan2(-u, -v) / RADIANS;
  return degrees < 0 ? degrees + 360 : degrees;
}
