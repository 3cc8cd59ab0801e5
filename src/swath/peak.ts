import { RADIANS } from '../earth.js';
import type { WindModel } from '../model/wind.js';
import { gustFactorOf, HOURS_THRESHOLDS_MPS, type SwathOptions } from './exact.js';
import type { Grid } from './grid.js';
import type { Arithmetic } from './kernel/arithmetic.js';
import { momentsOf } from './kernel/moments.js';
import { newTile, tileRunner } from './kernel/tile.js';
import { type Tiling, tilingOf } from './kernel/tiling.js';
import { timelineOf } from './kernel/timeline.js';
import { twinArithmetic } from './kernel/twin.js';
import { wasmArithmetic } from './kernel/wasm.js';
import type { Swath } from './swath.js';

export interface PeakOptions extends SwathOptions {
  /** without hours above 34, 50 and 64 kt, which then are zero */
  readonly peakOnly?: boolean;
  readonly jobs?: number;
  /** the hot loops; WebAssembly where there is any */
  readonly arithmetic?: Arithmetic;
  readonly signal?: AbortSignal;
  readonly onProgress?: (share: number) => void;
}

/** Fields of a swath while it is made; each nx*ny. */
export interface SwathFields {
  readonly windMps: Float32Array;
  readonly windFromDeg: Float32Array;
  readonly peakTimeS: Float32Array;
  readonly hours: readonly Float32Array[];
}

/**
 * The swath of a storm: the peak over continuous time, its direction and time, and the hours above 34, 50 and 64 kt.
 * Within 0.05 m/s of {@link exactSwath} at one-minute steps wherever the peak is 8 m/s or more.
 */
export async function peakSwath(model: WindModel, grid: Grid, options: PeakOptions = {}): Promise<Swath> {
  const fields = newFields(grid.nx * grid.ny);
  const work = swathWork(model, grid, options);
  try {
    for (let row = 0; row < work.tiling.rows; row++) {
      options.signal?.throwIfAborted();
      work.runRow(row, fields);
      if ((row & 15) === 15) {
        options.onProgress?.(row / work.tiling.rows);
        await new Promise((resolve) => setTimeout(resolve, 0));
      }
    }
  } finally {
    work.done();
  }
  return swathFrom(model, grid, fields, work.cautions);
}

export function newFields(cells: number): SwathFields {
  return {
    windMps: new Float32Array(cells),
    windFromDeg: new Float32Array(cells).fill(Number.NaN),
    peakTimeS: new Float32Array(cells).fill(Number.NaN),
    hours: HOURS_THRESHOLDS_MPS.map(() => new Float32Array(cells)),
  };
}

export function swathFrom(model: WindModel, grid: Grid, fields: SwathFields, cautions: readonly string[]): Swath {
  const gust = gustFactorOf(model, 'at-sea');
  return {
    grid,
    windMps: fields.windMps,
    gustMps: fields.windMps.map((wind) => wind * gust),
    windFromDeg: fields.windFromDeg,
    peakTimeS: fields.peakTimeS,
    hoursAbove: HOURS_THRESHOLDS_MPS.map((thresholdMps, i) => ({ thresholdMps, hours: fields.hours[i]! })),
    originMs: model.path.startMs,
    averagingS: model.averagingS,
    gustDurationS: model.recipe['gust.duration_s'] as number,
    cautions: [...model.cautions, ...cautions],
  };
}

/** A swath cut into rows of tiles that can be done in any order. */
export interface SwathWork {
  readonly tiling: Tiling;
  readonly cautions: readonly string[];
  readonly runRow: (row: number, fields: SwathFields) => void;
  /** gives the kernel's memory back for the next swath */
  readonly done: () => void;
}

/** Kernels that no swath is using: their memory is kept. */
const idle: Arithmetic[] = [];

export function swathWork(
  model: WindModel,
  grid: Grid,
  options: Pick<PeakOptions, 'fromMs' | 'toMs' | 'peakOnly' | 'arithmetic'>,
): SwathWork {
  const fromMs = options.fromMs ?? model.path.startMs;
  const timeline = timelineOf(model, fromMs, options.toMs ?? model.path.endMs);
  const arithmetic = options.arithmetic ?? idle.pop() ?? wasmArithmetic() ?? twinArithmetic();
  arithmetic.release();
  const moments = momentsOf(model, timeline, arithmetic);
  const tiling = tilingOf(grid);
  const tile = newTile();
  const runner = tileRunner(timeline, moments, arithmetic, {
    outerRadiusM: model.outerRadiusM,
    thresholdsMps: HOURS_THRESHOLDS_MPS,
    hours: options.peakOnly !== true,
  });
  const counts = options.peakOnly !== true;
  const offsetS = (fromMs - model.path.startMs) / 1000;
  const cautions = moments.complete
    ? []
    : ['the wind varies more around the centre than the fast tables hold; peaks may be off by more than 0.05 m/s'];
  return {
    tiling,
    cautions,
    done: () => {
      if (!options.arithmetic) idle.push(arithmetic);
    },
    runRow(row, fields) {
      for (let column = 0; column < tiling.columns; column++) {
        const bounds = tiling.load(tile, arithmetic.arrays, { column, row });
        const { cells } = bounds;
        const { arrays } = arithmetic;
        if (!runner.run(tile, bounds)) continue;
        if (counts)
          for (let h = 0; h < fields.hours.length; h++) {
            const [from, to] = [arrays.hours[h]!, fields.hours[h]!];
            for (let i = 0; i < tile.count; i++) to[cells[i]!] = from[i]!;
          }
        for (let i = 0; i < tile.count; i++) {
          const k = cells[i]!;
          const wind = tile.windMps[i]!;
          if (!(wind > 0)) continue;
          fields.windMps[k] = wind;
          fields.peakTimeS[k] = offsetS + tile.peakS[i]!;
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
