import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.js';
import { knots, NAUTICAL_MILE_M } from '../../src/units.js';
import { exponentThrough, modifiedRankine } from '../../src/vortex/modified-rankine.js';
import { pressureRise } from '../../src/vortex/pressure.js';
import type { VortexInput } from '../../src/vortex/profile.js';
import { rankine } from '../../src/vortex/rankine.js';

const input: VortexInput = {
  maxWindMps: 50,
  radiusOfMaxWindM: 30_000,
  coriolisPerS: 0,
  latDeg: 20,
  hollandB: 1.5,
  centralPressurePa: 95_000,
  ambientPressurePa: 101_000,
  airDensityKgM3: 1.15,
  translationMps: 0,
  maximumIs: 'gradient',
  numbers: { exponent: 0.5 },
};

describe('Rankine combined vortex', () => {
  const { windMps } = rankine.build(input);
  it('turns rigidly inside R and conserves rV outside', () => {
    // identity
    expect(windMps(0)).toBe(0);
    expect(windMps(30_000)).toBe(50);
    for (const r of [3e4, 1e5, 3e6]) expect(r * windMps(r)).toBeCloseTo(30_000 * 50, 6);
    // identity: vorticity (1/r) d(rV)/dr is 2V/R inside and 0 outside
    const vorticity = (r: number): number => ((r + 1) * windMps(r + 1) - (r - 1) * windMps(r - 1)) / (2 * r);
    expect(vorticity(10_000)).toBeCloseTo((2 * 50) / 30_000, 10);
    expect(vorticity(100_000)).toBeCloseTo(0, 12);
  });
});

describe('modified Rankine vortex', () => {
  const { windMps } = modifiedRankine.build(input);
  it('falls with the power of radius', () => {
    // identity: x = 0.5 halves the wind at 4R; x = 1 is the Rankine vortex
    expect(windMps(120_000)).toBeCloseTo(25, 12);
    const one = modifiedRankine.build({ ...input, numbers: { exponent: 1 } });
    for (const r of [1e4, 3e4, 2e5]) expect(one.windMps(r)).toBeCloseTo(rankine.build(input).windMps(r), 10);
  });

  it('has the deficit ρV²(½ + 1/(2x))', () => {
    // identity: the cyclostrophic integral with a rigid core; x = 0.5 gives 1.5 ρV²
    const rise = pressureRise(windMps, { fromM: 0, toM: 1e12, coriolisPerS: 0, airDensityKgM3: 1.15, breaksM: [3e4] });
    expect(rise / (1.15 * 2500)).toBeCloseTo(1.5, 6);
  });

  it('finds the exponent through two radii', () => {
    // independent: arithmetic script; 64 kt at 30 nmi and 34 kt at 100 nmi
    const x = exponentThrough(
      { radiusM: 30 * NAUTICAL_MILE_M, windMps: knots(64) },
      { radiusM: 100 * NAUTICAL_MILE_M, windMps: knots(34) },
    );
    expect(x).toBeCloseTo(0.525363, 6);
  });

  it.each([0, -1, 1.6, Number.NaN])('refuses the exponent %d', (exponent) => {
    expect(() => modifiedRankine.build({ ...input, numbers: { exponent } })).toThrow(InputError);
  });
});
