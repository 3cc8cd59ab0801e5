import { describe, expect, it } from 'vitest';
import { coriolisPerS } from '../../src/earth.js';
import {
  backgroundWind,
  LIN_CHAVAS_2012,
  MOTION_WEIGHTS,
  MOTIONS,
  movingGradientWind,
} from '../../src/surface/motion.js';
import { knots } from '../../src/units.js';

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

describe('the asymmetry of NWS 23', () => {
  const { share } = MOTIONS.find(({ id }) => id === 'schwerdt-1979')!;
  it('keeps its knots', () => {
    // independent: arithmetic script; 5, 10, 20 kt give 4.134684, 6.398693, 9.902393 kt
    for (const [kt, expectedKt] of [
      [5, 4.134684],
      [10, 6.398693],
      [20, 9.902393],
    ] as const)
      expect(share!.sizeMps(knots(kt)) / knots(1)).toBeCloseTo(expectedKt, 6);
    // 5 m/s put in plainly would give 4.13 m/s
    expect(share!.sizeMps(5)).toBeCloseTo(3.233237, 6);
  });
});

describe('the balance of a vortex that moves', () => {
  // Holland 1980, 50 hPa, R 30 km, B 1.5, 1.15 kg/m³, 20° N: gradient winds of the resting vortex
  const resting = { 30: 48.2393, 100: 27.7627 };
  const coriolis = coriolisPerS(20);
  const at = (km: 30 | 100, azimuthFromHeadingDeg: number): number =>
    movingGradientWind(resting[km], {
      radiusM: km * 1000,
      coriolisPerS: coriolis,
      translationMps: 5,
      azimuthFromHeadingDeg,
    });

  it('has more wind right of the heading, by a little less than the translation', () => {
    // independent: arithmetic script of the stated formula; right, ahead, left
    expect(at(30, 90)).toBeCloseTo(50.76487, 3);
    expect(at(30, 0)).toBeCloseTo(48.239269, 3);
    expect(at(30, 270)).toBeCloseTo(45.841139, 3);
    expect(at(100, 90)).toBeCloseTo(30.159727, 3);
    expect(at(100, 270)).toBeCloseTo(25.570485, 3);
  });

  it('keeps the driving term, is that of the resting vortex without motion, and calm where nothing drives', () => {
    // identity: V′² − (c sin α − |f|r)V′ = V² + |f|rV
    const fr = Math.abs(coriolis) * 30_000;
    const v = at(30, 40);
    const across = 5 * Math.sin((40 * Math.PI) / 180) - fr;
    expect(v * v - across * v).toBeCloseTo(resting[30] * (resting[30] + fr), 9);
    const still = { radiusM: 30_000, coriolisPerS: coriolis, translationMps: 0, azimuthFromHeadingDeg: 90 };
    expect(movingGradientWind(40, still)).toBeCloseTo(40, 12);
    expect(movingGradientWind(0, still)).toBe(0);
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
