import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
import { cyclostrophicWind } from '../../src/vortex/balance.js';
import { impliedDeficit, pressureAt, pressureRise } from '../../src/vortex/pressure.js';
import type { VortexInput } from '../../src/vortex/profile.js';
import { PROFILES, profileMethod } from '../../src/vortex/profiles.js';

const usual: VortexInput = {
  maxWindMps: 50,
  radiusOfMaxWindM: 30_000,
  coriolisPerS: coriolisPerS(20),
  latDeg: 20,
  hollandB: 1.5,
  centralPressurePa: 95_000,
  ambientPressurePa: 101_000,
  airDensityKgM3: 1.15,
  translationMps: 5,
  maximumIs: 'gradient',
  numbers: { factor: 0.9, outer_wind_radius_km: 180, outer_wind_mps: 17.5 },
};

/** weak to strong, small to wide, near the equator and far from it */
const vortices = [6, 20, 50, 85].flatMap((maxWindMps) =>
  [8_000, 30_000, 90_000].flatMap((radiusOfMaxWindM) =>
    [0, 12, -28, 45].map(
      (latDeg): VortexInput => ({
        ...usual,
        maxWindMps,
        radiusOfMaxWindM,
        latDeg,
        coriolisPerS: Math.abs(coriolisPerS(latDeg)),
        hollandB: maxWindMps > 40 ? 1.9 : 1.1,
      }),
    ),
  ),
);

/** 0 to 3000 km, dense in the core */
const radii = Array.from({ length: 2400 }, (_, i) => 20 * (Math.exp(0.005 * i) - 1)).filter((r) => r <= 3e6);

