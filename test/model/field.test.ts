import { describe, expect, it } from 'vitest';
import { fieldMethods, windField } from '../../src/model/field.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { maximumOf } from '../../src/model/round-trip.js';
import { quadrantRadiiM } from '../../src/model/verify.js';
import { windOf } from '../../src/model/wind.js';
import type { StormState } from '../../src/track/path.js';
import { knots } from '../../src/units.js';

const storm = (over: Partial<StormState> = {}): StormState => ({
  timeMs: 0,
  latDeg: 18,
  lonDeg: -60,
  hemisphere: 1,
  motionEastMps: 0,
  motionNorthMps: 0,
  maxWindMps: 45,
  centralPressurePa: 95_500,
  ambientPressurePa: 101_000,
  radiusOfMaxWindM: 35_000,
  sizeRadiusM: 150_000,
  hollandB: 1.4,
  ...over,
});
const field = (state: StormState, ...settings: string[]) =>
  windField(state, fieldMethods(makeRecipe(undefined, settings)), { outerRadiusM: 600_000 });
const EAST = Float64Array.of(1, 0);

describe('wind directions', () => {
  const south = { latDeg: -18, hemisphere: -1 } as const;
  const fromDeg = (state: StormState, settings: string[]): number => {
    const out = new Float64Array(2);
    // 100 km out the inflow of Sobey et al. is 25°
    field(state, 'surface.motion=none', ...settings).onCircle(out, 100_000, EAST);
    return ((Math.atan2(-out[0]!, -out[1]!) * 180) / Math.PI + 360) % 360;
  };
  it('blow anticlockwise around a northern centre and clockwise around a southern one', () => {
    // identity: due east of a northern centre the wind blows from the south, of a southern one from the north
    expect(fromDeg(storm(), ['surface.inflow=none'])).toBeCloseTo(180, 10);
    expect(fromDeg(storm(south), ['surface.inflow=none']) % 360).toBeCloseTo(0, 10);
    // identity: inflow turns it toward the centre
    expect(fromDeg(storm(), [])).toBeCloseTo(155, 10);
    expect(fromDeg(storm(south), [])).toBeCloseTo(25, 10);
  });

  it('carry east and north components that agree with the direction', () => {
    // identity: u = −V sin(from), v = −V cos(from)
    const at = windOf(field(storm({ motionNorthMps: 5 })), { latDeg: 18.4, lonDeg: -59.5 });
    const from = (at.fromDeg * Math.PI) / 180;
    expect(-at.speedMps * Math.sin(from)).toBeCloseTo(at.eastMps, 10);
    expect(-at.speedMps * Math.cos(from)).toBeCloseTo(at.northMps, 10);
  });

  it('are strongest right of the motion in the north, left of it in the south', () => {
    const side = (state: StormState): number => {
      const out = new Float64Array(4);
      field(state).onCircle(out, 35_000, Float64Array.of(1, 0, -1, 0));
      return Math.hypot(out[0]!, out[1]!) - Math.hypot(out[2]!, out[3]!);
    };
    expect(side(storm({ motionNorthMps: 6 }))).toBeGreaterThan(2);
    expect(side(storm({ motionNorthMps: 6, ...south }))).toBeLessThan(-2);
  });
});

describe('the maximum of a field', () => {
  it('is a thousandth above the wind of the state, so that a wind as high as the maximum has a place', () => {
    for (const maxWindMps of [knots(50), knots(64), knots(100)]) {
      for (const motionNorthMps of [0, 3, 8]) {
        const wind = field(storm({ maxWindMps, motionNorthMps }));
        expect(Math.abs(maximumOf(wind) / maxWindMps - 1.001)).toBeLessThan(2e-4);
        expect(Math.max(...quadrantRadiiM(wind, [maxWindMps])[0]!)).toBeGreaterThan(30_000);
      }
    }
  });
});
