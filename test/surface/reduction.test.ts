import { describe, expect, it } from 'vitest';
import { REDUCTIONS } from '../../src/surface/reduction.js';

const ratio = (id: string, input: { gradientWindMps?: number; radiusM?: number }): number =>
  REDUCTIONS.find((method) => method.id === id)!.ratio({
    gradientWindMps: 40,
    radiusM: 30_000,
    radiusOfMaxWindM: 30_000,
    numbers: {},
    ...input,
  });

describe('reduction to 10 m', () => {
  it('follows Harper 2001', () => {
    // independent: arithmetic script of the stated formula
    const expected = { 6: 0.81, 10: 0.79816, 19.5: 0.77, 30: 0.724745, 45: 0.66, 80: 0.66 };
    for (const [v, k] of Object.entries(expected)) {
      const gradientWindMps = Number(v);
      expect(ratio('harper-2001', { gradientWindMps })).toBeCloseTo(k, 3);
      // the pieces meet to 2·10⁻⁴
      expect(
        Math.abs(
          ratio('harper-2001', { gradientWindMps }) - ratio('harper-2001', { gradientWindMps: gradientWindMps - 1e-9 }),
        ),
      ).toBeLessThan(2e-4);
    }
  });

  it('is 0.90 in the eyewall after Franklin et al., and less outside', () => {
    // published: the surface wind is about 0.90 of that at 700 hPa in the eyewall (abstract)
    expect(ratio('franklin-2003', {})).toBe(0.9);
    expect(ratio('franklin-2003', { radiusM: 600_000 })).toBeCloseTo(0.8, 12);
    expect(ratio('knaff-2011', {})).toBe(0.9);
    // from memory: 0.75 at 700 km, a straight line from 100 km
    expect(ratio('knaff-2011', { radiusM: 400_000 })).toBeCloseTo(0.825, 12);
    expect(ratio('knaff-2011', { radiusM: 900_000 })).toBeCloseTo(0.75, 12);
  });

  it('takes the ratio of the recipe', () => {
    expect(
      REDUCTIONS[0]!.ratio({ gradientWindMps: 1, radiusM: 1, radiusOfMaxWindM: 1, numbers: { factor: 0.7 } }),
    ).toBe(0.7);
  });
});
