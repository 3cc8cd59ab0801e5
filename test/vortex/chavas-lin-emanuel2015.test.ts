import { describe, expect, it } from 'vitest';
import {
  chavasLinEmanuel2015,
  type MergeParameters,
  mergeAt,
  mergedProfile,
  mergeWithin,
} from '../../src/vortex/chavas-lin-emanuel2015.js';
import { coreMomentum } from '../../src/vortex/emanuel-rotunno2011.js';
import { integrateOuter, OUTER_STEPS, outerWindShare } from '../../src/vortex/emanuel2004.js';
import { donelanDrag, outerWindByDrag } from '../../src/vortex/emanuel2004-drag.js';

const usual = { coriolisPerS: 5e-5, exchangeRatio: 0.9, outerDrag: 0.0015, subsidenceMps: 0.002 };

describe('outer solution of Emanuel 2004', () => {
  it('has the momentum of an independent integration', () => {
    // independent: SciPy, adaptive Runge–Kutta; r0 900 km, f 5e-5, W_c 2 mm/s, C_d 0.0015; M/M0 at 800 … 200 km
    const gamma = (0.0015 * 5e-5 * 900_000) / 0.002;
    const expected = { 800: 0.881869, 600: 0.586827, 400: 0.345919, 300: 0.252344, 200: 0.177751 };
    for (const [km, share] of Object.entries(expected)) {
      const x = Number(km) / 900;
      expect(outerWindShare(x, gamma) + x * x).toBeCloseTo(share, 5);
    }
  });

  it('has the winds of an independent integration where the drag follows the wind', () => {
    // independent: SciPy, adaptive Runge–Kutta with the drag of Donelan et al. 2004 (from memory)
    const wind = outerWindByDrag({
      outerRadiusM: 900_000,
      coriolisPerS: 5e-5,
      subsidenceMps: 0.002,
      dragOf: donelanDrag,
    });
    for (const [km, mps] of [
      [800, 3.2308],
      [600, 7.0954],
      [400, 10.3185],
      [200, 16.0551],
    ] as const)
      expect(Math.abs(wind(km * 1000) - mps)).toBeLessThan(2e-3);
    expect([0, 6, 20.7, 35.4, 60].map(donelanDrag).map((c) => Math.round(c * 1e6))).toEqual([
      620, 620, 1485, 2350, 2350,
    ]);
    // identity: with a drag that does not follow it, the solution for constant drag
    const constant = outerWindByDrag({
      outerRadiusM: 900_000,
      coriolisPerS: 5e-5,
      subsidenceMps: 0.002,
      dragOf: () => 0.0015,
    });
    const gamma = (0.0015 * 5e-5 * 900_000) / 0.002;
    for (const km of [100, 300, 700]) {
      const share = outerWindShare(km / 900, gamma);
      expect(constant(km * 1000)).toBeCloseTo((share * 0.5 * 5e-5 * 900_000 ** 2) / (km * 1000), 4);
    }
  });

  it('is interpolated to 10⁻⁶ between its kept solutions', () => {
    for (const gamma of [0.5, 3.1234, 33.75, 311]) {
      const own = integrateOuter(gamma);
      for (let i = 1; i < OUTER_STEPS; i++) {
        const x = 1 - (i / OUTER_STEPS) ** 2;
        expect(Math.abs(outerWindShare(x, gamma) - own[i]!)).toBeLessThan(1e-6);
      }
    }
  });
});

