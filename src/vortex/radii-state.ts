import { FALL_2016, fallOfRadii } from './outer-fall.js';
import { LEAST_FROM_RIDGE, LEAST_GAP, type Quadrants, type RadiiState } from './radii.js';

/** One wind of a fix: what was observed of it and what the base vortex would have. */
export interface ObservedLevel {
  readonly windMps: number;
  /** observed radii, m; 0 = no such wind in the quadrant, null = not observed */
  readonly radiiM: Quadrants<number | null>;
  /** ln(r/R) of the base vortex on its strongest azimuth; negative where it does not reach this wind */
  readonly baseLogRatio: number;
}

/** How an observation had to give way. */
export type RadiiConflict = 'above-maximum' | 'inside-maximum' | 'crossing' | 'absent-below-maximum';

/** ln(r/R) that stands for `no such wind here`. */
const ABSENT = -0.1;
const LOWEST = -1;
/** A wind up to this share of the maximum counts as reached: knots were rounded. */
const REACHED = 1.0005;
/** Power of the share of ln V between two observed winds, from `scripts/calibrate.js` (1.32 has as small an error, but a bias of −1.1 km). */
const BETWEEN_POWER = 1.34;
/** Size that is taken where none is said, m: about the median of the calibration data. */
const MIDDLING_SIZE_M = 130_000;
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
  storm: { readonly maxWindMps: number; readonly radiusOfMaxWindM: number; readonly sizeRadiusM?: number },
): { state: RadiiState; conflicts: RadiiConflict[] } {
  const conflicts: RadiiConflict[] = [];
  const sizeRadiusM = storm.sizeRadiusM ?? MIDDLING_SIZE_M;
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
  // a radius well inside R is a radius all the same
  const reached = rising.map(({ windMps, radiiM }) =>
    radiiM.map((radius) => radius !== null && radius > 0 && windMps <= REACHED * storm.maxWindMps),
  );
  for (const j of QUADRANTS) {
    let outer = Number.POSITIVE_INFINITY;
    for (const [k, row] of seen.entries()) {
      const value = row[j] ?? null;
      if (value === null) continue;
      if (value > outer - LEAST_GAP && reached[k]![j]) {
        conflicts.push('crossing');
        row[j] = outer - LEAST_GAP;
      }
      outer = row[j]!;
    }
  }
  const known = seen.map((row) => [...row]);
  // the maximum in a quadrant is below a wind that was observed not to blow there
  const highest = QUADRANTS.map((j) =>
    Math.min(storm.maxWindMps, ...rising.filter(({ radiiM }) => radiiM[j] === 0).map(({ windMps }) => windMps)),
  );
  const filled = rising.map((level, k) =>
    QUADRANTS.map((j) => {
      const value = known[k]![j] ?? null;
      if (value !== null) return value;
      const estimate = (quadrant: number): number | null =>
        estimated(rising, { known, reached }, { k, j: quadrant, maxWindMps: highest[quadrant]!, sizeRadiusM });
      const elsewhere = (quadrant: number): number | null =>
        reached[k]![quadrant] ? known[k]![quadrant]! : estimate(quadrant);
      return estimate(j) ?? meanOf(QUADRANTS.map(elsewhere)) ?? level.baseLogRatio;
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
  const top = known.reduce(
    (last, row, k) =>
      rising[k]!.windMps <= REACHED * storm.maxWindMps && row.some((value) => value !== null) ? k : last,
    -1,
  );
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

/**
 * ln(r/R) of one wind in one quadrant from the observed ones there; null for none. Between two observed winds V₁ < V < V₂:
 * ln r = ln r₁ + (ln r₂ − ln r₁) t^1.34, t = ln(V/V₁)/ln(V₂/V₁). Beyond the last one, with Δ = Δ ln V from it and λ its stretch
 * against the base vortex: ln r = ln r₁ − Δ · `fallOfRadii` − 0.52 λ|Δ|, but not inside the ridge. Above the maximum: the base
 * vortex, stretched as there. The maximum is that of the quadrant: at most a wind that was observed not to blow in it.
 *
 * The curve between two winds is about as good as what is observed of them allows: on the calibration data the radius of 50 kt
 * between 34 and 64 kt is off by 11.7 km; regression trees on the two radii, the wind, the deficit, latitude, motion and the
 * other quadrants (own check, cross-validated by storm) come to 11.65–11.7 km, straight lines in ln r and ln V to 15.0 km.
 */
function estimated(
  rising: readonly ObservedLevel[],
  { known, reached }: { known: readonly (readonly (number | null)[])[]; reached: readonly (readonly boolean[])[] },
  { k, j, maxWindMps, sizeRadiusM }: { k: number; j: number; maxWindMps: number; sizeRadiusM: number },
): number | null {
  const { windMps, baseLogRatio } = rising[k]!;
  let below: number | null = null;
  let above: number | null = null;
  for (let i = 0; i < rising.length; i++) {
    if (!reached[i]![j]) continue;
    if (i < k) below = i;
    else if (i > k && above === null) above = i;
  }
  if (below !== null && above !== null) {
    const t = Math.log(windMps / rising[below]!.windMps) / Math.log(rising[above]!.windMps / rising[below]!.windMps);
    return known[below]![j]! + (known[above]![j]! - known[below]![j]!) * t ** BETWEEN_POWER;
  }
  const near = below ?? above;
  if (near === null) return null;
  const steps = Math.log(windMps / rising[near]!.windMps);
  const stretch = Math.max(-2, Math.min(2, known[near]![j]! - rising[near]!.baseLogRatio));
  if (windMps > REACHED * maxWindMps) return baseLogRatio + stretch;
  const size = Math.abs(steps);
  const fall = fallOfRadii({ maxWindMps, sizeRadiusM }, size);
  const estimate = known[near]![j]! - steps * fall - FALL_2016.back * stretch * size;
  return Math.max(LEAST_FROM_RIDGE, estimate);
}

function meanOf(values: readonly (number | null)[]): number | null {
  const known = values.filter((value): value is number => value !== null);
  return known.length === 0 ? null : known.reduce((sum, value) => sum + value, 0) / known.length;
}
