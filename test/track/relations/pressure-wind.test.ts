import { describe, expect, it } from 'vitest';
import {
  climatologicalWindAt500Km,
  knaffZehrDeficitHpa,
  PRESSURE_WIND_RELATIONS,
  type PressureWindInput,
  sizeFromRadius,
  stormRelativeWindKt,
} from '../../../src/track/relations/pressure-wind.js';
import { knots, NAUTICAL_MILE_M, toKnots } from '../../../src/units.js';

const relation = (id: string) => PRESSURE_WIND_RELATIONS.find((candidate) => candidate.id === id)!;
const usual: PressureWindInput = {
  latDeg: 25,
  translationMps: knots(10),
  radiusOf34KtM: 120 * NAUTICAL_MILE_M,
  ambientPressurePa: 101_300,
};
const hpa = (id: string, windKt: number, input: PressureWindInput = usual): number =>
  relation(id).centralPressurePa(knots(windKt), input) / 100;

describe('Atkinson & Holliday 1977', () => {
  // published: the western North Pacific column of Dvorak's table of 1984, which was made from this relation (from
  // memory), within 1 hPa because it is rounded; independent: the formula in an arithmetic script
  it.each([
    [30, 1000, 999.74],
    [35, 997, 996.97],
    [45, 991, 990.75],
    [55, 984, 983.72],
    [65, 976, 975.93],
    [77, 966, 965.68],
    [90, 954, 953.53],
    [102, 941, 941.42],
    [115, 927, 927.37],
    [127, 914, 913.61],
    [140, 898, 897.86],
    [155, 879, 878.66],
    [170, 858, 858.4],
  ])('gives the pressure of %i kt', (kt, table, formula) => {
    expect(Math.abs(hpa('atkinson-holliday-1977', kt) - table)).toBeLessThan(1);
    expect(Math.abs(hpa('atkinson-holliday-1977', kt) - formula)).toBeLessThan(0.005);
  });

  it('gives the wind of a pressure', () => {
    // independent: arithmetic script
    const kt = (p: number): number => toKnots(relation('atkinson-holliday-1977').maxWindMps(p * 100, usual));
    expect(kt(980)).toBeCloseTo(59.89, 2);
    expect(kt(950)).toBeCloseTo(93.58, 2);
    expect(kt(900)).toBeCloseTo(138.27, 2);
    expect(kt(931)).toBeCloseTo(111.72, 2);
    expect([1010, 1020].map(kt)).toEqual([0, 0]);
  });
});

describe('Knaff & Zehr 2007', () => {
  it('gives the pressure of a wind, a size and a motion', () => {
    // independent: arithmetic script; 100 kt, 10 kt of motion, 25°, 10 kt at 500 km, ambient 1013 hPa
    expect(stormRelativeWindKt(100, 10)).toBeCloseTo(93.601307, 6);
    expect(climatologicalWindAt500Km(100, 25)).toBeCloseTo(23.799243, 6);
    const size = 10 / climatologicalWindAt500Km(100, 25);
    expect(size).toBeCloseTo(0.420181, 6);
    const deficit = knaffZehrDeficitHpa({ maxWindKt: 100, translationKt: 10, latDeg: 25, size });
    expect(1013 + deficit).toBeCloseTo(958.8192, 4);
    expect(knaffZehrDeficitHpa({ maxWindKt: 100, translationKt: 10, latDeg: -25, size })).toBe(deficit);
  });
});

describe('Courtney & Knaff 2009', () => {
  it('gives the pressure by wind, motion, size and latitude', () => {
    // independent: arithmetic script; 100 kt, 10 kt of motion, R34 120 nmi
    expect(sizeFromRadius(120, 100, 25)).toBeCloseTo(0.434187, 6);
    expect(hpa('courtney-knaff-2009', 100)).toBeCloseTo(958.6429, 4);
    const tropical = { ...usual, latDeg: 15, ambientPressurePa: 101_000 };
    expect(hpa('courtney-knaff-2009', 100, tropical)).toBeCloseTo(961.2334, 4);
    expect(hpa('courtney-knaff-2009', 100, { ...tropical, latDeg: -15 })).toBeCloseTo(961.2334, 4);
  });

  it('steps by 3 hPa where its two equations meet', () => {
    // independent: arithmetic script
    const at = (latDeg: number): number =>
      hpa('courtney-knaff-2009', 100, { ...usual, latDeg, ambientPressurePa: 101_000 });
    expect(at(17.999999)).toBeCloseTo(961.4057, 3);
    expect(at(18)).toBeCloseTo(958.402, 3);
  });

  it('comes near an observed landfall', () => {
    // published: HURDAT2, AL092021 Ida, 29 August 2021 16:55 UTC: 130 kt, 931 hPa, 34-kt radii 130, 110, 80, 110 nmi
    const ida = { latDeg: 29.1, translationMps: 110_058.6 / 21_600, radiusOf34KtM: 107.5 * NAUTICAL_MILE_M };
    const p = hpa('courtney-knaff-2009', 130, { ...ida, ambientPressurePa: 101_200 });
    expect(Math.abs(p - 931)).toBeLessThan(10);
    // independent: arithmetic script with the motion rounded to 9.9 kt
    expect(Math.abs(p - 930.49)).toBeLessThan(0.05);
    expect(Math.abs(hpa('courtney-knaff-2009', 130, { ...ida, ambientPressurePa: 101_000 }) - 928.49)).toBeLessThan(
      0.05,
    );
  });
});

describe('every pressure–wind relation', () => {
  it.each(PRESSURE_WIND_RELATIONS.map(({ id }) => id))('%s inverts itself and falls with the wind', (id) => {
    const { centralPressurePa, maxWindMps } = relation(id);
    for (const latDeg of [-32, -12, 8, 17, 18, 24, 40]) {
      for (const translationMps of [0, 5, 12]) {
        for (const radiusOf34KtM of [null, 90_000, 250_000]) {
          const input = { latDeg, translationMps, radiusOf34KtM, ambientPressurePa: 101_000 };
          let before = Number.POSITIVE_INFINITY;
          for (let windMps = 20; windMps <= 80; windMps += 5) {
            const p = centralPressurePa(windMps, input);
            expect(p).toBeLessThanOrEqual(before);
            expect(p).toBeGreaterThan(80_000);
            expect(p).toBeLessThanOrEqual(101_000);
            before = p;
            if (p < 100_800) expect(Math.abs(maxWindMps(p, input) - windMps)).toBeLessThan(0.01);
          }
        }
      }
    }
  });
});
