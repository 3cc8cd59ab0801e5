import { describe, expect, it } from 'vitest';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { knots, toKnots } from '../../src/units.js';
import { rectangles } from '../land-world.js';
import { trackOf } from '../storms.js';

/** A large island between 60° and 66° W, and a storm drawn across it with 100 kt throughout. */
const island = rectangles([-66, 10, -60, 25]);
const across = trackOf(
  Array.from({ length: 13 }, (_, i) => ({
    hours: 6 * i,
    latDeg: 17,
    lonDeg: -57 - i,
    maxWindMps: knots(100),
    radiusOfMaxWindM: 40_000,
  })),
);

describe('a storm drawn across an island', () => {
  const model = windModel(across, makeRecipe(undefined, ['land.surface=off']), { land: island });
  const windAt = (hours: number): number => toKnots(model.path.at(model.path.startMs + hours * 3_600_000).maxWindMps);

  it('decays by the published curve from landfall on', () => {
    // independent: arithmetic script of Kaplan & DeMaria 1995 for 100 kt; landfall after 18 h, at 60° W
    const expected = { 1: 84.263, 3: 74.303, 6: 62.498, 12: 46.945, 24: 33.175 };
    for (const [hours, kt] of Object.entries(expected))
      expect(Math.abs(windAt(18 + Number(hours)) - kt)).toBeLessThan(0.25);
  });

  it('never grows over land and keeps its share of the track afterwards', () => {
    let before = Number.POSITIVE_INFINITY;
    for (let hours = 18.1; hours < 53.9; hours += 0.1) {
      expect(windAt(hours)).toBeLessThanOrEqual(before + 1e-9);
      before = windAt(hours);
    }
    expect(windAt(17.9)).toBeCloseTo(100, 6);
    // the step of 0.9 at the coast is taken back over water
    expect(windAt(56) / windAt(53.9)).toBeCloseTo(1 / 0.9, 2);
    expect(windAt(72)).toBeCloseTo(windAt(60), 6);
  });

  it('is left alone where the track is a best track or there is no land', () => {
    const best = { ...across, kind: 'best' as const };
    for (const [track, land] of [
      [best, island],
      [across, rectangles([10, 10, 20, 20])],
    ] as const) {
      const own = windModel(track, makeRecipe(undefined, ['land.surface=off']), { land });
      expect(toKnots(own.path.at(own.path.startMs + 40 * 3_600_000).maxWindMps)).toBeCloseTo(100, 9);
    }
    const twice = windModel(best, makeRecipe(undefined, ['land.decay=on']), { land: island });
    expect(twice.cautions.join(' ')).toMatch(/decays twice/);
  });
});
