import { EARTH_RADIUS_M, RADIANS } from '../earth.js';
import type { WindModel } from '../model/wind.js';
import type { Engine } from '../swath/kernel/engine.js';
import { MOST_POINTS, MOST_THRESHOLDS } from '../swath/kernel/places.js';
import { stormTables } from '../swath/kernel/storm-tables.js';
import { timelineOf } from '../swath/kernel/timeline.js';
import { type Tracer, tracerOf } from '../swath/kernel/tracer.js';
import { newEngine } from '../swath/kernel/wasm.js';
import { isSharp } from '../swath/peak.js';
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
  readonly engine?: Engine;
  readonly signal?: AbortSignal;
  readonly onProgress?: (share: number) => void;
}

/** Most places of one batch. */
const BATCH = Math.min(256, MOST_POINTS);

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
  const tables = stormTables(model, timeline);
  const engine = options.engine ?? newEngine();
  const windMps = new Float32Array(n);
  const windFromDeg = new Float32Array(n).fill(Number.NaN);
  const peakTimeS = new Float32Array(n).fill(Number.NaN);
  const hours = thresholds.map(() => new Float32Array(n));
  const offsetS = (fromMs - originMs) / 1000;
  const order = spaceOrder(lonDeg, latDeg);
  // the kernel counts a few thresholds at a time
  const passes = Math.max(1, Math.ceil(thresholds.length / MOST_THRESHOLDS));
  for (let pass = 0; pass < passes; pass++) {
    const first = pass * MOST_THRESHOLDS;
    const part = thresholds.slice(first, first + MOST_THRESHOLDS);
    const tracer = tracerOf(engine, timeline, tables, { outerRadiusM: model.outerRadiusM, thresholdsMps: part });
    for (let from = 0, batch = 1; from < n; from += BATCH, batch++) {
      const some = order.subarray(from, from + BATCH);
      if (!gather(tracer, points, some)) continue;
      tracer.trace(some.length);
      for (const [i, k] of some.entries()) {
        const wind = tracer.windMps[i]!;
        // a wind that only grazes a threshold must not last where it is not reached
        for (let h = 0; h < part.length; h++) hours[first + h]![k] = wind >= part[h]! ? tracer.hours[h]![i]! : 0;
        if (pass > 0 || !(wind > 0)) continue;
        windMps[k] = wind;
        peakTimeS[k] = offsetS + tracer.timeS(i);
        windFromDeg[k] = tracer.fromDeg(i);
      }
      if (batch % 256 === 0) {
        options.signal?.throwIfAborted();
        options.onProgress?.((pass + from / n) / passes);
        await new Promise((resolve) => setTimeout(resolve, 0));
      }
    }
  }
  return {
    windMps,
    windFromDeg,
    peakTimeS,
    hours,
    originMs,
    cautions:
      tables.complete && !isSharp(model)
        ? []
        : ['the wind varies more around the centre than the fast tables hold; peaks may be off by more than 0.05 m/s'],
  };
}

/** Puts places that follow each other on the curve into a tracer; false where the storm comes near none. */
function gather(tracer: Tracer, points: PointColumns, order: Uint32Array): boolean {
  const { x, y, z } = tracer;
  for (const [i, k] of order.entries()) {
    const la = points.latDeg[k]! * RADIANS;
    const lo = points.lonDeg[k]! * RADIANS;
    const flat = Math.cos(la);
    x[i] = flat * Math.cos(lo);
    y[i] = flat * Math.sin(lo);
    z[i] = Math.sin(la);
  }
  tracer.windMps.fill(0, 0, order.length);
  let farthest = 0;
  for (let i = 1; i < order.length; i++)
    farthest = Math.max(farthest, Math.hypot(x[i]! - x[0]!, y[i]! - y[0]!, z[i]! - z[0]!));
  const radiusM = 2 * Math.asin(Math.min(1, farthest / 2)) * EARTH_RADIUS_M + 1;
  return tracer.near([x[0]!, y[0]!, z[0]!], radiusM);
}
