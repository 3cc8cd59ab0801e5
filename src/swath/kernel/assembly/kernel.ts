// The hot loops of the swath on four cells at a time. `twin.ts` does the same in plain JavaScript, bit for bit: every
// operation here is a single-precision one in the same order. Pointers are byte offsets; arrays hold f32 and are padded
// to whole groups of four.

// the rows of a table, as in table.ts
const CORE_X: f32 = 0.5;
const CORE_ROWS_PER_X: f32 = 128;
const SHIFT: i32 = 23 - 6;
const FIRST_WORD: i32 = ((127 - 1) << 6) - 64;
const FRACTION: i32 = (1 << SHIFT) - 1;
const FRACTION_SCALE: f32 = <f32>1 / <f32>(1 << SHIFT);

/** Room for the products s·cos kφ and s·sin kφ of four cells: 1 + 2·10, padded. */
const BASIS: usize = memory.data(24 * 16, 16);

/**
 * Winds of cells at one moment.
 * @param cells x, y, z of the cells: three arrays of `pitch` bytes
 * @param table rows of `groups` × 4 floats
 */
export function sample(
  cells: usize, pitch: usize, quads: i32, table: usize, groups: i32, lastRow: i32,
  e0: f32, e1: f32, n0: f32, n1: f32, n2: f32, maxWind: f32, out: usize,
): void {
  const ve0 = f32x4.splat(e0);
  const ve1 = f32x4.splat(e1);
  const vn0 = f32x4.splat(n0);
  const vn1 = f32x4.splat(n1);
  const vn2 = f32x4.splat(n2);
  const vmax = f32x4.splat(maxWind);
  const zero = f32x4.splat(0);
  const stride: i32 = groups << 4;
  for (let q = 0; q < quads; q++) {
    const at = <usize>q << 4;
    const x = v128.load(cells + at);
    const y = v128.load(cells + pitch + at);
    const z = v128.load(cells + 2 * pitch + at);
    const east = f32x4.add(f32x4.mul(x, ve0), f32x4.mul(y, ve1));
    const north = f32x4.add(f32x4.add(f32x4.mul(x, vn0), f32x4.mul(y, vn1)), f32x4.mul(z, vn2));
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
    const row = i32x4.min_s(row0, i32x4.splat(lastRow));
    const share = v128.andnot(share0, i32x4.ge_s(row0, i32x4.splat(lastRow)));
    const p0 = table + <usize>(i32x4.extract_lane(row, 0) * stride);
    const p1 = table + <usize>(i32x4.extract_lane(row, 1) * stride);
    const p2 = table + <usize>(i32x4.extract_lane(row, 2) * stride);
    const p3 = table + <usize>(i32x4.extract_lane(row, 3) * stride);
    const t0 = f32x4.splat(f32x4.extract_lane(share, 0));
    const t1 = f32x4.splat(f32x4.extract_lane(share, 1));
    const t2 = f32x4.splat(f32x4.extract_lane(share, 2));
    const t3 = f32x4.splat(f32x4.extract_lane(share, 3));
    let value: v128;
    if (groups == 1) {
      const a = between(p0, 16, t0);
      const b = between(p1, 16, t1);
      const c = between(p2, 16, t2);
      const d = between(p3, 16, t3);
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
        const a = between(p0 + offset, stride, t0);
        const b = between(p1 + offset, stride, t1);
        const c = between(p2 + offset, stride, t2);
        const d = between(p3 + offset, stride, t3);
        const ab01 = v128.shuffle<f32>(a, b, 0, 4, 1, 5);
        const cd01 = v128.shuffle<f32>(c, d, 0, 4, 1, 5);
        const ab23 = v128.shuffle<f32>(a, b, 2, 6, 3, 7);
        const cd23 = v128.shuffle<f32>(c, d, 2, 6, 3, 7);
        const from = BASIS + (<usize>g << 6);
        value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab01, cd01, 0, 1, 4, 5), v128.load(from)));
        value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab01, cd01, 2, 3, 6, 7), v128.load(from, 16)));
        value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab23, cd23, 0, 1, 4, 5), v128.load(from, 32)));
        value = f32x4.add(value, f32x4.mul(v128.shuffle<f32>(ab23, cd23, 2, 3, 6, 7), v128.load(from, 48)));
      }
    }
    v128.store(out + at, f32x4.mul(f32x4.sqrt(f32x4.max(value, zero)), vmax));
  }
}

