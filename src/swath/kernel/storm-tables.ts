import { EARTH_RADIUS_M } from '../../earth.js';
import type { WindField } from '../../model/field.js';
import type { WindModel } from '../../model/wind.js';
import {
  type Layout,
  layoutOf,
  type MomentTable,
  rowBound,
  rowRatios,
  rowsBeyond,
  type Sampling,
  samplingOf,
  tableOf,
} from './table.js';
import { FRAME, highestOfLeg, type Leg, type Timeline } from './timeline.js';

/** From one table to the next the wind changes by at most this, m/s: between them the nearer one serves, with R and V of the moment. */
const SLOT_MPS = 0.015;
/** Tables are parabolas in time through three that are built, where these tell the ones between within this, m/s; where many harmonics make tables dear. */
const TOLERANCE_MPS = [0.016, 0.04] as const;
/** What is checked at a quarter and at three: each so many rows. */
const CHECK_ROWS = 8;
/** Winds below this need not be explained, m/s: nothing is promised of them. */
const LEAST_MPS = 7.5;
/** Truncation of the harmonics that is left out, m/s. */
const TRUNCATION_MPS = 0.01;
const MOST_HARMONICS = 14;
/** Directions in which a field is probed for its harmonics. */
const PROBES = 64;
/** Where a lowest wind is given, tables reach to this share of it, and farther by this factor: they are probed at some moments only. */
const WEAK_SHARE = 0.5;
const WEAK_MARGIN = 1.3;
/** where any still has this share of the lowest wind at its end, all are made again to the storm's outer radius. */
const ENDS_SHARE = 0.85;
/** Splits of a leg at most, and where many harmonics make tables dear: the tables between are interpolated. */
const MOST_SPLITS = [6, 5] as const;
/** Floats that all tables of a storm may take; beyond it fewer tables serve for longer. */
const MOST_FLOATS = 80_000_000;
/** Harmonics of the direction at most: 2° are promised of it. */
const MOST_WIND_HARMONICS = 5;

/** The tables of a storm as they are built, before any is interpolated, leg by leg: plain data. */
export interface StormTables {
  readonly layout: Layout;
  readonly complete: boolean;
  readonly legTables: readonly (readonly Piece[])[];
}

/**
 * Builds the tables of a storm.
 * @param options.leastMps for peak winds of at least this alone: tables end where the wind is well below it, and hold no parts of the wind
 */
export function stormTables(
  model: WindModel,
  timeline: Timeline,
  options: { readonly leastMps?: number } = {},
): StormTables {
  const { leastMps = null } = options;
  const short = tablesWith(model, timeline, planTables(model, timeline, leastMps));
  if (leastMps === null || endsBelow(short, timeline, ENDS_SHARE * leastMps)) return short;
  // a moment that was not probed reaches farther
  return tablesWith(model, timeline, planTables(model, timeline, null));
}

/** Whether every table has a lower wind than a given one in its last row. */
function endsBelow({ layout, legTables }: StormTables, timeline: Timeline, windMps: number): boolean {
  return timeline.legs.every((leg, number) => {
    const bound = (windMps / highestOfLeg(timeline, leg, 9)) ** 2;
    return [...builtTables(legTables[number]!)].every((table) => rowBound(table, layout, layout.rows - 1) < bound);
  });
}

function tablesWith(
  model: WindModel,
  timeline: Timeline,
  { layout, sampling, complete }: ReturnType<typeof planTables>,
): StormTables {
  const build = (timeMs: number): MomentTable => tableOf(model.fieldAt(timeMs), layout, sampling);
  // where the model is continuous a fix serves the legs on both sides
  const continuous = model.recipe['path.interpolation'] !== 'linear';
  const legTables: (readonly Piece[])[] = [];
  let last: MomentTable | null = null;
  for (const leg of timeline.legs) {
    const pieces = piecesOf(leg, continuous ? last : null);
    legTables.push(pieces);
    last = pieces[pieces.length - 1]!.b;
  }

  return { layout, complete, legTables };

  /** Tables of a leg, more of them where three do not tell those between. */
  function piecesOf(leg: Leg, start: MomentTable | null): readonly Piece[] {
    const first = start ?? build(leg.startMs);
    if (leg.endMs === leg.startMs) return [{ from: 0, to: 1, a: first, m: first, b: first }];
    const timeOf = (at: number): number => leg.startMs + at * (leg.endMs - leg.startMs);
    const most = Math.min(MOST_SPLITS[layout.harmonics > 2 ? 1 : 0], leg.depth - 1);
    const pieces: Piece[] = [];
    const split = (piece: Piece, depth: number): void => {
      const { from, to, a, m, b } = piece;
      const quarter = 0.25 * (to - from);
      const tells = (share: number): boolean => {
        const at = from + share * (to - from);
        const maxWindMps = timeline.frames[(leg.first + Math.round(at * (1 << leg.depth))) * FRAME + 9]!;
        const check = tableOf(model.fieldAt(timeOf(at)), layout, sampling, CHECK_ROWS);
        return isTold(piece, share, check, layout, maxWindMps);
      };
      if (depth >= most || (tells(0.25) && tells(0.75))) {
        pieces.push(piece);
        return;
      }
      const middle = from + 2 * quarter;
      split({ from, to: middle, a, m: build(timeOf(from + quarter)), b: m }, depth + 1);
      split({ from: middle, to, a: m, m: build(timeOf(to - quarter)), b }, depth + 1);
    };
    const end = build(continuous ? leg.endMs : leg.endMs - 1);
    split({ from: 0, to: 1, a: first, m: build(timeOf(0.5)), b: end }, 0);
    return pieces;
  }
}

