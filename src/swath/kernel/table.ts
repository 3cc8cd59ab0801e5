import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import { taper, type WindField } from '../../model/field.js';

/**
 * The wind of one moment as a table over the squared distance x = (r/R)² (r by the sine of the angle). Rows are even in x
 * in the core and spaced as floating-point numbers are outside, so that a number's own bits give the row; between them goes a parabola through three rows of one octave.
 * The first row is the centre; x = 1, the radius of maximum wind, is a row and begins an octave: there the wind may have a corner.
 *
 * Columns, for the harmonics 0 … K of the squared speed over V²: [mean, b₁, a₁, b₂, a₂ …] with
 *   S²/V² = mean + Σ (b_k E_k + a_k N_k),  E_k = s·sin kφ, N_k = s·cos kφ, s = √x, φ clockwise from north;
 * E₁ and N₁ are the cell's coordinates in units of R. Then the same for the wind's east and north part over V.
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
}

/** Rows of the core, evenly spaced in x, and the x at which they end. */
export const CORE_ROWS = 32;
export const CORE_X = 0.5;
/** From there on 2^OUTER_BITS rows to every doubling of x, as the bits of a float divide it. */
export const OUTER_BITS = 5;
/** x of a row. */
export function rowX(row: number): number {
  if (row < CORE_ROWS) return (row * CORE_X) / CORE_ROWS;
  const outer = row - CORE_ROWS;
  const each = 1 << OUTER_BITS;
  return CORE_X * 2 ** (outer >> OUTER_BITS) * (1 + (outer & (each - 1)) / each);
}

/** The last row within a ratio r/R. */
export function rowsBelow(ratio: number): number {
  const x = ratio * ratio;
  if (x < CORE_X) return Math.floor((x * CORE_ROWS) / CORE_X);
  const octave = Math.floor(Math.log2(x / CORE_X));
  return CORE_ROWS + (octave << OUTER_BITS) + Math.floor((x / CORE_X / 2 ** octave - 1) * (1 << OUTER_BITS));
}

/** Under a taper that leaves less than this the wind is not asked for. */
const LEAST_FADE = 0.02;

/** √x of the first rows, kept as far as they were asked for; the centre stands for a place next to it. */
let ratios = new Float64Array(0);
export function rowRatios(rows: number): Float64Array {
  if (ratios.length < rows)
    ratios = Float64Array.from({ length: rows }, (_, row) => (row === 0 ? 1e-3 : Math.sqrt(rowX(row))));
  return ratios;
}

/** Upper bound of the squared speed over V² in a row: the harmonics add up to no more than the sum of their amplitudes. */
export function rowBound({ speed }: Pick<MomentTable, 'speed'>, { rows, speedStride }: Layout, row: number): number {
  const at = row * speedStride;
  let waves = 0;
  for (let c = 1; c < speedStride; c++) waves += Math.abs(speed[at + c]!);
  return speed[at]! + rowRatios(rows)[row]! * waves;
}

/** Rows that reach beyond x. */
export function rowsBeyond(x: number): number {
  return CORE_ROWS + (Math.max(2, Math.ceil(Math.log2(x / CORE_X))) << OUTER_BITS) + 2;
}

/** @param windHarmonics 0 without parts of the wind */
export function layoutOf(harmonics: number, windHarmonics: number, rows: number): Layout {
  return {
    harmonics,
    windHarmonics,
    rows,
    speedStride: (1 + 2 * harmonics + 3) & ~3,
    windStride: windHarmonics === 0 ? 0 : 2 * (1 + 2 * windHarmonics),
  };
}

/** Directions of one sampling of the circle, and sine and cosine of every harmonic there: those of the first, then of the second. */
export interface Sampling {
  readonly count: number;
  readonly directions: Float64Array;
  readonly waves: Float64Array;
}

