import { type RateInterval, rateInterval } from './rate-interval.js';

/** What an event did at a place. */
export interface PlaceEvent {
  /** its place in the order of the set */
  readonly event: number;
  readonly value: number;
  readonly rate: number;
}

/** A point of an empirical curve of exceedance: values fall, equal ones share a point. */
export interface CurvePoint extends RateInterval {
  readonly value: number;
  /** the first event, in the order of the set, that has the value */
  readonly event: number;
  /** events at or above the value */
  readonly count: number;
  /** expected number of events a year at or above the value */
  readonly exceedanceRate: number;
}

/** The curve of a place with the interval of each rate, and the upper bound of the rate above its highest value. */
export interface PlaceCurve {
  readonly points: readonly CurvePoint[];
  /** what the rate of stronger events than any of the set may be, at most */
  readonly beyondUpper: number;
}

/**
 * Empirical curve of exceedance: λ(v) = Σ rates of events at or above v, with its sampling interval.
 * @param largest largest rate of the whole set
 */
export function placeCurve(
  events: readonly PlaceEvent[],
  { largest, confidence }: { largest: number; confidence: number },
): PlaceCurve {
  const falling = [...events].sort((a, b) => b.value - a.value || a.event - b.event);
  const points: CurvePoint[] = [];
  let [rate, squares, first] = [0, 0, 0];
  for (const [i, one] of falling.entries()) {
    rate += one.rate;
    squares += one.rate * one.rate;
    if (falling[i + 1]?.value === one.value) continue;
    points.push({
      value: one.value,
      event: falling[first]!.event,
      count: i + 1,
      exceedanceRate: rate,
      ...rateInterval({ rate, squares, largest }, confidence),
    });
    first = i + 1;
  }
  return { points, beyondUpper: rateInterval({ rate: 0, squares: 0, largest }, confidence).upper };
}

/** The value of a return period with its interval. */
export interface ReturnValue {
  readonly years: number;
  /** 0 where events are rarer than that */
  readonly value: number;
  readonly lower: number;
  /** null where the set does not bound it: even no event in all its years would not */
  readonly upper: number | null;
}

/** What a sum of equal rates may miss 1/T by. */
const ROUNDING = 1e-9;

/**
 * The highest value whose rate of exceedance is at least 1/T, and the same of the lower and of the upper bounds of the rates:
 * point by point, not for the curve as a whole.
 */
export function returnValueOf(curve: PlaceCurve, years: number): ReturnValue {
  const highest = (of: (point: CurvePoint) => number): number =>
    curve.points.find((point) => of(point) * years >= 1 - ROUNDING)?.value ?? 0;
  return {
    years,
    value: highest((point) => point.exceedanceRate),
    lower: highest((point) => point.lower),
    upper: curve.beyondUpper * years >= 1 ? null : highest((point) => point.upper),
  };
}