/** Which tables serve the moments of a storm: so many of each piece that the wind changes little to the next. */
export function servingTables({ layout, legTables }: StormTables, { legs, count, frames }: Timeline): Serving {
  const wanted = (leg: Leg, { from, to, a, m, b }: Piece): number => {
    const fine = 1 << leg.depth;
    const middle = Math.min(count - 1, leg.first + Math.round(0.5 * (from + to) * fine));
    const maxWindMps = frames[middle * FRAME + 9]!;
    const apartMps = farthestApart(a, m, layout, maxWindMps) + farthestApart(m, b, layout, maxWindMps);
    return Math.min(Math.ceil(apartMps / SLOT_MPS) || 1, Math.max(1, Math.round((to - from) * fine)));
  };
  const partsOf = legs.map((leg, number) => legTables[number]!.map((piece) => wanted(leg, piece)));
  const asked = partsOf.flat().reduce((sum, parts) => sum + parts + 1, 1) * layout.rows * layout.speedStride;
  const thin = Math.max(1, asked / MOST_FLOATS);
  const slots = new Int32Array(count);
  const made: Mixture[] = [];
  for (const [number, leg] of legs.entries()) {
    const fine = 1 << leg.depth;
    let serving = 0;
    for (const [i, piece] of legTables[number]!.entries()) {
      const parts = Math.max(1, Math.round(partsOf[number]![i]! / thin));
      const first = made.length;
      for (let part = 0; part <= parts; part++) made.push({ piece, share: part / parts });
      for (; serving <= piece.to * fine && leg.first + serving < count; serving++) {
        const t = (serving / fine - piece.from) / (piece.to - piece.from);
        slots[leg.first + serving] = first + Math.round(t * parts);
      }
    }
  }
  return { slots, tables: made };
}

/** A table on the parabola through three built ones. */
export interface Mixture {
  readonly piece: Piece;
  readonly share: number;
}

/** The tables of a storm, and for each moment which of them serves it. */
export interface Serving {
  readonly slots: Int32Array;
  readonly tables: readonly Mixture[];
}

/** The built tables of pieces, each once. */
export function builtTables(pieces: readonly Piece[]): Set<MomentTable> {
  return new Set(pieces.flatMap(({ a, m, b }) => [a, m, b]));
}

/** How many rows and harmonics the fields of this storm need. */
function planTables(
  model: WindModel,
  timeline: Timeline,
  leastMps: number | null,
): { layout: Layout; sampling: Sampling; complete: boolean } {
  let smallest = Number.POSITIVE_INFINITY;
  for (const leg of timeline.legs) {
    const steps = Math.min(8, 1 << leg.depth);
    for (let i = 0; i <= steps; i++) {
      const index = Math.min(timeline.count - 1, leg.first + Math.round((i * (1 << leg.depth)) / steps));
      smallest = Math.min(smallest, timeline.frames[index * FRAME + 8]!);
    }
  }
  const farthest = (EARTH_RADIUS_M * Math.sin(Math.min(Math.PI / 2, model.outerRadiusM / EARTH_RADIUS_M))) / smallest;
  let rows = rowsBeyond(farthest * farthest * 1.02);
  let weakRatio = 0;
  // probe a few moments with many directions
  const probe = samplingOf(PROBES);
  const winds = new Float64Array(2 * PROBES);
  let [harmonics, windHarmonics] = [1, 1];
  let complete = true;
  const { legs } = timeline;
  const probed = [...new Set([0, 1, 2, 3, 4].map((i) => Math.floor((i * (legs.length - 1)) / 4)))];
  for (const number of probed) {
    const leg = legs[number]!;
    for (const share of [0, 0.4]) {
      const field = model.fieldAt(leg.startMs + share * (leg.endMs - leg.startMs));
      if (leastMps !== null) weakRatio = Math.max(weakRatio, reachedRatio(field, WEAK_SHARE * leastMps));
      for (const ratio of [0.5, 0.9, 1, 1.1, 1.5, 2, 3, 5, 8, 12]) {
        const radiusM = ratio * field.state.radiusOfMaxWindM;
        if (radiusM > 0.95 * field.outerRadiusM) continue;
        field.onCircle(winds, radiusM, probe.directions);
        const squared = Array.from({ length: PROBES }, (_, i) => winds[2 * i]! ** 2 + winds[2 * i + 1]! ** 2);
        const mean = Math.sqrt(squared.reduce((a, b) => a + b, 0) / PROBES);
        const needed = harmonicsNeeded(squared, 2 * Math.max(mean, 8) * TRUNCATION_MPS, probe);
        complete &&= needed <= MOST_HARMONICS;
        harmonics = Math.max(harmonics, Math.min(MOST_HARMONICS, needed));
        if (leastMps !== null) continue;
        for (const part of [0, 1]) {
          const component = Array.from({ length: PROBES }, (_, i) => winds[2 * i + part]!);
          // a degree of the local wind
          windHarmonics = Math.max(
            windHarmonics,
            Math.min(MOST_WIND_HARMONICS, harmonicsNeeded(component, 0.015 * Math.max(mean, 4), probe)),
          );
        }
      }
    }
  }
  if (leastMps !== null) {
    windHarmonics = 0;
    rows = Math.min(rows, rowsBeyond((WEAK_MARGIN * weakRatio) ** 2));
  }
  const most = Math.max(harmonics, windHarmonics);
  return {
    layout: layoutOf(harmonics, windHarmonics, rows),
    sampling: samplingOf(most === 1 ? 4 : 2 * most + 4),
    complete,
  };
}

