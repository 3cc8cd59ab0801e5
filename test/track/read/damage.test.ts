import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { GalewakeError } from '../../../src/errors.js';
import type { Track } from '../../../src/track/track.js';
import { fixtureText, readText } from './read-text.js';

const SOURCES = [
  fixtureText('hurdat2_EP202015_PATRICIA.txt'),
  fixtureText('bdeck_bsh052021_YASA.dat').slice(0, 4000),
  fixtureText('ibtracs_v04r00_ACTIVE_list_original.csv').slice(0, 12_000),
  fixtureText('demo-tarrabel.csv'),
  '{"type":"FeatureCollection","features":[{"type":"Feature","properties":{"storm":"A","time":["2031090300","2031090306"],"vmax_kt":[50,60]},"geometry":{"type":"LineString","coordinates":[[0,15],[1,16]]}}]}',
];

const isNumber = (value: number | null): boolean => value === null || Number.isFinite(value);

/** What every reader promises of a track. */
function expectSound({ id, fixes }: Track): void {
  expect(id).not.toBe('');
  expect(fixes.length).toBeGreaterThan(0);
  fixes.forEach((fix, i) => {
    expect(Number.isFinite(fix.timeMs) && Math.abs(fix.latDeg) <= 90 && fix.lonDeg >= -180 && fix.lonDeg < 180).toBe(
      true,
    );
    if (i > 0) expect(fix.timeMs).toBeGreaterThan(fixes[i - 1]!.timeMs);
    const values = [
      fix.maxWindMps,
      fix.centralPressurePa,
      fix.ambientPressurePa,
      fix.outerIsobarPa,
      fix.outerIsobarRadiusM,
    ];
    expect(
      [...values, fix.radiusOfMaxWindM, fix.hollandB, ...fix.windRadii.flatMap(({ radiiM }) => radiiM)].every(isNumber),
    ).toBe(true);
    expect(fix.maxWindMps ?? 0).toBeGreaterThanOrEqual(0);
    const thresholds = fix.windRadii.map(({ thresholdMps }) => thresholdMps);
    expect(thresholds).toEqual([...new Set(thresholds)].toSorted((a, b) => a - b));
  });
}

describe('a damaged file', () => {
  it('is read soundly or refused in words, whatever was done to it', () => {
    const change = fc.record({
      at: fc.nat(),
      remove: fc.nat({ max: 12 }),
      put: fc.oneof(
        fc.constantFrom(
          '',
          ',',
          '\n',
          '"',
          '-',
          '9',
          '\0',
          'NaN',
          '-999',
          ';',
          '{',
          '}',
          '.',
          '\r',
          '\uFEFF',
          'W',
          'é',
        ),
        fc.string({ maxLength: 4 }),
      ),
    });
    fc.assert(
      fc.property(fc.constantFrom(...SOURCES), fc.array(change, { minLength: 1, maxLength: 4 }), (source, changes) => {
        let text = source;
        for (const { at, remove, put } of changes) {
          const from = at % text.length || 0;
          text = text.slice(0, from) + put + text.slice(from + remove);
        }
        try {
          readText(text).forEach(expectSound);
        } catch (error) {
          // an expectation that fails is no GalewakeError either
          if (!(error instanceof GalewakeError)) throw error;
          expect(error.code).toMatch(/^track\./);
          expect(error.message).toMatch(/^storm\.csv:/);
        }
      }),
      { numRuns: 2000 },
    );
  });
});