describe('Chavas, Lin & Emanuel 2015', () => {
  // independent: NumPy and SciPy, the merge found by maximising the difference of momenta on trial radii
  const cases = [
    {
      maxWindMps: 50,
      r0: 900,
      rmax: 23.89164,
      ra: 66.855,
      atMerge: 31.0804,
      r34: 135.656,
      winds: [38.6975, 22.2691, 12.9973, 9.5332, 7.5121, 4.8054],
    },
    {
      maxWindMps: 50,
      r0: 1200,
      rmax: 37.57769,
      ra: 94.918,
      r34: 213.977,
      winds: [47.8435, 31.7654, 18.403, 13.6053, 10.957, 7.7882],
    },
    {
      maxWindMps: 30,
      r0: 700,
      rmax: 31.72722,
      ra: 74.757,
      r34: 91.803,
      winds: [26.8156, 16.3352, 9.5294, 6.8414, 5.142, 2.3575],
    },
  ];
  it.each(cases)('merges within $r0 km and from $rmax km', ({ maxWindMps, r0, rmax, ra, atMerge, r34, winds }) => {
    const p: MergeParameters = { ...usual, maxWindMps };
    const merge = mergeWithin(r0 * 1000, p);
    expect(Math.abs(merge.radiusOfMaxWindM - rmax * 1000)).toBeLessThan(1);
    expect(Math.abs(merge.mergeRadiusM - ra * 1000)).toBeLessThan(100);
    const { windMps } = mergedProfile(merge, p);
    [50, 100, 200, 300, 400, 600].forEach((km, i) => {
      expect(Math.abs(windMps(km * 1000) - winds[i]!)).toBeLessThan(1e-3);
    });
    expect(Math.abs(windMps(r34 * 1000) - (34 * 1852) / 3600)).toBeLessThan(1e-3);
    expect(windMps(r0 * 1000)).toBe(0);
    if (atMerge !== undefined) expect(Math.abs(windMps(merge.mergeRadiusM) - atMerge)).toBeLessThan(1e-3);
    // the other way round
    const back = mergeAt(merge.radiusOfMaxWindM, p);
    expect(Math.abs(back.outerRadiusM / (r0 * 1000) - 1)).toBeLessThan(1e-6);
    // identity: momentum and its slope agree at the merge
    const f = usual.coriolisPerS;
    const momentum = (r: number): number => r * windMps(r) + 0.5 * f * r * r;
    const at = merge.mergeRadiusM;
    const core = coreMomentum({ ...p, radiusOfMaxWindM: merge.radiusOfMaxWindM });
    expect(Math.abs(momentum(at + 1e-3) / core.at(at + 1e-3) - 1)).toBeLessThan(1e-7);
    const outerSlope = ((0.0015 / 0.002) * (2 * (at * windMps(at)) ** 2)) / (back.outerRadiusM ** 2 - at ** 2);
    expect(Math.abs(outerSlope / core.slopeAt(at) - 1)).toBeLessThan(1e-6);
  });

  it('merges with a drag that follows the wind', () => {
    const p: MergeParameters = { ...usual, maxWindMps: 50, outerDrag: donelanDrag };
    const merge = mergeAt(30_000, p);
    const { windMps } = mergedProfile(merge, p);
    const at = merge.mergeRadiusM;
    // identity: wind and slope of the momentum agree at the merge
    expect(Math.abs(windMps(at + 1) - windMps(at - 1))).toBeLessThan(1e-3);
    const core = coreMomentum({ ...p, radiusOfMaxWindM: 30_000 });
    const v = windMps(at);
    const outerSlope = ((2 * donelanDrag(v)) / 0.002) * ((at * v) ** 2 / (merge.outerRadiusM ** 2 - at ** 2));
    expect(Math.abs(outerSlope / core.slopeAt(at) - 1)).toBeLessThan(1e-4);
    const back = mergeWithin(merge.outerRadiusM, p);
    expect(Math.abs(back.radiusOfMaxWindM / 30_000 - 1)).toBeLessThan(1e-5);
  });

  it('says where no merge exists', () => {
    const p: MergeParameters = { ...usual, maxWindMps: 50 };
    expect(() => mergeWithin(20_000, p)).toThrow(expect.objectContaining({ code: 'profile.no-merge' }));
    expect(() => mergeAt(300_000, { ...p, maxWindMps: 5 })).toThrow(
      expect.objectContaining({ code: 'profile.no-merge' }),
    );
    expect(() => mergeAt(30_000, { ...p, exchangeRatio: 2 })).toThrow(
      expect.objectContaining({ code: 'profile.exchange-ratio' }),
    );
  });

  it('keeps the core where no merge exists, says so, and is cheap', () => {
    let builds = 0;
    const start = performance.now();
    for (const lat of [0, 2, 5, 15, 30, 45]) {
      const coriolisPerS = 2 * 7.292115e-5 * Math.sin((lat * Math.PI) / 180);
      for (const maxWindMps of [6, 10, 20, 40, 60, 85]) {
        for (const radiusOfMaxWindM of [8e3, 20e3, 50e3, 120e3]) {
          const { windMps, note } = chavasLinEmanuel2015.build({
            maxWindMps,
            radiusOfMaxWindM,
            coriolisPerS,
            latDeg: lat,
            hollandB: 1.5,
            centralPressurePa: 95_000,
            ambientPressurePa: 101_000,
            airDensityKgM3: 1.15,
            translationMps: 5,
            maximumIs: 'gradient',
            numbers: {},
          });
          builds++;
          expect(note !== undefined).toBe(maxWindMps < 0.68 * coriolisPerS * radiusOfMaxWindM);
          expect(Math.abs(windMps(radiusOfMaxWindM) / maxWindMps - 1)).toBeLessThan(note || lat < 4 ? 0.1 : 1e-9);
        }
      }
    }
    expect((performance.now() - start) / builds).toBeLessThan(2);
  });
});