/** How far from the centre a field has a wind, in units of its radius of maximum wind. */
function reachedRatio(field: WindField, windMps: number): number {
  const radiusM = field.state.radiusOfMaxWindM;
  let ratio = 1;
  while (ratio * radiusM < field.outerRadiusM && field.strongestOnCircle(ratio * radiusM) >= windMps) ratio *= 1.2;
  return ratio;
}

/** The harmonic beyond which the sum of amplitudes falls below a bound. */
function harmonicsNeeded(values: readonly number[], bound: number, probe: Sampling): number {
  const n = values.length;
  let rest = 0;
  for (let k = n / 2 - 1; k >= 1; k--) {
    let sine = 0;
    let cosine = 0;
    for (let i = 0; i < n; i++) {
      const j = 2 * ((i * k) % n);
      sine += values[i]! * probe.directions[j]!;
      cosine += values[i]! * probe.directions[j + 1]!;
    }
    rest += (2 / n) * Math.hypot(sine, cosine);
    if (rest > bound) return k;
  }
  return 1;
}

/** Whether the parabola through a piece's tables tells one between them, of which some rows are known. */
function isTold(
  { a, m, b }: Piece,
  share: number,
  check: MomentTable,
  { rows, speedStride, harmonics }: Layout,
  maxWindMps: number,
): boolean {
  const ratio = rowRatios(rows);
  const least = (LEAST_MPS / maxWindMps) ** 2;
  const tolerance = (2 * TOLERANCE_MPS[harmonics > 2 ? 1 : 0]) / maxWindMps;
  const [wa, wm, wb] = [(1 - share) * (1 - 2 * share), 4 * share * (1 - share), share * (2 * share - 1)];
  for (let row = CHECK_ROWS; row < rows; row += CHECK_ROWS) {
    const at = row * speedStride;
    const squared = Math.max(check.speed[at]!, m.speed[at]!);
    if (check.speed[at] === 0 || squared < least) continue;
    let off = 0;
    for (let c = speedStride - 1; c >= 0; c--) {
      const told = wa * a.speed[at + c]! + wm * m.speed[at + c]! + wb * b.speed[at + c]!;
      const own = Math.abs(told - check.speed[at + c]!);
      off += c === 0 ? own : ratio[row]! * own;
    }
    if (off > tolerance * Math.sqrt(squared)) return false;
  }
  return true;
}

/** The most by which the speeds of two tables differ anywhere, m/s; calms count for nothing. */
function farthestApart(
  a: Pick<MomentTable, 'speed'>,
  b: MomentTable,
  { rows, speedStride }: Layout,
  maxWindMps: number,
): number {
  const ratio = rowRatios(rows);
  const least = (LEAST_MPS / maxWindMps) ** 2;
  let most = 0;
  for (let row = 1; row < rows; row++) {
    const at = row * speedStride;
    const squared = Math.max(a.speed[at]!, b.speed[at]!);
    if (squared < least) continue;
    let off = 0;
    for (let c = 1; c < speedStride; c++) off += Math.abs(a.speed[at + c]! - b.speed[at + c]!);
    off = ratio[row]! * off + Math.abs(a.speed[at]! - b.speed[at]!);
    most = Math.max(most, off / (2 * Math.sqrt(squared)));
  }
  return most * maxWindMps;
}

/** Tables at the start, in the middle and at the end of a part of a leg; between them goes a parabola. */
export interface Piece {
  /** shares of the leg */
  readonly from: number;
  readonly to: number;
  readonly a: MomentTable;
  readonly m: MomentTable;
  readonly b: MomentTable;
}
