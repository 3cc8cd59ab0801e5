import { describe, expect, it } from 'vitest';
import {
  exceedanceCurve,
  gumbelReturnValue,
  PLOTTING_POSITIONS,
  paretoReturnValue,
  probabilityOfAny,
  returnPeriodYears,
  returnValue,
} from '../../src/events/return-period.js';

describe('rates of exceedance', () => {
  const curve = exceedanceCurve([
    { value: 30, rate: 0.1 },
    { value: 60, rate: 0.01 },
    { value: 45, rate: 0.04 },
  ]);

  it('are sums of the rates of events at or above a value', () => {
    // identity
    expect(curve.map((point) => point.value)).toEqual([60, 45, 30]);
    for (const [i, rate] of [0.01, 0.05, 0.15].entries()) expect(curve[i]!.exceedanceRate).toBeCloseTo(rate, 12);
    expect(
      curve.map((point) => returnPeriodYears(point.exceedanceRate)).map((years) => Number(years.toFixed(3))),
    ).toEqual([100, 20, 6.667]);
  });

  it('give Poisson probabilities', () => {
    // identity: 1 − e^(−λ), and over 30 years
    expect(probabilityOfAny(0.15)).toBeCloseTo(0.139292, 6);
    expect(probabilityOfAny(0.05)).toBeCloseTo(0.0487706, 7);
    expect(probabilityOfAny(0.01)).toBeCloseTo(0.00995017, 8);
    expect(probabilityOfAny(0.01, 30)).toBeCloseTo(0.2591818, 7);
  });

  it('give the value of a return period, none where events are rarer', () => {
    expect([5, 6.7, 20, 50, 100, 1000].map((years) => returnValue(curve, years))).toEqual([0, 30, 45, 45, 60, 60]);
  });

  it('share a point between equal values', () => {
    expect(
      exceedanceCurve([
        { value: 5, rate: 0.1 },
        { value: 5, rate: 0.2 },
      ]),
    ).toHaveLength(1);
  });
});

describe('tails', () => {
  it('give return values', () => {
    // independent: arithmetic of the formulas, from memory
    const tail = { threshold: 30, scale: 6, rate: 0.5 };
    expect(paretoReturnValue({ ...tail, shape: -0.1 }, 100)).toBeCloseTo(49.4254, 4);
    expect(paretoReturnValue({ ...tail, shape: 0 }, 100)).toBeCloseTo(53.472138, 6);
    expect(paretoReturnValue({ ...tail, shape: 0.1 }, 100)).toBeCloseTo(58.725459, 5);
    expect(gumbelReturnValue({ location: 40, scale: 5 }, 100)).toBeCloseTo(63.000746, 6);
  });

  it('have plotting positions', () => {
    // independent: arithmetic, from memory
    const at = Object.entries(PLOTTING_POSITIONS).map(([name, of]) => [name, Number(of(1, 10).toFixed(6))]);
    expect(Object.fromEntries(at)).toEqual({ weibull: 0.090909, gringorten: 0.055336, cunnane: 0.058824, hazen: 0.05 });
  });
});
