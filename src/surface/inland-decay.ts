import { knots, toKnots } from '../units.js';

/** Coefficients of the exponential decay over land. */
export interface DecaySet {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** step from sea to land */
  readonly reduction: number;
  /** background wind that is approached, kt, 1-min */
  readonly backgroundKt: number;
  /** rate, 1/h */
  readonly rateHourly: number;
}

/** The published sets   [KaplanDeMaria1995, KaplanDeMaria2001; both from memory]. */
export const DECAY_SETS: readonly DecaySet[] = [
  {
    id: 'kaplan-demaria-1995',
    title: 'Coasts south of 37° N',
    source: 'KaplanDeMaria1995',
    reduction: 0.9,
    backgroundKt: 26.7,
    rateHourly: 0.095,
  },
  {
    id: 'kaplan-demaria-2001',
    title: 'New England',
    source: 'KaplanDeMaria2001',
    reduction: 0.9,
    backgroundKt: 29.6,
    rateHourly: 0.187,
  },
];

/**
 * Maximum 1-min wind `hours` after landfall: V = V_b + (R V₀ − V_b) e^(−αt)   [KaplanDeMaria1995]; the correction for the
 * distance inland is left out. A storm that enters with R V₀ below V_b stays there: the wind never grows over land.
 * @param landfallMps 1-min wind at landfall, over water, m/s
 */
export function windAfterLandfallMps(landfallMps: number, { set, hours }: { set: DecaySet; hours: number }): number {
  const start = set.reduction * toKnots(landfallMps);
  if (start <= set.backgroundKt) return knots(start);
  return knots(set.backgroundKt + (start - set.backgroundKt) * Math.exp(-set.rateHourly * hours));
}
