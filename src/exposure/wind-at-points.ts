import { EARTH_RADIUS_M, RADIANS, wrapBearing } from '../earth.js';
import type { WindModel } from '../model/wind.js';
import type { Arithmetic } from '../swath/kernel/arithmetic.js';
import { momentsOf } from '../swath/kernel/moments.js';
import { newTile, type Tile, type TileBounds, type TileRunner, tileRunner } from '../swath/kernel/tile.js';
import { MOST_CELLS_OF_TILE, THRESHOLD_SLOTS } from '../swath/kernel/tile-size.js';
import { timelineOf } from '../swath/kernel/timeline.js';
import { twinArithmetic } from '../swath/kernel/twin.js';
import { wasmArithmetic } from '../swath/kernel/wasm.js';
import { spaceOrder } from './space-order.js';

/** Places in columns, degrees. */
export interface PointColumns {
  readonly lonDeg: Float64Array;
  readonly latDeg: Float64Array;
}

/** What a storm did at places, in their order. Winds: 10 m, earth-relative, open sea. */
export interface PointWinds {
  /** peak sustained wind, m/s; 0 where the model has none */
  readonly windMps: Float32Array;
  /** where it blows from at the peak, degrees; NaN where the peak is 0 */
  readonly windFromDeg: Float32Array;
  /** time of the peak, s after `originMs`; NaN where the peak is 0 */
  readonly peakTimeS: Float32Array;
  /** hours at or above each threshold */
  readonly hours: readonly Float32Array[];
  readonly originMs: number;
  readonly cautions: readonly string[];
}

export interface PointWindOptions {
  /** winds whose hours are counted, m/s */
  readonly thresholdsMps?: readonly number[];
  readonly fromMs?: number;
  readonly toMs?: number;
  /** the hot loops; WebAssembly where there is any */
  readonly arithmetic?: Arithmetic;
  readonly signal?: AbortSignal;
  readonly onProgress?: (share: number) => void;
}

/** Farthest that a place of a tile may lie from its first one, m. */
const REACH_M = 14_000;
const MOST_POINTS = Math.min(64, MOST_CELLS_OF_TILE);

/**
 * Peak wind over continuous time, its direction and time, and hours above thresholds at any number of places: the model
 * at the place itself, not read off a grid. Within 0.05 m/s of the plain model at one-minute steps wherever the peak is
 * 8 m/s or more. Places are gathered into small tiles along a space-filling curve, so that near ones share the work.
 */
export async function windAtPoints(
  model: WindModel,
  points: PointColumns,
  options: PointWindOptions = {},
): Promise<PointWinds> {
  const { lonDeg, latDeg } = points;
  const n = lonDeg.length;
  const thresholds = options.thresholdsMps ?? [];
  const originMs = model.path.startMs;
  const fromMs = options.fromMs ?? originMs;
  const timeline = timelineOf(model, fromMs, options.toMs ?? model.path.endMs);
  const arithmetic = options.arithmetic ?? wasmArithmetic() ?? twinArithmetic();
  arithmetic.release();
  const moments = momentsOf(model, timeline, arithmetic);
  // the kernel counts a few thresholds at a time
  const runners: { runner: TileRunner; first: number; count: number }[] = [];
  for (let first = 0; first === 0 || first < thresholds.length; first += THRESHOLD_SLOTS) {
    const part = thresholds.slice(first, first + THRESHOLD_SLOTS);
    const runner = tileRunner(timeline, moments, arithmetic, {
      outerRadiusM: model.outerRadiusM,
      thresholdsMps: part,
      hours: part.length > 0,
    });
    runners.push({ runner, first, count: part.length });
  }
  const windMps = new Float32Array(n);
  const windFromDeg = new Float32Array(n).fill(Number.NaN);
  const peakTimeS = new Float32Array(n).fill(Number.NaN);
  const hours = thresholds.map(() => new Float32Array(n));
  const offsetS = (fromMs - originMs) / 1000;
  const order = spaceOrder(lonDeg, latDeg);
  const tile = newTile();
  let tiles = 0;
  for (let from = 0; from < n; ) {
    const bounds = gather(tile, arithmetic, points, order.subarray(from, from + MOST_POINTS));
    for (const [pass, { runner, first, count }] of runners.entries()) {
      if (!runner.run(tile, bounds)) break;
      const { arrays } = arithmetic;
      for (let i = 0; i < tile.count; i++) {
        const k = order[from + i]!;
        const wind = tile.windMps[i]!;
        // a wind that only grazes a threshold must not last where it is not reached
        for (let h = 0; h < count; h++)
          hours[first + h]![k] = wind >= thresholds[first + h]! ? arrays.hours[h]![i]! : 0;
        if (pass > 0 || !(wind > 0)) continue;
        windMps[k] = wind;
        peakTimeS[k] = offsetS + tile.peakS[i]!;
        windFromDeg[k] = fromDirection(tile, i, arithmetic, timeline.frame(tile.peakIndex[i]!));
      }
    }
    from += tile.count;
    if (++tiles % 1024 === 0) {
      options.signal?.throwIfAborted();
      options.onProgress?.(from / n);
      await new Promise((resolve) => setTimeout(resolve, 0));
    }
  }
  return {
    windMps,
    windFromDeg,
    peakTimeS,
    hours,
    originMs,
    cautions: moments.complete
      ? []
      : ['the wind varies more around the centre than the fast tables hold; peaks may be off by more than 0.05 m/s'],
  };
}

