import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
import { demaria1992 } from '../../src/vortex/demaria1992.js';
import { coreMomentum, emanuelRotunno2011 } from '../../src/vortex/emanuel-rotunno2011.js';
import { fujita1952 } from '../../src/vortex/fujita1952.js';
import { hollandBelangerFritz2010, outerExponent } from '../../src/vortex/holland-belanger-fritz2010.js';
import { surfaceShape } from '../../src/vortex/holland2008.js';
import { jelesnianski1966 } from '../../src/vortex/jelesnianski1966.js';
import { pressureRise } from '../../src/vortex/pressure.js';
import type { VortexInput } from '../../src/vortex/profile.js';
import { schloemer1954 } from '../../src/vortex/schloemer1954.js';
import { takahashi1939 } from '../../src/vortex/takahashi1939.js';
import { rampWeight, transitionOf, willoughbyParameters, willoughbyProfile } from '../../src/vortex/willoughby2006.js';

const usual: VortexInput = {
  maxWindMps: 50,
  radiusOfMaxWindM: 30_000,
  coriolisPerS: 0,
  latDeg: 20,
  hollandB: 1.4,
  centralPressurePa: 96_000,
  ambientPressurePa: 101_000,
  airDensityKgM3: 1.15,
  translationMps: 5,
  maximumIs: 'gradient',
  numbers: {},
};
const wholeRise = (windMps: (r: number) => number): number =>
  pressureRise(windMps, { fromM: 0, toM: 1e12, coriolisPerS: 0, airDensityKgM3: 1.15 });

describe('Willoughby, Darling & Rahn 2006', () => {
  // independent: NumPy script of the stated formulas; V 50 m/s, 25°, R by their own relation
  const p = willoughbyParameters({ maxWindMps: 50, radiusOfMaxWindM: 32_615.886, latDeg: 25 });
  it('has the stated parameters', () => {
    expect(p.slowDecayM / 1000).toBeCloseTo(263.675, 6);
    expect(p.n).toBeCloseTo(1.0317, 10);
    expect(p.share).toBeCloseTo(0.1546, 10);
    const { startM, endM } = transitionOf(p);
    expect(startM / 1000).toBeCloseTo(17.150345, 5);
    expect(endM / 1000).toBeCloseTo(42.150345, 5);
    // the place of the maximum in the transition, and its weight there
    const xi = (32_615.886 - startM) / (endM - startM);
    expect(xi).toBeCloseTo(0.618622, 6);
    expect(rampWeight(xi)).toBeCloseTo(0.771093, 6);
  });
  it('has the stated winds and no slope at R', () => {
    const { windMps } = willoughbyProfile(p);
    const expected: [number, number][] = [
      [5, 7.2226],
      [10, 14.7661],
      [15, 22.4356],
      [20, 30.2322],
      [25, 39.8716],
      [30, 48.757],
      [40, 46.8624],
      [60, 40.6853],
      [100, 33.2594],
      [200, 22.4141],
    ];
    for (const [km, wind] of expected) expect(Math.abs(windMps(km * 1000) - wind)).toBeLessThan(1e-4);
    expect(windMps(32_615.886)).toBeCloseTo(50, 10);
    expect(Math.abs(windMps(32_616.886) - windMps(32_614.886))).toBeLessThan(1e-6);
  });
  it('has a ramp with vanishing slopes at its ends', () => {
    // identity
    expect([0, 0.5, 1].map(rampWeight)).toEqual([0, 0.5, 1]);
    expect(rampWeight(0.25)).toBeCloseTo(0.0489273, 7);
    expect(rampWeight(0.9)).toBeCloseTo(0.99910908, 8);
    let sum = 0;
    for (let i = 0; i < 1000; i++) {
      const xi = (i + 0.5) / 1000;
      sum += rampWeight(xi) / 1000;
      expect(rampWeight(xi) + rampWeight(1 - xi)).toBeCloseTo(1, 12);
      const slope = (rampWeight(xi + 1e-5) - rampWeight(xi - 1e-5)) / 2e-5;
      expect(slope).toBeCloseTo(630 * xi ** 4 * (1 - xi) ** 4, 6);
    }
    expect(sum).toBeCloseTo(0.5, 10);
  });
  it('drops the fast decay where the regression turns negative', () => {
    // independent: raw value −0.0884
    expect(willoughbyParameters({ maxWindMps: 20, radiusOfMaxWindM: 40_000, latDeg: 40 }).share).toBe(0);
  });
  it('starts its transition outside the centre of a small storm', () => {
    for (const radiusOfMaxWindM of [3000, 8000, 15_000])
      expect(
        transitionOf(willoughbyParameters({ maxWindMps: 70, radiusOfMaxWindM, latDeg: 10 })).startM,
      ).toBeGreaterThan(0);
  });
});

