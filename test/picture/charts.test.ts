import { describe, expect, it } from 'vitest';
import { siteRecords } from '../../src/exposure/sites.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { roundDomain, roundTicks } from '../../src/picture/chart.js';
import { profileSvg } from '../../src/picture/profile-svg.js';
import { seriesSvg } from '../../src/picture/series-svg.js';
import { trackSvg } from '../../src/picture/track-svg.js';
import { knots } from '../../src/units.js';
import { inventedTrack, madeStorm, STORMS } from './invented.js';

const count = (svg: string, what: RegExp): number => svg.match(what)?.length ?? 0;

describe('axes', () => {
  // identity: ticks are multiples of 1, 2, 2.5 or 5 times a power of ten inside the domain
  it('carry round values', () => {
    expect(roundTicks([0, 70], 7)).toEqual([0, 10, 20, 30, 40, 50, 60, 70]);
    expect(roundTicks([0.1, 0.94], 5)).toEqual([0.2, 0.4, 0.6, 0.8]);
    expect(roundTicks([3, 3], 5)).toEqual([3]);
    expect(roundDomain([948.9, 1012], 5)).toEqual([940, 1020]);
  });
});

describe('drawings', () => {
  const { track, model } = madeStorm('open');
  const timeMs = track.fixes[2]!.timeMs;

  it('profiles stand side by side on common axes', () => {
    const vortices = ['holland-1980', 'rankine'].map((name) => {
      const recipe = makeRecipe(undefined, [`vortex.profile=${name}`]);
      const one = windModel(track, recipe);
      return { name, recipe, state: one.path.at(timeMs), field: one.fieldAt(timeMs), rows: [{ radiusM: 300_000 }] };
    });
    const svg = profileSvg(vortices);
    expect(count(svg, /class="line"/g)).toBe(2 * 5);
    expect(svg).toContain('>holland-1980<');
    expect(svg).toContain('>rankine<');
    expect(svg).not.toContain('NaN');
    const axes = [...svg.matchAll(/<text[^>]*text-anchor="end"[^>]*>(\d+)<\/text>/g)].map(([, text]) => text);
    expect(axes.slice(0, axes.length / 2)).toEqual(axes.slice(axes.length / 2));
  });

  it('regimes change with the Rossby number', () => {
    const field = model.fieldAt(timeMs);
    const vortex = { name: 'one', recipe: makeRecipe(), state: field.state, field, rows: [{ radiusM: 900_000 }] };
    const rossby = profileSvg([vortex]);
    expect(count(rossby, /class="regime cyclostrophic"/g)).toBeGreaterThan(0);
    expect(count(rossby, /class="regime gradient"/g)).toBeGreaterThan(0);
    const never = profileSvg([vortex], { regimeBounds: { above: 1e9, below: 0 } });
    expect(count(never, /class="regime cyclostrophic"/g)).toBe(0);
  });

  it('series have a panel a place, with the peak marked', () => {
    const records = siteRecords(
      model,
      [
        { name: 'A <b>', latDeg: 30, lonDeg: -45.5 },
        { name: 'Far', latDeg: -40, lonDeg: 100 },
      ],
      {
        levelsMps: [knots(34)],
        fromMs: model.path.startMs,
        toMs: model.path.endMs,
        gustFactor: 1.11,
        everyS: 3600,
      },
    );
    const svg = seriesSvg(records, { averagingS: 60, gustDurationS: 3, levelsMps: [knots(34)], stormName: 'Quillon' });
    expect(count(svg, /class="place"/g)).toBe(2);
    expect(count(svg, /class="peak"/g)).toBe(1);
    expect(svg).toContain('A &#60;b&#62;');
    expect(svg).toContain('no wind here');
    expect(svg).not.toContain('NaN');
  });

  it('tracks show every fix, hollow where there is no wind', () => {
    const storms = [STORMS.open.track, STORMS.antimeridian.track, inventedTrack('One', [[10, 10, 40]])];
    const bare = { ...storms[2]!, fixes: [{ ...storms[2]!.fixes[0]!, maxWindMps: null }] };
    const svg = trackSvg([storms[0]!, storms[1]!, bare]);
    expect(count(svg, /class="fix"/g)).toBe(9);
    expect(count(svg, /class="fix"[^>]*fill="#ffffff"/g)).toBe(1);
    expect(svg).toContain('3 storms');
    expect(trackSvg([])).toContain('0 storms');
  });
});
