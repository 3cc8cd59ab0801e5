// Four points at a time. `../twin-lanes.ts` does the same in plain JavaScript, bit for bit: every operation here is a
// single-precision one in the same order.
import { BASIS, EXTREMES, FADE, LEVELS, NEAR, NEED, QUAD } from './places';

// the rows of a table, as in table.ts
const CORE_X: f32 = 0.5;
const CORE_ROWS_PER_X: f32 = 64;
const SHIFT: i32 = 23 - 5;
const FIRST_WORD: i32 = ((127 - 1) << 5) - 32;
/** The last row of an octave: what comes after is spaced otherwise. */
const LAST_OF_OCTAVE: i32 = 31;
const FRACTION: i32 = (1 << SHIFT) - 1;
const FRACTION_SCALE: f32 = <f32>1 / <f32>(1 << SHIFT);

/**
 * Winds of the four points of {@link QUAD} at a moment.
 * @param frame the moment's frame: e0, e1, n0, n1, n2, V, R, table
 * @param east0, north0 coordinates of the first point
 */
export function sampleQuad(
  to: i32, frame: i32, east0: f64, north0: f64, table: i32, groups: i32, lastRow: i32,
): void {
  const zero = f32x4.splat(0);
  const stride: i32 = groups << 4;
  const x = v128.load(QUAD);
  const y = v128.load(QUAD, 16);
  const z = v128.load(QUAD, 32);
  const f = <usize>frame;
  const east = f32x4.add(f32x4.splat(<f32>east0), f32x4.add(
    f32x4.mul(x, f32x4.splat(<f32>load<f64>(f))), f32x4.mul(y, f32x4.splat(<f32>load<f64>(f, 8)))));
  const north = f32x4.add(f32x4.splat(<f32>north0), f32x4.add(f32x4.add(
    f32x4.mul(x, f32x4.splat(<f32>load<f64>(f, 16))), f32x4.mul(y, f32x4.splat(<f32>load<f64>(f, 24)))),
    f32x4.mul(z, f32x4.splat(<f32>load<f64>(f, 32)))));
  const s2 = f32x4.add(f32x4.mul(east, east), f32x4.mul(north, north));
  // row and share of the way to the next
  const core = f32x4.lt(s2, f32x4.splat(CORE_X));
  const evenly = f32x4.mul(s2, f32x4.splat(CORE_ROWS_PER_X));
  const coreRow = i32x4.trunc_sat_f32x4_s(evenly);
  const coreShare = f32x4.sub(evenly, f32x4.convert_i32x4_s(coreRow));
  const outerRow = i32x4.sub(i32x4.shr_s(s2, SHIFT), i32x4.splat(FIRST_WORD));
  const outerShare = f32x4.mul(
    f32x4.convert_i32x4_s(v128.and(s2, i32x4.splat(FRACTION))), f32x4.splat(FRACTION_SCALE));
  const row0 = v128.bitselect(coreRow, outerRow, core);
  const share0 = v128.bitselect(coreShare, outerShare, core);
  const beyond = i32x4.ge_s(row0, i32x4.splat(lastRow));
  // a parabola through three rows of one octave
  const turn = v128.andnot(
    i32x4.eq(v128.and(row0, i32x4.splat(LAST_OF_OCTAVE)), i32x4.splat(LAST_OF_OCTAVE)), beyond);
  const row = i32x4.add(i32x4.min_s(row0, i32x4.splat(lastRow)), turn);
  const share1 = v128.andnot(share0, beyond);
  const share = f32x4.add(share1, v128.and(turn, f32x4.splat(1)));
  const rest = f32x4.sub(f32x4.splat(2), share);
  const less = f32x4.sub(share, f32x4.splat(1));
  const w0 = f32x4.mul(f32x4.splat(-0.5), f32x4.mul(less, rest));
  const w1 = f32x4.mul(share, rest);
  const w2 = f32x4.mul(f32x4.splat(0.5), f32x4.mul(share, less));
  const p0 = <usize>(table + i32x4.extract_lane(row, 0) * stride);
  const p1 = <usize>(table + i32x4.extract_lane(row, 1) * stride);
  const p2 = <usize>(table + i32x4.extract_lane(row, 2) * stride);
  const p3 = <usize>(table + i32x4.extract_lane(row, 3) * stride);
  let value: v128;
  if (groups == 1) {
    const a = between(p0, 16, v128.shuffle<f32>(w0, w0, 0, 0, 0, 0), v128.shuffle<f32>(w1, w1, 0, 0, 0, 0), v128.shuffle<f32>(w2, w2, 0, 0, 0, 0));
    const b = between(p1, 16, v128.shuffle<f32>(w0, w0, 1, 1, 1, 1), v128.shuffle<f32>(w1, w1, 1, 1, 1, 1), v128.shuffle<f32>(w2, w2, 1, 1, 1, 1));
    const c = between(p2, 16, v128.shuffle<f32>(w0, w0, 2, 2, 2, 2), v128.shuffle<f32>(w1, w1, 2, 2, 2, 2), v128.shuffle<f32>(w2, w2, 2, 2, 2, 2));
    const d = between(p3, 16, v128.shuffle<f32>(w0, w0, 3, 3, 3, 3), v128.shuffle<f32>(w1, w1, 3, 3, 3, 3), v128.shuffle<f32>(w2, w2, 3, 3, 3, 3));
    const ab01 = v128.shuffle<f32>(a, b, 0, 4, 1, 5);
    const cd01 = v128.shuffle<f32>(c, d, 0, 4, 1, 5);
    const ab2 = v128.shuffle<f32>(a, b, 2, 6, 2, 6);
    const cd2 = v128.shuffle<f32>(c, d, 2, 6, 2, 6);
    const mean = v128.shuffle<f32>(ab01, cd01, 0, 1, 4, 5);
    const sine = v128.shuffle<f32>(ab01, cd01, 2, 3, 6, 7);
    const cosine = v128.shuffle<f32>(ab2, cd2, 0, 1, 4, 5);
    value = f32x4.add(f32x4.add(mean, f32x4.mul(east, sine)), f32x4.mul(north, cosine));
  } else {
    basis(east, north, s2, groups);
    value = zero;
    for (let g = 0; g < groups; g++) {
      const offset = <usize>g << 4;
      const a = between(p0 + offset, stride, v128.shuffle<f32>(w0, w0, 0, 0, 0, 0), v128.shuffle<f32>(w1, w1, 0, 0, 0, 0), v128.shuffle<f32>(w2, w2, 0, 0, 0, 0));
      const b = between(p1 + offset, stride, v128.shuffle<f32>(w0, w0, 1, 1, 1, 1), v128.shuffle<f32>(w1, w1, 1, 1, 1, 1), v128.shuffle<f32>(w2, w2, 1, 1, 1, 1));
      const c = between(p2 + offset, stride, v128.shuffle<f32>(w0, w0, 2, 2, 2, 2), v128.shuffle<f32>(w1, w1, 2, 2, 2, 2), v128.shuffle<f32>(w2, w2, 2, 2, 2, 2));
      const d = between(p3 + offset, stride, v128.shuffle<f32>(w0, w0, 3, 3, 3, 3), v128.shuffle<f32>(w1, w1, 3, 3, 3, 3), v128.shuffle<f32>(w2, w2, 3, 3, 3, 3));
      const ab01 = v128.shuffle<f32>(a, b, 0, 4, 1, 5);
      const cd01 = v128.shuffle<f32>(c, d, 0, 4, 1, 5);
      const ab23 = v128.shuffle<f32>(a, b, 2, 6, 3, 7);
      const cd23 = v128.shuffle<f32>(c, d, 2, 6, 3, 7);
      const from = BASIS + (g << 6);
      value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab01, cd01, 0, 1, 4, 5), v128.load(from)));
      value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab01, cd01, 2, 3, 6, 7), v128.load(from, 16)));
      value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab23, cd23, 0, 1, 4, 5), v128.load(from, 32)));
      value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab23, cd23, 2, 3, 6, 7), v128.load(from, 48)));
    }
  }
  let wind = f32x4.mul(f32x4.sqrt(f32x4.max(value, zero)), f32x4.splat(<f32>load<f64>(f, 40)));
  const rmax = <f32>load<f64>(f, 48);
  const squared = f32x4.mul(s2, f32x4.splat(rmax * rmax));
  const farthest = highest(squared);
  // the taper, from the arc that the sine gives: 3t² − 2t³
  if (farthest > load<f32>(FADE)) {
    const flat = f32x4.sqrt(squared);
    const arc = f32x4.add(flat, f32x4.mul(f32x4.mul(flat, squared), v128.load32_splat(FADE, 12)));
    const t0 = f32x4.mul(f32x4.sub(v128.load32_splat(FADE, 4), arc), v128.load32_splat(FADE, 8));
    const t = f32x4.min(f32x4.splat(1), f32x4.max(zero, t0));
    wind = f32x4.mul(wind, f32x4.mul(f32x4.mul(t, t), f32x4.sub(f32x4.splat(3), f32x4.add(t, t))));
  }
  v128.store(<usize>to, wind);
  v128.store(NEAR, f32x4.min(v128.load(NEAR), squared));
  store<f32>(EXTREMES, lowest(squared));
  store<f32>(EXTREMES, highest(wind), 4);
  store<f32>(EXTREMES, farthest, 8);
}