const corners = new Float64Array(12);

/** Puts the first of some places and those after it that lie near into a tile, with a box around them. */
function gather(tile: Tile, arithmetic: Arithmetic, points: PointColumns, order: Uint32Array): TileBounds {
  const { x, y, z } = arithmetic.arrays;
  const reach = REACH_M / EARTH_RADIUS_M;
  const origin = unitOf(points, order[0]!);
  // a plane that touches the sphere at the first place: no pole and no ±180° in it
  const size = Math.hypot(origin[0], origin[1]);
  const east = size > 1e-9 ? ([-origin[1] / size, origin[0] / size, 0] as const) : ([0, 1, 0] as const);
  const north = [
    origin[1] * east[2] - origin[2] * east[1],
    origin[2] * east[0] - origin[0] * east[2],
    origin[0] * east[1] - origin[1] * east[0],
  ] as const;
  let [west, right, south, top] = [0, 0, 0, 0];
  let count = 0;
  for (const k of order) {
    const la = points.latDeg[k]! * RADIANS;
    const lo = points.lonDeg[k]! * RADIANS;
    const flat = Math.cos(la);
    const [px, py, pz] = [flat * Math.cos(lo), flat * Math.sin(lo), Math.sin(la)];
    const e = px * east[0] + py * east[1] + pz * east[2];
    const n = px * north[0] + py * north[1] + pz * north[2];
    const up = px * origin[0] + py * origin[1] + pz * origin[2];
    if (up < 0 || e * e + n * n > reach * reach) break;
    x[count] = px;
    y[count] = py;
    z[count] = pz;
    count++;
    west = Math.min(west, e);
    right = Math.max(right, e);
    south = Math.min(south, n);
    top = Math.max(top, n);
  }
  tile.count = count;
  const at = (e: number, n: number): [number, number, number] => {
    const up = Math.sqrt(1 - e * e - n * n);
    return [
      up * origin[0] + e * east[0] + n * north[0],
      up * origin[1] + e * east[1] + n * north[1],
      up * origin[2] + e * east[2] + n * north[2],
    ];
  };
  for (const [q, [e, n]] of [
    [west, top],
    [right, top],
    [west, south],
    [right, south],
  ].entries())
    corners.set(at(e!, n!), 3 * q);
  return {
    centre: at(0.5 * (west + right), 0.5 * (south + top)),
    radiusM: 0.5 * Math.hypot(right - west, top - south) * EARTH_RADIUS_M + 1,
    corners,
  };
}

function unitOf({ lonDeg, latDeg }: PointColumns, i: number): readonly [number, number, number] {
  const la = latDeg[i]! * RADIANS;
  const lo = lonDeg[i]! * RADIANS;
  const c = Math.cos(la);
  return [c * Math.cos(lo), c * Math.sin(lo), Math.sin(la)];
}

/** Nearer to the centre than this the direction back to it drowns in the rounding of the kernel's floats, m. */
const NEAR_M = 2000;

/** Where the wind blows from at a place: the wind of the frame at the centre, turned as the great circle turns on the way. */
function fromDirection(tile: Tile, i: number, { arrays }: Arithmetic, frame: Float64Array): number {
  const [x, y, z] = [arrays.x[i]!, arrays.y[i]!, arrays.z[i]!];
  const [cx, cy, cz] = [frame[0]!, frame[1]!, frame[2]!];
  const flat = Math.sqrt(x * x + y * y);
  const centreFlat = Math.sqrt(cx * cx + cy * cy);
  let [real, imaginary] = [-tile.northMps[i]!, -tile.eastMps[i]!];
  // sides of the triangle of the two places and the pole, as far as their bearings need them
  const across = cx * y - cy * x;
  const along = cx * x + cy * y;
  const outEast = across / centreFlat;
  const outNorth = z * centreFlat - (cz * along) / centreFlat;
  const near = NEAR_M / EARTH_RADIUS_M;
  if (flat > 1e-7 && centreFlat > 1e-7 && outEast * outEast + outNorth * outNorth > near * near) {
    // bearings as complex numbers, north real: times the way's direction at the place, divided by that at the centre
    const onEast = across / flat;
    const onNorth = (z * along) / flat - cz * flat;
    [real, imaginary] = [real * onNorth - imaginary * onEast, real * onEast + imaginary * onNorth];
    [real, imaginary] = [real * outNorth + imaginary * outEast, imaginary * outNorth - real * outEast];
  }
  return wrapBearing(Math.atan2(imaginary, real) / RADIANS);
}