// @ts-ignore: decorator
@inline
function between(row: usize, stride: i32, t: v128): v128 {
  const a = v128.load(row);
  return f32x4.add(a, f32x4.mul(t, f32x4.sub(v128.load(row + <usize>stride), a)));
}

/** 1, s sin φ, s cos φ, s sin 2φ, s cos 2φ … of four cells. */
function basis(east: v128, north: v128, s2: v128, groups: i32): void {
  const zero = f32x4.splat(0);
  const inverse = v128.bitselect(f32x4.div(f32x4.splat(1), f32x4.sqrt(s2)), zero, f32x4.gt(s2, zero));
  const c = f32x4.mul(north, inverse);
  const s = f32x4.mul(east, inverse);
  let e = east;
  let n = north;
  v128.store(BASIS, f32x4.splat(1));
  v128.store(BASIS + 16, e);
  v128.store(BASIS + 32, n);
  const columns = groups << 2;
  for (let k = 3; k < columns; k += 2) {
    const nextE = f32x4.add(f32x4.mul(e, c), f32x4.mul(n, s));
    n = f32x4.sub(f32x4.mul(n, c), f32x4.mul(e, s));
    e = nextE;
    const to = BASIS + (<usize>k << 4);
    v128.store(to, e);
    v128.store(to, n, 16);
  }
}

/**
 * Local maxima in time of three moments that follow each other: the middle one where it is above the first and not below
 * the last. Of all that pass, the two highest are kept for each cell, by the vertex of their parabola.
 * @param state per cell: first estimate, first moment, second estimate, second moment; four arrays of `pitch` bytes
 * @param moment number of the middle moment; t0 < 0 < t2: the other two as seen from it
 * @param has0, has2 whether the first and the last moment exist; a missing one counts as lower
 */
export function maxima(
  first: usize, middle: usize, last: usize, state: usize, pitch: usize, quads: i32,
  moment: f32, t0: f32, t2: f32, has0: i32, has2: i32,
): void {
  const lowest = f32x4.splat(-1);
  const zero = f32x4.splat(0);
  const w0 = f32x4.splat(t0);
  const w2 = f32x4.splat(t2);
  const divisor = f32x4.splat(1 / (t0 * t2 * (t0 - t2)));
  const perT0 = f32x4.splat(1 / t0);
  const vmoment = f32x4.splat(moment);
  const both = has0 != 0 && has2 != 0;
  for (let q = 0; q < quads; q++) {
    const at = <usize>q << 4;
    const b = v128.load(middle + at);
    const a = has0 != 0 ? v128.load(first + at) : lowest;
    const c = has2 != 0 ? v128.load(last + at) : lowest;
    const peak = v128.and(f32x4.gt(b, a), f32x4.ge(b, c));
    if (!v128.any_true(peak)) continue;
    let estimate = b;
    let moments = vmoment;
    if (both) {
      const d0 = f32x4.sub(a, b);
      const d2 = f32x4.sub(c, b);
      const bend = f32x4.mul(f32x4.sub(f32x4.mul(d0, w2), f32x4.mul(d2, w0)), divisor);
      const slope = f32x4.mul(f32x4.sub(d0, f32x4.mul(bend, f32x4.mul(w0, w0))), perT0);
      const falls = f32x4.lt(bend, zero);
      const vertex0 = f32x4.div(slope, f32x4.mul(f32x4.splat(-2), bend));
      const vertex1 = f32x4.min(w2, f32x4.max(w0, vertex0));
      const vertex = v128.bitselect(vertex1, zero, falls);
      estimate = f32x4.add(b, f32x4.add(f32x4.mul(slope, vertex), f32x4.mul(bend, f32x4.mul(vertex, vertex))));
      estimate = v128.bitselect(estimate, b, falls);
      moments = f32x4.add(vmoment, vertex);
    }
    const bestAt = state + at;
    const best = v128.load(bestAt);
    const bestMoment = v128.load(bestAt + pitch);
    const second = v128.load(bestAt + 2 * pitch);
    const secondMoment = v128.load(bestAt + 3 * pitch);
    const wins = v128.and(peak, f32x4.gt(estimate, best));
    const follows = v128.andnot(v128.and(peak, f32x4.gt(estimate, second)), wins);
    v128.store(bestAt, v128.bitselect(estimate, best, wins));
    v128.store(bestAt + pitch, v128.bitselect(moments, bestMoment, wins));
    v128.store(bestAt + 2 * pitch, v128.bitselect(best, v128.bitselect(estimate, second, follows), wins));
    v128.store(bestAt + 3 * pitch, v128.bitselect(bestMoment, v128.bitselect(moments, secondMoment, follows), wins));
  }
}

