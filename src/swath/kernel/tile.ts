import { EARTH_RADIUS_M } from '../../earth.js';
import type { Moments } from './moments.js';
import { FIRST_EXPONENT, type Layout, type MomentTable, ROWS_PER_OCTAVE_BITS } from './table.js';
import type { Timeline } from './timeline.js';

/** Most cells of one tile. */
export const MOST_CELLS_OF_TILE = 256;
/** A step moves the storm by at most this share of the distance from it (or of its radius of maximum wind). */
const STEP_SHARE = 0.12;
/** A step changes the maximum wind by at most this, m/s, and R by at most this share. */
const STEP_CHANGE_MPS = 2;
const STEP_GROWTH = 0.06;
/** Longest step, s. */
const LONGEST_STEP_S = 3600;

/** The cells of a tile as unit vectors, and what was found for each. */
export interface Tile {
  /** cells in use */
  count: number;
  readonly x: Float32Array;
  readonly y: Float32Array;
  readonly z: Float32Array;
  /** results: peak wind m/s, its time in seconds after the timeline's start, its direction as east and north parts */
  readonly windMps: Float32Array;
  readonly peakS: Float64Array;
  readonly eastMps: Float32Array;
  readonly northMps: Float32Array;
  /** moment of the timeline nearest to the peak */
  readonly peakIndex: Int32Array;
  /** hours above each threshold */
  readonly hours: readonly Float32Array[];
}

export function newTile(thresholds: number): Tile {
  const floats = (): Float32Array => new Float32Array(MOST_CELLS_OF_TILE);
  return {
    count: 0,
    x: floats(),
    y: floats(),
    z: floats(),
    windMps: floats(),
    peakS: new Float64Array(MOST_CELLS_OF_TILE),
    eastMps: floats(),
    northMps: floats(),
    peakIndex: new Int32Array(MOST_CELLS_OF_TILE),
    hours: Array.from({ length: thresholds }, floats),
  };
}

const bits = new Float32Array(1);
const word = new Int32Array(bits.buffer);
const FIRST_X = 2 ** FIRST_EXPONENT;
const SHIFT = 23 - ROWS_PER_OCTAVE_BITS;
const FIRST_WORD = ((127 + FIRST_EXPONENT) << ROWS_PER_OCTAVE_BITS) - 1;
const FRACTION = (1 << SHIFT) - 1;
const FRACTION_SCALE = 1 / (1 << SHIFT);

/** The table row below x; the share of the way to the next is left in `share`. */
let share = 0;
function rowOf(x: number, last: number): number {
  if (x < FIRST_X) {
    share = x * (1 / FIRST_X);
    return 0;
  }
  bits[0] = x;
  const w = word[0]!;
  const row = (w >> SHIFT) - FIRST_WORD;
  if (row >= last) {
    share = 0;
    return last;
  }
  share = (w & FRACTION) * FRACTION_SCALE;
  return row;
}

/** Squared speed over V² at scaled coordinates. */
function squaredAt(table: MomentTable, layout: Layout, east: number, north: number): number {
  const { speed } = table;
  const { speedStride: stride, harmonics } = layout;
  const x = east * east + north * north;
  const row = rowOf(x, layout.rows - 2);
  const t = share;
  const a = row * stride;
  const b = a + stride;
  let value =
    speed[a]! +
    t * (speed[b]! - speed[a]!) +
    east * (speed[a + 1]! + t * (speed[b + 1]! - speed[a + 1]!)) +
    north * (speed[a + 2]! + t * (speed[b + 2]! - speed[a + 2]!));
  if (harmonics > 1) {
    const inverse = x > 0 ? 1 / Math.sqrt(x) : 0;
    const c = north * inverse;
    const s = east * inverse;
    let [e, n] = [east, north];
    for (let k = 2; k <= harmonics; k++) {
      const nextE = e * c + n * s;
      n = n * c - e * s;
      e = nextE;
      const i = a + 2 * k - 1;
      const j = b + 2 * k - 1;
      value +=
        e * (speed[i]! + t * (speed[j]! - speed[i]!)) + n * (speed[i + 1]! + t * (speed[j + 1]! - speed[i + 1]!));
    }
  }
  return value;
}

/** A storm on its way past tiles. */
export interface TileRunner {
  /** fills the tile's results from its cells; `centre` and `radiusM` bound them */
  readonly run: (tile: Tile, centre: readonly [number, number, number], radiusM: number) => boolean;
}

