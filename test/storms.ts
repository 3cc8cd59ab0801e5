import { bareFix, type Fix, type Track } from '../src/track/track.js';
import { knots } from '../src/units.js';

/** Invented storms for tests. */
export function trackOf(
  fixes: readonly (Partial<Fix> & { hours: number; latDeg: number; lonDeg: number })[],
  over: Partial<Track> = {},
): Track {
  return {
    id: 'T1',
    name: 'Testor',
    basin: null,
    kind: 'drawn',
    format: 'csv',
    cautions: [],
    fixes: fixes.map(({ hours, ...fix }, i) => ({
      ...bareFix({
        timeMs: Date.UTC(2031, 8, 3) + hours * 3_600_000,
        latDeg: fix.latDeg,
        lonDeg: fix.lonDeg,
        line: i + 2,
      }),
      ...fix,
    })),
    ...over,
  };
}

/** A two-day storm that recurves, grows and weakens. */
export const recurving = trackOf([
  { hours: 0, latDeg: 18, lonDeg: -55, maxWindMps: knots(60), radiusOfMaxWindM: 50_000 },
  { hours: 12, latDeg: 19.5, lonDeg: -58, maxWindMps: knots(95), radiusOfMaxWindM: 32_000 },
  { hours: 24, latDeg: 22, lonDeg: -60, maxWindMps: knots(120), radiusOfMaxWindM: 25_000 },
  { hours: 36, latDeg: 25.5, lonDeg: -60, maxWindMps: knots(100), radiusOfMaxWindM: 35_000 },
  { hours: 48, latDeg: 29, lonDeg: -57.5, maxWindMps: knots(70), radiusOfMaxWindM: 50_000 },
]);

/** The same storm on the other side of the equator. */
export function mirrored(track: Track): Track {
  return { ...track, fixes: track.fixes.map((fix) => ({ ...fix, latDeg: -fix.latDeg })) };
}

/** The same storm some degrees farther east. */
export function shifted(track: Track, byDeg: number): Track {
  return {
    ...track,
    fixes: track.fixes.map((fix) => ({ ...fix, lonDeg: ((((fix.lonDeg + byDeg + 180) % 360) + 360) % 360) - 180 })),
  };
}