/**
 * Adds the hours of the step from `a` to `b` in which the wind is at or above a threshold: the wind between them is the
 * parabola through the moment before, `a` and `b`, and a straight line where there is none before.
 * @param ratio length of the step before over that of this one
 */
export function addHours(
  first: usize, a: usize, b: usize, hours: usize, quads: i32, threshold: f32, stepHours: f32, ratio: f32, has0: i32,
): void {
  const one = f32x4.splat(1);
  const zero = f32x4.splat(0);
  const half = f32x4.splat(0.5);
  const vthreshold = f32x4.splat(threshold);
  const vstep = f32x4.splat(stepHours);
  const perRatio = f32x4.splat(has0 != 0 ? <f32>1 / ratio : 0);
  const perBoth = f32x4.splat(has0 != 0 ? <f32>1 / (<f32>1 + ratio) : 0);
  for (let q = 0; q < quads; q++) {
    const at = <usize>q << 4;
    const from = v128.load(a + at);
    const to = v128.load(b + at);
    const rise = f32x4.sub(to, from);
    // the wind at a share u of the step: from + rise·u + bend·u(u − 1)
    let bend = zero;
    if (has0 != 0)
      bend = f32x4.mul(f32x4.sub(rise, f32x4.mul(f32x4.sub(from, v128.load(first + at)), perRatio)), perBoth);
    const size = f32x4.mul(f32x4.abs(bend), half);
    const low = f32x4.sub(f32x4.min(from, to), size);
    const high = f32x4.add(f32x4.max(from, to), size);
    if (!v128.any_true(f32x4.ge(high, vthreshold))) continue;
    let share = one;
    if (v128.any_true(f32x4.lt(low, vthreshold))) {
      const fromAbove = f32x4.ge(from, vthreshold);
      const toAbove = f32x4.ge(to, vthreshold);
      const need = f32x4.sub(vthreshold, from);
      const slope = f32x4.sub(rise, bend);
      const four = f32x4.mul(f32x4.splat(4), f32x4.mul(bend, need));
      const inner = f32x4.add(f32x4.mul(slope, slope), four);
      const root = f32x4.sqrt(f32x4.max(inner, zero));
      const twice = f32x4.add(need, need);
      const up = f32x4.div(twice, f32x4.add(slope, root));
      const down = f32x4.div(twice, f32x4.sub(slope, root));
      const rising = f32x4.sub(one, clamped(up));
      const falling = clamped(down);
      // both ends on one side: a vertex between them may reach to the other side
      const vertex = f32x4.div(slope, f32x4.mul(f32x4.splat(-2), bend));
      const between = v128.and(v128.and(f32x4.gt(vertex, zero), f32x4.lt(vertex, one)), f32x4.gt(inner, zero));
      const across = v128.and(clamped(f32x4.div(root, f32x4.abs(bend))), between);
      const hump = v128.and(across, f32x4.lt(bend, zero));
      const dip = f32x4.sub(one, v128.and(across, f32x4.gt(bend, zero)));
      share = v128.bitselect(v128.bitselect(dip, falling, toAbove), v128.bitselect(rising, hump, toAbove), fromAbove);
    }
    v128.store(hours + at, f32x4.add(v128.load(hours + at), f32x4.mul(vstep, share)));
  }
}

