import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decimalSum, decimalsOf } from '../../src/exposure/decimal-sum.js';

describe('a sum of decimals', () => {
  it('has no rounding where binary fractions have', () => {
    const sum = decimalSum(1);
    for (let i = 0; i < 10; i++) sum.add(0.1);
    // identity; the sum of ten times 0.1 in binary is 0.9999999999999999
    expect(sum.value()).toBe(1);
  });

  it('is that of whole numbers of any size', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 2 ** 53 - 1 }), { maxLength: 50 }), (values) => {
        const sum = decimalSum(0);
        for (const value of values) sum.add(value);
        // independent: integers of any length
        expect(sum.units()).toBe(values.reduce((total, value) => total + BigInt(value), 0n));
      }),
      { seed: 1, numRuns: 200 },
    );
  });

  it('takes away what was added', () => {
    const [all, part] = [decimalSum(2), decimalSum(2)];
    for (const value of [10.05, 20.1, 30.3]) all.add(value);
    part.add(20.1);
    all.addSum(part, -1);
    expect(all.value()).toBe(40.35);
    part.addSum(all, -1);
    expect(part.value()).toBe(-20.25);
  });

  it('counts decimals', () => {
    expect([5, 0.5, 1.25, 0.1234567, 1e12].map((value) => decimalsOf(value, 6))).toEqual([0, 1, 2, 6, 0]);
  });
});
