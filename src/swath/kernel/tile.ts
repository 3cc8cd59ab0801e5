import { EARTH_RADIUS_M } from '../../earth.js';
import type { Arithmetic } from './arithmetic.js';
import type { Moments } from './moments.js';
import { FIRST_EXPONENT, type Layout, type MomentTable, ROWS_PER_OCTAVE_BITS } from './table.js';
import { MOST_CELLS_OF_TILE } from './tile-size.js';
import type { Timeline } from './timeline.js';

/** A step moves the storm by at most this share of the distance from it (or of its radius of maximum wind). */
const STEP_SHARE = 0.12;
/** A step changes the maximum wind by at most this, m/s, and R by at most this share. */
const STEP_CHANGE_MPS = 2;
const STEP_GROWTH = 0.06;
/** What the tables' rounding may hide, m/s. */
const ROUNDING_MPS = 0.02;
/** A parabola is trusted when the wind at its vertex is this near to it, m/s. */
const PARABOLA_MPS = 0.01;
/** A second maximum in time within this share of the first is looked at too. */
const RIVAL_SHARE = 0.95;
/** Longest step, s. */
const LONGEST_STEP_S = 3600;

/** The cells of a tile, and what was found for each. The arrays of cells and hours are the kernel's. */
export interface Tile {
  /** cells in use */
  count: number;
  /** peak wind, m/s; 0 for none */
  readonly windMps: Float32Array;
  /** its time, s after the timeline's start */
  readonly peakS: Float64Array;
  /** moment of the timeline nearest to it */
  readonly peakIndex: Int32Array;
  /** its parts in the frame at the storm's centre */
  readonly eastMps: Float32Array;
  readonly northMps: Float32Array;
}