// @ts-ignore: decorator
@inline
function lowest(v: v128): f32 {
  const pairs = f32x4.min(v, v128.shuffle<f32>(v, v, 2, 3, 0, 1));
  return min<f32>(f32x4.extract_lane(pairs, 0), f32x4.extract_lane(pairs, 1));
}

// @ts-ignore: decorator
@inline
function highest(v: v128): f32 {
  const pairs = f32x4.max(v, v128.shuffle<f32>(v, v, 2, 3, 0, 1));
  return max<f32>(f32x4.extract_lane(pairs, 0), f32x4.extract_lane(pairs, 1));
}

// @ts-ignore: decorator
@inline
function between(row: usize, stride: i32, w0: v128, w1: v128, w2: v128): v128 {
  const next = row + <usize>stride;
  return f32x4.add(
    f32x4.add(f32x4.mul(w0, v128.load(row)), f32x4.mul(w1, v128.load(next))),
    f32x4.mul(w2, v128.load(next + <usize>stride)));
}

/** 1, s sin φ, s cos φ, s sin 2φ, s cos 2φ … of four points. */
function basis(east: v128, north: v128, s2: v128, groups: i32): void {
  const zero = f32x4.splat(0);
  const inverse = v128.bitselect(f32x4.div(f32x4.splat(1), f32x4.sqrt(s2)), zero, f32x4.gt(s2, zero));
  const c = f32x4.mul(north, inverse);
  const s = f32x4.mul(east, inverse);
  let e = east;
  let n = north;
  v128.store(BASIS, f32x4.splat(1));
  v128.store(BASIS, e, 16);
  v128.store(BASIS, n, 32);
  const columns = groups << 2;
  for (let k = 3; k < columns; k += 2) {
    const nextE = f32x4.add(f32x4.mul(e, c), f32x4.mul(n, s));
    n = f32x4.sub(f32x4.mul(n, c), f32x4.mul(e, s));
    e = nextE;
    const to = <usize>(BASIS + (k << 4));
    v128.store(to, e);
    v128.store(to, n, 16);
  }
}