describe.each(PROFILES.map(({ id }) => id))('profile %s', (id) => {
  const method = profileMethod(id)!;

  it('is calm at the centre, finite, nowhere negative and has one maximum, at or next to R', () => {
    for (const vortex of vortices) {
      const { windMps, note } = method.build(vortex);
      expect(windMps(0)).toBe(0);
      const winds = radii.map(windMps);
      expect(winds.every((wind) => Number.isFinite(wind) && wind >= 0)).toBe(true);
      const most = Math.max(...winds);
      const at = winds.indexOf(most);
      // winds next to 0 far out are rounding
      let [leastBefore, mostAfter] = [0, 0];
      for (let i = 1; i < winds.length; i++) {
        const change = winds[i]! - winds[i - 1]!;
        if (i <= at) leastBefore = Math.min(leastBefore, change);
        else mostAfter = Math.max(mostAfter, change);
      }
      expect(leastBefore).toBeGreaterThanOrEqual(-1e-12);
      expect(mostAfter).toBeLessThanOrEqual(1e-9);
      const { maxWindMps: v, radiusOfMaxWindM: r, coriolisPerS: f } = vortex;
      // the balance moves the maximum inward as f grows; by little where V is well above fR
      const rossby = v / (f * r);
      if (note === undefined && rossby > 3) {
        expect(Math.abs(windMps(r) / v - 1)).toBeLessThan(f < 1e-5 ? 0.02 : 1e-9);
        expect(most / v).toBeLessThan(1.04);
        expect(radii[at]! / r).toBeGreaterThan(0.6);
        expect(radii[at]! / r).toBeLessThan(1.05);
      }
    }
  });

  it('is continuous', () => {
    for (const vortex of vortices) {
      const { windMps, kinksM } = method.build(vortex);
      for (const r of [...(kinksM ?? []), vortex.radiusOfMaxWindM, ...radii.filter((_, i) => i % 40 === 39)]) {
        if (r > 0) expect(Math.abs(windMps(r * (1 + 1e-9)) - windMps(r * (1 - 1e-9)))).toBeLessThan(1e-5);
      }
    }
  });

  it('gives back its pressure deficit from its winds', () => {
    // identity: ∫ρ(V²/r + |f|V)dr, here summed by trapezia in ln r, apart from the model's own quadrature
    for (const latDeg of [0, 20]) {
      const vortex = { ...usual, latDeg, coriolisPerS: coriolisPerS(latDeg) };
      const profile = method.build(vortex);
      const toM = method.kinematic ? 1_000_000 : 1e13;
      const n = 30_000;
      const step = Math.log(toM / 0.1) / n;
      let sum = 0;
      for (let i = 0; i <= n; i++) {
        const r = 0.1 * Math.exp(i * step);
        const v = profile.windMps(r);
        sum += (i === 0 || i === n ? 0.5 : 1) * (v * v + vortex.coriolisPerS * r * v);
      }
      const deficit = impliedDeficit(profile, { ...vortex, toM });
      expect(Math.abs((vortex.airDensityKgM3 * sum * step) / deficit - 1)).toBeLessThan(2e-5);
      expect(profile.impliedDeficitPa !== undefined).toBe(!method.kinematic);
      // the rise between two radii is the difference of their pressures
      const rise = pressureRise(profile.windMps, {
        fromM: 20_000,
        toM: 300_000,
        coriolisPerS: vortex.coriolisPerS,
        airDensityKgM3: vortex.airDensityKgM3,
        breaksM: [vortex.radiusOfMaxWindM, ...(profile.kinksM ?? [])],
      });
      // a balanced profile's own pressure is scaled to the given deficit
      const scale =
        profile.impliedDeficitPa === undefined
          ? 1
          : profile.impliedDeficitPa / (vortex.ambientPressurePa - vortex.centralPressurePa);
      const difference = pressureAt(profile, 300_000, vortex) - pressureAt(profile, 20_000, vortex);
      expect(Math.abs(rise / (scale * difference) - 1)).toBeLessThan(1e-4);
    }
  });

  it('has the limit f → 0', () => {
    // identity: without rotation of the Earth the winds are those of a vanishing one
    const still = method.build({ ...usual, latDeg: 1e-7, coriolisPerS: 0 });
    const nearly = method.build({ ...usual, latDeg: 1e-7, coriolisPerS: 1e-12 });
    for (const km of [12, 20, 30, 60, 150, 400]) {
      const v = still.windMps(km * 1000);
      expect(Math.abs(nearly.windMps(km * 1000) - v)).toBeLessThan(1e-4 * v + 1e-6);
      // identity: then it is the cyclostrophic wind of its own pressure
      if (still.pressurePa === undefined) continue;
      const share = still.impliedDeficitPa! / (usual.ambientPressurePa - usual.centralPressurePa);
      const slope = (still.pressurePa(km * 1000 + 10) - still.pressurePa(km * 1000 - 10)) / 20;
      const balanced = cyclostrophicWind({
        radiusM: km * 1000,
        pressureGradientMps2: (share * slope) / usual.airDensityKgM3,
        coriolisPerS: 0,
      });
      expect(Math.abs(balanced / v - 1)).toBeLessThan(1e-4);
    }
  });

  it('has the central pressure at 0 and a pressure that rises outward by the balance', () => {
    const profile = method.build(usual);
    const pressure = (r: number): number => pressureAt(profile, r, usual);
    expect(pressure(0)).toBe(95_000);
    let before = 95_000;
    for (const km of [5, 15, 30, 45, 80, 150, 300, 600]) {
      expect(pressure(km * 1000)).toBeGreaterThan(before);
      before = pressure(km * 1000);
    }
    if (method.kinematic) {
      for (const r of [12_345, 77_000, 400_000]) {
        const slope = (pressure(r + 50) - pressure(r - 50)) / 100 / usual.airDensityKgM3;
        const v = profile.windMps(r);
        // the core solution ends where its wind does
        if (v === 0) continue;
        expect(Math.abs(slope / ((v * v) / r + usual.coriolisPerS * v) - 1)).toBeLessThan(1e-3);
      }
    } else expect(Math.abs(pressure(1e13) - 101_000)).toBeLessThan(1);
  });

  it('does not ask on which side of the equator it is', () => {
    const north = method.build(usual);
    const south = method.build({ ...usual, latDeg: -20, coriolisPerS: coriolisPerS(-20) });
    for (const r of [5e3, 3e4, 2e5]) expect(south.windMps(r)).toBe(north.windMps(r));
  });
});

describe('B = 1', () => {
  it('makes the profile of Holland that of Schloemer', () => {
    // identity
    const schloemer = profileMethod('schloemer-1954')!.build(usual);
    for (const [hollandB, within] of [
      [1, 1e-12],
      [1 + 1e-6, 1e-4],
    ] as const) {
      const holland = profileMethod('holland-1980')!.build({ ...usual, hollandB });
      for (const km of [2, 10, 30, 80, 300]) {
        expect(Math.abs(holland.windMps(km * 1000) - schloemer.windMps(km * 1000))).toBeLessThan(within);
        expect(Math.abs(holland.pressurePa!(km * 1000) - schloemer.pressurePa!(km * 1000))).toBeLessThan(100 * within);
      }
    }
  });
});
