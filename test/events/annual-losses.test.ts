import { describe, expect, it } from 'vitest';
import {
  aggregateLoss,
  annualMoments,
  occurrenceCurve,
  occurrenceLoss,
  simulateYears,
} from '../../src/events/annual-losses.js';
import { randomNumbers } from '../../src/events/random.js';

describe('losses of years', () => {
  it('are those worked out by hand for four events', () => {
    const rates = [0.1, 0.02, 0.05, 0.3];
    const losses = Float64Array.of(100, 500, 100, 0);
    // by hand: 10 + 10 + 5; 1,000 + 5,000 + 500
    expect(annualMoments(rates, losses).mean).toBeCloseTo(25, 12);
    expect(annualMoments(rates, losses).deviation).toBeCloseTo(Math.sqrt(6500), 12);
    const curve = occurrenceCurve(rates, losses);
    // by hand: λ = 0.02 and 0.17; 1 − e^(−0.02) = 0.0198013, 1 − e^(−0.17) = 0.1563352
    expect(curve.map(({ loss }) => loss)).toEqual([500, 100]);
    expect(curve[0]!.exceedanceRate).toBeCloseTo(0.02, 12);
    expect(curve[1]!.exceedanceRate).toBeCloseTo(0.17, 12);
    expect(curve[0]!.annualProbability).toBeCloseTo(0.0198013, 7);
    expect(curve[1]!.annualProbability).toBeCloseTo(0.1563352, 7);
    // 1/0.0198 = 50.5 years, 1/0.156 = 6.4 years
    expect([5, 10, 50, 51].map((years) => occurrenceLoss(curve, years))).toEqual([0, 100, 100, 500]);
  });

  it('of one kind of event follow the Poisson distribution', () => {
    const years = 200_000;
    const [sums] = simulateYears({ rates: [0.5], losses: [Float64Array.of(10)] }, { years, seed: 3 });
    // identity: P(sum ≥ 10k) of a Poisson count of mean 1/2; four standard errors of the simulation
    let [term, below] = [Math.exp(-0.5), 0];
    for (let k = 1; k <= 4; k++) {
      below += term;
      term *= 0.5 / k;
      const share = sums!.filter((sum) => sum >= 10 * k - 1e-9).length / years;
      const p = 1 - below;
      expect(Math.abs(share - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / years));
    }
    expect(simulateYears({ rates: [0.5], losses: [Float64Array.of(10)] }, { years: 1000, seed: 3 })).toEqual(
      simulateYears({ rates: [0.5], losses: [Float64Array.of(10)] }, { years: 1000, seed: 3 }),
    );
  });

  it('add up as Panjer’s recursion says', () => {
    // independent: the recursion for a compound Poisson distribution of whole losses, in this test alone
    const rates = [0.3, 0.2, 0.1, 0.05, 0.4];
    const losses = Float64Array.of(1, 2, 5, 9, 0);
    const most = 60;
    const density = new Float64Array(most + 1);
    density[0] = Math.exp(-0.65);
    for (let s = 1; s <= most; s++) {
      let sum = 0;
      for (const [i, loss] of losses.entries()) if (loss > 0 && loss <= s) sum += rates[i]! * loss * density[s - loss]!;
      density[s] = sum / s;
    }
    const years = 200_000;
    const [sums, doubled] = simulateYears(
      { rates, losses: [losses, losses.map((loss) => 2 * loss)] },
      { years, seed: 1 },
    );
    let p = 1;
    for (let s = 1; s <= 20; s++) {
      p -= density[s - 1]!;
      const share = sums!.filter((sum) => sum >= s).length / years;
      expect(Math.abs(share - p)).toBeLessThan(4.5 * Math.sqrt((p * (1 - p)) / years));
    }
    // columns share their years
    expect(doubled!.every((sum, i) => sum === 2 * sums![i]!)).toBe(true);
    const mean = sums!.reduce((sum, loss) => sum + loss, 0) / years;
    const moments = annualMoments(rates, losses);
    expect(Math.abs(mean - moments.mean)).toBeLessThan((4 * moments.deviation) / Math.sqrt(years));
  });

  it('have their T-year value and its interval by rank', () => {
    // by hand: of 1000 years with losses 1000, 999 … the 10th is that of 100 years; 10 ± 1.96 √9.9 = 3.8 to 16.2
    const falling = Float64Array.from({ length: 1000 }, (_, i) => 1000 - i);
    expect(aggregateLoss(falling, 100)).toEqual({ loss: 991, lower: 984, upper: 998 });
    expect(aggregateLoss(falling, 1000).upper).toBeNull();
  });

  it('are not drawn without end, and not at all without a loss', () => {
    const many = { rates: [1e6], losses: [Float64Array.of(1)] };
    expect(() => simulateYears(many, { years: 1000, seed: 1 })).toThrow(/at most 300 with --simulate/);
    const none = simulateYears({ rates: [1e6], losses: [Float64Array.of(0)] }, { years: 10, seed: 1 });
    expect([...none[0]!]).toEqual(Array(10).fill(0));
  });
});

describe('random numbers', () => {
  it('are even, without memory, and the same for a seed', () => {
    const random = randomNumbers(1);
    const n = 100_000;
    const numbers = Array.from({ length: n }, random);
    const mean = (of: (u: number, i: number) => number): number => numbers.reduce((sum, u, i) => sum + of(u, i), 0) / n;
    // identity: moments of the even distribution, four standard errors
    expect(Math.abs(mean((u) => u) - 1 / 2)).toBeLessThan(4 / Math.sqrt(12 * n));
    expect(Math.abs(mean((u) => u * u) - 1 / 3)).toBeLessThan(4 * Math.sqrt(4 / 45 / n));
    expect(Math.abs(mean((u, i) => (u - 0.5) * ((numbers[i + 1] ?? 0.5) - 0.5)))).toBeLessThan(4 / (12 * Math.sqrt(n)));
    const bins = new Float64Array(100);
    for (const u of numbers) bins[Math.floor(100 * u)]!++;
    // χ² with 99 degrees of freedom lies below 149 in 999 of 1000 cases
    expect(bins.reduce((sum, count) => sum + (count - n / 100) ** 2 / (n / 100), 0)).toBeLessThan(149);
    expect(Array.from({ length: 5 }, randomNumbers(1))).toEqual(numbers.slice(0, 5));
    expect(randomNumbers(2)()).not.toBe(numbers[0]);
  });
});
