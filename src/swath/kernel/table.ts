import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import type { WindField } from '../../model/field.js';

/**
 * The wind of one moment as a table over the squared distance x = (r/R)² (r by the sine of the angle). Rows are even in x
 * in the core and spaced as floating-point numbers are outside, so that a number's own bits give the row. The first row is the centre; x = 1, the radius of maximum wind, is a row.
 *
 * Columns, for the harmonics 0 … K of the squared speed over V²: [mean, b₁, a₁, b₂, a₂ …] with
 *   S²/V² = mean + Σ (b_k E_k + a_k N_k),  E_k = s·sin kφ, N_k = s·cos kφ, s = √x, φ clockwise from north;
 * E₁ and N₁ are the cell's coordinates in units of R. Then the same for the wind's east and north part over V, and a bound
 * of the speed's gradient, m/s per metre.
 */
export interface Layout {
  readonly harmonics: number;
  readonly windHarmonics: number;
  /** floats of one row of the speed part: 1 + 2K, padded to a multiple of 4 */
  readonly speedStride: number;
  /** floats of one row of the wind part */
  readonly windStride: number;
  readonly rows: number;
}

export interface MomentTable {
  /** rows × speedStride */
  readonly speed: Float32Array;
  /** rows × windStride: east [mean, b₁, a₁ …], north [mean, b₁, a₁ …] */
  readonly wind: Float32Array;
  /** rows: the largest gradient of the speed from this row outward, the taper left out; then the same with it */
  readonly steepest: Float32Array;
  readonly steepestWithTaper: Float32Array;
  /** the same for the second derivative of the speed, m/s per m² */
  readonly bent: Float32Array;
  readonly bentWithTaper: Float32Array;
}

/** Rows of the core, evenly spaced in x, and the x at which they end. */
export const CORE_ROWS = 64;
export const CORE_X = 0.5;
/** From there on 2^OUTER_BITS rows to every doubling of x, as the bits of a float divide it. */
export const OUTER_BITS = 6;
/** The row of x = 1. */
const RIDGE_ROW = CORE_ROWS + (Math.log2(1 / CORE_X) << OUTER_BITS);

/** x of a row. */
export function rowX(row: number): number {
  if (row < CORE_ROWS) return (row * CORE_X) / CORE_ROWS;
  const outer = row - CORE_ROWS;
  const each = 1 << OUTER_BITS;
  return CORE_X * 2 ** (outer >> OUTER_BITS) * (1 + (outer & (each - 1)) / each);
}

/** √x of the first rows, kept as far as they were asked for; the centre stands for a place next to it. */
let ratios = new Float64Array(0);
export function rowRatios(rows: number): Float64Array {
  if (ratios.length < rows)
    ratios = Float64Array.from({ length: rows }, (_, row) => (row === 0 ? 1e-3 : Math.sqrt(rowX(row))));
  return ratios;
}

/** Rows that reach beyond x. */
export function rowsBeyond(x: number): number {
  return CORE_ROWS + (Math.max(2, Math.ceil(Math.log2(x / CORE_X))) << OUTER_BITS) + 1;
}

const bits = new Float32Array(1);
const word = new Int32Array(bits.buffer);
bits[0] = CORE_X;
const SHIFT = 23 - OUTER_BITS;
const FIRST_WORD = (word[0]! >> SHIFT) - CORE_ROWS;
const FRACTION = (1 << SHIFT) - 1;

/** The share of the way from the row that {@link rowOf} gave last to the next one. */
export let rowShare = 0;

/** The table row below x, in single precision as the kernel does it. */
export function rowOf(x: number, last: number): number {
  if (x < CORE_X) {
    const at = x * (CORE_ROWS / CORE_X);
    const row = Math.trunc(at);
    rowShare = at - row;
    return row;
  }
  bits[0] = x;
  const w = word[0]!;
  const row = (w >> SHIFT) - FIRST_WORD;
  if (row >= last) {
    rowShare = 0;
    return last;
  }
  rowShare = (w & FRACTION) / (FRACTION + 1);
  return row;
}

export function layoutOf(harmonics: number, windHarmonics: number, rows: number): Layout {
  return {
    harmonics,
    windHarmonics,
    rows,
    speedStride: (1 + 2 * harmonics + 3) & ~3,
    windStride: 2 * (1 + 2 * windHarmonics),
  };
}

/** Directions of one sampling of the circle and the weights of its Fourier sums. */
export interface Sampling {
  readonly count: number;
  readonly directions: Float64Array;
}

export function samplingOf(count: number): Sampling {
  const directions = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    directions[2 * i] = Math.sin((i * 360 * RADIANS) / count);
    directions[2 * i + 1] = Math.cos((i * 360 * RADIANS) / count);
  }
  return { count, directions };
}

