import { gammaQuantile } from './gamma.js';

/** A two-sided interval of an annual rate. */
export interface RateInterval {
  readonly lower: number;
  readonly upper: number;
}

/** How an interval was made, in words for a result. */
export const INTERVAL_METHODS = {
  exact: 'exact Poisson interval of the number of events (Garwood 1936)',
  gamma:
    'gamma interval of a sum of unequal rates (Fay & Feuer 1997), each event taken as one Poisson count times its rate',
} as const;

/**
 * Sampling interval of a rate of exceedance λ = Σ rᵢ of the events at or above a value, each seen as rᵢ times one count of
 * a Poisson process: with v = Σ rᵢ² and R the largest rate of the set
 *   lower = (v/λ) G(λ²/v; α/2),   upper = ((v + R²)/(λ + R)) G((λ + R)²/(v + R²); 1 − α/2)   [FayFeuer1997, from memory],
 * G(a; p) the quantile of the gamma distribution of shape a. For equal rates 1/N it is the exact interval
 * χ²(α/2; 2k)/2N … χ²(1 − α/2; 2k + 2)/2N of k events in N years   [Garwood1936, from memory]. For unequal ones it is
 * on the safe side: its upper end allows that an event which the set happens to lack is as frequent as its most frequent one,
 * and is wide where rates differ much. It tells how far the set's own
 * chance may lie off, not how good the set or the wind model is.
 * @param confidence two-sided, such as 0.95
 */
export function rateInterval(
  sums: { readonly rate: number; readonly squares: number; readonly largest: number },
  confidence: number,
): RateInterval {
  const { rate, squares, largest } = sums;
  const tail = (1 - confidence) / 2;
  const lower = rate > 0 ? (squares / rate) * gammaQuantile((rate * rate) / squares, tail) : 0;
  const [above, spread] = [rate + largest, squares + largest * largest];
  return { lower, upper: (spread / above) * gammaQuantile((above * above) / spread, 1 - tail) };
}

/** Whether rates are equal to a billionth: then intervals are exact. */
export function ratesAreEqual(rates: ArrayLike<number>): boolean {
  const first = rates[0] ?? 0;
  for (let i = 1; i < rates.length; i++) if (Math.abs(rates[i]! - first) > 1e-9 * first) return false;
  return true;
}

/**
 * Return period of the rarest event, years: N for equal rates 1/N. No curve of the set goes beyond it.
 */
export function setYears(rates: ArrayLike<number>): number {
  let least = Number.POSITIVE_INFINITY;
  for (let i = 0; i < rates.length; i++) least = Math.min(least, rates[i]!);
  return 1 / least;
}
