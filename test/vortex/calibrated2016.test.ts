import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
import { knaffZehrDeficitHpa } from '../../src/track/relations/knaff-zehr2007.js';
import { radius2016M } from '../../src/track/relations/radius2016.js';
import { size2016RadiusM } from '../../src/track/relations/size.js';
import { sizeFromRadius } from '../../src/track/relations/storm-size500.js';
import { toKnots } from '../../src/units.js';
import { calibrated2016, outerParameter, PROFILE_2016, stretchedExponential } from '../../src/vortex/calibrated2016.js';
import { impliedDeficit } from '../../src/vortex/pressure.js';

describe('the calibrated vortex', () => {
  it('has its maximum at R and falls everywhere outside', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 9, max: 90, noNaN: true }),
        fc.double({ min: 5_000, max: 150_000, noNaN: true }),
        fc.double({ min: 1.05, max: 40, noNaN: true }),
        (maxWindMps, radiusOfMaxWindM, ratio) => {
          const shape = stretchedExponential({
            maxWindMps,
            radiusOfMaxWindM,
            sizeRadiusM: ratio * radiusOfMaxWindM,
            outer: outerParameter(maxWindMps),
            stretch: PROFILE_2016.stretch,
          });
          // identity
          expect(shape(radiusOfMaxWindM)).toBeCloseTo(1, 12);
          let last = shape(0);
          expect(last).toBe(0);
          for (let s = 0.05; s < 1; s += 0.05) {
            expect(shape(s * radiusOfMaxWindM)).toBeGreaterThan(last);
            last = shape(s * radiusOfMaxWindM);
          }
          last = 1;
          for (let s = 1.01; s < 60; s *= 1.03) {
            expect(shape(s * radiusOfMaxWindM)).toBeLessThanOrEqual(last + 1e-12);
            last = shape(s * radiusOfMaxWindM);
          }
        },
      ),
      { numRuns: 200 },
    );
  });

  it('has 17.5 m/s at its size once the ridge is far inside', () => {
    const shape = stretchedExponential({
      maxWindMps: 50,
      radiusOfMaxWindM: 10_000,
      sizeRadiusM: 200_000,
      outer: outerParameter(50),
      stretch: PROFILE_2016.stretch,
    });
    expect(50 * shape(200_000)).toBeCloseTo(17.5, 1);
  });
});

describe('beside the radius of maximum wind', () => {
  const storms = [30, 40, 50, 60, 70, 80].flatMap((maxWindMps) =>
    [110_000, 160_000, 220_000, 320_000].flatMap((sizeRadiusM) =>
      [10, 20, 30].map((latDeg) => ({ maxWindMps, sizeRadiusM, latDeg })),
    ),
  );
  const radiusOf = (storm: (typeof storms)[number]): number =>
    radius2016M({
      ...storm,
      surfaceFactor: 0.9,
      pressureDeficitPa: 5000,
      translationMps: 5,
      radiusOf34KtM: null,
    });

  it('angular momentum nearly or wholly rises outward, and the wind is level at R', () => {
    for (const storm of storms) {
      const radiusOfMaxWindM = radiusOf(storm);
      const shape = stretchedExponential({
        ...storm,
        radiusOfMaxWindM,
        outer: outerParameter(storm.maxWindMps),
        stretch: PROFILE_2016.stretch,
      });
      const f = Math.abs(coriolisPerS(storm.latDeg));
      let highest = 0;
      for (let s = 0.2; s < 8; s *= 1.02) {
        const r = s * radiusOfMaxWindM;
        // identity: M = rV + ½fr²; it rises where the vortex is inertially stable
        const momentum = r * (storm.maxWindMps / 0.9) * shape(r) + 0.5 * f * r * r;
        expect(momentum).toBeGreaterThan(0.97 * highest);
        highest = Math.max(highest, momentum);
      }
      for (const near of [0.99, 1.01]) {
        expect(1 - shape(near * radiusOfMaxWindM)).toBeGreaterThan(0);
        expect(1 - shape(near * radiusOfMaxWindM)).toBeLessThan(0.002);
      }
    }
  });

  it('the balanced pressure rises by about what wind and size have in nature', () => {
    // own calibration: the given deficit is between 0.7 and 1.2 of it in nine fixes of ten. Here against Knaff & Zehr's
    // relation (from memory), which has seen neither the profile nor its calibration
    const ratios = storms
      .filter(({ maxWindMps }) => maxWindMps >= 40)
      .map((storm) => {
        const field = {
          maxWindMps: storm.maxWindMps / 0.9,
          radiusOfMaxWindM: radiusOf(storm),
          coriolisPerS: Math.abs(coriolisPerS(storm.latDeg)),
          airDensityKgM3: 1.15,
        };
        const profile = calibrated2016.build({
          ...field,
          latDeg: storm.latDeg,
          hollandB: 1.5,
          centralPressurePa: 95_000,
          ambientPressurePa: 101_000,
          translationMps: 0,
          maximumIs: 'gradient',
          size: { radiusM: storm.sizeRadiusM, ownMaxMps: storm.maxWindMps, fieldMaxMps: storm.maxWindMps },
          numbers: {},
        });
        const maxWindKt = toKnots(storm.maxWindMps);
        const size = sizeFromRadius(storm.sizeRadiusM / 1852, maxWindKt, storm.latDeg);
        const deficitHpa = -knaffZehrDeficitHpa({ maxWindKt, translationKt: 0, latDeg: storm.latDeg, size });
        return impliedDeficit(profile, { ...field, toM: 1_000_000 }) / 100 / deficitHpa;
      });
    ratios.sort((a, b) => a - b);
    const median = ratios[ratios.length >> 1]!;
    expect(median).toBeGreaterThan(0.8);
    expect(median).toBeLessThan(1.25);
  });
});

describe('the size relation', () => {
  const storm = {
    maxWindMps: 40,
    dayMeanWindMps: 40,
    dayMeanDeficitPa: 3500,
    highestWindMps: 40,
    latDeg: 20,
    translationMps: 5,
  };
  it('rises with the deficit, falls with the wind at one deficit, and is bounded', () => {
    for (const factor of [1.1, 1.5, 3]) {
      expect(size2016RadiusM({ ...storm, dayMeanDeficitPa: factor * 3500 })).toBeGreaterThan(size2016RadiusM(storm));
      expect(
        size2016RadiusM({
          ...storm,
          maxWindMps: factor * 40,
          dayMeanWindMps: factor * 40,
          highestWindMps: factor * 40,
        }),
      ).toBeLessThan(size2016RadiusM(storm));
    }
    expect(size2016RadiusM({ ...storm, latDeg: 35 })).toBeGreaterThan(size2016RadiusM(storm));
    expect(size2016RadiusM({ ...storm, latDeg: -20 })).toBe(size2016RadiusM(storm));
    expect(size2016RadiusM({ ...storm, dayMeanDeficitPa: 1e6 })).toBe(800_000);
    expect(size2016RadiusM({ ...storm, dayMeanDeficitPa: 10 })).toBe(20_000);
  });
});
