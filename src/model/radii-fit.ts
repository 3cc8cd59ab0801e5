import { averagingFactor } from '../surface/averaging.js';
import type { CompletedTrack } from '../track/complete.js';
import { type Curve, monotoneCubic, piecewiseLinear } from '../track/interpolate.js';
import type { Path } from '../track/path.js';
import type { Quadrants, WindRadii } from '../track/track.js';
import { knots } from '../units.js';
import type { RadiiState } from '../vortex/radii.js';
import { type ObservedLevel, type RadiiConflict, radiiState } from '../vortex/radii-state.js';
import type { WindField } from './field.js';

/** The radii of a storm at any time, fitted at every fix that has some. */
export interface RadiiFit {
  readonly at: (timeMs: number) => RadiiState;
  readonly cautions: readonly string[];
}

const CONFLICTS: Readonly<Record<RadiiConflict, string>> = {
  'above-maximum': 'a radius of a wind that is not below the maximum wind: left aside',
  'inside-maximum': 'no radius of its highest wind lies outside the radius of maximum wind: put just outside it',
  crossing: 'a radius that is not inside that of a lower wind: put just inside it',
  'absent-below-maximum':
    'a wind below the maximum that is said to blow nowhere: it blows about the radius of maximum wind',
};
const QUADRANTS = [0, 1, 2, 3] as const;
/** Winds (1-min means) that carry the shape of the base vortex where nobody observed them, and how near to another they are left out. */
const SHAPE_WINDS_KT = [34, 50, 64, 96];
const LEAST_SPACING = 0.12;
/** Fall of ln V with ln r by which a wind above the vortex's own is put inside R. */
const INWARD_EXPONENT = 0.5;

/**
 * Fits a storm's radii. The winds of all fixes together make the levels; at each fix that has radii the set is completed (see
 * `radiiState`); between them the stretch against the base vortex is carried over in time, so that fixes without radii, and
 * levels that appear and vanish as the storm grows and weakens, are ordinary cases. Exact at the fixes.
 * @param baseFieldAt the field without radii, untapered
 * @returns null where no fix has any radii
 */
export function fitRadii(
  completed: CompletedTrack,
  path: Path,
  {
    baseFieldAt,
    interpolation,
  }: { baseFieldAt: (timeMs: number) => WindField; interpolation: 'monotone-cubic' | 'linear' },
): RadiiFit | null {
  const { fixes } = completed;
  const observed = fixes.map(({ fix }) => observedOf(fix.windRadii, fix.averagingS, completed.averagingS));
  const winds: number[] = [];
  for (const rows of observed)
    for (const { windMps } of rows) if (!winds.some((known) => Math.abs(known - windMps) < 0.2)) winds.push(windMps);
  if (winds.length === 0) return null;
  for (const wind of SHAPE_WINDS_KT.map(
    (kt) => knots(kt) / averagingFactor('at-sea', { fromS: completed.averagingS, toS: 60 }),
  ))
    if (!winds.some((known) => Math.abs(Math.log(known / wind)) < LEAST_SPACING)) winds.push(wind);
  winds.sort((a, b) => b - a);

  const counts = new Map<RadiiConflict, { count: number; line: number }>();
  const known: { index: number; stretch: number[][]; ridge: Quadrants<number> }[] = [];
  const bases = fixes.map(({ timeMs }) => {
    const field = baseFieldAt(timeMs);
    return { field, logRatio: winds.map((wind) => baseLogRatio(field, wind)) };
  });
  const states = fixes.map(({ fix }, index): RadiiState | null => {
    if (observed[index]!.length === 0) return null;
    const { field, logRatio } = bases[index]!;
    const levels = winds.map((windMps, k): ObservedLevel => {
      const row = observed[index]!.find((entry) => Math.abs(entry.windMps - windMps) < 0.2);
      return { windMps, radiiM: row?.radiiM ?? [null, null, null, null], baseLogRatio: logRatio[k]! };
    });
    const { state, conflicts } = radiiState(levels, field.state);
    for (const conflict of new Set(conflicts)) {
      const entry = counts.get(conflict);
      counts.set(conflict, { count: (entry?.count ?? 0) + 1, line: entry?.line ?? fix.line });
    }
    known.push({
      index,
      stretch: winds.map((_, k) => QUADRANTS.map((j) => state.levels[k]!.logRatio[j]! - logRatio[k]!)),
      ridge: state.ridge,
    });
    return state;
  });

  const seconds = fixes.map(({ timeMs }) => (timeMs - path.startMs) / 1000);
  const curve = (x: readonly number[], y: readonly number[]): Curve =>
    (interpolation === 'linear' ? piecewiseLinear : monotoneCubic)(x, y);
  const knownSeconds = known.map(({ index }) => seconds[index]!);
  const logRadius = winds.map((_, k) =>
    QUADRANTS.map((j) => {
      const stretch = curve(
        knownSeconds,
        known.map((entry) => entry.stretch[k]![j]!),
      );
      return curve(
        seconds,
        fixes.map((_fix, i) => {
          const ratio =
            states[i]?.levels[k]?.logRatio[j] ?? Math.max(-1, bases[i]!.logRatio[k]! + stretch(seconds[i]!));
          return ratio + Math.log(bases[i]!.field.state.radiusOfMaxWindM);
        }),
      );
    }),
  );
  const ridge = QUADRANTS.map((j) =>
    curve(
      seconds,
      fixes.map((_, i) => states[i]?.ridge[j] ?? 0),
    ),
  );
  const last = seconds[seconds.length - 1]!;
  return {
    cautions: [...counts].map(
      ([conflict, { count, line }]) =>
        `storm ${completed.track.id}: ${count} of ${known.length} fixes with wind radii (first: line ${line}) have ${CONFLICTS[conflict]}`,
    ),
    at: (timeMs) => {
      const s = Math.min(last, Math.max(0, (timeMs - path.startMs) / 1000));
      const logR = Math.log(path.at(timeMs).radiusOfMaxWindM);
      return {
        levels: winds.map((windMps, k) => ({
          windMps,
          logRatio: QUADRANTS.map((j) => logRadius[k]![j]!(s) - logR) as unknown as Quadrants<number>,
        })),
        ridge: QUADRANTS.map((j) => ridge[j]!(s)) as unknown as Quadrants<number>,
      };
    },
  };
}

/** The radii of a fix with the winds in the model's averaging period; a wind of which nothing is observed is left out. */
function observedOf(
  windRadii: readonly WindRadii[],
  fromS: number,
  toS: number,
): { windMps: number; radiiM: Quadrants<number | null> }[] {
  const factor = averagingFactor('at-sea', { fromS, toS });
  return windRadii
    .filter(({ radiiM }) => radiiM.some((radius) => radius !== null))
    .map(({ thresholdMps, radiiM }) => ({ windMps: thresholdMps * factor, radiiM }));
}

/** ln(r/R) where the strongest azimuth falls to a wind; negative where it does not reach it. */
function baseLogRatio(field: WindField, windMps: number): number {
  const { radiusOfMaxWindM } = field.state;
  const most = field.strongestOnCircle(radiusOfMaxWindM);
  if (most <= windMps) return Math.max(-1, -Math.log(windMps / most) / INWARD_EXPONENT);
  let low = 0;
  let high = Math.log(3_000_000 / radiusOfMaxWindM);
  for (let i = 0; i < 24; i++) {
    const middle = 0.5 * (low + high);
    if (field.strongestOnCircle(radiusOfMaxWindM * Math.exp(middle)) > windMps) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}
