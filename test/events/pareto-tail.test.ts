import { describe, expect, it } from 'vitest';
import { paretoTail, tailValue, tailValueError, usualThreshold } from '../../src/events/pareto-tail.js';

/** Numbers in 0–1, even, by a generator of this test. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return (((t ^ (t >>> 14)) >>> 0) + 0.5) / 2 ** 32;
  };
}

/** Values of a generalised Pareto distribution by its inverse. */
function sample(
  n: number,
  { shape, scale, threshold }: { shape: number; scale: number; threshold: number },
  seed: number,
) {
  const random = generator(seed);
  return Array.from({ length: n }, () => {
    const p = random();
    return { value: threshold + (scale * (p ** -shape - 1)) / shape, rate: 0.01 };
  });
}

describe('a generalised Pareto tail', () => {
  it.each([-0.3, -0.1, 0.15])('of shape %d is found again in a sample', (shape) => {
    // identity: the parameters that the sample was drawn with, within four of its own standard errors
    const tail = paretoTail(sample(20_000, { shape, scale: 6, threshold: 30 }, 7), 30);
    expect(Math.abs(tail.shape - shape)).toBeLessThan(4 * tail.shapeError);
    expect(Math.abs(tail.scale - 6)).toBeLessThan(4 * tail.scaleError);
    expect(tail.shapeError).toBeLessThan(0.02);
    expect(tail.rate).toBeCloseTo(200, 6);
    expect(tail.upperEnd === null).toBe(tail.shape >= 0);
  });

  it('scatters as its standard errors say', () => {
    // independent: 400 samples of 200 values; the spread of 400 has a standard error of 3.5 %
    const tails = Array.from({ length: 400 }, (_, i) =>
      paretoTail(sample(200, { shape: -0.15, scale: 6, threshold: 30 }, 1000 + i), 30),
    );
    const spread = (of: (tail: (typeof tails)[number]) => number): number => {
      const mean = tails.reduce((sum, tail) => sum + of(tail), 0) / tails.length;
      return Math.sqrt(tails.reduce((sum, tail) => sum + (of(tail) - mean) ** 2, 0) / (tails.length - 1));
    };
    const mean = (of: (tail: (typeof tails)[number]) => number): number =>
      tails.reduce((sum, tail) => sum + of(tail), 0) / tails.length;
    expect(Math.abs(spread((tail) => tail.shape) / mean((tail) => tail.shapeError) - 1)).toBeLessThan(0.1);
    expect(Math.abs(spread((tail) => tail.scale) / mean((tail) => tail.scaleError) - 1)).toBeLessThan(0.1);
    // the rate is fixed in these samples: its part is taken out
    const withoutRate = (tail: (typeof tails)[number]): number => tailValueError({ ...tail, effectiveEvents: 1e9 }, 20);
    expect(Math.abs(spread((tail) => tailValue(tail, 20)!) / mean(withoutRate) - 1)).toBeLessThan(0.1);
  });

  it('of four values with weights is that worked out by hand, once they are many', () => {
    // by hand: excesses 1, 2, 3, 4 of equal rates five times over, p = (j − 0.35)/20 in the order 1 1 1 1 1 2 …
    const values = [1, 2, 3, 4].flatMap((excess) =>
      Array.from({ length: 5 }, () => ({ value: 20 + excess, rate: 0.1 })),
    );
    let a1 = 0;
    for (let j = 1; j <= 20; j++) a1 += ((1 - (j - 0.35) / 20) * Math.ceil(j / 5)) / 20;
    const k = 2.5 / (2.5 - 2 * a1) - 2;
    const tail = paretoTail(values, 20);
    expect(tail.shape).toBeCloseTo(-k, 12);
    expect(tail.scale).toBeCloseTo((2 * 2.5 * a1) / (2.5 - 2 * a1), 12);
    expect(tail.rate).toBeCloseTo(2, 12);
    // one event of rate 0.5 stands for five of 0.1 but is as sure as one
    const heavy = [...values, { value: 26, rate: 0.5 }];
    expect(paretoTail(heavy, 20).effectiveEvents).toBeCloseTo(2.5 ** 2 / (20 * 0.01 + 0.25), 10);
  });

  it('begins at the return period of its threshold', () => {
    const tail = paretoTail(sample(100, { shape: -0.1, scale: 5, threshold: 20 }, 3), 20);
    expect(tailValue(tail, 0.99)).toBeNull();
    expect(tailValue(tail, 1)).toBeCloseTo(20, 10);
    expect(tailValueError(tail, 1000)).toBeGreaterThan(tailValueError(tail, 10));
  });

  it('is refused where there is too little', () => {
    expect(() => paretoTail(sample(30, { shape: -0.1, scale: 5, threshold: 20 }, 3), 40)).toThrow(/lower --threshold/);
    expect(() => paretoTail(Array(30).fill({ value: 25, rate: 0.1 }), 20)).toThrow(/too much alike/);
  });

  it('takes the highest tenth where nobody says', () => {
    const falling = Array.from({ length: 1000 }, (_, i) => 1000 - i);
    expect(usualThreshold(falling).threshold).toBe(900);
    expect(usualThreshold(falling.slice(0, 200)).threshold).toBe(950);
    expect(usualThreshold(falling.slice(0, 30)).threshold).toBe(971);
  });
});
