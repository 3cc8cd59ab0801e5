import { knots, toKnots } from '../../units.js';
import type { PressureWindInput, PressureWindRelation } from './pressure-wind.js';
import { sizeNote, sizeOf, stormRelativeWindKt } from './storm-size500.js';

/** What the relation depends on. */
export interface KnaffZehrTerms {
  readonly translationKt: number;
  readonly latDeg: number;
  /** S = V500/V500c */
  readonly size: number;
}

/**
 * Pressure difference p_c − p_env, hPa: 23.286 − 0.483 V − (V/24.254)² − 12.587 S − 0.483 |φ|, V the storm-relative wind in kt
 * [KnaffZehr2007, from memory].
 */
export function knaffZehrDeficitHpa(p: KnaffZehrTerms & { readonly maxWindKt: number }): number {
  const v = stormRelativeWindKt(p.maxWindKt, p.translationKt);
  return 23.286 - 0.483 * v - (v / 24.254) ** 2 - 12.587 * p.size - 0.483 * Math.abs(p.latDeg);
}

/**
 * Maximum wind, kt, from p_c − p_env (hPa, below 0): 18.633 − 14.960 S − 0.755 |φ| + 0.518 D + 9.738 √D + 1.5 c^0.63 with
 * D = p_env − p_c   [KnaffZehr2007, from memory]. A regression of its own: it inverts the other one within about 0.5 kt at 100 kt.
 */
export function knaffZehrWindKt(p: KnaffZehrTerms & { readonly deficitHpa: number }): number {
  const d = Math.max(0, -p.deficitHpa);
  const wind =
    18.633 -
    14.96 * p.size -
    0.755 * Math.abs(p.latDeg) +
    0.518 * d +
    9.738 * Math.sqrt(d) +
    1.5 * p.translationKt ** 0.63;
  return Math.max(0, wind);
}

function pressurePa(maxWindMps: number, input: PressureWindInput): number {
  const maxWindKt = toKnots(maxWindMps);
  const deficitHpa = knaffZehrDeficitHpa({
    maxWindKt,
    translationKt: toKnots(input.translationMps),
    latDeg: input.latDeg,
    size: sizeOf(maxWindKt, input),
  });
  return input.ambientPressurePa + Math.min(0, deficitHpa) * 100;
}

/** The size depends on the wind that is sought: repeated until the two agree. */
function windMps(centralPressurePa: number, input: PressureWindInput): number {
  const terms = {
    deficitHpa: (centralPressurePa - input.ambientPressurePa) / 100,
    translationKt: toKnots(input.translationMps),
    latDeg: input.latDeg,
  };
  let windKt = 60;
  for (let i = 0; i < 60; i++)
    windKt = 0.5 * (windKt + knaffZehrWindKt({ ...terms, size: sizeOf(Math.max(10, windKt), input) }));
  return knots(windKt);
}

/** Knaff & Zehr (2007) with the size from the radius of 34 kt as Courtney & Knaff (2009) have it. */
export const knaffZehr2007: PressureWindRelation = {
  id: 'knaff-zehr-2007',
  title: 'Knaff & Zehr 2007: wind, motion, size, latitude',
  source: 'KnaffZehr2007',
  centralPressurePa: pressurePa,
  maxWindMps: windMps,
  note: sizeNote,
};