// @ts-ignore: decorator
@inline
function clamped(v: v128): v128 {
  // pmin and pmax: not a number becomes 0
  return f32x4.pmin(f32x4.splat(1), f32x4.pmax(f32x4.splat(0), v));
}

/**
 * Wind of single cells, each at a moment of its own: speed (to check an estimate), parts east and north, (r/R)².
 * @param frames, speeds, winds per cell: where its frame (e0, e1, n0, n1, n2, V) and its two tables stand
 */
export function settle(
  cells: usize, pitch: usize, count: i32, frames: usize, speeds: usize, winds: usize,
  groups: i32, lastRow: i32, windHarmonics: i32, outSpeed: usize, outEast: usize, outNorth: usize, outX: usize,
): void {
  const stride: i32 = groups << 4;
  const part: i32 = (1 + 2 * windHarmonics) << 2;
  for (let i = 0; i < count; i++) {
    const at = <usize>i << 2;
    const frame = <usize>load<i32>(frames + at);
    const x = load<f32>(cells + at);
    const y = load<f32>(cells + pitch + at);
    const z = load<f32>(cells + 2 * pitch + at);
    const east: f32 = x * load<f32>(frame) + y * load<f32>(frame, 4);
    const north: f32 = x * load<f32>(frame, 8) + y * load<f32>(frame, 12) + z * load<f32>(frame, 16);
    const maxWind = load<f32>(frame, 20);
    const s2: f32 = east * east + north * north;
    let row: i32;
    let t: f32;
    if (s2 < CORE_X) {
      t = s2 * CORE_ROWS_PER_X;
      row = <i32>t;
      t -= <f32>row;
    } else {
      const w = reinterpret<i32>(s2);
      row = (w >> SHIFT) - FIRST_WORD;
      t = <f32>(w & FRACTION) * FRACTION_SCALE;
      if (row >= lastRow) {
        row = lastRow;
        t = 0;
      }
    }
    let inverse: f32 = 0;
    if (s2 > 0) inverse = <f32>1 / sqrt<f32>(s2);
    const c: f32 = north * inverse;
    const s: f32 = east * inverse;
    // squared speed
    let p = <usize>load<i32>(speeds + at) + <usize>(row * stride);
    let value = column(p, stride, t);
    let e = east;
    let n = north;
    for (let k = 1; k < groups << 2; k += 2) {
      value += e * column(p + (<usize>k << 2), stride, t);
      if (k + 1 < groups << 2) value += n * column(p + (<usize>(k + 1) << 2), stride, t);
      const nextE: f32 = e * c + n * s;
      n = n * c - e * s;
      e = nextE;
    }
    store<f32>(outSpeed + at, sqrt<f32>(max<f32>(value, 0)) * maxWind);
    // parts of the wind
    p = <usize>load<i32>(winds + at) + <usize>(row * 2 * part);
    const q = p + <usize>part;
    let u = column(p, 2 * part, t);
    let v = column(q, 2 * part, t);
    e = east;
    n = north;
    for (let k = 1; k <= windHarmonics; k++) {
      const o = (<usize>k << 3) - 4;
      u += e * column(p + o, 2 * part, t) + n * column(p + o + 4, 2 * part, t);
      v += e * column(q + o, 2 * part, t) + n * column(q + o + 4, 2 * part, t);
      const nextE: f32 = e * c + n * s;
      n = n * c - e * s;
      e = nextE;
    }
    store<f32>(outX + at, s2);
    store<f32>(outEast + at, u * maxWind);
    store<f32>(outNorth + at, v * maxWind);
  }
}

// @ts-ignore: decorator
@inline
function column(at: usize, stride: i32, t: f32): f32 {
  const a = load<f32>(at);
  return a + t * (load<f32>(at + <usize>stride) - a);
}
