import { describe, expect, it } from 'vitest';
import { destination } from '../../src/earth.js';
import { fieldMethods, type WindField, windField } from '../../src/model/field.js';
import { makeRecipe, recipeDocument } from '../../src/model/recipe.js';
import { maximumOf } from '../../src/model/round-trip.js';
import { windModel, windOf } from '../../src/model/wind.js';
import { INFLOWS } from '../../src/surface/inflow.js';
import { MOTIONS } from '../../src/surface/motion.js';
import { REDUCTIONS } from '../../src/surface/reduction.js';
import type { StormState } from '../../src/track/path.js';
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

/** What the one profile needs that wants a wind of its own. */
const OUTER_WIND = ['vortex.outer_wind_radius_km=350', 'vortex.outer_wind_mps=7'];

const resting: StormState = {
  timeMs: 0,
  latDeg: 20,
  lonDeg: 140,
  hemisphere: 1,
  motionEastMps: 0,
  motionNorthMps: 0,
  maxWindMps: 45,
  centralPressurePa: 95_500,
  ambientPressurePa: 101_000,
  radiusOfMaxWindM: 40_000,
  sizeRadiusM: 150_000,
  hollandB: 1.4,
};

/** The highest wind of a field on a circle, looked for every 2°. */
function strongest(field: WindField, radiusM: number): number {
  field.onCircle(circleWinds, radiusM, CIRCLE);
  let most = 0;
  for (let i = 0; i < circleWinds.length; i += 2)
    most = Math.max(most, Math.hypot(circleWinds[i]!, circleWinds[i + 1]!));
  return most;
}
const CIRCLE = Float64Array.from({ length: 360 }, (_, i) =>
  (i % 2 === 0 ? Math.sin : Math.cos)(((i >> 1) * 2 * Math.PI) / 180),
);
const circleWinds = new Float64Array(CIRCLE.length);

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
    const seen = { profile: new Set<string>(), surface: new Set<string>() };
    for (let i = 0; i < 200; i++) {
      const profile = profiles[i % profiles.length]!;
      const surface = SURFACES[(i * 7) % SURFACES.length]!;
      seen.profile.add(profile);
      seen.surface.add(surface.join(' '));
      const share = highest([`vortex.profile=${profile}`, ...OUTER_WIND, ...surface], random, i % 2 === 0 ? 1 : -1);
      // identity: the round-trip rule, 1 %
      expect(Math.abs(share - 1), `${profile} ${surface.join(' ')}`).toBeLessThan(0.01);
    }
    expect(seen.profile.size).toBe(profiles.length);
    expect(seen.surface.size).toBe(SURFACES.length);
  });

  it('refuses what would count the motion, the inflow or the reduction twice, and says why', () => {
    for (const other of [
      'surface.motion=schwerdt-1979',
      // the built-in choice, asked for by name
      'surface.motion=lin-chavas-2012',
      'surface.inflow=sobey-1977',
      'surface.motion=georgiou-1985',
      'surface.inflow=zhang-uhlhorn-2012',
      'surface.reduction=harper-2001',
    ])
      expect(() => makeRecipe(undefined, ['surface.layer=kepert-2001', other])).toThrow(
        new RegExp(`already holds.*${other}`),
      );
    expect(() => makeRecipe(undefined, ['surface.layer=kepert-2001', 'surface.maximum=added'])).toThrow(/cannot add/);
    // a whole document names every entry: what it does not change is not asked for
    const layered = makeRecipe(undefined, ['surface.layer=kepert-2001']);
    expect(makeRecipe(recipeDocument(layered))).toEqual(layered);
    expect(() => makeRecipe(undefined, ['surface.motion=none', 'surface.maximum=added'])).toThrow(/nothing to add/);
  });

  it('gives a resting vortex its wind with every reduction when the motion is added', () => {
    for (const { id } of REDUCTIONS) {
      const methods = fieldMethods(
        makeRecipe(undefined, ['vortex.profile=holland-1980', 'surface.maximum=added', `surface.reduction=${id}`]),
      );
      for (const maxWindMps of [20, 30, 45, 60]) {
        const most = maximumOf(windField({ ...resting, maxWindMps }, methods, { outerRadiusM: 700_000 }));
        expect(Math.abs(most / maxWindMps - 1), id).toBeLessThan(0.01);
      }
    }
  });

  it('says where the boundary layer has no solution', () => {
    const fix = { radiusOfMaxWindM: 30_000, maxWindMps: 50 };
    const track = trackOf([
      { hours: 0, latDeg: 15, lonDeg: 150, ...fix },
      { hours: 6, latDeg: 15.4, lonDeg: 149, ...fix },
    ]);
    const cautions = (exponent: number): string => {
      const settings = ['vortex.profile=modified-rankine', `vortex.exponent=${exponent}`, 'surface.layer=kepert-2001'];
      return windModel(track, makeRecipe(undefined, settings)).cautions.join(' ');
    };
    // identity: V ∝ r^−x has V/r + dV/dr = (1 − x)V/r, which is negative for x > 1
    expect(cautions(0.5)).not.toMatch(/unstable/);
    expect(cautions(1.4)).toMatch(/inertially unstable.*constant reduction/);
  });

  it('holds under the boundary layer with every profile, and for storms that move faster than they blow', () => {
    const random = generator(23);
    const state = (): StormState => {
      const bearing = 2 * Math.PI * random();
      const speed = 20 * random();
      const hemisphere = random() < 0.5 ? 1 : -1;
      return {
        ...resting,
        hemisphere,
        latDeg: hemisphere * (4 + 40 * random()),
        motionEastMps: speed * Math.sin(bearing),
        motionNorthMps: speed * Math.cos(bearing),
        maxWindMps: 12 + 65 * random(),
        radiusOfMaxWindM: 10_000 + 70_000 * random(),
      };
    };
    for (const { id } of PROFILES) {
      for (const surface of ['surface.layer=kepert-2001', 'surface.motion=georgiou-1985']) {
        const methods = fieldMethods(makeRecipe(undefined, [`vortex.profile=${id}`, ...OUTER_WIND, surface]));
        for (let i = 0; i < 8; i++) {
          const at = state();
          // the first ones are weak and fast
          const fast = i < 3 ? { maxWindMps: 13 + i, motionEastMps: -3, motionNorthMps: 18 } : {};
          const field = windField({ ...at, ...fast }, methods, { outerRadiusM: 700_000 });
          let most = 0;
          for (let ratio = 0.05; ratio < 6; ratio *= 1.01) {
            const radiusM = ratio * at.radiusOfMaxWindM;
            if (radiusM < 600_000) most = Math.max(most, strongest(field, radiusM));
          }
          // identity: the round-trip rule, 1 %
          expect(Math.abs(most / field.state.maxWindMps - 1), `${id} ${surface} ${i}`).toBeLessThan(0.01);
        }
      }
    }
  });

  it('is the mirror image in the south, bit for bit in the speed', () => {
    for (const surface of SURFACES) {
      const methods = fieldMethods(makeRecipe(undefined, ['vortex.profile=holland-1980', ...surface]));
      for (const [motionEastMps, motionNorthMps] of [
        [-4.3, 3.1],
        [0.7, -9.9],
        [0, 0],
      ] as const) {
        const speeds = ([1, -1] as const).map((h) => {
          const state = {
            ...resting,
            hemisphere: h,
            latDeg: 20 * h,
            motionEastMps,
            motionNorthMps: h * motionNorthMps,
          };
          const field = windField(state, methods, { outerRadiusM: 700_000 });
          const winds = [0.05, 0.7, 1, 1.4, 4].flatMap((ratio) => {
            const out = new Float64Array(8);
            field.onCircle(out, ratio * 40_000, Float64Array.of(0.6, h * 0.8, -0.6, h * 0.8, 0.8, h * -0.6, -1, 0));
            return [0, 2, 4, 6].map((i) => Math.hypot(out[i]!, out[i + 1]!));
          });
          return [field.gradientMaxMps, ...winds];
        });
        // identity: a mirror gives a mirror
        expect(speeds[1]!, surface.join(' ')).toEqual(speeds[0]!);
      }
    }
  });
});
