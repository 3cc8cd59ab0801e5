import { describe, expect, it } from 'vitest';
import { placeCurve, returnValueOf } from '../../src/events/place-curve.js';

describe('the curve of a place', () => {
  it('has rates, counts and intervals by its values; equal ones share a point', () => {
    const values = [50, 40, 40, 30];
    const { points, beyondUpper } = placeCurve(
      values.map((value, event) => ({ event, value, rate: 0.01 })),
      { largest: 0.01, confidence: 0.95 },
    );
    expect(points.map(({ value, event, count }) => [value, event, count])).toEqual([
      [50, 0, 1],
      [40, 1, 3],
      [30, 3, 4],
    ]);
    // published: 95 % limits of counts 0, 1, 3 and 4, from memory, over 100 years
    const limits = points.map(({ lower, upper }) => [(100 * lower).toFixed(3), (100 * upper).toFixed(3)]);
    expect(limits).toEqual([
      ['0.025', '5.572'],
      ['0.619', '8.767'],
      ['1.090', '10.242'],
    ]);
    expect((100 * beyondUpper).toFixed(3)).toBe('3.689');
  });

  it('gives return values with bounds read off the bounds of its rates', () => {
    const curve = placeCurve(
      [50, 40, 40, 30].map((value, event) => ({ event, value, rate: 0.01 })),
      { largest: 0.01, confidence: 0.95 },
    );
    // by hand: 1/25 = 0.04 is reached by 30; the lower bounds are all below it; the upper bound of 50 is 0.0557
    expect(returnValueOf(curve, 25)).toEqual({ years: 25, value: 30, lower: 0, upper: 50 });
    // 1/15 = 0.067: no rate; the upper bound of 40 is 0.0877
    expect(returnValueOf(curve, 15)).toEqual({ years: 15, value: 0, lower: 0, upper: 40 });
    // 1/100: 50; the lower bound of 30 is 0.0109; none of 100 years may still be 0.0369 a year
    expect(returnValueOf(curve, 100)).toEqual({ years: 100, value: 50, lower: 30, upper: null });
    expect(returnValueOf({ points: [], beyondUpper: 0.03 }, 100).value).toBe(0);
  });
});
