import { RADIANS } from '../../earth.js';
import { NAUTICAL_MILE_M, toKnots } from '../../units.js';
import type { RadiusRelation } from './radius-of-max-wind.js';

/**
 * R (nmi) = 218.3784 − 1.2014 V + (V/10.9844)² − (V/35.3052)³ − 145.5090 cos φ, V the 1-min maximum in kt
 * [KnaffEtAl2015, from memory].
 */
export function knaffRadiusM(maxWindMps: number, latDeg: number): number {
  const v = toKnots(maxWindMps);
  const nmi = 218.3784 - 1.2014 * v + (v / 10.9844) ** 2 - (v / 35.3052) ** 3 - 145.509 * Math.cos(latDeg * RADIANS);
  return nmi * NAUTICAL_MILE_M;
}

export const knaff2015: RadiusRelation = {
  id: 'knaff-2015',
  title: 'Knaff et al. 2015: wind and latitude',
  source: 'KnaffEtAl2015',
  radiusM: ({ maxWindMps, latDeg }) => knaffRadiusM(maxWindMps, latDeg),
};
