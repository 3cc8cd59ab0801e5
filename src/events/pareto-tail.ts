import { LimitError } from '../errors.js';
import { paretoReturnValue } from './return-period.js';

/** A generalised Pareto tail of a curve of exceedance, and how sure it is. */
export interface ParetoTail {
  /** u, what the tail begins above */
  readonly threshold: number;
  readonly scale: number;
  /** ξ; above 0 a heavy tail, below 0 one with an upper end */
  readonly shape: number;
  /** ζ, events a year above the threshold */
  readonly rate: number;
  /** events above the threshold */
  readonly events: number;
  /** as many events of equal rates would be as sure: (Σr)²/Σr² */
  readonly effectiveEvents: number;
  readonly scaleError: number;
  readonly shapeError: number;
  /** covariance of scale and shape */
  readonly covariance: number;
  /** u − σ/ξ for ξ < 0; null where the tail has no end */
  readonly upperEnd: number | null;
}

/** Fewest events above a threshold for a tail. */
export const FEWEST_IN_TAIL = 20;

/**
 * Generalised Pareto tail of the values above a threshold by probability-weighted moments: with a₀ = mean excess and
 * a₁ = Σ wⱼ(1 − pⱼ)xⱼ, pⱼ = (j − 0.35)/n of the rising excesses xⱼ,
 *   k = a₀/(a₀ − 2a₁) − 2,   σ = 2a₀a₁/(a₀ − 2a₁),   ξ = −k   [HoskingWallis1987, from memory].
 * Unequal rates weigh the moments; pⱼ is then (Wⱼ − 0.35wⱼ)/W of the running weights. Standard errors are the asymptotic
 * ones for the effective number of events; they hold for ξ < 1/2.
 * @throws LimitError `events.tail` where too few events, or too few different values, lie above the threshold
 */
export function paretoTail(
  values: readonly { readonly value: number; readonly rate: number }[],
  threshold: number,
): ParetoTail {
  const above = values.filter(({ value }) => value > threshold).sort((a, b) => a.value - b.value);
  if (above.length < FEWEST_IN_TAIL)
    throw new LimitError(
      'events.tail',
      `${above.length} events lie above ${threshold.toFixed(2)} m/s, a tail needs ${FEWEST_IN_TAIL}; lower --threshold or take a larger set`,
    );
  const rate = above.reduce((sum, one) => sum + one.rate, 0);
  const squares = above.reduce((sum, one) => sum + one.rate * one.rate, 0);
  let [a0, a1, before] = [0, 0, 0];
  for (const { value, rate: weight } of above) {
    before += weight;
    const share = weight / rate;
    const p = (before - 0.35 * weight) / rate;
    a0 += share * (value - threshold);
    a1 += share * (1 - p) * (value - threshold);
  }
  const k = a0 / (a0 - 2 * a1) - 2;
  const scale = (2 * a0 * a1) / (a0 - 2 * a1);
  if (!(scale > 0) || !Number.isFinite(k) || above[0]!.value === above[above.length - 1]!.value)
    throw new LimitError(
      'events.tail',
      `the events above ${threshold.toFixed(2)} m/s are too much alike for a tail; lower --threshold`,
    );
  const n = (rate * rate) / squares;
  const common = 1 / ((1 + 2 * k) * (3 + 2 * k) * n);
  const known = k > -0.5;
  return {
    threshold,
    scale,
    shape: -k,
    rate,
    events: above.length,
    effectiveEvents: n,
    scaleError: known ? scale * Math.sqrt(common * (7 + 18 * k + 11 * k ** 2 + 2 * k ** 3)) : Number.NaN,
    shapeError: known ? (2 + k) * Math.sqrt(common * (1 + k) * (1 + k + 2 * k ** 2)) : Number.NaN,
    // that of σ and k with its sign turned
    covariance: known ? -common * scale * (2 + k) * (2 + 6 * k + 7 * k ** 2 + 2 * k ** 3) : Number.NaN,
    upperEnd: k > 0 ? threshold + scale / k : null,
  };
}

/** The tail's value of T years, or null below the threshold's own return period. */
export function tailValue(tail: ParetoTail, years: number): number | null {
  return tail.rate * years >= 1 ? paretoReturnValue(tail, years) : null;
}

/**
 * Standard error of {@link tailValue} by the delta method: the gradient by σ, ξ and ζ, the rate's own variance ζ²/n
 * [Coles2001, from memory].
 */
export function tailValueError(tail: ParetoTail, years: number): number {
  const { scale, rate, effectiveEvents } = tail;
  const at = (change: Partial<ParetoTail>): number => paretoReturnValue({ ...tail, ...change }, years);
  const slope = (key: 'scale' | 'shape' | 'rate', step: number): number =>
    (at({ [key]: tail[key] + step }) - at({ [key]: tail[key] - step })) / (2 * step);
  const [bySigma, byXi, byRate] = [slope('scale', 1e-4 * scale), slope('shape', 1e-4), slope('rate', 1e-4 * rate)];
  return Math.sqrt(
    bySigma ** 2 * tail.scaleError ** 2 +
      byXi ** 2 * tail.shapeError ** 2 +
      2 * bySigma * byXi * tail.covariance +
      (byRate ** 2 * rate ** 2) / effectiveEvents,
  );
}

/** Least number of events above a threshold that is chosen here, and their share of all. */
const CHOSEN = { fewest: 50, share: 0.1 } as const;

/**
 * The threshold of a tail where nobody names one: the highest tenth of the events, fifty at least, lies above it; all but
 * one where there are fewer. A rule of the trade that is to be checked with other thresholds [common practice].
 * @param falling values of the events, falling
 */
export function usualThreshold(falling: readonly number[]): { readonly threshold: number; readonly rule: string } {
  const above = Math.min(falling.length - 1, Math.max(CHOSEN.fewest, Math.round(CHOSEN.share * falling.length)));
  return {
    threshold: falling[above] ?? 0,
    rule: `the value of event ${above + 1} of ${falling.length}, counted from the highest: the highest tenth, but at least ${CHOSEN.fewest}, lies above it`,
  };
}
