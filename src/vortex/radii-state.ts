import type { Quadrants } from '../track/track.js';
import { LEAST_FROM_RIDGE, LEAST_GAP, type RadiiState } from './radii.js';

/** One wind of a fix: what was observed of it and what the base vortex would have. */
export interface ObservedLevel {
  readonly windMps: number;
  /** observed radii, m; 0 = no such wind in the quadrant, null = not observed */
  readonly radiiM: Quadrants<number | null>;
  /** ln(r/R) of the base vortex, mean around the circle; negative where it does not reach this wind */
  readonly baseLogRatio: number;
}

/** How an observation had to give way. */
export type RadiiConflict = 'above-maximum' | 'inside-maximum' | 'crossing' | 'absent-below-maximum';

/** How far a stretch known at one wind holds at another: it fades as exp(−0.38 |Δ ln V|) (own calibration, 2004–2016). */
const STRETCH_FADING = 0.38;
/** ln(r/R) that stands for `no such wind here`. */
const ABSENT = -0.1;
const LOWEST = -1;
/** A wind up to this share of the maximum counts as reached: knots were rounded. */
const REACHED = 1.0005;
const QUADRANTS = [0, 1, 2, 3] as const;

/**
 * A full set of radii from a partial one. Where two things contradict each other the earlier of this list stands: the maximum
 * wind; the radius of maximum wind; the radii of the lowest wind; those of higher winds in rising order; values that nobody
 * observed. So a radius of a wind above the maximum is left aside; a radius inside the ridge pulls the ridge in on that side;
 * a radius that is not inside that of a lower wind is put just inside it. What was not observed keeps the shape of the base
 * vortex, stretched as the observed winds of the same quadrant are, or as the same wind is in the other quadrants.
 */
export function radiiState(
  levels: readonly ObservedLevel[],
  storm: { readonly maxWindMps: number; readonly radiusOfMaxWindM: number },
): { state: RadiiState; conflicts: RadiiConflict[] } {
  const conflicts: RadiiConflict[] = [];
  // from the lowest wind up
  const rising = [...levels].sort((a, b) => a.windMps - b.windMps);
  const seen = rising.map(({ windMps, radiiM }) =>
    radiiM.map((radius) => {
      if (radius === null || radius === 0) return radius === null ? null : ABSENT;
      if (windMps > REACHED * storm.maxWindMps) {
        conflicts.push('above-maximum');
        return ABSENT;
      }
      return Math.log(radius / storm.radiusOfMaxWindM);
    }),
  );
  for (const j of QUADRANTS) {
    let outer = Number.POSITIVE_INFINITY;
    for (const row of seen) {
      const value = row[j] ?? null;
      if (value === null) continue;
      if (value > outer - LEAST_GAP && value > ABSENT) {
        conflicts.push('crossing');
        row[j] = outer - LEAST_GAP;
      }
      outer = row[j]!;
    }
  }
  const known = seen.map((row) => [...row]);
  const stretch = known.map((row, k) =>
    row.map((value) => (value === null || value <= ABSENT ? null : value - rising[k]!.baseLogRatio)),
  );
  const filled = rising.map((level, k) =>
    QUADRANTS.map((j) => {
      const value = known[k]![j] ?? null;
      if (value !== null) return value;
      const own =
        fadedStretch(rising, stretch, k, j) ??
        meanOf(QUADRANTS.map((other) => fadedStretch(rising, stretch, k, other)));
      return level.baseLogRatio + Math.max(-2, Math.min(2, own ?? 0));
    }),
  );
  // what was filled in keeps between its neighbours
  for (const j of QUADRANTS) {
    for (let k = 0; k < filled.length; k++) {
      if (known[k]![j] !== null) continue;
      const outer = k === 0 ? Number.POSITIVE_INFINITY : filled[k - 1]![j]! - LEAST_GAP;
      const innerKnown = known.slice(k + 1).findIndex((row) => row[j] !== null);
      const inner =
        innerKnown < 0 ? Number.NEGATIVE_INFINITY : known[k + 1 + innerKnown]![j]! + LEAST_GAP * (innerKnown + 1);
      filled[k]![j] = Math.min(outer, Math.max(inner, filled[k]![j]!));
    }
    for (let k = 1; k < filled.length; k++) filled[k]![j] = Math.min(filled[k]![j]!, filled[k - 1]![j]! - LEAST_GAP);
  }
  for (const row of filled) for (const j of QUADRANTS) row[j] = Math.max(LOWEST, row[j]!);

  // no place has a wind above the maximum
  for (let k = 0; k < filled.length; k++)
    if (rising[k]!.windMps > REACHED * storm.maxWindMps)
      for (const j of QUADRANTS) filled[k]![j] = Math.min(filled[k]![j]!, ABSENT);

  const ridge = [0, 0, 0, 0];
  const top = filled.reduce((last, _, k) => (rising[k]!.windMps <= REACHED * storm.maxWindMps ? k : last), -1);
  if (top >= 0) {
    const innermost = filled[top]!;
    const farthest = Math.max(...innermost);
    const strongest = innermost.indexOf(farthest);
    if (farthest < LEAST_FROM_RIDGE) {
      const observed = known[top]![strongest] ?? null;
      if (observed !== null) conflicts.push(observed === ABSENT ? 'absent-below-maximum' : 'inside-maximum');
      innermost[strongest] = LEAST_FROM_RIDGE;
      for (let k = top - 1; k >= 0; k--)
        filled[k]![strongest] = Math.max(filled[k]![strongest]!, filled[k + 1]![strongest]! + LEAST_GAP);
    }
    for (const j of QUADRANTS) {
      // an observed radius inside R: there the ridge lies farther in
      const observed = known[top]![j] ?? null;
      if (j !== strongest && observed !== null && observed !== ABSENT && innermost[j]! < LEAST_FROM_RIDGE)
        ridge[j] = Math.max(LOWEST, innermost[j]! - LEAST_FROM_RIDGE);
    }
  }
  return {
    state: {
      levels: rising
        .map(({ windMps }, k) => ({ windMps, logRatio: filled[k] as unknown as Quadrants<number> }))
        .reverse(),
      ridge: ridge as unknown as Quadrants<number>,
    },
    conflicts,
  };
}

/** The stretch of one wind in one quadrant from the others there: linear in ln V between them, fading beyond; null for none. */
function fadedStretch(
  rising: readonly ObservedLevel[],
  stretch: readonly (readonly (number | null)[])[],
  k: number,
  j: number,
): number | null {
  const own = stretch[k]![j] ?? null;
  if (own !== null) return own;
  const at = Math.log(rising[k]!.windMps);
  let below: { at: number; value: number } | null = null;
  let above: { at: number; value: number } | null = null;
  for (let i = 0; i < rising.length; i++) {
    const value = stretch[i]![j] ?? null;
    if (value === null) continue;
    const point = { at: Math.log(rising[i]!.windMps), value };
    if (i < k) below = point;
    else if (above === null) above = point;
  }
  if (below && above) return below.value + ((above.value - below.value) * (at - below.at)) / (above.at - below.at);
  const near = below ?? above;
  return near ? near.value * Math.exp(-STRETCH_FADING * Math.abs(at - near.at)) : null;
}

function meanOf(values: readonly (number | null)[]): number | null {
  const known = values.filter((value): value is number => value !== null);
  return known.length === 0 ? null : known.reduce((sum, value) => sum + value, 0) / known.length;
}
