import { toKnots } from '../../units.js';
import { knaffZehrDeficitHpa } from './knaff-zehr2007.js';
import { type PressureWindInput, type PressureWindRelation, windOfPressure } from './pressure-wind.js';
import { sizeNote, sizeOf, stormRelativeWindKt } from './storm-size500.js';

/** p_c − p_env (hPa) equatorward of 18°: 5.962 − 0.267 V − (V/18.26)² − 6.8 S   [CourtneyKnaff2009, from memory]. */
export function courtneyKnaffTropicalDeficitHpa(p: { maxWindKt: number; translationKt: number; size: number }): number {
  const v = stormRelativeWindKt(p.maxWindKt, p.translationKt);
  return 5.962 - 0.267 * v - (v / 18.26) ** 2 - 6.8 * p.size;
}

/**
 * Courtney & Knaff (2009): Knaff & Zehr's equation at and poleward of 18°, their own equatorward of it. The two differ by
 * about 3 hPa at 18°, and the relation keeps that step as published.
 */
function courtneyKnaffPressurePa(maxWindMps: number, input: PressureWindInput): number {
  const maxWindKt = toKnots(maxWindMps);
  const translationKt = toKnots(input.translationMps);
  const terms = { maxWindKt, translationKt, latDeg: input.latDeg, size: sizeOf(maxWindKt, input) };
  const deficitHpa = Math.abs(input.latDeg) >= 18 ? knaffZehrDeficitHpa(terms) : courtneyKnaffTropicalDeficitHpa(terms);
  return input.ambientPressurePa + Math.min(0, deficitHpa) * 100;
}

export const courtneyKnaff2009: PressureWindRelation = {
  id: 'courtney-knaff-2009',
  title: 'Courtney & Knaff 2009: wind, motion, size, latitude',
  source: 'CourtneyKnaff2009',
  centralPressurePa: courtneyKnaffPressurePa,
  maxWindMps: (pressurePa, input) => windOfPressure((wind) => courtneyKnaffPressurePa(wind, input), pressurePa),
  note: sizeNote,
};
