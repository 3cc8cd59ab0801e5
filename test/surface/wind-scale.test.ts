import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.js';
import { averagingFactor } from '../../src/surface/averaging.js';
import { WIND_SCALES, windClass } from '../../src/surface/wind-scale.js';
import { knots } from '../../src/units.js';

const codes = (scale: string, winds: readonly number[], toMps: (wind: number) => number): string[] =>
  winds.map((wind) => windClass(toMps(wind), { scale }).code);
const kmh = (wind: number): number => wind / 3.6;
const mps = (wind: number): number => wind;

describe('wind scales', () => {
  it('follow Saffir and Simpson', () => {
    // published: National Weather Service, notice of 2012 on the revised bounds, in knots
    expect(codes('saffir-simpson', [33, 34, 63, 64, 82, 83, 95, 96, 112, 113, 136, 137, 190], knots)).toEqual(
      'TD TS TS 1 1 2 2 3 3 4 4 5 5'.split(' '),
    );
    expect(codes('saffir-simpson-1973', [95, 96, 113, 114, 135, 136], knots)).toEqual('2 3 3 4 4 5'.split(' '));
    // identity: the bounds in m/s, 1 kt = 1852/3600 m/s
    const [, , one, two, three, four, five] = WIND_SCALES[0]!.classes.map(({ fromMps }) => fromMps.toFixed(4));
    expect([one, two, three, four, five]).toEqual(['32.9244', '42.6989', '49.3867', '58.1322', '70.4789']);
  });

  it('follow Beaufort', () => {
    // published: WMO Guide No. 8, wind speed equivalents in m/s
    const winds = [0, 0.2, 0.3, 1.5, 1.6, 7.9, 8, 17.1, 17.2, 32.6, 32.7, 80];
    expect(codes('beaufort', winds, mps)).toEqual('0 0 1 1 2 4 5 7 8 11 12 12'.split(' '));
    // identity: v = 0.836 B^1.5 m/s lies inside each force
    for (let force = 1; force <= 12; force++)
      expect(codes('beaufort', [0.836 * force ** 1.5], mps)).toEqual([String(force)]);
  });

  it('follow the Bureau of Meteorology in km/h and in knots', () => {
    // published: Bureau of Meteorology, Knowledge Centre, tropical cyclone categories
    const means = [62, 63, 88, 89, 117, 118, 159, 160, 199, 201];
    expect(codes('australian', means, kmh)).toEqual('low 1 1 2 2 3 3 4 4 5'.split(' '));
    const gusts = [124, 125, 164, 165, 224, 225, 279, 280];
    expect(codes('australian-gust', gusts, kmh)).toEqual('1 2 2 3 3 4 4 5'.split(' '));
    // published: the same in knots (from memory)
    const inKnots = [33, 34, 47, 48, 63, 64, 85, 86, 107, 108];
    expect(codes('australian', inKnots, knots)).toEqual('low 1 1 2 2 3 3 4 4 5'.split(' '));
  });

  it('follow the agencies of India and Japan', () => {
    // published: India Meteorological Department, Mumbai, classification of disturbances; 90 kt from memory
    expect(codes('india', [16, 17, 27, 28, 33, 34, 47, 48, 63, 64, 89, 90, 119, 120], knots)).toEqual(
      'L D D DD DD CS CS SCS SCS VSCS VSCS ESCS ESCS SuCS'.split(' '),
    );
    // published: RSMC Tokyo, classes of tropical cyclones
    expect(codes('japan', [33, 34, 47, 48, 63, 64, 84, 85, 104, 105], knots)).toEqual(
      'TD TS TS STS STS TY TY TY+ TY+ TY++'.split(' '),
    );
  });

  it('start at 0 and rise', () => {
    for (const { classes, averagingS } of WIND_SCALES) {
      expect(classes[0]!.fromMps).toBe(0);
      for (let i = 1; i < classes.length; i++) expect(classes[i]!.fromMps).toBeGreaterThan(classes[i - 1]!.fromMps);
      expect([3, 60, 180, 600]).toContain(averagingS);
    }
  });

  it('keep a bound that went through a conversion', () => {
    const bound = knots(64) / 3 + knots(64) / 3 + knots(64) / 3;
    expect(windClass(bound * (1 - 2e-16), { scale: 'saffir-simpson' }).code).toBe('1');
    expect(windClass(knots(64) - 1e-3, { scale: 'saffir-simpson' }).code).toBe('TS');
  });

  it('convert a wind of another averaging period first', () => {
    // identity: 70 kt over 1 min are 65 kt over 10 min at sea
    const factor = averagingFactor('at-sea', { fromS: 60, toS: 600 });
    expect(windClass(knots(64) / factor, { scale: 'japan', averagingS: 60 }).code).toBe('TY');
    expect(windClass((0.999 * knots(64)) / factor, { scale: 'japan', averagingS: 60 }).code).toBe('STS');
  });

  it('refuse what has no class', () => {
    for (const wind of [-1, Number.NaN]) expect(() => windClass(wind, { scale: 'beaufort' })).toThrow(InputError);
    expect(() => windClass(20, { scale: 'richter' })).toThrow(/saffir-simpson, /);
    expect(() => windClass(20, { scale: 'beaufort', averagingS: 45 })).toThrow(InputError);
  });
});
