import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import type { WindModel } from '../../model/wind.js';

/** Moments lie at most this far apart, s, and nearer where the centre moves fast past its radius of maximum wind: */
const FINE_S = 60;
/** share of that radius from one moment to the next; down to the bound, s. */
const FINE_SHARE = 0.06;
const FINEST_S = 5;
/** Every so many moments the frame is the path's own; between them frames are straight lines where these are as near as this. */
const KNOT_MOMENTS = 4;
const STRAIGHT_M = 2;
const STRAIGHT_MPS = 0.002;
/** A step changes the radius of maximum wind by at most this share. */
const STEP_GROWTH = 0.1;
/** Numbers in a frame: see {@link Timeline.frames}. */
export const FRAME = 10;

/** One leg of the timeline: half of the way from a fix to the next, cut into 2^depth fine steps. */
export interface Leg {
  readonly startMs: number;
  readonly endMs: number;
  /** index of its start; its end is `first + (1 << depth)`, the start of the next leg, or one before it where the motion jumps */
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

/** The highest value of a frame's number over the moments of a leg: 8 for R, 9 for the maximum wind. */
export function highestOfLeg({ frames, count }: Timeline, leg: Leg, part: 8 | 9): number {
  let most = 0;
  for (let m = leg.first; m <= leg.first + (1 << leg.depth) && m < count; m++)
    most = Math.max(most, frames[m * FRAME + part]!);
  return most;
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
  // where the motion jumps at a fix the fix has two moments: the wind before it and after it
  const jumps = model.recipe['path.interpolation'] === 'linear';
  const legs: Leg[] = [];
  let first = 0;
  for (let i = 0; i + 1 < knots.length; i++) {
    const [startMs, endMs] = [knots[i]!, knots[i + 1]!];
    const { smallestM, ...bounds } = boundsOf(model, startMs, endMs);
    const fineS = Math.max(FINEST_S, Math.min(FINE_S, (FINE_SHARE * smallestM) / bounds.speedMps));
    const depth = Math.max(2, Math.ceil(Math.log2((endMs - startMs) / 1000 / fineS)));
    const longestS = STEP_GROWTH / bounds.growthPerS;
    legs.push({ startMs, endMs, first, depth, ...bounds, fineMs: (endMs - startMs) / (1 << depth), longestS });
    first += (1 << depth) + (jumps ? 1 : 0);
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
  const count = legs.length === 1 && legs[0]!.depth === 0 ? 1 : jumps ? first : first + 1;
  return { legs, count, frames: framesOf(model, legs, count) };
}

function framesOf(model: WindModel, legs: readonly Leg[], count: number): Float64Array {
  const frames = new Float64Array(count * FRAME);
  const put = (leg: Leg, m: number): void =>
    frames.set(frameOf(model.path.at(leg.startMs + (m - leg.first) * leg.fineMs)), m * FRAME);
  for (const leg of legs) {
    const end = Math.min(count - 1, leg.first + (1 << leg.depth));
    for (let m = leg.first; m <= end; m += KNOT_MOMENTS) put(leg, m);
    const straight = isStraight(frames, leg.first, end);
    for (let m = leg.first; m < end; m++) {
      const t = ((m - leg.first) % KNOT_MOMENTS) / KNOT_MOMENTS;
      if (t === 0) continue;
      if (!straight) {
        put(leg, m);
        continue;
      }
      const a = (m - t * KNOT_MOMENTS) * FRAME;
      const b = a + KNOT_MOMENTS * FRAME;
      const between = (k: number, wa = 1, wb = 1): number => (1 - t) * wa * frames[a + k]! + t * wb * frames[b + k]!;
      const radiusM = between(8);
      const to = m * FRAME;
      for (let k = 0; k < 3; k++) frames[to + k] = between(k);
      // of unit vectors, so that they stay square to the centre's
      const [wa, wb] = [frames[a + 8]! / radiusM, frames[b + 8]! / radiusM];
      for (let k = 3; k < 8; k++) frames[to + k] = between(k, wa, wb);
      frames[to + 8] = radiusM;
      frames[to + 9] = between(9);
    }
  }
  return frames;
}

/** Whether straight lines between the knots of a leg are near enough: an eighth of the second difference is what they are off. */
function isStraight(frames: Float64Array, first: number, end: number): boolean {
  const step = KNOT_MOMENTS * FRAME;
  if (end - first < 2 * KNOT_MOMENTS) return false;
  for (let b = first * FRAME + step; b < end * FRAME; b += step) {
    const bend = (k: number): number =>
      Math.abs(frames[b - step + k]! - 2 * frames[b + k]! + frames[b + step + k]!) / 8;
    const offM = EARTH_RADIUS_M * Math.max(bend(0), bend(1), bend(2));
    if (offM > STRAIGHT_M || bend(8) > STRAIGHT_M || bend(9) > STRAIGHT_MPS) return false;
  }
  return true;
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
