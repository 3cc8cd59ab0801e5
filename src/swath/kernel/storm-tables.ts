import { EARTH_RADIUS_M } from '../../earth.js';
import type { WindField } from '../../model/field.js';
import type { WindModel } from '../../model/wind.js';
import {
  type Layout,
  layoutOf,
  type MomentTable,
  rowRatios,
  rowsBeyond,
  type Sampling,
  samplingOf,
  tableOf,
} from './table.js';
import { FRAME, type Leg, type Timeline } from './timeline.js';

/** From one table to the next the wind changes by at most this, m/s: between them the nearer one serves, with R and V of the moment. */
const SLOT_MPS = 0.015;
/** A table is interpolated between two neighbours that explain the one in their middle within this, m/s. */
const TOLERANCE_MPS = [0.02, 0.06] as const;
/** Tables that differ by more than this, m/s, are not believed to explain the one in their middle. */
const HIDDEN_MPS = 1;
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
/** Splits of a leg at most, and where many harmonics make tables dear: the tables between are interpolated. */
const MOST_SPLITS = [6, 5] as const;
/** Floats that all tables of a storm may take; beyond it fewer tables serve for longer. */
const MOST_FLOATS = 80_000_000;
/** Harmonics of the direction at most: 2° are promised of it. */
const MOST_WIND_HARMONICS = 5;

/** The tables of a storm as they are built, before any is interpolated: plain data. */
export interface StormTables {
  readonly layout: Layout;
  readonly complete: boolean;
  readonly legTables: readonly (readonly Built[])[];
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
  const { layout, sampling, complete } = planTables(model, timeline, options.leastMps ?? null);
  const build = (timeMs: number): MomentTable => tableOf(model.fieldAt(timeMs), layout, sampling);
  // where the model is continuous a fix serves the legs on both sides
  const continuous = model.recipe['path.interpolation'] !== 'linear';
  const legTables: (readonly Built[])[] = [];
  let last: MomentTable | null = null;
  for (const leg of timeline.legs) {
    const list = tablesOfLeg(leg, continuous ? last : null);
    legTables.push(list);
    last = list[list.length - 1]!.table;
  }

  return { layout, complete, legTables };

  /** Tables of a leg, more of them where two do not explain the one in their middle. */
  function tablesOfLeg(leg: Leg, start: MomentTable | null): readonly Built[] {
    const list: Built[] = [{ at: 0, table: start ?? build(leg.startMs) }];
    if (leg.endMs === leg.startMs) return list;
    const split = (from: number, a: MomentTable, to: number, b: MomentTable, depth: number): void => {
      const at = 0.5 * (from + to);
      const middle = build(leg.startMs + at * (leg.endMs - leg.startMs));
      const maxWindMps = timeline.frames[(leg.first + Math.round(at * (1 << leg.depth))) * FRAME + 9]!;
      // what bends one way first and then the other may pass through the mean in the middle
      const hidden = depth < 3 && farthestApart(a, b, layout, maxWindMps) > HIDDEN_MPS;
      const fine =
        depth >= Math.min(MOST_SPLITS[layout.harmonics > 2 ? 1 : 0], leg.depth) ||
        (!hidden && explains(a, b, middle, layout, maxWindMps));
      if (!fine) split(from, a, at, middle, depth + 1);
      list.push({ at, table: middle });
      if (!fine) split(at, middle, to, b, depth + 1);
    };
    const last = build(continuous ? leg.endMs : leg.endMs - 1);
    split(0, list[0]!.table, 1, last, 1);
    list.push({ at: 1, table: last });
    return list;
  }
}

/** Which tables serve the moments of a storm: so many between two built ones that the wind changes little to the next. */
export function servingTables({ layout, legTables }: StormTables, { legs, count, frames }: Timeline): Serving {
  const wanted = (leg: Leg, a: Built, b: Built): number => {
    const fine = 1 << leg.depth;
    const middle = Math.min(count - 1, leg.first + Math.round(0.5 * (a.at + b.at) * fine));
    const apartMps = farthestApart(a.table, b.table, layout, frames[middle * FRAME + 9]!);
    return Math.min(Math.ceil(apartMps / SLOT_MPS) || 1, Math.max(1, Math.round((b.at - a.at) * fine)));
  };
  const partsOf = legs.map((leg, number) => {
    const list = legTables[number]!;
    return list.slice(1).map((b, i) => wanted(leg, list[i]!, b));
  });
  const asked = partsOf.flat().reduce((sum, parts) => sum + parts + 1, 1) * layout.rows * layout.speedStride;
  const thin = Math.max(1, asked / MOST_FLOATS);
  const slots = new Int32Array(count);
  const made: Mixture[] = [];
  for (const [number, leg] of legs.entries()) {
    const list = legTables[number]!;
    const fine = 1 << leg.depth;
    let serving = 0;
    for (let i = 0; i + 1 < list.length; i++) {
      const [a, b] = [list[i]!, list[i + 1]!];
      const parts = Math.max(1, Math.round(partsOf[number]![i]! / thin));
      const first = made.length;
      for (let part = 0; part <= parts; part++) made.push({ a: a.table, b: b.table, share: part / parts });
      for (; serving <= b.at * fine && leg.first + serving < count; serving++) {
        const t = (serving / fine - a.at) / (b.at - a.at);
        slots[leg.first + serving] = first + Math.round(t * parts);
      }
    }
    if (list.length === 1) {
      slots.fill(made.length, leg.first, leg.first + 1);
      made.push({ a: list[0]!.table, b: list[0]!.table, share: 0 });
    }
  }
  return { slots, tables: made };
}

/** A table between two built ones. */
export interface Mixture {
  readonly a: MomentTable;
  readonly b: MomentTable;
  readonly share: number;
}

/** The tables of a storm, and for each moment which of them serves it. */
export interface Serving {
  readonly slots: Int32Array;
  readonly tables: readonly Mixture[];
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

/** Whether the mean of two tables gives the one in their middle. */
function explains(a: MomentTable, b: MomentTable, middle: MomentTable, layout: Layout, maxWindMps: number): boolean {
  const mean = a.speed.map((value, k) => 0.5 * (value + b.speed[k]!));
  return farthestApart({ speed: mean }, middle, layout, maxWindMps) <= TOLERANCE_MPS[layout.harmonics > 2 ? 1 : 0];
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

/** A table at a share of its leg. */
export interface Built {
  readonly at: number;
  readonly table: MomentTable;
}