export function samplingOf(count: number): Sampling {
  const directions = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    directions[2 * i] = Math.sin((i * 360 * RADIANS) / count);
    directions[2 * i + 1] = Math.cos((i * 360 * RADIANS) / count);
  }
  const most = count >> 1;
  const waves = new Float64Array(2 * count * most);
  for (let k = 1, to = 0; k <= most; k++)
    for (let i = 0; i < count; i++, to += 2) {
      const j = 2 * ((i * k) % count);
      waves[to] = directions[j]!;
      waves[to + 1] = directions[j + 1]!;
    }
  return { count, directions, waves };
}

/**
 * The table of a field; without parts of the wind where the layout has none.
 * @param every only each so many rows are filled, and no parts of the wind
 */
export function tableOf(
  field: WindField,
  layout: Layout,
  { count, directions, waves }: Sampling,
  every = 1,
): MomentTable {
  const { rows, speedStride, windStride, harmonics, windHarmonics } = layout;
  const { radiusOfMaxWindM, maxWindMps } = field.state;
  const speed = new Float32Array(rows * speedStride);
  const wind = new Float32Array(every === 1 ? rows * windStride : 0);
  const winds = new Float64Array(2 * count);
  const perWind = 1 / maxWindMps;
  const ratio = rowRatios(rows);
  const part = 1 + 2 * windHarmonics;
  for (let row = 0; row < rows; row += every) {
    const s = ratio[row]!;
    const radiusM = EARTH_RADIUS_M * Math.asin(Math.min(1, (s * radiusOfMaxWindM) / EARTH_RADIUS_M));
    const fade = taper(radiusM, field.outerRadiusM);
    if (fade < LEAST_FADE) {
      // the taper is the kernel's; beyond what can be told of the wind under it, it goes on
      if (every > 1) break;
      speed.copyWithin(row * speedStride, (row - 1) * speedStride, row * speedStride);
      wind.copyWithin(row * windStride, (row - 1) * windStride, row * windStride);
      continue;
    }
    field.onCircle(winds, radiusM, directions);
    if (fade < 1) for (let i = 0; i < 2 * count; i++) winds[i] = winds[i]! / fade;
    if (windStride > 0 && every === 1) {
      fourier(winds, waves, windHarmonics, perWind, s, wind, row * windStride, 0);
      fourier(winds, waves, windHarmonics, perWind, s, wind, row * windStride + part, 1);
    }
    for (let i = 0; i < 2 * count; i += 2) winds[i] = winds[i]! ** 2 + winds[i + 1]! ** 2;
    fourier(winds, waves, harmonics, perWind * perWind, s, speed, row * speedStride, 0);
  }
  return { speed, wind };
}

/** Fourier coefficients of the values in every other place on a circle: mean, then for each harmonic the sine and cosine part over s. */
function fourier(
  values: Float64Array,
  waves: Float64Array,
  harmonics: number,
  factor: number,
  s: number,
  out: Float32Array,
  at: number,
  offset: number,
): void {
  const count = values.length >> 1;
  if (count === 4 && harmonics === 1) {
    // north, east, south, west
    const [n, e, w] = [values[offset]!, values[2 + offset]!, values[6 + offset]!];
    const south = values[4 + offset]!;
    out[at] = 0.25 * factor * (n + e + south + w);
    out[at + 1] = (0.5 * factor * (e - w)) / s;
    out[at + 2] = (0.5 * factor * (n - south)) / s;
    return;
  }
  let mean = 0;
  for (let i = 0; i < count; i++) mean += values[2 * i + offset]!;
  out[at] = (mean * factor) / count;
  for (let k = 1, b = 0; k <= harmonics; k++) {
    let sine = 0;
    let cosine = 0;
    for (let i = offset; i < 2 * count; i += 2, b += 2) {
      sine += values[i]! * waves[b]!;
      cosine += values[i]! * waves[b + 1]!;
    }
    const scale = (2 * factor) / (count * s);
    out[at + 2 * k - 1] = sine * scale;
    out[at + 2 * k] = cosine * scale;
  }
}
