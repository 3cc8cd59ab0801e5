import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import type { WindModel } from '../../model/wind.js';

/** Moments lie at most this far apart, s, and nearer where the centre moves fast past its radius of maximum wind: */
const FINE_S = 40;
/** share of that radius from one moment to the next; down to the bound, s. */
const FINE_SHARE = 0.04;
const FINEST_S = 4;
/** A step changes the radius of maximum wind by at most this share. */
const STEP_GROWTH = 0.08;
/** Numbers in a frame: see {@link Timeline.frame}. */
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

/** Moments of a storm between its fixes, each fix being one of them. */
export interface Timeline {
  readonly legs: readonly Leg[];
  /** moments in all */
  readonly count: number;
  /** number of the leg that a moment belongs to; the start of a leg belongs to it */
  readonly legNumber: Uint16Array;
  readonly timeMs: (index: number) => number;
  /**
   * The frame of a moment at `index * FRAME`: the centre as a unit vector (3), then its local east (2) and north (3)
   * times a/R, then R in metres and the maximum wind in m/s. Dot products of a cell with the scaled vectors are its
   * coordinates in units of R.
   */
  readonly frame: (index: number) => Float64Array;
}

/** A timeline as plain data, its frames filled: what another thread needs of it. */
export interface TimelineData extends Pick<Timeline, 'legs' | 'count' | 'legNumber'> {
  /** count × FRAME */
  readonly frames: Float64Array;
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
    const longestS = Math.min((endMs - startMs) / 1000, STEP_GROWTH / bounds.growthPerS);
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
  const legNumber = new Uint16Array(count);
  for (const [number, leg] of legs.entries())
    legNumber.fill(number, leg.first, Math.min(count, leg.first + (1 << leg.depth) + 1));
  return over({ legs, count, legNumber }, (timeMs) => frameOf(model.path.at(timeMs)));
}

/** The timeline of plain data. */
export function timelineFrom({ frames, ...data }: TimelineData): Timeline {
  return over(data, (_, index) => frames.subarray(index * FRAME, (index + 1) * FRAME));
}

/** A timeline as plain data. */
export function timelineData({ legs, count, legNumber, frame }: Timeline): TimelineData {
  const frames = new Float64Array(count * FRAME);
  for (let index = 0; index < count; index++) frames.set(frame(index), index * FRAME);
  return { legs, count, legNumber, frames };
}

function over(
  { legs, count, legNumber }: Pick<Timeline, 'legs' | 'count' | 'legNumber'>,
  frameAt: (timeMs: number, index: number) => Float64Array,
): Timeline {
  const frames: (Float64Array | undefined)[] = new Array(count);
  const timeMs = (index: number): number => {
    const leg = legs[legNumber[Math.min(count - 1, Math.max(0, Math.floor(index)))]!]!;
    return leg.startMs + ((leg.endMs - leg.startMs) * (index - leg.first)) / (1 << leg.depth);
  };
  const frame = (index: number): Float64Array => {
    const known = frames[index];
    if (known) return known;
    const made = frameAt(timeMs(index), index);
    frames[index] = made;
    return made;
  };
  return { legs, count, legNumber, timeMs, frame };
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
