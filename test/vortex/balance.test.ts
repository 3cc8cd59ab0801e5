import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  angularMomentum,
  anticyclonicWind,
  balanceRegime,
  cyclostrophicWind,
  forceBudget,
  geostrophicWind,
  gradientWind,
  rossbyNumber,
} from '../../src/vortex/balance.js';

const driving = fc.record({
  radiusM: fc.double({ min: 10, max: 3e6, noNaN: true }),
  pressureGradientMps2: fc.double({ min: 1e-9, max: 1, noNaN: true }),
  coriolisPerS: fc.double({ min: -1.5e-4, max: 1.5e-4, noNaN: true }),
});

describe('gradient wind', () => {
  it('gives the worked example of a textbook', () => {
    // published: Stull, Practical Meteorology, ch. 10, sample applications (from memory): geostrophic 10 m/s,
    // f = 1e-4 /s, r = 500 km: 8.54 m/s around a low, 13.82 m/s around a high, curvature Rossby number 0.2
    const low = { radiusM: 500_000, pressureGradientMps2: 1e-3, coriolisPerS: 1e-4 };
    expect(geostrophicWind(low)).toBeCloseTo(10, 12);
    expect(gradientWind(low)).toBeCloseTo(8.54102, 5);
    expect(anticyclonicWind({ ...low, pressureGradientMps2: -1e-3 })).toBeCloseTo(13.81966, 5);
    expect(rossbyNumber(10, low)).toBeCloseTo(0.2, 12);
  });

  it('solves V²/r + |f|V = G/r', () => {
    // identity
    fc.assert(
      fc.property(driving, (d) => {
        const v = gradientWind(d);
        const g = d.radiusM * d.pressureGradientMps2;
        expect(Math.abs(v * v + Math.abs(d.coriolisPerS) * d.radiusM * v - g)).toBeLessThanOrEqual(1e-12 * g);
        expect(gradientWind({ ...d, coriolisPerS: -d.coriolisPerS })).toBe(v);
        expect(v).toBeLessThanOrEqual(cyclostrophicWind(d) * (1 + 1e-15));
      }),
      { seed: 1, numRuns: 500 },
    );
  });

  it('has the cyclostrophic and the geostrophic limit', () => {
    // identity
    const at = { radiusM: 30_000, pressureGradientMps2: 0.08, coriolisPerS: 0 };
    expect(gradientWind(at)).toBe(cyclostrophicWind(at));
    const far = { radiusM: 1e12, pressureGradientMps2: 1e-3, coriolisPerS: 1e-4 };
    expect(gradientWind(far)).toBeCloseTo(10, 5);
    expect(gradientWind({ ...at, pressureGradientMps2: 0 })).toBe(0);
  });

  it('is NaN where the gradient points inward, and where a high is too strong', () => {
    expect(gradientWind({ radiusM: 1e5, pressureGradientMps2: -1e-3, coriolisPerS: 5e-5 })).toBeNaN();
    expect(cyclostrophicWind({ radiusM: 1e5, pressureGradientMps2: -1e-3, coriolisPerS: 0 })).toBeNaN();
    expect(anticyclonicWind({ radiusM: 1e5, pressureGradientMps2: -1e-2, coriolisPerS: 5e-5 })).toBeNaN();
  });

  it('keeps a precise root where the Coriolis term dwarfs the wind', () => {
    // identity: V → G/(2c) for G ≪ c²; the plain root −c + √(c² + G) would lose every digit here
    const v = gradientWind({ radiusM: 1e6, pressureGradientMps2: 1e-16, coriolisPerS: 1e-4 });
    expect(Math.abs(v / 1e-12 - 1)).toBeLessThan(1e-12);
  });
});

describe('force budget, angular momentum and regime', () => {
  it('closes', () => {
    fc.assert(
      fc.property(driving, (d) => {
        const v = gradientWind(d);
        const budget = forceBudget(v, d);
        expect(Math.abs(budget.pressureGradientMps2 / d.pressureGradientMps2 - 1)).toBeLessThan(1e-11);
      }),
      { seed: 2 },
    );
    expect(forceBudget(0, { radiusM: 0, coriolisPerS: 1e-4 }).pressureGradientMps2).toBe(0);
  });

  it('knows the momentum of air at rest and the three regimes', () => {
    // identity: M = ½ f r² for V = 0
    expect(angularMomentum(0, { radiusM: 2e5, coriolisPerS: -5e-5 })).toBe(1e6);
    expect(angularMomentum(10, { radiusM: 2e5, coriolisPerS: 5e-5 })).toBe(3e6);
    expect([50, 1, 0.05].map((rossby) => balanceRegime(rossby))).toEqual(['cyclostrophic', 'gradient', 'geostrophic']);
    expect(balanceRegime(rossbyNumber(40, { radiusM: 3e4, coriolisPerS: 0 }))).toBe('cyclostrophic');
  });
});
