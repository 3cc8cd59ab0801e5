import { chavasKnaff2022 } from './chavas-knaff2022.js';
import { radius2016 } from './radius2016.js';

/** What a relation for the radius of maximum wind may use. */
export interface RadiusInput {
  /** maximum sustained 10-m wind, 1-min mean, m/s */
  readonly maxWindMps: number;
  /** 10-m over gradient-level wind of the recipe */
  readonly surfaceFactor: number;
  readonly latDeg: number;
  readonly pressureDeficitPa: number;
  readonly translationMps: number;
  /** mean radius of 34 kt over the quadrants that have it; null where not known */
  readonly radiusOf34KtM: number | null;
  /** size by the recipe's relation: the radius at which the storm's own wind would be 17.5 m/s, m */
  readonly sizeRadiusM: number;
}

/** A relation that gives the radius of maximum wind, m. */
export interface RadiusRelation {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  readonly radiusM: (input: RadiusInput) => number;
}

/** R = 46.4 exp(−0.0155 V + 0.0169 φ) km, V the flight-level maximum in m/s   [Willoughby2006, eq. 7a, from memory]. */
export function willoughbyRadiusM(flightLevelWindMps: number, latDeg: number): number {
  return 46_400 * Math.exp(-0.0155 * flightLevelWindMps + 0.0169 * Math.abs(latDeg));
}

const willoughby2006: RadiusRelation = {
  id: 'willoughby-2006',
  title: 'Willoughby, Darling & Rahn 2006: wind and latitude',
  source: 'Willoughby2006',
  radiusM: ({ maxWindMps, surfaceFactor, latDeg }) => willoughbyRadiusM(maxWindMps / surfaceFactor, latDeg),
};

/** Every relation for the radius of maximum wind that a recipe may name. */
export const RADIUS_RELATIONS: readonly RadiusRelation[] = [radius2016, willoughby2006, chavasKnaff2022];
