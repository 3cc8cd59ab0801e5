import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
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
      for (let i = 1; i < winds.length; i++) {
        const change = winds[i]! - winds[i - 1]!;
        if (i <= at) expect(change).toBeGreaterThanOrEqual(-1e-12);
        else expect(change).toBeLessThanOrEqual(1e-9);
      }
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
    // identity: ∫ρ(V²/r + |f|V)dr
    for (const latDeg of [0, 20]) {
      const vortex = { ...usual, latDeg, coriolisPerS: coriolisPerS(latDeg) };
      const profile = method.build(vortex);
      const toM = method.kinematic ? 1_000_000 : 1e13;
      const rise = pressureRise(profile.windMps, {
        fromM: 0,
        toM,
        coriolisPerS: vortex.coriolisPerS,
        airDensityKgM3: vortex.airDensityKgM3,
        breaksM: [vortex.radiusOfMaxWindM, ...(profile.kinksM ?? [])],
      });
      const deficit = impliedDeficit(profile, { ...vortex, toM });
      expect(Math.abs(rise / deficit - 1)).toBeLessThan(2e-5);
      expect(profile.impliedDeficitPa !== undefined).toBe(!method.kinematic);
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