/** The table of a field. */
export function tableOf(field: WindField, layout: Layout, sampling: Sampling): MomentTable {
  const { rows, speedStride, windStride, harmonics, windHarmonics } = layout;
  const { count, directions } = sampling;
  const { radiusOfMaxWindM, maxWindMps } = field.state;
  const speed = new Float32Array(rows * speedStride);
  const wind = new Float32Array(rows * windStride);
  const gradient = new Float64Array(rows);
  const curvature = new Float64Array(rows);
  const slopes = new Float64Array(count);
  let lastMiddle = 0;
  const winds = new Float64Array(2 * count);
  const speeds = new Float64Array(count);
  const lastSpeeds = new Float64Array(count);
  let lastRadius = 0;
  const inverse = 1 / (maxWindMps * maxWindMps);
  const ratio = rowRatios(rows);
  for (let row = 0; row < rows; row++) {
    const s = ratio[row]!;
    const radiusM = EARTH_RADIUS_M * Math.asin(Math.min(1, (s * radiusOfMaxWindM) / EARTH_RADIUS_M));
    if (radiusM >= field.outerRadiusM) winds.fill(0);
    else field.onCircle(winds, radiusM, directions);
    fourier(winds, 2, count, directions, windHarmonics, 1 / maxWindMps, s, wind, row * windStride, 0);
    fourier(
      winds,
      2,
      count,
      directions,
      windHarmonics,
      1 / maxWindMps,
      s,
      wind,
      row * windStride + 1 + 2 * windHarmonics,
      1,
    );
    let around = 0;
    for (let i = 0; i < count; i++) {
      const squared = winds[2 * i]! ** 2 + winds[2 * i + 1]! ** 2;
      winds[2 * i] = squared;
      speeds[i] = Math.sqrt(squared);
    }
    fourier(winds, 2, count, directions, harmonics, inverse, s, speed, row * speedStride, 0);
    const arc = Math.max((2 * Math.PI * radiusM) / count, 0.2 * radiusOfMaxWindM);
    const middle = 0.5 * (radiusM + lastRadius);
    let [radial, bend] = [0, 0];
    for (let i = 0; i < count; i++) {
      const next = speeds[(i + 1) % count]!;
      const previous = speeds[(i + count - 1) % count]!;
      around = Math.max(around, Math.abs(speeds[i]! - next));
      // rows beyond the antipodes stand at one radius
      if (row > 0 && radiusM > lastRadius) {
        const slope = (speeds[i]! - lastSpeeds[i]!) / (radiusM - lastRadius);
        radial = Math.max(radial, Math.abs(slope));
        const outward = row > 1 ? Math.abs(slope - slopes[i]!) / (middle - lastMiddle) : 0;
        bend = Math.max(
          bend,
          outward,
          Math.abs(slope) / radiusM + Math.abs(next - 2 * speeds[i]! + previous) / (arc * arc),
        );
        slopes[i] = slope;
      }
      lastSpeeds[i] = speeds[i]!;
    }
    gradient[row] = Math.hypot(radial, around / arc);
    curvature[row] = bend;
    lastRadius = radiusM;
    lastMiddle = middle;
  }
  settleBetween(speed, rows, speedStride);
  settleBetween(wind, rows, windStride);
  const steepest = new Float32Array(rows);
  const steepestWithTaper = new Float32Array(rows);
  const taperX = (0.9 * field.outerRadiusM) / radiusOfMaxWindM;
  const bent = new Float32Array(rows);
  const bentWithTaper = new Float32Array(rows);
  let [inner, all, innerBend, allBend] = [0, 0, 0, 0];
  for (let row = rows - 1; row >= 0; row--) {
    all = Math.max(all, gradient[row]!);
    allBend = Math.max(allBend, curvature[row]!);
    if (ratio[row]! < taperX) {
      inner = Math.max(inner, gradient[row]!);
      innerBend = Math.max(innerBend, curvature[row]!);
    }
    steepest[row] = inner;
    steepestWithTaper[row] = all;
    bent[row] = innerBend;
    bentWithTaper[row] = allBend;
  }
  return { speed, wind, steepest, steepestWithTaper, bent, bentWithTaper };
}

/**
 * Straight lines between rows lie to one side of a curve, by up to an eighth of the second difference: half of that, taken
 * off the rows, leaves half the error, on both sides. The ridge, where the slope jumps, stays as it is.
 */
function settleBetween(values: Float32Array, rows: number, stride: number): void {
  for (let c = 0; c < stride; c++) {
    let before = values[c]!;
    let now = values[stride + c]!;
    for (let row = 1; row + 1 < rows; row++) {
      const after = values[(row + 1) * stride + c]!;
      if (row !== CORE_ROWS && row !== RIDGE_ROW) values[row * stride + c] = now - (before - 2 * now + after) / 16;
      before = now;
      now = after;
    }
  }
}

/** Fourier coefficients of values on a circle: mean, then for each harmonic the sine and cosine part over s. */
function fourier(
  values: Float64Array,
  step: number,
  count: number,
  directions: Float64Array,
  harmonics: number,
  factor: number,
  s: number,
  out: Float32Array,
  at: number,
  offset: number,
): void {
  if (count === 4 && harmonics === 1) {
    // north, east, south, west
    const [n, e, w] = [values[offset]!, values[step + offset]!, values[3 * step + offset]!];
    const south = values[2 * step + offset]!;
    out[at] = 0.25 * factor * (n + e + south + w);
    out[at + 1] = (0.5 * factor * (e - w)) / s;
    out[at + 2] = (0.5 * factor * (n - south)) / s;
    return;
  }
  let mean = 0;
  for (let i = 0; i < count; i++) mean += values[step * i + offset]!;
  out[at] = (mean * factor) / count;
  for (let k = 1; k <= harmonics; k++) {
    let [sine, cosine] = [0, 0];
    for (let i = 0; i < count; i++) {
      const j = (i * k) % count;
      sine += values[step * i + offset]! * directions[2 * j]!;
      cosine += values[step * i + offset]! * directions[2 * j + 1]!;
    }
    const scale = (2 * factor) / (count * s);
    out[at + 2 * k - 1] = sine * scale;
    out[at + 2 * k] = cosine * scale;
  }
}
