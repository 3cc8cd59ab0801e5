import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
import {
  gradientConsistentB,
  type HollandParameters,
  hollandPressureRise,
  hollandWind,
} from '../../src/vortex/holland1980.js';
import { pressureRise } from '../../src/vortex/pressure.js';

const storm: HollandParameters = {
  pressureDeficitPa: 5000,
  radiusOfMaxWindM: 30_000,
  hollandB: 1.5,
  coriolisPerS: coriolisPerS(20),
  airDensityKgM3: 1.15,
};
const still = { ...storm, coriolisPerS: 0 };

describe('Holland 1980', () => {
  // independent: the stated formula in a NumPy script; p_c 950 hPa, Δp 50 hPa, R 30 km, B 1.5, ρ 1.15, 20°
  it.each([
    [10, 13.452, 13.6991, 950.2769],
    [20, 43.1883, 43.6843, 957.9638],
    [30, 48.2393, 48.9818, 968.394],
    [40, 46.0496, 47.0367, 976.1148],
    [60, 38.7694, 40.238, 985.1094],
    [100, 27.7627, 30.1538, 992.4237],
    [200, 14.5663, 18.9075, 997.178],
    [300, 8.5115, 14.1356, 998.4436],
    [500, 3.3398, 9.7186, 999.2705],
  ])('gives wind and pressure at %i km', (km, gradient, cyclostrophic, hpa) => {
    expect(Math.abs(hollandWind(km * 1000, storm) - gradient)).toBeLessThan(1e-4);
    expect(Math.abs(hollandWind(km * 1000, still) - cyclostrophic)).toBeLessThan(1e-4);
    expect(Math.abs(950 + hollandPressureRise(km * 1000, storm) / 100 - hpa)).toBeLessThan(1e-4);
  });

  it('has its cyclostrophic maximum √(BΔp/ρe) at R, where the pressure has risen by Δp/e', () => {
    // identity
    expect(hollandWind(30_000, still)).toBeCloseTo(Math.sqrt((1.5 * 5000) / (1.15 * Math.E)), 10);
    expect(hollandWind(30_000, still)).toBeCloseTo(48.98177, 5);
    expect(hollandPressureRise(30_000, still)).toBeCloseTo(5000 / Math.E, 8);
    // identity: B = 1 is Schloemer's profile
    expect(hollandWind(30_000, { ...still, hollandB: 1 })).toBeCloseTo(39.993447, 6);
    for (const r of [29_900, 30_100]) expect(hollandWind(r, still)).toBeLessThan(hollandWind(30_000, still));
  });

  it('has its gradient maximum a little inside R', () => {
    // independent: maximum by an optimiser of SciPy
    expect(hollandWind(29_610.3, storm)).toBeCloseTo(48.2441, 4);
    for (const r of [29_400, 29_800]) expect(hollandWind(r, storm)).toBeLessThan(hollandWind(29_610.3, storm));
  });

  it('falls from R to 2R by the stated shares', () => {
    // identity: V(2R)/V_max = √(2⁻ᴮ exp(1 − 2⁻ᴮ))
    for (const [hollandB, share] of [
      [1, 0.907943],
      [1.5, 0.821489],
      [2, 0.727496],
    ] as const) {
      const p = { ...still, hollandB };
      expect(hollandWind(60_000, p) / hollandWind(30_000, p)).toBeCloseTo(share, 6);
    }
  });

  it('gives back its deficit from its winds', () => {
    // identity: ∫ ρ(V²/r + |f|V) dr over all radii is Δp; up to 10⁶ km it is Δp exp(−s⁻ᴮ)
    const options = { fromM: 0, toM: 1e9, airDensityKgM3: 1.15 };
    for (const p of [still, storm, { ...storm, hollandB: 0.8 }, { ...storm, hollandB: 2.5 }]) {
      const rise = pressureRise((r) => hollandWind(r, p), { ...options, coriolisPerS: p.coriolisPerS });
      expect(Math.abs(rise / hollandPressureRise(1e9, p) - 1)).toBeLessThan(1e-7);
      expect(Math.abs(rise / 5000 - 1)).toBeLessThan(3e-4);
    }
  });

  it('is calm at the centre and finite next to it', () => {
    for (const r of [0, 1e-6, 1e-3, 1, 100]) {
      expect(hollandWind(r, { ...storm, hollandB: 2.5 })).toBeGreaterThanOrEqual(0);
      expect(hollandWind(r, { ...storm, hollandB: 2.5 })).toBeLessThan(0.01);
    }
  });

  it('finds B from the maximum wind', () => {
    // independent: arithmetic script; V 50 m/s, Δp 60 hPa, ρ 1.15; then with R 30 km at 20°
    const p = { maxWindMps: 50, pressureDeficitPa: 6000, airDensityKgM3: 1.15, radiusOfMaxWindM: 30_000 };
    expect(gradientConsistentB({ ...p, coriolisPerS: 0 })).toBeCloseTo(1.30251, 6);
    const hollandB = gradientConsistentB({ ...p, coriolisPerS: coriolisPerS(20) });
    expect(hollandB).toBeCloseTo(1.341492, 6);
    // identity: that B has the wind at R
    expect(hollandWind(30_000, { ...storm, pressureDeficitPa: 6000, hollandB })).toBeCloseTo(50, 10);
  });
});
