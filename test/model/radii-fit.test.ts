import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { makeRecipe } from '../../src/model/recipe.js';
import { maximumOf } from '../../src/model/round-trip.js';
import { quadrantRadiiM } from '../../src/model/verify.js';
import { windModel } from '../../src/model/wind.js';
import { readTracksFromText } from '../../src/track/read/read.js';
import type { Track, WindRadii } from '../../src/track/track.js';
import { knots } from '../../src/units.js';
import { mirrored, trackOf } from '../storms.js';

const KM = 1000;
const radii = (kt: number, km: readonly (number | null)[]): WindRadii => ({
  thresholdMps: knots(kt),
  radiiM: km.map((r) => (r === null ? null : r * KM)) as unknown as WindRadii['radiiM'],
});
const recipe = makeRecipe(undefined, []);
const radiiAt = (track: Track, index: number, kt: number) => {
  const model = windModel(track, recipe);
  return quadrantRadiiM(model.fieldAt(track.fixes[index]!.timeMs), [knots(kt)])[0]!.map((r) => r / KM);
};

/** an invented storm with full radii at its middle fix */
const withRadii = (rows: readonly WindRadii[], over: object = {}) =>
  trackOf([
    { hours: 0, latDeg: 18, lonDeg: -55, maxWindMps: knots(60) },
    { hours: 6, latDeg: 19, lonDeg: -56, maxWindMps: knots(95), radiusOfMaxWindM: 30 * KM, windRadii: rows, ...over },
    { hours: 12, latDeg: 20, lonDeg: -57.5, maxWindMps: knots(80) },
  ]);

