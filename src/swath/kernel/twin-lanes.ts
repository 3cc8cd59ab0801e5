import { BASIS, EXTREMES, FADE, LEVELS, NEAR, NEED, QUAD } from './places.js';
import { bitsOf, f32At, f64At, setF32 } from './twin-memory.js';

/** Four points at a time, as `assembly/lanes.ts` does them: every operation rounds to single precision, in the same order. */
const { fround } = Math;
const CORE_X = 0.5;
const CORE_ROWS_PER_X = 64;
const SHIFT = 18;
const FIRST_WORD = (126 << 5) - 32;
const LAST_OF_OCTAVE = 31;
const FRACTION = (1 << SHIFT) - 1;
const FRACTION_SCALE = 1 / (1 << SHIFT);

export function sampleQuad(
  to: number,
  frame: number,
  east0: number,
  north0: number,
  table: number,
  groups: number,
  lastRow: number,
): void {
  const [e0, e1, n0, n1, n2, maxWind, rmax] = [0, 8, 16, 24, 32, 40, 48].map((at) => fround(f64At(frame + at))) as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const rmax2 = fround(rmax * rmax);
  const [first, second] = [fround(east0), fround(north0)];
  const stride = groups << 4;
  let least = Number.POSITIVE_INFINITY;
  let farthest = 0;
  for (let i = 0; i < 4; i++) {
    const x = f32At(QUAD + 4 * i);
    const y = f32At(QUAD + 16 + 4 * i);
    const z = f32At(QUAD + 32 + 4 * i);
    const east = fround(first + fround(fround(x * e0) + fround(y * e1)));
    const north = fround(second + fround(fround(fround(x * n0) + fround(y * n1)) + fround(z * n2)));
    const s2 = fround(fround(east * east) + fround(north * north));
    let row: number;
    let t: number;
    if (s2 < CORE_X) {
      const evenly = fround(s2 * CORE_ROWS_PER_X);
      row = Math.trunc(evenly);
      t = fround(evenly - row);
    } else {
      const w = bitsOf(s2);
      row = (w >> SHIFT) - FIRST_WORD;
      t = (w & FRACTION) * FRACTION_SCALE;
    }
    if (row >= lastRow) {
      row = lastRow;
      t = 0;
    } else if ((row & LAST_OF_OCTAVE) === LAST_OF_OCTAVE) {
      row -= 1;
      t = fround(t + 1);
    }
    const rest = fround(2 - t);
    const less = fround(t - 1);
    const w0 = fround(-0.5 * fround(less * rest));
    const w1 = fround(t * rest);
    const w2 = fround(0.5 * fround(t * less));
    const at = table + row * stride;
    const column = (k: number): number =>
      fround(
        fround(fround(w0 * f32At(at + k)) + fround(w1 * f32At(at + stride + k))) +
          fround(w2 * f32At(at + 2 * stride + k)),
      );
    let value: number;
    if (groups === 1) {
      value = fround(fround(column(0) + fround(east * column(4))) + fround(north * column(8)));
    } else {
      basis(east, north, s2, groups);
      value = 0;
      for (let k = 0; k < stride; k += 4) value = fround(value + fround(column(k) * f32At(BASIS + k)));
    }
    setF32(to + 4 * i, fround(fround(Math.sqrt(Math.max(value, 0))) * maxWind));
    const squared = fround(s2 * rmax2);
    distances[i] = squared;
    if (squared < f32At(NEAR + 4 * i)) setF32(NEAR + 4 * i, squared);
    least = Math.min(least, squared);
    farthest = Math.max(farthest, squared);
  }
  let most = 0;
  for (let i = 0; i < 4; i++) {
    if (farthest > f32At(FADE)) setF32(to + 4 * i, fround(f32At(to + 4 * i) * faded(distances[i]!)));
    most = Math.max(most, f32At(to + 4 * i));
  }
  setF32(EXTREMES, least);
  setF32(EXTREMES + 4, most);
  setF32(EXTREMES + 8, farthest);
}

const distances = new Float32Array(4);

