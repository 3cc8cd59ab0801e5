import { describe, expect, it } from 'vitest';
import { backgroundWind, LIN_CHAVAS_2012, MOTION_WEIGHTS } from '../../src/surface/motion.js';

const storm = { motionEastMps: 0, motionNorthMps: 5, hemisphere: 1, maxWindMps: 40 } as const;

describe('background wind', () => {
  it('is 0.55 of the motion, turned 20° cyclonically', () => {
    // independent: arithmetic script; a northern storm that heads north at 5 m/s
    const [east, north] = backgroundWind(LIN_CHAVAS_2012, storm);
    expect(east).toBeCloseTo(-0.940555, 6);
    expect(north).toBeCloseTo(2.584155, 6);
    // with 40 m/s of tangential wind and no inflow: strongest on the right in the north
    expect(Math.hypot(east, north + 40)).toBeCloseTo(42.59454, 5);
    expect(Math.hypot(east, north - 40)).toBeCloseTo(37.427665, 5);
  });

  it('is mirrored in the south', () => {
    // identity: the mirror keeps the eastward part and turns the northward one
    const moving = { ...storm, motionEastMps: -3, motionNorthMps: 4 };
    const [e, n] = backgroundWind(LIN_CHAVAS_2012, moving);
    const [es, ns] = backgroundWind(LIN_CHAVAS_2012, { ...moving, motionNorthMps: -4, hemisphere: -1 });
    expect(es).toBe(e);
    expect(ns).toBe(-n);
  });

  it('leaves the weak side of a fast storm about gale force, where the storm has it', () => {
    const sizeAt = (maxWindMps: number): number =>
      Math.hypot(...backgroundWind(LIN_CHAVAS_2012, { ...storm, motionNorthMps: 30, maxWindMps }));
    // identity: V − 2B = 17 m/s
    expect(sizeAt(25)).toBeCloseTo(4, 10);
    expect(sizeAt(10)).toBeCloseTo(0.3, 10);
    expect(sizeAt(60)).toBeCloseTo(0.55 * 30, 10);
  });
});

describe('weights of the motion', () => {
  const at = (radiusM: number) => ({ radiusM, radiusOfMaxWindM: 30_000, relativeWind: 0.7 });
  it('fade as published', () => {
    // independent: arithmetic script; identity: e^−π at 500 km, ½ at R, 0.3 at 3R
    expect(MOTION_WEIGHTS['miyazaki-1961'](at(100_000))).toBeCloseTo(0.533488, 6);
    expect(MOTION_WEIGHTS['miyazaki-1961'](at(500_000))).toBeCloseTo(Math.exp(-Math.PI), 12);
    expect(MOTION_WEIGHTS['jelesnianski-1966'](at(30_000))).toBe(0.5);
    expect(MOTION_WEIGHTS['jelesnianski-1966'](at(90_000))).toBeCloseTo(0.3, 12);
    expect(MOTION_WEIGHTS.relative(at(1))).toBe(0.7);
    expect(MOTION_WEIGHTS.uniform()).toBe(1);
  });
});
