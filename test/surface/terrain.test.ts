import { describe, expect, it } from 'vitest';
import { asce7Kz, asce7WindRatio } from '../../src/surface/asce7.js';
import { durstFactor } from '../../src/surface/gust-curve.js';
import { DECAY_SETS, windAfterLandfallMps } from '../../src/surface/inland-decay.js';
import { blendingRatio, logLawRatio, ROUGHNESS_CLASSES, turbulenceIntensity } from '../../src/surface/roughness.js';
import { knots, toKnots } from '../../src/units.js';

describe('roughness', () => {
  it('has the classes of Davenport and Wieringa', () => {
    // published: the revised table (as given by Stull)
    expect(ROUGHNESS_CLASSES.map(({ z0M }) => z0M)).toEqual([0.0002, 0.005, 0.03, 0.1, 0.25, 0.5, 1, 2]);
  });

  it('brings a wind from open country to each class through 60 m', () => {
    // independent: arithmetic script of the log law
    const expected = [1.1225, 1.0588, 1, 0.9419, 0.8807, 0.8187, 0.7358, 0.6191];
    for (const [i, { z0M }] of ROUGHNESS_CLASSES.entries())
      expect(blendingRatio(z0M, { fromZ0M: 0.03 })).toBeCloseTo(expected[i]!, 4);
    const intensity = [0.0924, 0.1316, 0.1721, 0.2171, 0.2711, 0.3338, Math.LOG10E, 0.6213];
    for (const [i, { z0M }] of ROUGHNESS_CLASSES.entries())
      expect(turbulenceIntensity(z0M)).toBeCloseTo(intensity[i]!, 4);
    expect(logLawRatio(0.03, { fromM: 10, toM: 3 })).toBeCloseTo(0.792745, 6);
    expect(logLawRatio(0.03, { fromM: 10, toM: 20 })).toBeCloseTo(1.11932, 5);
    expect(() => blendingRatio(12)).toThrow(/between 0 and 10/);
  });
});

describe('decay inland', () => {
  it('follows Kaplan and DeMaria', () => {
    // independent: arithmetic script; kt after 0, 1, 3, 6, 12, 24, 48 h
    const hours = [0, 1, 3, 6, 12, 24, 48];
    const expected: Record<number, number[]> = {
      65: [58.5, 55.618, 50.614, 44.684, 36.87, 29.953, 27.033],
      100: [90, 84.263, 74.303, 62.498, 46.945, 33.175, 27.362],
      140: [126, 117.001, 101.375, 82.857, 58.458, 36.857, 27.739],
    };
    for (const [kt, winds] of Object.entries(expected))
      for (const [i, h] of hours.entries())
        expect(toKnots(windAfterLandfallMps(knots(Number(kt)), { set: DECAY_SETS[0]!, hours: h }))).toBeCloseTo(
          winds[i]!,
          3,
        );
    const newEngland = [6, 12, 24].map((h) =>
      toKnots(windAfterLandfallMps(knots(100), { set: DECAY_SETS[1]!, hours: h })),
    );
    expect(newEngland[0]).toBeCloseTo(49.268, 3);
    expect(newEngland[1]).toBeCloseTo(36.004, 3);
    expect(newEngland[2]).toBeCloseTo(30.279, 3);
    // identity: the background wind in the end
    expect(toKnots(windAfterLandfallMps(knots(100), { set: DECAY_SETS[0]!, hours: 1000 }))).toBeCloseTo(26.7, 6);
  });
});

describe('the curve of means over t seconds within an hour', () => {
  it('is that of the Coastal Engineering Manual', () => {
    // independent: arithmetic script
    const expected = {
      3: 1.5094,
      10: 1.4334,
      30: 1.3235,
      45: 1.277,
      60: 1.2439,
      120: 1.1688,
      180: 1.1307,
      300: 1.0905,
      600: 1.05,
      3600: 0.9997,
    };
    for (const [t, factor] of Object.entries(expected)) expect(durstFactor(Number(t))).toBeCloseTo(factor, 4);
    // published: example II-2-1, 5-min winds to hourly ones (manual, II-2-4)
    for (const [five, hour] of [
      [20.3, 18.6],
      [24.8, 22.8],
      [28.2, 25.9],
    ] as const)
      expect(Math.abs(five / durstFactor(300) - hour)).toBeLessThan(0.06);
    // published: example II-2-2, 19.9 m/s over 3 h to 90 min; the page prints 20.8 (manual, II-2-6)
    expect(Math.abs((19.9 * durstFactor(5400)) / durstFactor(10_800) - 20.8)).toBeLessThan(0.1);
    // published: 80 mph fastest mile, 62.5 mph hourly, 95.6 mph as a 3-s gust, by ASCE 7-95
    expect(Math.abs(durstFactor(45) / durstFactor(3) / (80 / 95.6) - 1)).toBeLessThan(0.015);
    expect(() => durstFactor(0.5)).toThrow(/1 to 36000/);
  });
});

describe('exposure categories of ASCE 7', () => {
  it('have the velocity pressure coefficients of the standard at 33 ft', () => {
    // independent: arithmetic script of the stated formula
    const height = 33 * 0.3048;
    for (const [category, kz] of [
      ['B', 0.71993],
      ['C', 1.00216],
      ['D', 1.18164],
    ] as const)
      expect(asce7Kz(category, height)).toBeCloseTo(kz, 5);
    expect(asce7WindRatio('B', height)).toBeCloseTo(0.84757, 5);
    expect(asce7WindRatio('D', height)).toBeCloseTo(1.08586, 5);
  });
});