export function newTile(): Tile {
  const floats = (): Float32Array => new Float32Array(MOST_CELLS_OF_TILE);
  return {
    count: 0,
    windMps: floats(),
    peakS: new Float64Array(MOST_CELLS_OF_TILE),
    peakIndex: new Int32Array(MOST_CELLS_OF_TILE),
    eastMps: floats(),
    northMps: floats(),
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

/** Where a tile lies. */
export interface TileBounds {
  readonly centre: readonly [number, number, number];
  /** every cell is within this distance of the centre, m */
  readonly radiusM: number;
  /** unit vectors of four corners; every cell lies between them */
  readonly corners: Float64Array;
}

/** A storm on its way past tiles. */
export interface TileRunner {
  /** fills the tile's results from its cells; false where the storm never comes near */
  readonly run: (tile: Tile, bounds: TileBounds) => boolean;
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
  arithmetic: Arithmetic,
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
  const margin: number[] = [];
  const cornerMps: number[] = [];
  const broken: boolean[] = [];
  const wanted: number[] = [];
  const rivals = new Int32Array(5);
  const found = { peak: 0, index: 0 };
  const startMs = timeline.timeMs(0);

  return { run };

  function run(tile: Tile, { centre, radiusM, corners }: TileBounds): boolean {
    walk(centre, radiusM, corners);
    if (walkIndex.length === 0) return false;
    const { arrays } = arithmetic;
    const quads = (tile.count + 3) >> 2;
    // cells beyond the last of a group are copies of none: the earth's centre, where there is no wind
    for (let i = tile.count; i < 4 * quads; i++) {
      arrays.x[i] = 0;
      arrays.y[i] = 0;
      arrays.z[i] = 0;
    }
    for (const part of arrays.state) part.fill(-1, 0, 4 * quads);
    if (options.hours) for (let h = 0; h < thresholdsMps.length; h++) arrays.hours[h]!.fill(0, 0, 4 * quads);
    choose();
    evaluate(tile, quads);
    finish(tile);
    return true;
  }

  /** Walks the storm's way with steps that follow its distance. */
  function walk(centre: readonly [number, number, number], tileM: number, corners: Float64Array): void {
    walkIndex.length = 0;
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
        slack[k] = gradient * (tileM + moveM) + change;
        broken[k] = gap;
        gap = false;
        const bend = 1.1 * (distanceM + reachM < taperM ? table.bent : table.bentWithTaper)[row]!;
        margin[k] = Math.min(bend * (0.5 * tileM * tileM + 0.125 * moveM * moveM), slack[k]!) + ROUNDING_MPS;
        for (let q = 0; q < 4; q++) {
          const [cx, cy, cz] = [corners[3 * q]!, corners[3 * q + 1]!, corners[3 * q + 2]!];
          const squared = squaredAt(
            table,
            layout,
            cx * frame[3]! + cy * frame[4]!,
            cx * frame[5]! + cy * frame[6]! + cz * frame[7]!,
          );
          cornerMps[4 * k + q] = Math.sqrt(Math.max(0, squared)) * frame[9]!;
        }
      }
      if (index === end) return;
      const local = index - leg.first;
      const full = 1 << leg.depth;
      // the longest dyadic step that fits, starts on its own grid and ends within the leg
      let step = 1;
      while (step * 2 * fineS <= stepS && (local & (step * 2 - 1)) === 0 && local + step * 2 <= full) step *= 2;
      index += step;
    }
  }

  /**
   * Marks the moments at which the cells are evaluated: 1 for the peak, 2 for the hours. A moment holds no peak when at
   * another one, the strongest at the centre or at a corner, all four corners have more wind by more than the margins:
   * what a cell between the corners may differ from their interpolation, and what may rise between two steps.
   */
  function choose(): void {
    const count = walkIndex.length;
    rivals.fill(0);
    for (let k = 0; k < count; k++) {
      wanted[k] = 0;
      if (centreMps[k]! > centreMps[rivals[4]!]!) rivals[4] = k;
      for (let q = 0; q < 4; q++) if (cornerMps[4 * k + q]! > cornerMps[4 * rivals[q]! + q]!) rivals[q] = k;
    }
    for (let k = 0; k < count; k++) {
      const joined = k + 1 < count && !broken[k + 1];
      if (!beaten(k)) {
        for (let j = Math.max(0, k - 1); j <= Math.min(count - 1, k + 1); j++) wanted[j]! |= 1;
      }
      const strongest = joined ? Math.max(centreMps[k]!, centreMps[k + 1]!) : centreMps[k]!;
      const upper = strongest + (joined ? Math.max(slack[k]!, slack[k + 1]!) : slack[k]!);
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

  function beaten(k: number): boolean {
    for (const rival of rivals) {
      const m = margin[k]! + margin[rival]!;
      const [i, j] = [4 * k, 4 * rival];
      if (
        cornerMps[i]! + m < cornerMps[j]! &&
        cornerMps[i + 1]! + m < cornerMps[j + 1]! &&
        cornerMps[i + 2]! + m < cornerMps[j + 2]! &&
        cornerMps[i + 3]! + m < cornerMps[j + 3]!
      )
        return true;
    }
    return false;
  }

  function evaluate(tile: Tile, quads: number): void {
    const groups = layout.speedStride / 4;
    const lastRow = layout.rows - 2;
    // buffers of the two moments before; −1 for none
    let [first, middle, middleK] = [-1, -1, -1];
    for (let k = 0; k < walkIndex.length; k++) {
      const joined = k > 0 && !broken[k];
      const stepHours = joined ? (walkMs[k]! - walkMs[k - 1]!) / 3_600_000 : 0;
      if (wanted[k] === 0) {
        if (options.hours && joined) wholeHours(tile, k, stepHours);
        continue;
      }
      const index = walkIndex[k]!;
      const to = first !== 0 && middle !== 0 ? 0 : first !== 1 && middle !== 1 ? 1 : 2;
      arithmetic.sample(quads, moments.tableAt(index).speed, groups, lastRow, timeline.frame(index), to);
      const follows = joined && middleK === k - 1;
      if (middle >= 0) passed(quads, first, middle, follows ? to : -1, middleK);
      if (options.hours && joined) {
        if (follows) {
          for (let h = 0; h < thresholdsMps.length; h++)
            arithmetic.addHours(quads, middle, to, h, thresholdsMps[h]!, stepHours);
        } else wholeHours(tile, k, stepHours);
      }
      first = follows ? middle : -1;
      middle = to;
      middleK = k;
    }
    if (middle >= 0) passed(quads, first, middle, -1, middleK);
  }

  /** Looks for local maxima at a moment whose neighbours are known. */
  function passed(quads: number, first: number, middle: number, last: number, k: number): void {
    const index = walkIndex[k]!;
    const t0 = first >= 0 ? walkIndex[k - 1]! - index : -1;
    const t2 = last >= 0 ? walkIndex[k + 1]! - index : 1;
    arithmetic.maxima(quads, first, middle, last, index, t0, t2);
  }

  /** A step in which no threshold lies between the bounds: all cells are above it or none is. */
  function wholeHours(tile: Tile, k: number, stepHours: number): void {
    const lower = Math.min(centreMps[k - 1]! - slack[k - 1]!, centreMps[k]! - slack[k]!);
    for (let h = 0; h < thresholdsMps.length; h++) {
      if (lower < thresholdsMps[h]!) continue;
      const hours = arithmetic.arrays.hours[h]!;
      for (let i = 0; i < tile.count; i++) hours[i]! += stepHours;
    }
  }

  /** Wind of one cell at a moment. */
  function speedAt(i: number, index: number): number {
    const frame = timeline.frame(index);
    const east = arithmetic.arrays.x[i]! * frame[3]! + arithmetic.arrays.y[i]! * frame[4]!;
    const north =
      arithmetic.arrays.x[i]! * frame[5]! + arithmetic.arrays.y[i]! * frame[6]! + arithmetic.arrays.z[i]! * frame[7]!;
    return Math.sqrt(Math.max(0, squaredAt(moments.tableAt(index), layout, east, north))) * frame[9]!;
  }

  /** The peak between the moments that were evaluated, and the wind's direction then. */
  function finish(tile: Tile): void {
    const [best, bestMoment, second, secondMoment] = arithmetic.arrays.state;
    for (let i = 0; i < tile.count; i++) {
      if (!(best[i]! > 0)) {
        tile.windMps[i] = 0;
        continue;
      }
      settle(i, best[i]!, bestMoment[i]!);
      const { peak, index } = found;
      // the estimates may be off where the wind has a corner: then the second may be the first
      if (second[i]! > RIVAL_SHARE * best[i]!) {
        settle(i, second[i]!, secondMoment[i]!);
        if (found.peak <= peak) {
          found.peak = peak;
          found.index = index;
        }
      }
      const nearest = Math.round(found.index);
      tile.windMps[i] = found.peak;
      tile.peakS[i] = (timeline.timeMs(found.index) - startMs) / 1000;
      tile.peakIndex[i] = nearest;
      direction(tile, i, nearest);
    }
  }

  /** A peak that was estimated by a parabola, checked where it was put, and searched for where it does not hold. */
  function settle(i: number, estimate: number, moment: number): void {
    const near = Math.round(moment);
    if (Math.abs(speedAt(i, near) - estimate) <= PARABOLA_MPS) {
      found.peak = estimate;
      found.index = moment;
      return;
    }
    let k = 0;
    while (k + 1 < walkIndex.length && walkIndex[k + 1]! <= near) k++;
    const low = broken[k] ? walkIndex[k]! : walkIndex[k - 1]!;
    const next = k + 1 < walkIndex.length && !broken[k + 1] ? k + 1 : k;
    const high = next + 1 < walkIndex.length && !broken[next + 1] ? walkIndex[next + 1]! : walkIndex[next]!;
    search(i, low, near, high);
  }

  /** Halves the wider side around the best moment until neighbours are left; a parabola through the last three. */
  function search(i: number, from: number, at: number, to: number): void {
    let [low, middle, high] = [from, at, to];
    let [before, peak, after] = [speedAt(i, low), speedAt(i, middle), speedAt(i, high)];
    while (high - middle > 1 || middle - low > 1) {
      const right = high - middle > middle - low;
      const probe = right ? (middle + high) >> 1 : (low + middle) >> 1;
      const value = speedAt(i, probe);
      if (value > peak) {
        if (right) [low, before] = [middle, peak];
        else [high, after] = [middle, peak];
        [middle, peak] = [probe, value];
      } else if (right) [high, after] = [probe, value];
      else [low, before] = [probe, value];
    }
    found.peak = peak;
    found.index = middle;
    if (before > peak || after > peak) {
      found.peak = Math.max(before, after);
      found.index = before > after ? low : high;
      return;
    }
    const bend = 0.5 * (before + after) - peak;
    if (low === middle || high === middle || !(bend < -1e-9)) return;
    const slope = 0.5 * (after - before);
    const rise = (-0.25 * slope * slope) / bend;
    // a corner has no vertex above it
    if (rise > 0.25 * Math.min(peak - before, peak - after) + 0.02) return;
    found.peak = peak + rise;
    found.index = middle - (0.5 * slope) / bend;
  }

  function direction(tile: Tile, i: number, index: number): void {
    const frame = timeline.frame(index);
    const { wind } = moments.tableAt(index);
    const [x, y, z] = [arithmetic.arrays.x[i]!, arithmetic.arrays.y[i]!, arithmetic.arrays.z[i]!];
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
