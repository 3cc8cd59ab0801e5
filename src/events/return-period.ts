/** A value of one event and that event's annual rate. */
export interface RatedValue {
  readonly value: number;
  /** expected number a year */
  readonly rate: number;
}

/** A point of an exceedance curve. */
export interface ExceedancePoint {
  readonly value: number;
  /** expected number of events a year at or above the value */
  readonly exceedanceRate: number;
}

/**
 * Rates of exceedance: values falling, λ(v) = Σ rates of events at or above v; equal values share one point.
 */
export function exceedanceCurve(values: readonly RatedValue[]): ExceedancePoint[] {
  const sorted = [...values].sort((a, b) => b.value - a.value);
  const points: ExceedancePoint[] = [];
  let rate = 0;
  for (const [i, one] of sorted.entries()) {
    rate += one.rate;
    if (sorted[i + 1]?.value !== one.value) points.push({ value: one.value, exceedanceRate: rate });
  }
  return points;
}

/** Probability of at least one event in `years` years of a Poisson process: 1 − e^(−λn). */
export function probabilityOfAny(exceedanceRate: number, years = 1): number {
  return -Math.expm1(-exceedanceRate * years);
}

/** Mean time between exceedances, years: 1/λ. It is not the inverse of the annual probability, from which it differs at short periods. */
export function returnPeriodYears(exceedanceRate: number): number {
  return 1 / exceedanceRate;
}

/**
 * The highest value whose rate of exceedance is at least 1/T: the T-year value of the event set, without interpolation.
 * 0 where events are rarer than that.
 */
export function returnValue(curve: readonly ExceedancePoint[], years: number): number {
  // a sum of equal rates may miss 1/T by rounding
  return curve.find((point) => point.exceedanceRate * years >= 1 - 1e-9)?.value ?? 0;
}

/** Plotting positions of the i-th largest of n (i from 1): probability of exceedance [Gringorten1963, Cunnane1978, from memory]. */
export const PLOTTING_POSITIONS = {
  weibull: (i: number, n: number) => i / (n + 1),
  gringorten: (i: number, n: number) => (i - 0.44) / (n + 0.12),
  cunnane: (i: number, n: number) => (i - 0.4) / (n + 0.2),
  hazen: (i: number, n: number) => (i - 0.5) / n,
} as const satisfies Record<string, (i: number, n: number) => number>;

/**
 * Value of a generalised Pareto tail exceeded once in T years: u + (σ/ξ)[(ζT)^ξ − 1], u + σ ln ζT for ξ → 0; ζ the rate of
 * exceeding u a year, ξ > 0 a heavy tail [Coles2001, from memory].
 */
export function paretoReturnValue(
  p: { threshold: number; scale: number; shape: number; rate: number },
  years: number,
): number {
  const m = p.rate * years;
  return Math.abs(p.shape) < 1e-9
    ? p.threshold + p.scale * Math.log(m)
    : p.threshold + (p.scale / p.shape) * (m ** p.shape - 1);
}

/** Gumbel value of T years: μ − β ln(−ln(1 − 1/T)) [Gumbel1958, from memory]. */
export function gumbelReturnValue(p: { location: number; scale: number }, years: number): number {
  return p.location - p.scale * Math.log(-Math.log1p(-1 / years));
}