/**
 * Which of four points may have a maximum in time about the middle of three moments that matters: higher than what the
 * point needs, or across the next threshold. The flanks' slopes, carried on, bound it.
 * @param ratio length of the step after the middle over that of the step before
 */
export function peaks(first: i32, middle: i32, last: i32, ratio: f64, margin: f64, thresholds: i32): i32 {
  const a = v128.load(<usize>first);
  const b = v128.load(<usize>middle);
  const c = v128.load(<usize>last);
  const peak = v128.and(f32x4.gt(b, a), f32x4.ge(b, c));
  if (!v128.any_true(peak)) return 0;
  const reach = f32x4.add(reachOf(f32x4.sub(b, a), f32x4.sub(b, c), ratio), f32x4.splat(<f32>margin));
  let need = v128.load(NEED);
  for (let h = 0; h < thresholds; h++) {
    const level = v128.load32_splat(<usize>(LEVELS + (h << 2)));
    need = f32x4.min(need, v128.bitselect(level, f32x4.splat(Infinity), f32x4.gt(level, b)));
  }
  return i32x4.bitmask(v128.and(peak, f32x4.gt(f32x4.add(b, reach), need)));
}

/** Which of four points may dip below a threshold about the middle of three moments. */
export function dips(first: i32, middle: i32, last: i32, ratio: f64, margin: f64, thresholds: i32): i32 {
  const a = v128.load(<usize>first);
  const b = v128.load(<usize>middle);
  const c = v128.load(<usize>last);
  const dip = v128.and(f32x4.le(b, a), f32x4.lt(b, c));
  if (!v128.any_true(dip)) return 0;
  const reach = f32x4.add(reachOf(f32x4.sub(a, b), f32x4.sub(c, b), ratio), f32x4.splat(<f32>margin));
  const least = f32x4.sub(b, reach);
  let across = f32x4.splat(0);
  for (let h = 0; h < thresholds; h++) {
    const level = v128.load32_splat(<usize>(LEVELS + (h << 2)));
    across = v128.or(across, v128.and(f32x4.ge(b, level), f32x4.lt(least, level)));
  }
  return i32x4.bitmask(v128.and(dip, across));
}