describe('Jelesnianski 1966', () => {
  it('has 0.8 of its maximum at R/2 and 2R, and a deficit of 2ρV²', () => {
    // identity
    const { windMps } = jelesnianski1966.build(usual);
    expect(windMps(15_000)).toBeCloseTo(40, 12);
    expect(windMps(60_000)).toBeCloseTo(40, 12);
    expect(wholeRise(windMps) / (1.15 * 2500)).toBeCloseTo(2, 6);
  });
});

describe('DeMaria et al. 1992', () => {
  it('has the stated shares and deficit for d = 0.5', () => {
    // identity; the deficit by quadrature in SciPy (independent)
    const { windMps } = demaria1992.build(usual);
    expect(windMps(60_000) / 50).toBeCloseTo(0.873471, 6);
    expect(windMps(15_000) / 50).toBeCloseTo(0.898202, 6);
    expect(wholeRise(windMps) / (1.15 * 2500)).toBeCloseTo(2.559288, 5);
  });
  it.each([0, -1, 4])('refuses d = %d', (d) => {
    expect(() => demaria1992.build({ ...usual, numbers: { size_exponent: d } })).toThrow(/vortex.size_exponent/);
  });
});

describe('pressure profiles of one scale', () => {
  it('Fujita: V_max² = 0.3849 Δp/ρ, p(R) = p_env − Δp/√3', () => {
    // identity
    const maxWindMps = Math.sqrt((2 * 3 ** -1.5 * 5000) / 1.15);
    expect(maxWindMps).toBeCloseTo(40.908178, 6);
    const profile = fujita1952.build({ ...usual, maxWindMps });
    expect(profile.impliedDeficitPa).toBeCloseTo(5000, 8);
    expect(profile.pressurePa!(30_000) / 100).toBeCloseTo(981.132487, 6);
  });
  it('Takahashi: V_max² = Δp/4ρ, half the deficit at R', () => {
    // identity
    const profile = takahashi1939.build({ ...usual, maxWindMps: Math.sqrt(5000 / 4.6) });
    expect(profile.impliedDeficitPa).toBeCloseTo(5000, 8);
    expect(profile.pressurePa!(30_000)).toBeCloseTo(98_500, 8);
  });
  it('Schloemer: V_max² = Δp/(ρe)', () => {
    // identity
    const profile = schloemer1954.build({ ...usual, maxWindMps: Math.sqrt(5000 / (1.15 * Math.E)) });
    expect(profile.impliedDeficitPa).toBeCloseTo(5000, 8);
    expect(profile.windMps(30_000)).toBeCloseTo(39.993447, 6);
  });
});

describe('Holland 2008', () => {
  it('gives the stated shapes', () => {
    // independent: arithmetic script
    const shape = (hpa: number, latDeg: number, translationMps: number): number =>
      surfaceShape({ pressureDeficitPa: hpa * 100, pressureTrendPaPerS: 0, latDeg, translationMps });
    expect(shape(50, 20, 5)).toBeCloseTo(1.424733, 6);
    expect(shape(50, -20, 5)).toBe(shape(50, 20, 5));
    expect(shape(80, 15, 4)).toBeCloseTo(1.56128, 6);
    // independent: surface maximum √(Δp b_s/(ρe))
    expect(Math.sqrt((5000 * shape(50, 20, 5)) / (1.15 * Math.E))).toBeCloseTo(47.7371, 4);
    // identity: a fall of 1 hPa/h lowers it by 0.03
    const falling = surfaceShape({
      pressureDeficitPa: 5000,
      pressureTrendPaPerS: -100 / 3600,
      latDeg: 20,
      translationMps: 5,
    });
    expect(falling - shape(50, 20, 5)).toBeCloseTo(-0.03, 12);
    expect(() => shape(215, 20, 5)).toThrow(/below 215 hPa/);
  });
});

