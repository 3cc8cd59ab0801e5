import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.js';
import { AVERAGING_PERIODS_S, averagingFactor, EXPOSURES, gustFactor } from '../../src/surface/averaging.js';

describe('mean to mean', () => {
  it('gives the published conversions from 1 to 10 minutes', () => {
    // published: WMO/TD-No. 1555, conversion of Vmax from 1 to 10 minutes (from memory)
    const expected = { 'in-land': 0.84, 'off-land': 0.87, 'off-sea': 0.9, 'at-sea': 0.93 };
    for (const exposure of EXPOSURES)
      expect(averagingFactor(exposure, { fromS: 60, toS: 600 }).toFixed(2)).toBe(expected[exposure].toFixed(2));
  });

  it('is transitive, and inverse to itself', () => {
    // identity
    for (const exposure of EXPOSURES) {
      for (const fromS of AVERAGING_PERIODS_S) {
        expect(averagingFactor(exposure, { fromS, toS: fromS })).toBe(1);
        for (const toS of AVERAGING_PERIODS_S) {
          const there = averagingFactor(exposure, { fromS, toS });
          expect(there * averagingFactor(exposure, { fromS: toS, toS: fromS })).toBeCloseTo(1, 14);
          if (toS > fromS) expect(there).toBeLessThanOrEqual(1);
          const over = averagingFactor(exposure, { fromS, toS: 120 }) * averagingFactor(exposure, { fromS: 120, toS });
          expect(over).toBeCloseTo(there, 14);
        }
      }
    }
  });

  it('is not the inverse of a gust factor', () => {
    expect(averagingFactor('at-sea', { fromS: 60, toS: 600 })).not.toBeCloseTo(
      1 / gustFactor('at-sea', { durationS: 60, periodS: 600 }),
      2,
    );
  });

  it.each([3, 45, 0, Number.NaN])('refuses winds averaged over %d s', (fromS) => {
    expect(() => averagingFactor('at-sea', { fromS, toS: 600 })).toThrow(InputError);
  });
});

describe('gust factor', () => {
  it('gives the published 3-s factors', () => {
    // published: WMO/TD-No. 1555, table 1.1, in-land, off-land, off-sea, at-sea (from memory)
    const row = (periodS: number): number[] => EXPOSURES.map((e) => gustFactor(e, { durationS: 3, periodS }));
    expect(row(600)).toEqual([1.66, 1.52, 1.38, 1.23]);
    expect(row(60)).toEqual([1.49, 1.36, 1.23, 1.11]);
  });

  it('is at least 1, falls with the gust’s duration, grows with the period and with roughness', () => {
    // identity: a longer gust is never stronger, rougher ground never steadier
    const durations = [3, 60, 120, 180, 600];
    for (const periodS of AVERAGING_PERIODS_S) {
      const shorter = durations.filter((durationS) => durationS <= periodS);
      for (const [i, exposure] of EXPOSURES.entries()) {
        const factors = shorter.map((durationS) => gustFactor(exposure, { durationS, periodS }));
        expect(factors[factors.length - 1]).toBeGreaterThanOrEqual(1);
        for (let k = 1; k < factors.length; k++) expect(factors[k]).toBeLessThanOrEqual(factors[k - 1]!);
        const smoother = EXPOSURES[i + 1];
        for (const durationS of shorter) {
          const own = gustFactor(exposure, { durationS, periodS });
          if (smoother) expect(gustFactor(smoother, { durationS, periodS })).toBeLessThanOrEqual(own);
          const longer = AVERAGING_PERIODS_S.find((period) => period > periodS);
          if (longer) expect(gustFactor(exposure, { durationS, periodS: longer })).toBeGreaterThanOrEqual(own);
        }
      }
    }
  });

  it.each([
    { durationS: 10, periodS: 600 },
    { durationS: 600, periodS: 60 },
    { durationS: 3, periodS: 300 },
  ])('refuses %o', (pair) => {
    expect(() => gustFactor('at-sea', pair)).toThrow(/durations are 3, 60/);
  });
});
