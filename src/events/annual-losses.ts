import { LimitError } from '../errors.js';
import { randomNumbers } from './random.js';

/** Losses of events, one array for each column of values, and their annual rates. */
export interface EventLosses {
  readonly rates: ArrayLike<number>;
  readonly losses: readonly Float64Array[];
}

/** Average annual loss Σ rᵢLᵢ and the standard deviation √Σ rᵢLᵢ² of a year's loss: a compound Poisson process. */
export function annualMoments(rates: ArrayLike<number>, losses: Float64Array): { mean: number; deviation: number } {
  let [mean, squares] = [0, 0];
  for (let i = 0; i < losses.length; i++) {
    mean += rates[i]! * losses[i]!;
    squares += rates[i]! * losses[i]! ** 2;
  }
  return { mean, deviation: Math.sqrt(squares) };
}

/** A point of a curve of losses. */
export interface LossPoint {
  readonly loss: number;
  /** expected number of events a year with at least that loss */
  readonly exceedanceRate: number;
  /** probability that a year's largest loss is at least that: 1 − e^(−λ) */
  readonly annualProbability: number;
}

/** Curve of the largest loss of a year (occurrence exceedance): losses above 0, falling; equal ones share a point. */
export function occurrenceCurve(rates: ArrayLike<number>, losses: Float64Array): LossPoint[] {
  const order = Array.from(losses.keys())
    .filter((i) => losses[i]! > 0)
    .sort((a, b) => losses[b]! - losses[a]! || a - b);
  const points: LossPoint[] = [];
  let rate = 0;
  for (const [k, i] of order.entries()) {
    rate += rates[i]!;
    const next = order[k + 1];
    if (next !== undefined && losses[next] === losses[i]) continue;
    points.push({ loss: losses[i]!, exceedanceRate: rate, annualProbability: -Math.expm1(-rate) });
  }
  return points;
}

/** The highest loss that a year's largest reaches with a probability of at least 1/T; 0 where losses are rarer. */
export function occurrenceLoss(curve: readonly LossPoint[], years: number): number {
  return curve.find((point) => point.annualProbability * years >= 1 - 1e-9)?.loss ?? 0;
}

/** Draws of events that a simulation may make. */
export const MOST_DRAWS = 300_000_000;

/**
 * Losses of simulated years, falling, for each column: in each year a Poisson number of events with the total rate, each event
 * with its share of it. The columns share their years.
 * @throws LimitError `losses.draws` for more than {@link MOST_DRAWS} events
 */
export function simulateYears(
  { rates, losses }: EventLosses,
  { years, seed }: { years: number; seed: number },
): Float64Array[] {
  // events without loss change nothing: they are not drawn
  const drawn = Array.from({ length: rates.length }, (_, i) => i).filter((i) =>
    losses.some((column) => column[i]! > 0),
  );
  const running = new Float64Array(drawn.length);
  let total = 0;
  for (const [k, i] of drawn.entries()) {
    total += rates[i]!;
    running[k] = total;
  }
  if (total * years > MOST_DRAWS)
    throw new LimitError(
      'losses.draws',
      `${years} years of ${total.toFixed(1)} events with losses each are too many to simulate; take at most ${Math.floor(MOST_DRAWS / total)} with --simulate`,
    );
  const sums = losses.map(() => new Float64Array(years));
  const random = randomNumbers(seed);
  // gaps between events are exponential
  const gap = (): number => -Math.log1p(-random()) / total;
  if (total > 0)
    for (let year = 0; year < years; year++) {
      for (let time = gap(); time < 1; time += gap()) {
        const event = drawn[firstAbove(running, random() * total)]!;
        for (let c = 0; c < losses.length; c++) sums[c]![year]! += losses[c]![event]!;
      }
    }
  return sums.map((column) => column.sort().reverse());
}

/** Index of the first running sum above a value. */
function firstAbove(running: Float64Array, value: number): number {
  let [low, high] = [0, running.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (running[middle]! > value) high = middle;
    else low = middle + 1;
  }
  return low;
}

/** A loss of simulated years with the interval of the simulation. */
export interface SimulatedLoss {
  readonly loss: number;
  readonly lower: number;
  /** null where too few years lie above */
  readonly upper: number | null;
}

/**
 * The highest loss that a simulated year reaches with a probability of at least 1/T, from the years' losses, falling; with the
 * losses 1.96 √k ranks beside it: 95 % of the chance of the simulation, not of the set.
 */
export function aggregateLoss(falling: Float64Array, years: number): SimulatedLoss {
  const rank = Math.ceil(falling.length / years - 1e-9);
  const spread = 1.96 * Math.sqrt(rank * (1 - Math.min(1, rank / falling.length)));
  const at = (k: number): number => falling[Math.min(falling.length, Math.max(1, k)) - 1] ?? 0;
  const above = Math.floor(rank - spread);
  return { loss: at(rank), lower: at(Math.ceil(rank + spread)), upper: above < 1 ? null : at(above) };
}
