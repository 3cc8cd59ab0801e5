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
  /** what it had to assume because the track does not say it; null for nothing */
  readonly note?: (input: RadiusInput) => string | null;
}

/** Bounds within which an estimated radius is kept, m: own choice. */
export const RADIUS_BOUNDS_M = [5_000, 250_000] as const;
