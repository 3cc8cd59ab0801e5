import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import type { WindModel } from '../../model/wind.js';

/** Moments lie at most this far apart, s, and nearer where the centre moves fast past its radius of maximum wind: */
const FINE_S = 60;
/** share of that radius from one moment to the next; down to the bound, s. */
const FINE_SHARE = 0.06;
const FINEST_S = 5;
/** Every so many moments the frame is the path's own; between them frames are straight lines: a few metres off. */
const KNOT_MOMENTS = 4;
/** A step changes the radius of maximum wind by at most this share. */
const STEP_GROWTH = 0.1;
/** Numbers in a frame: see {@link Timeline.frames}. */
export const FRAME = 10;

/** One leg of the timeline: half of the way from a fix to the next, cut into 2^depth fine steps. */
export interface Leg {
  readonly startMs: number;
  readonly endMs: number;
  /** index of its start; its end is `first + (1 << depth)`, the start of the next leg */
  readonly first: number;
  readonly depth: number;
  /** upper bounds over the leg: speed of the centre, m/s; growth of the radius of maximum wind, 1/s; change of the maximum wind, m/s² */
  readonly speedMps: number;
  readonly growthPerS: number;
  readonly changeMps2: number;
  /** between two moments */
  readonly fineMs: number;
  /** longest step within which the size changes little, s */
  readonly longestS: number;
}

/** Moments of a storm between its fixes, each fix being one of them: plain data. */
export interface Timeline {
  readonly legs: readonly Leg[];
  /** moments in all */
  readonly count: number;
  /**
   * count × FRAME: the centre as a unit vector (3), then its local east (2) and north (3) times a/R, then R in metres and
   * the maximum wind in m/s. Dot products of a cell with the scaled vectors are its coordinates in units of R.
   */
  readonly frames: Float64Array;
}

/** Time of a moment, or of one between two. */
export function timeMsOf(timeline: Timeline, moment: number): number {
  const leg = timeline.legs[legOf(timeline, ({ first }) => first <= moment)]!;
  return leg.startMs + (moment - leg.first) * leg.fineMs;
}

/** Moment of a time. */
export function momentOf(timeline: Timeline, timeMs: number): number {
  const leg = timeline.legs[legOf(timeline, ({ startMs }) => startMs <= timeMs)]!;
  const moment = leg.first + (leg.fineMs > 0 ? (timeMs - leg.startMs) / leg.fineMs : 0);
  return Math.min(timeline.count - 1, Math.max(0, moment));
}

/** Number of the last leg that has begun. */
function legOf({ legs }: Timeline, begun: (leg: Leg) => boolean): number {
  let [low, high] = [0, legs.length];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (begun(legs[middle]!)) low = middle;
    else high = middle;
  }
  return low;
}

/** The timeline of a model between two times. */
export function timelineOf(model: WindModel, fromMs: number, toMs: number): Timeline {
  const { knotsMs } = model.path;
  // the motion turns at another rate from the middle between two fixes
  const middles = knotsMs.slice(1).map((time, i) => Math.round(0.5 * (time + knotsMs[i]!)));
  const inside = [...new Set([...knotsMs, ...middles])].filter((time) => time > fromMs && time < toMs);
  const knots = [fromMs, ...inside.sort((a, b) => a - b), ...(toMs > fromMs ? [toMs] : [])];
  const legs: Leg[] = [];
  let first = 0;
  for (let i = 0; i + 1 < knots.length; i++) {
    const [startMs, endMs] = [knots[i]!, knots[i + 1]!];
    const { smallestM, ...bounds } = boundsOf(model, startMs, endMs);
    const fineS = Math.max(FINEST_S, Math.min(FINE_S, (FINE_SHARE * smallestM) / bounds.speedMps));
    const depth = Math.max(2, Math.ceil(Math.log2((endMs - startMs) / 1000 / fineS)));
    const longestS = STEP_GROWTH / bounds.growthPerS;
    legs.push({ startMs, endMs, first, depth, ...bounds, fineMs: (endMs - startMs) / (1 << depth), longestS });
    first += 1 << depth;
  }
  if (legs.length === 0)
    legs.push({
      startMs: fromMs,
      endMs: fromMs,
      first: 0,
      depth: 0,
      speedMps: 0,
      growthPerS: 0,
      changeMps2: 0,
      fineMs: 0,
      longestS: 0,
    });
  const count = legs.length === 1 && legs[0]!.depth === 0 ? 1 : first + 1;
  return { legs, count, frames: framesOf(model, legs, count) };
}

function framesOf(model: WindModel, legs: readonly Leg[], count: number): Float64Array {
  const frames = new Float64Array(count * FRAME);
  for (const leg of legs) {
    const end = Math.min(count - 1, leg.first + (1 << leg.depth));
    frames.set(frameOf(model.path.at(leg.startMs)), leg.first * FRAME);
    for (let from = leg.first; from < end; from += KNOT_MOMENTS) {
      const to = from + KNOT_MOMENTS;
      const a = from * FRAME;
      frames.set(frameOf(model.path.at(leg.startMs + (to - leg.first) * leg.fineMs)), to * FRAME);
      for (let i = 1; i < KNOT_MOMENTS; i++) {
        const t = i / KNOT_MOMENTS;
        for (let k = 0; k < FRAME; k++) {
          const start = frames[a + k]!;
          frames[a + i * FRAME + k] = start + t * (frames[to * FRAME + k]! - start);
        }
      }
    }
  }
  return frames;
}

function frameOf(state: {
  latDeg: number;
  lonDeg: number;
  radiusOfMaxWindM: number;
  maxWindMps: number;
}): Float64Array {
  const la = state.latDeg * RADIANS;
  const lo = state.lonDeg * RADIANS;
  const scale = EARTH_RADIUS_M / state.radiusOfMaxWindM;
  const [sla, cla, slo, clo] = [Math.sin(la), Math.cos(la), Math.sin(lo), Math.cos(lo)];
  return Float64Array.of(
    cla * clo,
    cla * slo,
    sla,
    -slo * scale,
    clo * scale,
    -sla * clo * scale,
    -sla * slo * scale,
    cla * scale,
    state.radiusOfMaxWindM,
    state.maxWindMps,
  );
}

/** Samples of a leg, from which its bounds are taken with a margin. */
const SAMPLES = 16;
const MARGIN = 1.15;

function boundsOf(
  model: WindModel,
  startMs: number,
  endMs: number,
): Pick<Leg, 'speedMps' | 'growthPerS' | 'changeMps2'> & { readonly smallestM: number } {
  const dt = (endMs - startMs) / 1000 / SAMPLES;
  let [speedMps, growthPerS, changeMps2] = [0, 0, 0];
  let before = frameOf(model.path.at(startMs));
  let smallestM = before[8]!;
  for (let i = 1; i <= SAMPLES; i++) {
    const after = frameOf(model.path.at(startMs + i * dt * 1000));
    const chord = Math.hypot(after[0]! - before[0]!, after[1]! - before[1]!, after[2]! - before[2]!);
    speedMps = Math.max(speedMps, (chord * EARTH_RADIUS_M) / dt);
    growthPerS = Math.max(growthPerS, Math.abs(Math.log(after[8]! / before[8]!)) / dt);
    changeMps2 = Math.max(changeMps2, Math.abs(after[9]! - before[9]!) / dt);
    smallestM = Math.min(smallestM, after[8]!);
    before = after;
  }
  return { smallestM, speedMps: MARGIN * speedMps, growthPerS: MARGIN * growthPerS, changeMps2: MARGIN * changeMps2 };
}
