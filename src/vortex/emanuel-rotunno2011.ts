import { InputError } from '../errors.js';
import type { ProfileMethod, RadialProfile } from './profile.js';

/** The core of a storm whose outflow stratifies itself. */
export interface CoreParameters {
  readonly maxWindMps: number;
  readonly radiusOfMaxWindM: number;
  readonly coriolisPerS: number;
  /** C_k/C_d, enthalpy over momentum exchange, above 0 and below 2 */
  readonly exchangeRatio: number;
}

/** Absolute angular momentum and its slope along the radius. */
export interface Momentum {
  /** M(r), m²/s */
  readonly at: (radiusM: number) => number;
  /** dM/dr, m/s */
  readonly slopeAt: (radiusM: number) => number;
}

/**
 * (M/M_m)^{2−k} = 2s²/(2 − k + ks²), s = r/R, M_m = RV_m + ½|f|R², k = C_k/C_d   [EmanuelRotunno2011, from memory].
 * @throws InputError `profile.exchange-ratio` for k outside 0–2
 */
export function coreMomentum(p: CoreParameters): Momentum {
  const k = p.exchangeRatio;
  if (!(k > 0 && k < 2)) {
    throw new InputError(
      'profile.exchange-ratio',
      `vortex.exchange_ratio is ${k}: C_k/C_d lies above 0 and below 2 in Emanuel & Rotunno's solution`,
    );
  }
  const r0 = p.radiusOfMaxWindM;
  const maximum = r0 * p.maxWindMps + 0.5 * Math.abs(p.coriolisPerS) * r0 * r0;
  const at = (radiusM: number): number => {
    const s2 = (radiusM / r0) ** 2;
    return maximum * ((2 * s2) / (2 - k + k * s2)) ** (1 / (2 - k));
  };
  return {
    at,
    slopeAt: (radiusM) => (radiusM <= 0 ? 0 : (2 * at(radiusM)) / (radiusM * (2 - k + k * (radiusM / r0) ** 2))),
  };
}

/** V = M/r − ½|f|r of the core solution, 0 where that is negative: the solution holds for the core alone. */
export function coreProfile(p: CoreParameters): RadialProfile {
  const f = Math.abs(p.coriolisPerS);
  const momentum = coreMomentum(p);
  return {
    windMps: (radiusM) => (radiusM <= 0 ? 0 : Math.max(0, momentum.at(radiusM) / radiusM - 0.5 * f * radiusM)),
    kinksM: [],
  };
}

/** The core solution alone. Its maximum lies a little inside R, by 1–2 % of it. C_k/C_d is `vortex.exchange_ratio`. */
export const emanuelRotunno2011: ProfileMethod = {
  id: 'emanuel-rotunno-2011',
  title: 'Emanuel & Rotunno 2011: core of self-stratified outflow',
  source: 'EmanuelRotunno2011',
  kinematic: true,
  build: (input) => coreProfile({ ...input, exchangeRatio: input.numbers['exchange_ratio'] ?? 0.9 }),
};
