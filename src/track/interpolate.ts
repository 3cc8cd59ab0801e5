/** A function of time through given points, exact at each of them, constant outside. */
export type Curve = (at: number) => number;

/**
 * Monotone cubic Hermite interpolation through (x, y), x strictly rising: no overshoot, smooth first derivative
 * [FritschCarlson1980; slopes by the weighted harmonic mean of FritschButland1984, from memory].
 */
export function monotoneCubic(x: readonly number[], y: readonly number[]): Curve {
  const n = x.length;
  if (n === 1) return () => y[0]!;
  const slope: number[] = [];
  for (let i = 0; i + 1 < n; i++) slope.push((y[i + 1]! - y[i]!) / (x[i + 1]! - x[i]!));
  const tangent = [endTangent(x, slope, 0, 1)];
  for (let i = 1; i + 1 < n; i++) {
    const before = slope[i - 1]!;
    const after = slope[i]!;
    const h0 = x[i]! - x[i - 1]!;
    const h1 = x[i + 1]! - x[i]!;
    const w0 = 2 * h1 + h0;
    const w1 = h1 + 2 * h0;
    tangent.push(before * after > 0 ? (w0 + w1) / (w0 / before + w1 / after) : 0);
  }
  tangent.push(endTangent(x, slope, n - 2, n - 3));
  return (at) => {
    const i = segmentOf(x, at);
    const h = x[i + 1]! - x[i]!;
    const t = Math.min(1, Math.max(0, (at - x[i]!) / h));
    if (t === 0) return y[i]!;
    if (t === 1) return y[i + 1]!;
    const u = 1 - t;
    return (
      y[i]! * (1 + 2 * t) * u * u +
      h * tangent[i]! * t * u * u +
      y[i + 1]! * t * t * (3 - 2 * t) -
      h * tangent[i + 1]! * t * t * u
    );
  };
}

/** Tangent at an end: three-point formula, limited so that the first piece stays monotone. */
function endTangent(x: readonly number[], slope: readonly number[], own: number, next: number): number {
  const s0 = slope[own]!;
  const s1 = slope[next];
  if (s1 === undefined) return s0;
  const h0 = x[own + 1]! - x[own]!;
  const h1 = x[next + 1]! - x[next]!;
  const t = ((2 * h0 + h1) * s0 - h0 * s1) / (h0 + h1);
  if (t * s0 <= 0) return 0;
  return s0 * s1 <= 0 && Math.abs(t) > 3 * Math.abs(s0) ? 3 * s0 : t;
}

/** Straight lines through (x, y), x strictly rising. */
export function piecewiseLinear(x: readonly number[], y: readonly number[]): Curve {
  if (x.length === 1) return () => y[0]!;
  return (at) => {
    const i = segmentOf(x, at);
    const t = Math.min(1, Math.max(0, (at - x[i]!) / (x[i + 1]! - x[i]!)));
    return t === 1 ? y[i + 1]! : y[i]! + (y[i + 1]! - y[i]!) * t;
  };
}

/** The index of the piece of a rising sequence that holds `at`: 0 … n − 2. */
export function segmentOf(x: readonly number[], at: number): number {
  let low = 0;
  let high = x.length - 2;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (x[middle]! <= at) low = middle;
    else high = middle - 1;
  }
  return low;
}
