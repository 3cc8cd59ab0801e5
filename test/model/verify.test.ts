import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { makeRecipe } from '../../src/model/recipe.js';
import { hideableOf, scoreOf, summarize, verifyTrack, WITHOUT_RADII, withHidden } from '../../src/model/verify.js';
import { contrast, rgbOf } from '../../src/picture/colours.js';
import { verifySvg } from '../../src/picture/verify-svg.js';
import { readTracksFromText } from '../../src/track/read/read.js';
import { knots } from '../../src/units.js';
import { trackOf } from '../storms.js';

const recipe = makeRecipe(undefined, []);
const real = (name: string) =>
  readTracksFromText(readFileSync(new URL(`../../fixtures/${name}`, import.meta.url), 'utf8'), { source: name });

describe('scores', () => {
  it('are those of the definition', () => {
    // independent: worked by hand; differences 1, −3, 2
    const score = scoreOf([
      { observed: 1, modelled: 2 },
      { observed: 5, modelled: 2 },
      { observed: 3, modelled: 5 },
    ]);
    expect(score.n).toBe(3);
    expect(score.bias).toBeCloseTo(0, 12);
    expect(score.mae).toBeCloseTo(2, 12);
    expect(score.rmse).toBeCloseTo(Math.sqrt(14 / 3), 12);
    // Σ(o − 3)(m − 3) = 2 − 2 + 0 = 0
    expect(score.r).toBeCloseTo(0, 12);
    expect(scoreOf([])).toEqual({ n: 0, bias: null, mae: null, rmse: null, r: null });
  });
});

describe('rows', () => {
  const track = trackOf([
    {
      hours: 0,
      latDeg: 20,
      lonDeg: -60,
      maxWindMps: knots(40),
      centralPressurePa: 100_000,
      windRadii: [{ thresholdMps: knots(34), radiiM: [100_000, 80_000, 0, null] }],
    },
    { hours: 6, latDeg: 20.5, lonDeg: -61, maxWindMps: knots(40) },
  ]);
  it('stand for fixes with something observed; null where not observed', () => {
    const rows = verifyTrack(track, recipe);
    expect(rows).toHaveLength(1);
    const pair = rows[0]!.radii['34kt']!;
    expect(pair.observed_km).toEqual([100, 80, 0, null]);
    expect(pair.modelled_km[0]).toBeCloseTo(100, 0);
    expect(pair.modelled_km[3]).toBeNull();
    expect(rows[0]!.pressure_hpa).toEqual({ observed: 1000, modelled: 1000 });
    // not all four above zero: not in the summary
    expect(summarize(rows)['34kt'].n).toBe(0);
    expect(summarize(rows).pressure_hpa).toMatchObject({ n: 1, bias: 0 });
  });
  it('hide what they are told to, and compare with it all the same', () => {
    const hidden = withHidden(track, ['34kt', 'pressure']);
    expect(hidden.fixes[0]!.windRadii).toEqual([]);
    expect(hidden.fixes[0]!.centralPressurePa).toBeNull();
    const [row] = verifyTrack(track, recipe, { hide: ['34kt', 'pressure'] });
    expect(row!.radii['34kt']!.observed_km[0]).toBe(100);
    expect(row!.pressure_hpa.modelled).not.toBe(1000);
    expect(() => hideableOf(['83kt'])).toThrow(/34kt, 50kt, 64kt, rmax, pressure/);
  });
  it('are drawn', () => {
    const svg = verifySvg(verifyTrack(track, recipe), { title: 'Testor', hidden: ['rmax'] });
    expect(svg).toContain('Central pressure');
    expect(svg.match(/>modelled</g)).toHaveLength(svg.match(/>observed</g)!.length);
    // dots stand out from the paper by 3 to 1, as WCAG 2.2 asks of graphics
    for (const [, fill] of svg.matchAll(/class="dots" fill="(#\w+)"/g))
      expect(contrast(rgbOf(fill!), [255, 255, 255])).toBeGreaterThan(3);
    expect(svg).toContain('Hidden from the model: rmax.');
  });
});

describe('skill', () => {
  it('stays what it is on three storms', () => {
    // frozen: NOAA National Hurricane Center, HURDAT2 (EP202015, CP032015, AL112017), every fix; a guard, not a claim
    const tracks = ['hurdat2_EP202015_PATRICIA.txt', 'hurdat2_CP032015_KILO.txt', 'hurdat2_AL112017_IRMA.txt'].flatMap(
      real,
    );
    const none = summarize(tracks.flatMap((track) => verifyTrack(track, recipe, { hide: WITHOUT_RADII })));
    expect(none['34kt'].mae).toBeLessThan(35);
    expect(none['50kt'].mae).toBeLessThan(22);
    expect(none['64kt'].mae).toBeLessThan(18);
    const all = summarize(tracks.flatMap((track) => verifyTrack(track, recipe)));
    for (const wind of ['34kt', '50kt', '64kt'] as const) expect(all[wind].mae).toBeLessThan(1);
  });
});