// @ts-ignore: decorator
@inline
function reachOf(before: v128, after: v128, ratio: f64): v128 {
  const r = <f32>ratio;
  return f32x4.max(f32x4.mul(before, f32x4.splat(r)), f32x4.mul(after, f32x4.splat(<f32>1 / r)));
}

/** Whether any of four winds comes near, by a share, to what its point has had or all of them may expect. */
export function busy(winds: i32, share: f64, expected: f64): boolean {
  const most = f32x4.max(v128.load(NEED), f32x4.splat(<f32>expected));
  return v128.any_true(f32x4.ge(v128.load(<usize>winds), f32x4.mul(most, f32x4.splat(<f32>share))));
}

/** Which thresholds the four points are at or above: bit 4h + lane. */
export function sides(winds: i32, thresholds: i32): i32 {
  const w = v128.load(<usize>winds);
  let bits = 0;
  for (let h = 0; h < thresholds; h++)
    bits |= i32x4.bitmask(f32x4.ge(w, v128.load32_splat(<usize>(LEVELS + (h << 2))))) << (h << 2);
  return bits;
}

/** Numbers on the parabola through those at `a` (share 0), `m` (½) and `b` (1), whole groups of four. */
export function mix(to: i32, a: i32, m: i32, b: i32, share: f64, count: i32): void {
  const wa = f32x4.splat(<f32>((1 - share) * (1 - 2 * share)));
  const wm = f32x4.splat(<f32>(4 * share * (1 - share)));
  const wb = f32x4.splat(<f32>(share * (2 * share - 1)));
  for (let k: usize = 0; k < <usize>(count << 2); k += 16) {
    const ends = f32x4.add(f32x4.mul(wa, v128.load(<usize>a + k)), f32x4.mul(wb, v128.load(<usize>b + k)));
    v128.store(<usize>to + k, f32x4.add(ends, f32x4.mul(wm, v128.load(<usize>m + k))));
  }
}
