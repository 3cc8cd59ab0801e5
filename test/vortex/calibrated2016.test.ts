import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { size2016RadiusM } from '../../src/track/relations/size.js';
import { outerParameter, PROFILE_2016, stretchedExponential } from '../../src/vortex/calibrated2016.js';

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