/** The share that the taper leaves. */
function faded(squared: number): number {
  const flat = fround(Math.sqrt(squared));
  const arc = fround(flat + fround(fround(flat * squared) * f32At(FADE + 12)));
  const t = Math.min(1, Math.max(0, fround(fround(f32At(FADE + 4) - arc) * f32At(FADE + 8))));
  return fround(fround(t * t) * fround(3 - fround(t + t)));
}

/** 1, s sin φ, s cos φ, s sin 2φ, s cos 2φ … of a point. */
function basis(east: number, north: number, s2: number, groups: number): void {
  const inverse = s2 > 0 ? fround(1 / fround(Math.sqrt(s2))) : 0;
  const c = fround(north * inverse);
  const s = fround(east * inverse);
  let e = east;
  let n = north;
  setF32(BASIS, 1);
  setF32(BASIS + 4, e);
  setF32(BASIS + 8, n);
  const columns = groups << 2;
  for (let k = 3; k < columns; k += 2) {
    const nextE = fround(fround(e * c) + fround(n * s));
    n = fround(fround(n * c) - fround(e * s));
    e = nextE;
    setF32(BASIS + 4 * k, e);
    setF32(BASIS + 4 * k + 4, n);
  }
}

export function peaks(
  first: number,
  middle: number,
  last: number,
  ratio: number,
  margin: number,
  thresholds: number,
): number {
  let bits = 0;
  for (let i = 0; i < 4; i++) {
    const [a, b, c] = [f32At(first + 4 * i), f32At(middle + 4 * i), f32At(last + 4 * i)];
    if (!(b > a && b >= c)) continue;
    const reach = fround(reachOf(fround(b - a), fround(b - c), ratio) + fround(margin));
    let need = f32At(NEED + 4 * i);
    for (let h = 0; h < thresholds; h++) {
      const level = f32At(LEVELS + 4 * h);
      if (level > b) need = Math.min(need, level);
    }
    if (fround(b + reach) > need) bits |= 1 << i;
  }
  return bits;
}

export function dips(
  first: number,
  middle: number,
  last: number,
  ratio: number,
  margin: number,
  thresholds: number,
): number {
  let bits = 0;
  for (let i = 0; i < 4; i++) {
    const [a, b, c] = [f32At(first + 4 * i), f32At(middle + 4 * i), f32At(last + 4 * i)];
    if (!(b <= a && b < c)) continue;
    const reach = fround(reachOf(fround(a - b), fround(c - b), ratio) + fround(margin));
    const least = fround(b - reach);
    for (let h = 0; h < thresholds; h++) {
      const level = f32At(LEVELS + 4 * h);
      if (b >= level && least < level) bits |= 1 << i;
    }
  }
  return bits;
}

function reachOf(before: number, after: number, ratio: number): number {
  const r = fround(ratio);
  return Math.max(fround(before * r), fround(after * fround(1 / r)));
}

export function busy(winds: number, share: number, expected: number): boolean {
  for (let i = 0; i < 4; i++) {
    const most = Math.max(f32At(NEED + 4 * i), fround(expected));
    if (f32At(winds + 4 * i) >= fround(most * fround(share))) return true;
  }
  return false;
}

export function sides(winds: number, thresholds: number): number {
  let bits = 0;
  for (let h = 0; h < thresholds; h++)
    for (let i = 0; i < 4; i++) if (f32At(winds + 4 * i) >= f32At(LEVELS + 4 * h)) bits |= 1 << (4 * h + i);
  return bits;
}

export function mix(to: number, a: number, m: number, b: number, share: number, count: number): void {
  const wa = fround((1 - share) * (1 - 2 * share));
  const wm = fround(4 * share * (1 - share));
  const wb = fround(share * (2 * share - 1));
  for (let k = 0; k < 4 * count; k += 4) {
    const ends = fround(fround(wa * f32At(a + k)) + fround(wb * f32At(b + k)));
    setF32(to + k, fround(ends + fround(wm * f32At(m + k))));
  }
}