describe('a field fitted to wind radii', () => {
  it('meets every radius and keeps the maximum and its radius', () => {
    const share = fc.double({ min: 0.55, max: 1, noNaN: true });
    fc.assert(
      fc.property(
        fc.tuple(share, share, share, share),
        fc.double({ min: 120, max: 400, noNaN: true }),
        fc.double({ min: 0.35, max: 0.7, noNaN: true }),
        fc.double({ min: 0.4, max: 0.8, noNaN: true }),
        (shares, outer, second, third) => {
          const r34 = shares.map((s) => s * outer);
          const r50 = r34.map((r) => Math.max(40, r * second));
          const r64 = r50.map((r) => Math.max(34, r * third));
          const track = withRadii([radii(34, r34), radii(50, r50), radii(64, r64)]);
          const model = windModel(track, recipe);
          const field = model.fieldAt(track.fixes[1]!.timeMs);
          const got = quadrantRadiiM(field, [knots(34), knots(50), knots(64)]);
          for (const [k, wanted] of [r34, r50, r64].entries())
            for (let j = 0; j < 4; j++) expect(Math.abs(got[k]![j]! / KM - wanted[j]!)).toBeLessThan(0.02 * wanted[j]!);
          // the round-trip rule
          expect(Math.abs(maximumOf(field) / knots(95) - 1)).toBeLessThan(0.01);
          expect(field.strongestOnCircle(30 * KM) / knots(95)).toBeGreaterThan(0.99);
        },
      ),
      { numRuns: 60, seed: 2016 },
    );
  });

  it('falls outward beyond the ridge along every azimuth, without jumps around the circle', () => {
    const track = withRadii([
      radii(34, [300, 260, 110, 200]),
      radii(50, [150, 130, 60, 90]),
      radii(64, [70, 70, 35, 40]),
    ]);
    const field = windModel(track, recipe).fieldAt(track.fixes[1]!.timeMs);
    const circle = Float64Array.from({ length: 720 }, (_, i) =>
      (i % 2 === 0 ? Math.sin : Math.cos)(((i >> 1) * Math.PI) / 180),
    );
    const winds = new Float64Array(720);
    let last: number[] | null = null;
    for (let r = 30 * KM; r < 700 * KM; r *= 1.03) {
      field.onCircle(winds, r, circle);
      const speeds = Array.from({ length: 360 }, (_, i) => Math.hypot(winds[2 * i]!, winds[2 * i + 1]!));
      for (let i = 0; i < 360; i++) {
        if (last) expect(speeds[i]!).toBeLessThanOrEqual(last[i]! + 1e-6);
        expect(Math.abs(speeds[i]! - speeds[(i + 1) % 360]!)).toBeLessThan(1.2);
      }
      last = speeds;
    }
  });

  it('takes any subset of winds and quadrants', () => {
    const only = withRadii([radii(50, [null, 120, null, 80])]);
    const got = radiiAt(only, 1, 50);
    expect(got[1]!).toBeCloseTo(120, 0);
    expect(got[3]!).toBeCloseTo(80, 0);
    expect(got[0]!).toBeGreaterThan(50);
    const none = withRadii([radii(34, [250, 200, 150, 200]), radii(64, [60, 50, 0, 0])]);
    const inner = radiiAt(none, 1, 64);
    expect(inner[0]!).toBeCloseTo(60, 0);
    // a boundary belongs to both quadrants; strictly inside there is none
    expect(inner[2]!).toBeLessThan(32);
  });

  it('is continuous in time, exact at the fixes', () => {
    const track = trackOf([
      { hours: 0, latDeg: 18, lonDeg: -55, maxWindMps: knots(45), windRadii: [radii(34, [110, 90, 0, 75])] },
      { hours: 6, latDeg: 19, lonDeg: -56, maxWindMps: knots(60) },
      {
        hours: 12,
        latDeg: 20,
        lonDeg: -57.5,
        maxWindMps: knots(85),
        windRadii: [radii(34, [220, 180, 110, 150]), radii(50, [110, 90, 60, 80]), radii(64, [55, 45, 30, 35])],
      },
    ]);
    const model = windModel(track, recipe);
    const start = track.fixes[0]!.timeMs;
    let last: readonly number[] | null = null;
    for (let minute = 0; minute <= 720; minute += 10) {
      const now = quadrantRadiiM(model.fieldAt(start + minute * 60_000), [knots(34)])[0]!;
      if (last) for (let j = 0; j < 4; j++) if (j !== 2) expect(Math.abs(now[j]! - last[j]!)).toBeLessThan(25 * KM);
      last = now;
    }
    expect(last!.map((r) => Math.round(r / KM))).toEqual([220, 180, 110, 150]);
    expect(radiiAt(track, 0, 34)[0]).toBeCloseTo(110, 0);
  });

  it('mirrors with the hemisphere', () => {
    const north = withRadii([radii(34, [250, 200, 150, 180]), radii(64, [60, 50, 40, 45])]);
    const swap = (row: WindRadii): WindRadii => ({
      ...row,
      radiiM: [row.radiiM[1], row.radiiM[0], row.radiiM[3], row.radiiM[2]],
    });
    const south = mirrored(north);
    const turned = { ...south, fixes: south.fixes.map((fix) => ({ ...fix, windRadii: fix.windRadii.map(swap) })) };
    const a = radiiAt(north, 1, 50);
    const b = radiiAt(turned, 1, 50);
    // identity: a mirrored storm has mirrored radii
    for (const [j, k] of [1, 0, 3, 2].entries()) expect(Math.abs(a[j]! - b[k]!)).toBeLessThan(1e-6 * a[j]!);
  });

  it('reports contradictions and ignores radii when told to', () => {
    const track = withRadii([radii(34, [100, 100, 100, 100]), radii(50, [120, 60, 60, 60])]);
    expect(windModel(track, recipe).cautions.join('\n')).toMatch(/not inside that of a lower wind/);
    const ignoring = makeRecipe(undefined, ['vortex.radii=ignore']);
    const plain = windModel(withRadii([], {}), recipe).fieldAt(track.fixes[1]!.timeMs);
    const ignored = windModel(track, makeRecipe(undefined, ['vortex.radii=ignore', 'completion.rmax=willoughby-2006']));
    expect(ignored.cautions.join('\n')).not.toMatch(/lower wind/);
    expect(
      windModel(track, ignoring)
        .fieldAt(track.fixes[1]!.timeMs)
        .strongestOnCircle(90 * KM),
    ).toBeCloseTo(plain.strongestOnCircle(90 * KM), 6);
  });

  it('meets the radii of a real storm', () => {
    // independent: NOAA National Hurricane Center, HURDAT2, AL112017, rows as published
    const text = readFileSync(new URL('../../fixtures/hurdat2_AL112017_IRMA.txt', import.meta.url), 'utf8');
    const [track] = readTracksFromText(text, { source: 'hurdat2_AL112017_IRMA.txt' });
    const model = windModel(track!, recipe);
    let compared = 0;
    for (const fix of track!.fixes) {
      const field = model.fieldAt(fix.timeMs);
      expect(Math.abs(maximumOf(field) / fix.maxWindMps! - 1)).toBeLessThan(0.01);
      for (const { thresholdMps, radiiM } of fix.windRadii) {
        if (!radiiM.every((r) => r !== null && r > 0)) continue;
        const got = quadrantRadiiM(field, [thresholdMps])[0]!;
        for (let j = 0; j < 4; j++) {
          expect(Math.abs(got[j]! - radiiM[j]!)).toBeLessThan(2000);
          compared++;
        }
      }
    }
    expect(compared).toBeGreaterThan(400);
  });
});
