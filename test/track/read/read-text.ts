import { readFileSync } from 'node:fs';
import { GalewakeError } from '../../../src/errors.js';
import { type ReadTracksOptions, readTracksFromText } from '../../../src/track/read/read.js';
import type { Fix, Track } from '../../../src/track/track.js';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';

export const fixtureText = (name: string): string =>
  readFileSync(new URL(`../../../fixtures/${name}`, import.meta.url), 'utf8');

type Options = Omit<ReadTracksOptions, 'source'>;

export const readText = (text: string, options: Options = {}): Track[] =>
  readTracksFromText(text, { source: 'storm.csv', ...options });

export const readFixture = (name: string, options: Options = {}): Track[] => readText(fixtureText(name), options);

/** The only track of a text. */
export function readOne(text: string, options: Options = {}): Track {
  const tracks = readText(text, options);
  if (tracks.length !== 1) throw new Error(`${tracks.length} tracks instead of one`);
  return tracks[0]!;
}

export function fixAt(track: Track, time: string): Fix {
  const fix = track.fixes.find(({ timeMs }) => timeMs === Date.parse(time));
  if (!fix) throw new Error(`no fix at ${time}`);
  return fix;
}

/** Radii in nautical miles by threshold in knots. */
export const radiiNmi = (fix: Fix): Record<number, (number | null)[]> =>
  Object.fromEntries(
    fix.windRadii.map(({ thresholdMps, radiiM }) => [
      Math.round(thresholdMps / knots(1)),
      radiiM.map((radiusM) => (radiusM === null ? null : radiusM / NAUTICAL_MILE_M)),
    ]),
  );

/** A track without what its source adds: format, cautions and line numbers. */
export const bare = ({ format: _f, cautions: _c, fixes, ...rest }: Track) => ({
  ...rest,
  fixes: fixes.map(({ line: _line, ...fix }) => fix),
});

/** The error that a call throws. */
export function failureOf(call: () => unknown): GalewakeError {
  try {
    call();
  } catch (error) {
    if (error instanceof GalewakeError) return error;
    throw error;
  }
  throw new Error('nothing was thrown');
}