/**
 * Runs tiles through a storm's life.
 *
 * For each tile the storm's way is walked with steps that follow its distance; at every step the wind at the tile's centre
 * and a bound of the wind's gradient from there outward give an upper bound for every cell of the tile until the next
 * step, and a lower bound of every cell's peak. Steps whose upper bound stays below the lower bound cannot hold a peak and
 * are skipped for the cells; one step on either side of the others is kept, so that the peak between steps comes from a
 * parabola through three. Steps in which a threshold lies between the bounds are evaluated for the hours.
 */
export function tileRunner(
  timeline: Timeline,
  moments: Moments,
  options: { outerRadiusM: number; thresholdsMps: readonly number[]; hours: boolean },
): TileRunner {
  const { layout } = moments;
  const { outerRadiusM, thresholdsMps } = options;
  const taperM = 0.9 * outerRadiusM;
  const cosFar = Math.cos(Math.min(Math.PI, (outerRadiusM * 1.001) / EARTH_RADIUS_M));
  // the walk: moments, wind at the centre, gradient bound, spread of the wind over the tile until the next moment
  const walkIndex: number[] = [];
  const walkMs: number[] = [];
  const centreMps: number[] = [];
  const slack: number[] = [];
  const within: number[] = [];
  const broken: boolean[] = [];
  const wanted: number[] = [];
  const n = MOST_CELLS_OF_TILE;
  const best = new Float64Array(n);
  const bestAt = new Int32Array(n);
  const before = new Float64Array(n);
  const after = new Float64Array(n);
  const last = new Float64Array(n);
  const now = new Float64Array(n);
  const startMs = timeline.timeMs(0);

  return { run };

  function run(tile: Tile, centre: readonly [number, number, number], radiusM: number): boolean {
    tile.windMps.fill(0, 0, tile.count);
    tile.peakS.fill(Number.NaN, 0, tile.count);
    tile.eastMps.fill(0, 0, tile.count);
    tile.northMps.fill(0, 0, tile.count);
    for (const hours of tile.hours) hours.fill(0, 0, tile.count);
    const lowest = walk(centre, radiusM);
    if (walkIndex.length === 0) return false;
    choose(lowest);
    evaluate(tile);
    finish(tile);
    return true;
  }

  /** Walks the storm's way; returns the lower bound of every cell's peak. */
  function walk(centre: readonly [number, number, number], tileM: number): number {
    walkIndex.length = 0;
    let lowest = 0;
    let index = 0;
    let gap = true;
    let number = 0;
    const end = timeline.count - 1;
    for (;;) {
      while (number + 1 < timeline.legs.length && timeline.legs[number + 1]!.first <= index) number++;
      const leg = timeline.legs[number]!;
      const frame = timeline.frame(index);
      const up = centre[0] * frame[0]! + centre[1] * frame[1]! + centre[2] * frame[2]!;
      const east = centre[0] * frame[3]! + centre[1] * frame[4]!;
      const north = centre[0] * frame[5]! + centre[1] * frame[6]! + centre[2] * frame[7]!;
      const rmaxM = frame[8]!;
      const flat = Math.sqrt(east * east + north * north);
      const distanceM =
        up > 0.95
          ? flat * rmaxM * (1 + (flat * rmaxM * flat * rmaxM) / (6 * EARTH_RADIUS_M ** 2))
          : EARTH_RADIUS_M * Math.atan2((flat * rmaxM) / EARTH_RADIUS_M, up);
      const fineS = (leg.endMs - leg.startMs) / 1000 / (1 << leg.depth);
      const outside = distanceM - tileM - outerRadiusM;
      let stepS: number;
      if (outside > 0) {
        stepS = leg.speedMps > 0 ? outside / leg.speedMps : Number.POSITIVE_INFINITY;
        gap = true;
      } else {
        const near = Math.max(distanceM - tileM, 0.8 * rmaxM);
        stepS = Math.min(
          LONGEST_STEP_S,
          leg.speedMps > 0 ? (STEP_SHARE * near) / leg.speedMps : LONGEST_STEP_S,
          STEP_CHANGE_MPS / leg.changeMps2,
          STEP_GROWTH / leg.growthPerS,
        );
        const table = moments.tableAt(index);
        const wind =
          distanceM < outerRadiusM && up > cosFar
            ? Math.sqrt(Math.max(0, squaredAt(table, layout, east, north))) * frame[9]!
            : 0;
        const moveM = Math.min(stepS, fineS * (1 << leg.depth)) * leg.speedMps;
        const reachM = tileM + moveM;
        const s = Math.max(0, distanceM - reachM) / rmaxM;
        const row = rowOf(s * s, layout.rows - 2);
        const bounds = distanceM + reachM < taperM ? table.steepest : table.steepestWithTaper;
        const gradient = 1.1 * bounds[row]!;
        const change = stepS * (leg.changeMps2 * (wind / frame[9]!) + gradient * distanceM * leg.growthPerS);
        walkIndex.push(index);
        const k = walkIndex.length - 1;
        walkMs[k] = leg.startMs + ((leg.endMs - leg.startMs) * (index - leg.first)) / (1 << leg.depth);
        centreMps[k] = wind;
        within[k] = gradient * tileM;
        slack[k] = gradient * (tileM + moveM) + change;
        broken[k] = gap;
        gap = false;
        lowest = Math.max(lowest, wind - gradient * tileM);
      }
      if (index === end) return lowest;
      const local = index - leg.first;
      const full = 1 << leg.depth;
      // the longest dyadic step that fits, starts on its own grid and ends within the leg
      let step = 1;
      while (step * 2 * fineS <= stepS && (local & (step * 2 - 1)) === 0 && local + step * 2 <= full) step *= 2;
      index += step;
    }
  }

  /** Marks the moments at which the cells are evaluated: 1 for the peak, 2 for the hours. */
  function choose(lowest: number): void {
    const count = walkIndex.length;
    for (let k = 0; k < count; k++) wanted[k] = 0;
    for (let k = 0; k < count; k++) {
      const joined = k + 1 < count && !broken[k + 1];
      const strongest = joined ? Math.max(centreMps[k]!, centreMps[k + 1]!) : centreMps[k]!;
      const upper = strongest + (joined ? Math.max(slack[k]!, slack[k + 1]!) : slack[k]!);
      if (upper >= lowest && upper > 0) {
        for (let j = Math.max(0, k - 1); j <= Math.min(count - 1, k + 2); j++) wanted[j]! |= 1;
      }
      if (options.hours && joined) {
        const lower = Math.min(centreMps[k]! - slack[k]!, centreMps[k + 1]! - slack[k + 1]!);
        for (const threshold of thresholdsMps) {
          if (upper >= threshold && lower < threshold) {
            wanted[k]! |= 2;
            wanted[k + 1]! |= 2;
            break;
          }
        }
      }
    }
  }

  function evaluate(tile: Tile): void {
    const { count } = tile;
    best.fill(-1, 0, count);
    bestAt.fill(-1, 0, count);
    before.fill(-1, 0, count);
    after.fill(-1, 0, count);
    let lastEvaluated = -2;
    for (let k = 0; k < walkIndex.length; k++) {
      const joined = k > 0 && !broken[k];
      const stepHours = joined ? (walkMs[k]! - walkMs[k - 1]!) / 3_600_000 : 0;
      if (wanted[k] === 0) {
        if (options.hours && joined) wholeHours(tile, k, stepHours);
        continue;
      }
      speeds(tile, walkIndex[k]!);
      const follows = joined && lastEvaluated === k - 1;
      for (let i = 0; i < count; i++) {
        const value = now[i]!;
        if (value > best[i]!) {
          best[i] = value;
          bestAt[i] = k;
          before[i] = follows ? last[i]! : -1;
          after[i] = -1;
        } else if (follows && bestAt[i] === k - 1) {
          after[i] = value;
        }
      }
      if (options.hours && joined) {
        if (follows) {
          for (let h = 0; h < thresholdsMps.length; h++) {
            const hours = tile.hours[h]!;
            const threshold = thresholdsMps[h]!;
            for (let i = 0; i < count; i++) {
              const [low, high] = now[i]! < last[i]! ? [now[i]!, last[i]!] : [last[i]!, now[i]!];
              hours[i]! += stepHours * Math.min(1, Math.max(0, (high - threshold) / Math.max(1e-6, high - low)));
            }
          }
        } else wholeHours(tile, k, stepHours);
      }
      last.set(now.subarray(0, count));
      lastEvaluated = k;
    }
  }

  /** A step in which no threshold lies between the bounds: all cells are above it or none is. */
  function wholeHours(tile: Tile, k: number, stepHours: number): void {
    const lower = Math.min(centreMps[k - 1]! - slack[k - 1]!, centreMps[k]! - slack[k]!);
    for (let h = 0; h < thresholdsMps.length; h++) {
      if (lower < thresholdsMps[h]!) continue;
      const hours = tile.hours[h]!;
      for (let i = 0; i < tile.count; i++) hours[i]! += stepHours;
    }
  }

  /** Winds of all cells of the tile at a moment, into `now`. */
  function speeds(tile: Tile, index: number): void {
    const frame = timeline.frame(index);
    const table = moments.tableAt(index);
    const maxWind = frame[9]!;
    const [e0, e1, n0, n1, n2] = [frame[3]!, frame[4]!, frame[5]!, frame[6]!, frame[7]!];
    const { x, y, z, count } = tile;
    for (let i = 0; i < count; i++) {
      const east = x[i]! * e0 + y[i]! * e1;
      const north = x[i]! * n0 + y[i]! * n1 + z[i]! * n2;
      now[i] = Math.sqrt(Math.max(0, squaredAt(table, layout, east, north))) * maxWind;
    }
  }

  /** Peak between moments by a parabola, and the wind's direction at the nearest moment. */
  function finish(tile: Tile): void {
    for (let i = 0; i < tile.count; i++) {
      const k = bestAt[i]!;
      if (k < 0 || best[i]! <= 0) continue;
      let peak = best[i]!;
      let ms = walkMs[k]!;
      const index = walkIndex[k]!;
      const leg = timeline.legOf(index);
      if (before[i]! >= 0 && after[i]! >= 0 && index !== leg.first) {
        const [t0, t2] = [walkMs[k - 1]! - ms, walkMs[k + 1]! - ms];
        const d0 = before[i]! - peak;
        const d2 = after[i]! - peak;
        // peak + b t + c t² through the three
        const c = (d0 * t2 - d2 * t0) / (t0 * t2 * (t0 - t2));
        const b = (d0 - c * t0 * t0) / t0;
        if (c < 0) {
          const vertex = Math.min(t2, Math.max(t0, -b / (2 * c)));
          peak += b * vertex + c * vertex * vertex;
          ms += vertex;
        }
      }
      tile.windMps[i] = peak;
      tile.peakS[i] = (ms - startMs) / 1000;
      direction(tile, i, ms, leg);
    }
  }

  function direction(
    tile: Tile,
    i: number,
    ms: number,
    near: { startMs: number; endMs: number; first: number; depth: number },
  ): void {
    const leg = ms < near.startMs ? timeline.legOf(near.first - 1) : near;
    const span = leg.endMs - leg.startMs;
    const index =
      span === 0
        ? leg.first
        : leg.first +
          Math.min(
            (1 << leg.depth) - (ms < near.startMs ? 1 : 0),
            Math.round(((ms - leg.startMs) / span) * (1 << leg.depth)),
          );
    tile.peakIndex[i] = index;
    const frame = timeline.frame(index);
    const { wind } = moments.tableAt(index);
    const [x, y, z] = [tile.x[i]!, tile.y[i]!, tile.z[i]!];
    const east = x * frame[3]! + y * frame[4]!;
    const north = x * frame[5]! + y * frame[6]! + z * frame[7]!;
    const s2 = east * east + north * north;
    const row = rowOf(s2, layout.rows - 2);
    const t = share;
    const { windStride, windHarmonics } = layout;
    const parts = windStride / 2;
    const inverse = s2 > 0 ? 1 / Math.sqrt(s2) : 0;
    const [c, s] = [north * inverse, east * inverse];
    for (let part = 0; part < 2; part++) {
      const a = row * windStride + part * parts;
      const b = a + windStride;
      let value = wind[a]! + t * (wind[b]! - wind[a]!);
      let [e, n] = [east, north];
      for (let k = 1; k <= windHarmonics; k++) {
        const p = a + 2 * k - 1;
        const q = b + 2 * k - 1;
        value += e * (wind[p]! + t * (wind[q]! - wind[p]!)) + n * (wind[p + 1]! + t * (wind[q + 1]! - wind[p + 1]!));
        const nextE = e * c + n * s;
        n = n * c - e * s;
        e = nextE;
      }
      (part === 0 ? tile.eastMps : tile.northMps)[i] = value * frame[9]!;
    }
  }
}
