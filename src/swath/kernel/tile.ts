import { EARTH_RADIUS_M } from '../../earth.js';
import type { Arithmetic } from './arithmetic.js';
import type { Moments, Placed } from './moments.js';
import { type Layout, type MomentTable, rowOf, rowShare } from './table.js';
import { MOST_CELLS_OF_TILE } from './tile-size.js';
import type { Leg, Timeline } from './timeline.js';

/** A step moves the storm by at most this share of the distance from it (or of its radius of maximum wind). */
const STEP_SHARE = 0.15;
/** Steps are longer by this factor while the wind is weak against what the tile has had and far from every threshold. */
const IDLE_FACTOR = 2.5;
const IDLE_SHARE = 0.6;
/** Steps through the taper leave out this much of a wind that bends, m/s. */
const TAPER_MPS = 0.08;
/** Below this wind, m/s, nothing is promised: there margins are not kept. */
const CALM_MPS = 7;
/** A step changes a tile's wind by at most this where the maximum wind changes, m/s. */
const STEP_CHANGE_MPS = 2;
/** Longest step where the tile has the maximum wind, s; longer where it has less. */
const LONGEST_S = 2000;
/** Next to the centre steps follow this share of the radius of maximum wind. */
const CORE_SHARE = 0.8;
/** What the tables' rounding may hide, m/s. */
const ROUNDING_MPS = 0.02;
/** A parabola is trusted when the wind at its vertex is this near to it, m/s. */
const PARABOLA_MPS = 0.01;
/** Farther off than this, the peak is searched for, m/s. */
const SEARCH_MPS = 0.03;
/** Farther off than this, both sides of the vertex are looked at, m/s. */
const DOUBT_MPS = 0.004;
/** A second maximum in time within this share of the first is looked at too. */
const RIVAL_SHARE = 0.95;
/** (r/R)² at which winds have corners: the radius of maximum wind, and 1.2 of it, where the inflow stops turning [Sobey1977]. */
const CORNERS_X = [1, 1.44] as const;
/** (r/R)² about them within which the wind of a peak may have a corner in time. */
const CORNER_X = [0.4, 3] as const;
/** What a corner may hide between moments, m/s. */
const CORNER_MPS = 0.4;
/** Moments about a corner at which it is checked, as a share of its bracket. */
const CORNER_STEP = 0.05;
/** Moments between the neighbours of an estimate at which a search looks first. */
const SEARCH_MOMENTS = 10;
/** A search ends when its neighbours are this near, m/s, or nearer than this share of a fine step. */
const SEARCHED_MPS = 0.001;
const SEARCHED_STEP = 0.005;

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

