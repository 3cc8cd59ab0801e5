import { describe, expect, it } from 'vitest';
import { gammaP, gammaQuantile, lnGamma } from '../../src/events/gamma.js';
import { rateInterval, ratesAreEqual, setYears } from '../../src/events/rate-interval.js';

describe('the gamma function', () => {
  it('is that of factorials, and of one half', () => {
    // identity
    expect(lnGamma(0.5)).toBeCloseTo(Math.log(Math.sqrt(Math.PI)), 12);
    let factorial = 0;
    for (let n = 1; n <= 100; n++) {
      expect(lnGamma(n)).toBeCloseTo(factorial, 10);
      factorial += Math.log(n);
    }
  });

  it('is incomplete as Poisson sums say', () => {
    // identity: P(k + 1, x) = 1 − Σ_{i≤k} e^(−x) xⁱ/i!
    for (const x of [0.1, 1, 4.5, 20, 60])
      for (const k of [0, 1, 3, 10, 40]) {
        let [term, sum] = [Math.exp(-x), 0];
        for (let i = 0; i <= k; i++, term *= x / i) sum += term;
        expect(gammaP(k + 1, x)).toBeCloseTo(1 - sum, 12);
      }
    for (const a of [0.3, 2, 50, 1e5])
      for (const p of [0.001, 0.5, 0.999]) expect(gammaP(a, gammaQuantile(a, p))).toBeCloseTo(p, 9);
  });
});

/** Interval of k events of rate 1/N. */
const equal = (k: number, years: number, confidence = 0.95) =>
  rateInterval({ rate: k / years, squares: k / years ** 2, largest: 1 / years }, confidence);

describe('the interval of a rate', () => {
  it('is the exact one of a Poisson count for equal rates', () => {
    // identity: none seen, −ln 0.025; one seen, e^(−λ)(1 + λ) = 0.025
    expect(equal(0, 1).lower).toBe(0);
    expect(equal(0, 1).upper).toBeCloseTo(-Math.log(0.025), 10);
    const { lower, upper } = equal(1, 1);
    expect(lower).toBeCloseTo(-Math.log(0.975), 10);
    expect(Math.exp(-upper) * (1 + upper)).toBeCloseTo(0.025, 10);
    // published: tables of the 95 % limits of a Poisson count, from memory
    const table = [
      [0, 0, 3.689],
      [1, 0.025, 5.572],
      [2, 0.242, 7.225],
      [5, 1.623, 11.668],
      [10, 4.8, 18.39],
      [50, 37.11, 65.92],
      [100, 81.36, 121.63],
    ] as const;
    for (const [k, low, high] of table) {
      const found = equal(k, 1);
      const digits = k < 10 ? 3 : 2;
      expect([k, found.lower.toFixed(digits), found.upper.toFixed(digits)]).toEqual([
        k,
        low.toFixed(digits),
        high.toFixed(digits),
      ]);
    }
    expect(equal(10, 1000).upper).toBeCloseTo(equal(10, 1).upper / 1000, 12);
    expect(equal(10, 1, 0.9).upper).toBeLessThan(equal(10, 1).upper);
  });

  it('holds the true rate about as often as it says, for unequal rates too', () => {
    // independent: sets drawn with the generator of this test; each kind of event is expected `mean` times with its own rate
    let state = 5;
    const random = (): number => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return (state + 0.5) / 2 ** 32;
    };
    const poisson = (mean: number): number => {
      let [count, left] = [0, Math.exp(-mean)];
      for (let product = random(); product > left; product *= random()) count++;
      return count;
    };
    const kinds = [
      { rate: 0.001, mean: 12 },
      { rate: 0.004, mean: 6 },
      { rate: 0.02, mean: 2 },
    ];
    const truth = kinds.reduce((sum, { rate, mean }) => sum + rate * mean, 0);
    const sets = 2000;
    let held = 0;
    for (let i = 0; i < sets; i++) {
      let [rate, squares] = [0, 0];
      for (const kind of kinds) {
        const count = poisson(kind.mean);
        rate += count * kind.rate;
        squares += count * kind.rate ** 2;
      }
      const { lower, upper } = rateInterval({ rate, squares, largest: 0.02 }, 0.95);
      if (lower <= truth && truth <= upper) held++;
    }
    // the interval is on the safe side: 95 % at least, up to three standard errors of 2000 trials
    expect(held / sets).toBeGreaterThan(0.95 - 3 * Math.sqrt((0.95 * 0.05) / sets));
    expect(held / sets).toBeLessThan(0.995);
  });

  it('goes with the years that a set stands for', () => {
    expect(ratesAreEqual([0.1, 0.1 + 1e-12])).toBe(true);
    expect(ratesAreEqual([0.1, 0.2])).toBe(false);
    expect(setYears([0.01, 0.01, 0.01])).toBeCloseTo(100, 10);
    expect(setYears([0.1, 0.05, 0.3])).toBeCloseTo(20, 12);
  });
});
