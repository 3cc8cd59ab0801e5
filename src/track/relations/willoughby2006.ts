import type { RadiusRelation } from './radius-of-max-wind.js';

/** R = 46.4 exp(−0.0155 V + 0.0169 |φ|) km, V the flight-level maximum in m/s   [Willoughby2006, eq. 7a, from memory]. */
export function willoughbyRadiusM(flightLevelWindMps: number, latDeg: number): number {
  return 46_400 * Math.exp(-0.0155 * flightLevelWindMps + 0.0169 * Math.abs(latDeg));
}

/** R = 51.6 exp(−0.0223 V + 0.0281 |φ|) km, V the flight-level maximum in m/s   [WilloughbyRahn2004, from memory]. */
export function willoughbyRahnRadiusM(flightLevelWindMps: number, latDeg: number): number {
  return 51_600 * Math.exp(-0.0223 * flightLevelWindMps + 0.0281 * Math.abs(latDeg));
}

/** The flight-level wind is taken as the 10-m wind over the recipe's reduction. */
export const willoughby2006: RadiusRelation = {
  id: 'willoughby-2006',
  title: 'Willoughby, Darling & Rahn 2006: wind and latitude',
  source: 'Willoughby2006',
  radiusM: ({ maxWindMps, surfaceFactor, latDeg }) => willoughbyRadiusM(maxWindMps / surfaceFactor, latDeg),
};

export const willoughbyRahn2004: RadiusRelation = {
  id: 'willoughby-rahn-2004',
  title: 'Willoughby & Rahn 2004: wind and latitude',
  source: 'WilloughbyRahn2004',
  radiusM: ({ maxWindMps, surfaceFactor, latDeg }) => willoughbyRahnRadiusM(maxWindMps / surfaceFactor, latDeg),
};
