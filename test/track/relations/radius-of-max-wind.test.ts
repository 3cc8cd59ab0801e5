import { describe, expect, it } from 'vitest';
import { chavasKnaffRadiusM } from '../../../src/track/relations/chavas-knaff2022.js';
import { knaffRadiusM } from '../../../src/track/relations/knaff2015.js';
import type { RadiusInput } from '../../../src/track/relations/radius-of-max-wind.js';
import { RADIUS_RELATIONS } from '../../../src/track/relations/radius-relations.js';
import { radius2016M } from '../../../src/track/relations/radius2016.js';
import {
  vickeryRadiusM,
  vickeryWadheraGulfRadiusM,
  vickeryWadheraRadiusM,
} from '../../../src/track/relations/vickery-wadhera2008.js';
import { willoughbyRadiusM, willoughbyRahnRadiusM } from '../../../src/track/relations/willoughby2006.js';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';

const OMEGA = 7.292115e-5;
const latOf = (coriolisPerS: number): number => (Math.asin(coriolisPerS / (2 * OMEGA)) * 180) / Math.PI;

describe('radius of maximum wind', () => {
  // independent: an arithmetic script of the stated formulas; their coefficients are from memory
  it('Willoughby, Darling & Rahn 2006', () => {
    expect(willoughbyRadiusM(50, 25) / 1000).toBeCloseTo(32.6159, 4);
    expect(willoughbyRadiusM(30, 15) / 1000).toBeCloseTo(37.5547, 4);
    expect(willoughbyRadiusM(50, -25)).toBe(willoughbyRadiusM(50, 25));
  });

  it('Willoughby & Rahn 2004', () => {
    expect(willoughbyRahnRadiusM(50, 25) / 1000).toBeCloseTo(34.1588, 4);
  });

  it('Vickery & Wadhera 2008 and Vickery et al. 2000', () => {
    expect(vickeryWadheraRadiusM(6000, 25) / 1000).toBeCloseTo(37.7515, 4);
    expect(vickeryWadheraGulfRadiusM(6000) / 1000).toBeCloseTo(35.9382, 4);
    expect(vickeryRadiusM(6000, 25) / 1000).toBeCloseTo(31.1917, 4);
    expect(vickeryWadheraRadiusM(6000, -25)).toBe(vickeryWadheraRadiusM(6000, 25));
  });

  it('Knaff et al. 2015', () => {
    expect(knaffRadiusM(knots(100), 25) / NAUTICAL_MILE_M).toBeCloseTo(26.518, 4);
    expect(knaffRadiusM(knots(60), -20) / NAUTICAL_MILE_M).toBeCloseTo(34.4889, 4);
  });

  it('Chavas & Knaff 2022', () => {
    // independent: the script has mean winds and radii; the relation takes 0.85 of a mean of quadrants
    const km = (windMps: number, radiusM: number, f: number): number =>
      chavasKnaffRadiusM({ windMps, radiusOf34KtM: radiusM / 0.85, latDeg: latOf(f) }) / 1000;
    expect(km(50, 200_000, 5e-5)).toBeCloseTo(35.938, 3);
    expect(km(30, 250_000, 6e-5)).toBeCloseTo(100.591, 3);
    // identity: the share of angular momentum, M_max/M₁₇
    const share = (windMps: number, radiusM: number, f: number): number => {
      const r = 1000 * km(windMps, radiusM, f);
      return (r * windMps + 0.5 * f * r * r) / (radiusM * 17.5 + 0.5 * f * radiusM * radiusM);
    };
    expect(share(50, 200_000, 5e-5)).toBeCloseTo(0.406487, 6);
    expect(share(30, 250_000, 6e-5)).toBeCloseTo(0.531406, 6);
    // identity: R → M_max/V towards the equator
    const still = 0.699 * Math.exp(-0.00618 * 32.5) * 17.5 * 200_000;
    expect(1000 * km(50, 200_000, 0)).toBeCloseTo(still / 50, 6);
    let before = 200;
    for (const windMps of [20, 30, 40, 50, 70]) {
      expect(km(windMps, 200_000, 5e-5)).toBeLessThan(before);
      before = km(windMps, 200_000, 5e-5);
    }
  });

  it('of the calibration lies inside the strong winds', () => {
    const storm: RadiusInput = { ...usual, maxWindMps: knots(70), radiusOf34KtM: 300_000 };
    const wide = RADIUS_RELATIONS.find(({ id }) => id === 'chavas-knaff-2022')!.radiusM(storm);
    expect(radius2016M(storm)).toBeLessThan(wide);
    expect(radius2016M({ ...storm, maxWindMps: knots(120) })).toBeLessThan(radius2016M(storm));
  });
});

const usual: RadiusInput = {
  maxWindMps: 45,
  surfaceFactor: 0.9,
  latDeg: 20,
  pressureDeficitPa: 5000,
  translationMps: 5,
  radiusOf34KtM: null,
  sizeRadiusM: 160_000,
};

describe.each(RADIUS_RELATIONS.map(({ id }) => id))('%s', (id) => {
  const relation = RADIUS_RELATIONS.find((candidate) => candidate.id === id)!;
  it('does not ask on which side of the equator it is, and stays sane where it was fitted', () => {
    for (const maxWindMps of [25, 40, 60, 75])
      for (const latDeg of [0, 10, 20, 35])
        for (const pressureDeficitPa of [1500, 5000, 9000]) {
          const input = { ...usual, maxWindMps, latDeg, pressureDeficitPa };
          const r = relation.radiusM(input);
          expect(r).toBeGreaterThan(2_000);
          expect(r).toBeLessThan(250_000);
          expect(relation.radiusM({ ...input, latDeg: -latDeg })).toBe(r);
        }
  });
});
