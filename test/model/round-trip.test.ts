import { describe, expect, it } from 'vitest';
import { destination } from '../../src/earth.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel, windOf } from '../../src/model/wind.js';
import { INFLOWS } from '../../src/surface/inflow.js';
import { MOTIONS } from '../../src/surface/motion.js';
import { REDUCTIONS } from '../../src/surface/reduction.js';
import { PROFILES } from '../../src/vortex/profiles.js';
import { trackOf } from '../storms.js';

const SURFACES = [
  ...REDUCTIONS.flatMap((reduction) =>
    INFLOWS.flatMap((inflow) =>
      MOTIONS.map((motion) => [
        `surface.reduction=${reduction.id}`,
        `surface.inflow=${inflow.id}`,
        `surface.motion=${motion.id}`,
      ]),
    ),
  ),
  ['surface.layer=kepert-2001'],
];

/** Uniform numbers in 0–1 from a seed. */
function generator(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** The highest 10-m wind of a model in the middle of a storm of two fixes. */
function highest(settings: readonly string[], random: () => number, hemisphere: 1 | -1) {
  const latDeg = hemisphere * (8 + 30 * random());
  const maxWindMps = 18 + 55 * random();
  const radiusOfMaxWindM = 12_000 + 60_000 * random();
  const bearingDeg = 360 * random();
  const distanceM = 6 * 3600 * 12 * random();
  const end = destination({ latDeg, lonDeg: 140 }, { bearingDeg, distanceM });
  const fix = { maxWindMps, radiusOfMaxWindM };
  const track = trackOf([
    { hours: 0, latDeg, lonDeg: 140, ...fix },
    { hours: 6, ...end, ...fix },
  ]);
  const model = windModel(track, makeRecipe(undefined, [...settings]));
  const field = model.fieldAt(model.path.startMs + 3 * 3_600_000);
  let most = 0;
  for (let ratio = 0.4; ratio < 4; ratio *= 1.012) {
    for (let azimuth = 0; azimuth < 360; azimuth += 5) {
      const place = destination(field.state, { bearingDeg: azimuth, distanceM: ratio * radiusOfMaxWindM });
      most = Math.max(most, windOf(field, place).speedMps);
    }
  }
  return most / field.state.maxWindMps;
}

describe('the round trip', () => {
  it('gives back the wind of the fix for every allowed profile, reduction, inflow and motion, in both hemispheres', () => {
    const random = generator(11);
    const profiles = PROFILES.map(({ id }) => id);
    // the one profile that wants a wind of its own
    const outer = ['vortex.outer_wind_radius_km=350', 'vortex.outer_wind_mps=7'];
    const seen = { profile: new Set<string>(), surface: new Set<string>() };
    for (let i = 0; i < 200; i++) {
      const profile = profiles[i % profiles.length]!;
      const surface = SURFACES[(i * 7) % SURFACES.length]!;
      seen.profile.add(profile);
      seen.surface.add(surface.join(' '));
      const share = highest([`vortex.profile=${profile}`, ...outer, ...surface], random, i % 2 === 0 ? 1 : -1);
      // identity: the round-trip rule, 1 %
      expect(Math.abs(share - 1), `${profile} ${surface.join(' ')}`).toBeLessThan(0.01);
    }
    expect(seen.profile.size).toBe(profiles.length);
    expect(seen.surface.size).toBe(SURFACES.length);
  });

  it('refuses what would count the motion, the inflow or the reduction twice, and says why', () => {
    for (const other of [
      'surface.motion=schwerdt-1979',
      'surface.motion=georgiou-1985',
      'surface.inflow=zhang-uhlhorn-2012',
      'surface.reduction=harper-2001',
    ])
      expect(() => makeRecipe(undefined, ['surface.layer=kepert-2001', other])).toThrow(
        new RegExp(`already holds.*${other}`),
      );
    expect(() => makeRecipe(undefined, ['surface.layer=kepert-2001', 'surface.maximum=added'])).toThrow(/cannot add/);
    expect(() => makeRecipe(undefined, ['surface.motion=none', 'surface.maximum=added'])).toThrow(/nothing to add/);
  });

  it('is the mirror image in the south, to the last bits of the speed', () => {
    for (const surface of SURFACES) {
      const speeds = ([1, -1] as const).map((h) => {
        const fix = { maxWindMps: 45, radiusOfMaxWindM: 30_000, hollandB: 1.5 };
        const track = trackOf([
          { hours: 0, latDeg: h * 20, lonDeg: 150, ...fix },
          { hours: 6, latDeg: h * 20.6, lonDeg: 149.2, ...fix },
        ]);
        const model = windModel(track, makeRecipe(undefined, ['vortex.profile=holland-1980', ...surface]));
        const field = model.fieldAt(model.path.startMs + 3_600_000);
        const out = new Float64Array(8);
        field.onCircle(out, 45_000, Float64Array.of(0.6, h * 0.8, -0.6, h * 0.8, 0.8, h * -0.6, -1, 0));
        return [0, 2, 4, 6].map((i) => Math.hypot(out[i]!, out[i + 1]!));
      });
      for (const [i, speed] of speeds[0]!.entries()) expect(speeds[1]![i]!, surface.join(' ')).toBeCloseTo(speed, 9);
    }
  });
});