/** Squared speed over V² at scaled coordinates. */
function squaredAt(table: Pick<MomentTable, 'speed'>, layout: Layout, east: number, north: number): number {
  const { speed } = table;
  const { speedStride: stride, harmonics } = layout;
  const x = east * east + north * north;
  const row = rowOf(x, layout.rows - 2);
  const t = rowShare;
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
  const lowestThreshold = options.hours
    ? Math.min(...thresholdsMps, Number.POSITIVE_INFINITY)
    : Number.POSITIVE_INFINITY;
  const groups = layout.speedStride / 4;
  const lastRow = layout.rows - 2;
  // the walk: moments, winds at the four corners and the centre, what the tile's winds may differ by until the next moment
  let capacity = 512;
  let count = 0;
  let calm = false;
  let walkIndex = new Int32Array(capacity);
  let walkMs = new Float64Array(capacity);
  let winds = new Float64Array(5 * capacity);
  let slack = new Float64Array(capacity);
  let margin = new Float64Array(capacity);
  let broken = new Uint8Array(capacity);
  let wanted = new Uint8Array(capacity);
  const rivals = new Int32Array(5);
  const found = { peak: 0, index: 0 };
  let [low, high] = [0, 0];
  const looked = new Float64Array(SEARCH_MOMENTS + 1);
  const startMs = timeline.timeMs(0);

  return { run };

  function run(tile: Tile, bounds: TileBounds): boolean {
    walk(bounds);
    if (count === 0) return false;
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
  function walk({ centre, radiusM: tileM, corners }: TileBounds): void {
    count = 0;
    const [px, py, pz, wind] = arithmetic.arrays.probe;
    const c0 = centre[0];
    const c1 = centre[1];
    const c2 = centre[2];
    for (let q = 0; q < 8; q++) {
      px[q] = q < 4 ? corners[3 * q]! : c0;
      py[q] = q < 4 ? corners[3 * q + 1]! : c1;
      pz[q] = q < 4 ? corners[3 * q + 2]! : c2;
    }
    let index = 0;
    let gap = true;
    let strongest = 0;
    calm = true;
    const end = timeline.count - 1;
    for (;;) {
      const leg = timeline.legs[timeline.legNumber[index]!]!;
      const frame = timeline.frame(index);
      const rmaxM = frame[8]!;
      const up = c0 * frame[0]! + c1 * frame[1]! + c2 * frame[2]!;
      const east = c0 * frame[3]! + c1 * frame[4]!;
      const north = c0 * frame[5]! + c1 * frame[6]! + c2 * frame[7]!;
      const flatM = Math.sqrt(east * east + north * north) * rmaxM;
      const distanceM =
        up > 0.95
          ? flatM * (1 + (flatM * flatM) / (6 * EARTH_RADIUS_M ** 2))
          : EARTH_RADIUS_M * Math.atan2(flatM / EARTH_RADIUS_M, up);
      const outside = distanceM - tileM - outerRadiusM;
      let stepS: number;
      if (outside > 0) {
        stepS = leg.speedMps > 0 ? outside / leg.speedMps : Number.POSITIVE_INFINITY;
        gap = true;
      } else {
        if (count === capacity) grow();
        const near = Math.max(distanceM - tileM, CORE_SHARE * rmaxM);
        const table = moments.tableAt(index);
        arithmetic.probe(table.speed, groups, lastRow, frame);
        strongest = Math.max(strongest, wind[4]!);
        const weight = Math.max(0.1, wind[4]! / frame[9]!);
        const mayIdle = wind[4]! < IDLE_SHARE * strongest;
        let moveM: number;
        let bend: number;
        let spread: number;
        let stepShare = mayIdle ? STEP_SHARE * IDLE_FACTOR : STEP_SHARE;
        for (;;) {
          stepS = Math.min(
            leg.longestS,
            (stepShare * near) / leg.speedMps,
            STEP_CHANGE_MPS / (leg.changeMps2 * weight),
            LONGEST_S / weight,
          );
          if (distanceM + tileM + stepS * leg.speedMps > taperM)
            stepS = Math.min(stepS, taperStepS(table, distanceM, tileM, leg, rmaxM));
          moveM = stepS * leg.speedMps;
          const reachM = tileM + moveM;
          const s = distanceM > reachM ? (distanceM - reachM) / rmaxM : 0;
          const row = rowOf(s * s, lastRow);
          const inside = distanceM + reachM < taperM;
          const gradient = 1.1 * (inside ? table.steepest : table.steepestWithTaper)[row]!;
          bend = 1.1 * (inside ? table.bent : table.bentWithTaper)[row]!;
          const change = stepS * (leg.changeMps2 * (wind[4]! / frame[9]!) + gradient * distanceM * leg.growthPerS);
          spread = gradient * reachM + change;
          // hours want the crossing of a threshold at short steps
          if (stepShare === STEP_SHARE || wind[4]! + spread < lowestThreshold) break;
          stepShare = STEP_SHARE;
        }
        const k = count++;
        walkIndex[k] = index;
        walkMs[k] = leg.startMs + (index - leg.first) * leg.fineMs;
        winds[5 * k] = wind[0]!;
        winds[5 * k + 1] = wind[1]!;
        winds[5 * k + 2] = wind[2]!;
        winds[5 * k + 3] = wind[3]!;
        winds[5 * k + 4] = wind[4]!;
        slack[k] = spread;
        margin[k] = Math.min(bend * (0.5 * tileM * tileM + 0.125 * moveM * moveM), spread) + ROUNDING_MPS;
        calm &&= wind[4]! + spread < CALM_MPS;
        broken[k] = gap ? 1 : 0;
        gap = false;
      }
      if (index === end) return;
      // two significant bits: so that tiles share moments
      const room = leg.first + (1 << leg.depth) - index;
      const fine = (stepS * 1000) / leg.fineMs;
      if (fine >= room) index += room;
      else if (!(fine >= 4)) index += Math.max(1, Math.floor(fine));
      else {
        const unit = 1 << (29 - Math.clz32(fine));
        index = leg.first + ((Math.floor((index - leg.first + fine) / unit) * unit) | 0);
      }
    }
  }

  /** The step in which the wind bends by less than {@link TAPER_MPS} on its way through the taper. */
  function taperStepS(table: Placed, distanceM: number, tileM: number, leg: Leg, rmaxM: number): number {
    const s = Math.max(0, Math.min(distanceM - tileM, 0.99 * taperM)) / rmaxM;
    const bend = table.bentWithTaper[rowOf(s * s, lastRow)]!;
    return Math.max(0.01 * outerRadiusM, Math.sqrt((8 * TAPER_MPS) / bend)) / leg.speedMps;
  }

  function grow(): void {
    capacity *= 2;
    walkIndex = longer(walkIndex, Int32Array, 1);
    walkMs = longer(walkMs, Float64Array, 1);
    winds = longer(winds, Float64Array, 5);
    slack = longer(slack, Float64Array, 1);
    margin = longer(margin, Float64Array, 1);
    broken = longer(broken, Uint8Array, 1);
    wanted = longer(wanted, Uint8Array, 1);
  }

  function longer<T extends Int32Array | Float64Array | Uint8Array>(
    old: T,
    kind: new (length: number) => T,
    each: number,
  ): T {
    const made = new kind(capacity * each);
    made.set(old);
    return made;
  }

  /**
   * Marks the moments at which the cells are evaluated: 1 for the peak, 2 for the hours. A moment holds no peak when at
   * another one, the strongest at the centre or at a corner, all four corners have more wind by more than the margins:
   * what a cell between the corners may differ from their interpolation, and what may rise between two steps.
   */
  function choose(): void {
    rivals.fill(0);
    for (let k = 0; k < count; k++) {
      wanted[k] = 0;
      for (let q = 0; q < 5; q++) if (winds[5 * k + q]! > winds[5 * rivals[q]! + q]!) rivals[q] = k;
    }
    let strongest = 0;
    for (let q = 0; q < 5; q++) strongest = Math.max(strongest, winds[5 * rivals[q]! + q]!);
    const weak = strongest + margin[rivals[4]!]! < CALM_MPS;
    for (let k = 0; k < count; k++) {
      if (weak ? k === rivals[4] : !beaten(k)) {
        if (k > 0) wanted[k - 1]! |= 1;
        wanted[k]! |= 1;
        if (k + 1 < count) wanted[k + 1]! |= 1;
      }
      if (!options.hours || k + 1 === count || broken[k + 1] === 1) continue;
      const [a, b] = [winds[5 * k + 4]!, winds[5 * k + 9]!];
      const upper = Math.max(a, b) + Math.max(slack[k]!, slack[k + 1]!);
      const lower = Math.min(a - slack[k]!, b - slack[k + 1]!);
      for (let h = 0; h < thresholdsMps.length; h++) {
        if (upper >= thresholdsMps[h]! && lower < thresholdsMps[h]!) {
          // the moment before, or after, tells how the wind bends
          if (cornerAt(k)) {
            if (k + 2 < count && broken[k + 2] === 0) wanted[k + 2]! |= 2;
          } else if (k > 0 && broken[k] === 0) wanted[k - 1]! |= 2;
          wanted[k]! |= 2;
          wanted[k + 1]! |= 2;
          break;
        }
      }
    }
  }

  function beaten(k: number): boolean {
    const i = 5 * k;
    for (let r = 0; r < 5; r++) {
      const rival = rivals[r]!;
      const m = calm ? ROUNDING_MPS : margin[k]! + margin[rival]!;
      const j = 5 * rival;
      if (
        winds[i]! + m < winds[j]! &&
        winds[i + 1]! + m < winds[j + 1]! &&
        winds[i + 2]! + m < winds[j + 2]! &&
        winds[i + 3]! + m < winds[j + 3]!
      )
        return true;
    }
    return false;
  }

  function evaluate(tile: Tile, quads: number): void {
    // buffers of the two moments before; −1 for none
    let [first, middle, middleK] = [-1, -1, -1];
    // the step from `first` to `middle` starts at a corner in time: the moment after it is to tell how the wind bends
    let waiting = false;
    for (let k = 0; k < count; k++) {
      const joined = k > 0 && broken[k] === 0;
      const follows = joined && wanted[k] !== 0 && middleK === k - 1;
      if (waiting && !follows) {
        addHours(quads, -1, first, middle, middleK);
        waiting = false;
      }
      if (wanted[k] === 0) {
        if (options.hours && joined) wholeHours(tile, k);
        continue;
      }
      const index = walkIndex[k]!;
      const to = first !== 0 && middle !== 0 ? 0 : first !== 1 && middle !== 1 ? 1 : 2;
      arithmetic.sample(quads, moments.tableAt(index).speed, groups, lastRow, timeline.frame(index), to);
      if (middle >= 0) passed(quads, first, middle, follows ? to : -1, middleK);
      if (options.hours && joined) {
        if (!follows) wholeHours(tile, k);
        else {
          if (waiting) addHours(quads, to, middle, first, k - 1, stepS(k) / stepS(k - 1));
          waiting = cornerAt(k - 1);
          if (!waiting) addHours(quads, first, middle, to, k, first >= 0 ? stepS(k - 1) / stepS(k) : 0);
        }
      }
      first = follows ? middle : -1;
      middle = to;
      middleK = k;
    }
    if (waiting) addHours(quads, -1, first, middle, middleK);
    if (middle >= 0) passed(quads, first, middle, -1, middleK);
  }

  /** Whether the motion turns at another rate from a moment of the walk. */
  function cornerAt(k: number): boolean {
    const index = walkIndex[k]!;
    return timeline.legs[timeline.legNumber[index]!]!.first === index;
  }

  /** Length of the step that ends at a moment of the walk, s. */
  function stepS(k: number): number {
    return 0.001 * (walkMs[k]! - walkMs[k - 1]!);
  }

  /** Adds the hours of the step that ends at the `k`th moment; `beside` lies on the side of `from`, −1 for none. */
  function addHours(quads: number, beside: number, from: number, to: number, k: number, ratio = 0): void {
    const stepHours = stepS(k) / 3600;
    for (let slot = 0; slot < thresholdsMps.length; slot++)
      arithmetic.addHours(quads, beside, from, to, { slot, thresholdMps: thresholdsMps[slot]!, stepHours, ratio });
  }

  /** Looks for local maxima at a moment whose neighbours are known. */
  function passed(quads: number, first: number, middle: number, last: number, k: number): void {
    const index = walkIndex[k]!;
    const t0 = first >= 0 ? walkIndex[k - 1]! - index : -1;
    const t2 = last >= 0 ? walkIndex[k + 1]! - index : 1;
    arithmetic.maxima(quads, first, middle, last, index, t0, t2);
  }

  /** A step in which no threshold lies between the bounds: all cells are above it or none is. */
  function wholeHours(tile: Tile, k: number): void {
    const stepHours = stepS(k) / 3600;
    const lower = Math.min(winds[5 * k - 1]! - slack[k - 1]!, winds[5 * k + 4]! - slack[k]!);
    for (let h = 0; h < thresholdsMps.length; h++) {
      if (lower < thresholdsMps[h]!) continue;
      const hours = arithmetic.arrays.hours[h]!;
      for (let i = 0; i < tile.count; i++) hours[i]! += stepHours;
    }
  }

  /** Wind of one cell at a moment or between two. */
  function speedAt(i: number, moment: number): number {
    const index = Math.floor(moment);
    const a = timeline.frame(index);
    const w = moment - index;
    const b = w > 0 ? timeline.frame(index + 1) : a;
    const { x, y, z } = arithmetic.arrays;
    const east = x[i]! * (a[3]! + w * (b[3]! - a[3]!)) + y[i]! * (a[4]! + w * (b[4]! - a[4]!));
    const north =
      x[i]! * (a[5]! + w * (b[5]! - a[5]!)) +
      y[i]! * (a[6]! + w * (b[6]! - a[6]!)) +
      z[i]! * (a[7]! + w * (b[7]! - a[7]!));
    const squared = squaredAt(moments.tableAt(Math.round(moment)), layout, east, north);
    return Math.sqrt(Math.max(0, squared)) * (a[9]! + w * (b[9]! - a[9]!));
  }

  /** The peak between the moments that were evaluated, checked where its parabola put it, and the wind's direction then. */
  function finish(tile: Tile): void {
    const { arrays } = arithmetic;
    const [best, bestMoment, second, secondMoment] = arrays.state;
    for (let i = 0; i < tile.count; i++) {
      const nearest = best[i]! > 0 ? Math.round(bestMoment[i]!) : 0;
      tile.peakIndex[i] = nearest;
      moments.place(i, nearest);
    }
    arithmetic.settle(tile.count, groups, lastRow, layout.windHarmonics);
    const [real, , , squared] = arrays.settled;
    let moved = false;
    for (let i = 0; i < tile.count; i++) {
      tile.windMps[i] = 0;
      if (!(best[i]! > 0)) continue;
      const off = Math.abs(real[i]! - best[i]!);
      found.peak = off <= PARABOLA_MPS ? best[i]! : real[i]!;
      found.index = bestMoment[i]!;
      if (best[i]! < CALM_MPS) found.peak = best[i]!;
      else if (off > SEARCH_MPS) search(i, bestMoment[i]!);
      else {
        if (off > DOUBT_MPS) doubt(i, bestMoment[i]!);
        if (squared[i]! > CORNER_X[0] && squared[i]! < CORNER_X[1]) corners(i, bestMoment[i]!);
      }
      // estimates are off where the wind has a corner: the second may be the first
      if (second[i]! > RIVAL_SHARE * found.peak && second[i]! > CALM_MPS) rival(i, second[i]!, secondMoment[i]!);
      tile.windMps[i] = found.peak;
      // a parabola over a corner may have counted a wind that was never there
      if (options.hours)
        for (let h = 0; h < thresholdsMps.length; h++) if (found.peak < thresholdsMps[h]!) arrays.hours[h]![i] = 0;
      tile.peakS[i] = (timeline.timeMs(found.index) - startMs) / 1000;
      const nearest = Math.round(found.index);
      if (nearest === tile.peakIndex[i]) continue;
      tile.peakIndex[i] = nearest;
      moments.place(i, nearest);
      moved = true;
    }
    if (moved) arithmetic.settle(tile.count, groups, lastRow, layout.windHarmonics);
    const [, east, north] = arrays.settled;
    tile.eastMps.set(east.subarray(0, tile.count));
    tile.northMps.set(north.subarray(0, tile.count));
  }

  /** The peak at another local maximum, where it is higher than the one that was found. */
  function rival(i: number, estimate: number, moment: number): void {
    const { peak } = found;
    const wind = speedAt(i, moment);
    // by as much as its estimate is off it may be off itself
    const x = squaredRatio(i, moment);
    const cornered = x > CORNER_X[0] && x < CORNER_X[1] ? CORNER_MPS : 0;
    const highest = Math.max(wind, estimate) + Math.abs(wind - estimate) + ROUNDING_MPS;
    if (highest >= peak) searchOn(i, moment);
    else if (highest + cornered >= peak) corners(i, moment);
  }

  /** Moments of the walk on both sides of an estimate. */
  function bracket(moment: number): void {
    const near = Math.round(moment);
    let [k, above] = [0, count];
    while (above - k > 1) {
      const middle = (k + above) >> 1;
      if (walkIndex[middle]! <= near) k = middle;
      else above = middle;
    }
    low = k === 0 || broken[k] === 1 ? walkIndex[k]! : walkIndex[k - 1]!;
    const next = k + 1 < count && broken[k + 1] === 0 ? k + 1 : k;
    high = next + 1 < count && broken[next + 1] === 0 ? walkIndex[next + 1]! : walkIndex[next]!;
  }

  /** Looks on both sides of an estimate: near a corner in time a parabola may agree with the wind below the peak. */
  function doubt(i: number, moment: number): void {
    bracket(moment);
    const before = speedAt(i, Math.round(moment - (moment - low) / 3));
    const after = speedAt(i, Math.round(moment + (high - moment) / 3));
    if (Math.max(before, after) > found.peak) searchOn(i, moment);
  }

  /** Looks at the moments about an estimate at which a corner of the profile passes. */
  function corners(i: number, moment: number): void {
    bracket(moment);
    const [from, to] = [low, high];
    const [a, b, c] = [squaredRatio(i, from), squaredRatio(i, moment), squaredRatio(i, to)];
    // (r/R)² is close to a parabola in time: it may touch a corner between two moments
    let [vertex, lowest] = [-1, 0];
    if (from < moment && moment < to) {
      const bend =
        ((a - b) * (to - moment) - (c - b) * (from - moment)) / ((from - moment) * (to - moment) * (from - to));
      const slope = (a - b) / (from - moment) - bend * (from - moment);
      vertex = moment - (0.5 * slope) / bend;
      if (vertex > from && vertex < to) lowest = squaredRatio(i, vertex);
      else vertex = -1;
    }
    for (const x of CORNERS_X) {
      if (a < x !== b < x) passing(i, x, { from, a, to: moment, b });
      if (b < x !== c < x) passing(i, x, { from: moment, a: b, to, b: c });
      if (vertex < 0 || a < x !== b < x || b < x !== c < x || lowest < x === a < x) continue;
      passing(i, x, { from, a, to: vertex, b: lowest });
      passing(i, x, { from: vertex, a: lowest, to, b: c });
    }
  }

  /** A corner at x passes between two moments with (r/R)² of a and b: the wind then, and whether it is a peak there. */
  function passing(i: number, x: number, between: { from: number; a: number; to: number; b: number }): void {
    const { from, to } = between;
    const [a, b] = [between.a - x, between.b - x];
    let at = from + ((to - from) * a) / (a - b);
    const off = squaredRatio(i, at) - x;
    // one more step of the secant
    if (off < 0 === a < 0) at = off === b ? at : at + ((to - at) * off) / (off - b);
    else at = from + ((at - from) * a) / (a - off);
    const wind = speedAt(i, at);
    if (wind <= found.peak) {
      // a hollow there may part the peak that was found from a higher one
      if (wind < found.peak - CORNER_MPS) return;
      const beside = Math.max(speedAt(i, 0.5 * (from + at)), speedAt(i, 0.5 * (at + to)));
      if (beside > found.peak - ROUNDING_MPS) searchOn(i, at);
      return;
    }
    found.peak = wind;
    found.index = at;
    const d = CORNER_STEP * (to - from);
    if (Math.max(speedAt(i, Math.max(low, at - d)), speedAt(i, Math.min(high, at + d))) <= wind + SEARCHED_MPS) return;
    searchOn(i, at);
  }

  /** Searches about a moment for a higher peak than the one that was found. */
  function searchOn(i: number, moment: number): void {
    const [from, to] = [low, high];
    const { peak, index } = found;
    search(i, moment);
    if (found.peak < peak) {
      found.peak = peak;
      found.index = index;
    }
    [low, high] = [from, to];
  }

  /** (r/R)² of a cell at a moment. */
  function squaredRatio(i: number, moment: number): number {
    const index = Math.floor(moment);
    const a = timeline.frame(index);
    const w = moment - index;
    const b = w > 0 ? timeline.frame(index + 1) : a;
    const { x, y, z } = arithmetic.arrays;
    const east = x[i]! * (a[3]! + w * (b[3]! - a[3]!)) + y[i]! * (a[4]! + w * (b[4]! - a[4]!));
    const north =
      x[i]! * (a[5]! + w * (b[5]! - a[5]!)) +
      y[i]! * (a[6]! + w * (b[6]! - a[6]!)) +
      z[i]! * (a[7]! + w * (b[7]! - a[7]!));
    return east * east + north * north;
  }

  /** The highest moment around an estimate, between the neighbours that the walk has. */
  function search(i: number, moment: number): void {
    bracket(moment);
    // corners and close double peaks: look at moments between first, then around the two highest
    const x = squaredRatio(i, moment);
    const parts = x > CORNER_X[0] && x < CORNER_X[1] ? SEARCH_MOMENTS : SEARCH_MOMENTS / 2;
    const step = (high - low) / parts;
    for (let m = 0; m <= parts; m++) looked[m] = speedAt(i, low + m * step);
    let [one, two] = [-1, -1];
    for (let m = 0; m <= parts; m++) {
      if ((m > 0 && looked[m - 1]! > looked[m]!) || (m < parts && looked[m + 1]! >= looked[m]!)) continue;
      if (one < 0 || looked[m]! > looked[one]!) [one, two] = [m, one];
      else if (two < 0 || looked[m]! > looked[two]!) two = m;
    }
    if (one < 0) one = 0;
    const from = low;
    around(i, from, step, one, parts);
    if (two < 0 || looked[two]! < looked[one]! - CORNER_MPS) return;
    const { peak, index } = found;
    around(i, from, step, two, parts);
    if (found.peak > peak) return;
    found.peak = peak;
    found.index = index;
  }

  function around(i: number, first: number, step: number, m: number, parts: number): void {
    const from = first + Math.max(0, m - 1) * step;
    const to = first + Math.min(parts, m + 1) * step;
    halve(i, from, first + m * step, to);
  }

  /** Halves the wider side around the best moment until its neighbours are as high; then a parabola through the three. */
  function halve(i: number, from: number, at: number, to: number): void {
    let [low, middle, high] = [from, at, to];
    let [before, peak, after] = [speedAt(i, low), speedAt(i, middle), speedAt(i, high)];
    for (let n = 0; n < 60; n++) {
      if (peak - Math.min(before, after) < SEARCHED_MPS || high - low < SEARCHED_STEP) break;
      const right = high - middle > middle - low;
      const probe = right ? 0.5 * (middle + high) : 0.5 * (low + middle);
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
    const [t0, t2] = [low - middle, high - middle];
    if (!(t0 < 0 && t2 > 0)) return;
    const bend = ((before - peak) * t2 - (after - peak) * t0) / (t0 * t2 * (t0 - t2));
    const slope = (before - peak - bend * t0 * t0) / t0;
    if (bend < 0) found.index = middle + Math.max(t0, Math.min(t2, (-0.5 * slope) / bend));
  }
}