describe('Holland, Belanger & Fritz 2010', () => {
  const core = { maxWindMps: 50, radiusOfMaxWindM: 30_000, b: 1.4 };
  it('meets the outer wind', () => {
    // independent: arithmetic script; 17.5 m/s at 200 km
    expect(outerExponent({ windMps: 17.5, radiusM: 200_000 }, core)).toBeCloseTo(0.60817, 6);
    const numbers = { factor: 1, outer_wind_mps: 17.5, outer_wind_radius_km: 200 };
    const { windMps } = hollandBelangerFritz2010.build({ ...usual, numbers });
    const expected = { 10: 17.3446, 30: 50, 60: 41.7078, 100: 31.1178, 200: 17.5 };
    for (const [km, wind] of Object.entries(expected)) expect(windMps(Number(km) * 1000)).toBeCloseTo(wind, 4);
  });
  it('refuses an outer wind that is not outside the core', () => {
    for (const outer of [
      { windMps: 50, radiusM: 2e5 },
      { windMps: 20, radiusM: 3e4 },
      { windMps: 0, radiusM: 2e5 },
    ])
      expect(() => outerExponent(outer, core)).toThrow(expect.objectContaining({ code: 'profile.outer-wind' }));
  });
});

describe('Emanuel & Rotunno 2011', () => {
  it.each([
    [0.5, [45.8855, 50, 42.5305, 30.2136, 13.3649]],
    [0.9, [41.4752, 50, 39.6528, 26.1165, 10.3489]],
    [1, [40.225, 50, 39.1, 25.4358, 9.89]],
  ] as const)('has the stated winds for C_k/C_d = %d', (exchange_ratio, winds) => {
    // independent: NumPy script; R 30 km, V 50 m/s, f 5e-5
    const { windMps } = emanuelRotunno2011.build({ ...usual, coriolisPerS: 5e-5, numbers: { exchange_ratio } });
    [15, 30, 60, 100, 200].forEach((km, i) => {
      expect(windMps(km * 1000)).toBeCloseTo(winds[i]!, 4);
    });
  });
  it('has its true peak a little inside R', () => {
    // independent: optimiser of SciPy
    const { windMps } = emanuelRotunno2011.build({ ...usual, coriolisPerS: 5e-5, numbers: { exchange_ratio: 0.9 } });
    expect(windMps(29_518.3)).toBeCloseTo(50.006066, 6);
    for (const r of [29_300, 29_700]) expect(windMps(r)).toBeLessThan(windMps(29_518.3));
  });
  it('is a rational function for C_k = C_d', () => {
    // identity: V = 2r(RV_m + ½fR²)/(R² + r²) − ½fr
    const f = coriolisPerS(20);
    const { windMps } = emanuelRotunno2011.build({ ...usual, coriolisPerS: f, numbers: { exchange_ratio: 1 } });
    for (const r of [1e3, 2e4, 1.5e5]) {
      const exact = (2 * r * (30_000 * 50 + 0.5 * f * 9e8)) / (9e8 + r * r) - 0.5 * f * r;
      expect(windMps(r)).toBeCloseTo(exact, 10);
    }
  });
  it('has the slope of its momentum', () => {
    const core = coreMomentum({ maxWindMps: 50, radiusOfMaxWindM: 30_000, coriolisPerS: 5e-5, exchangeRatio: 0.7 });
    for (const r of [5e3, 3e4, 2e5]) {
      const slope = (core.at(r + 1) - core.at(r - 1)) / 2;
      expect(Math.abs(core.slopeAt(r) / slope - 1)).toBeLessThan(1e-6);
    }
  });
});
