/** What the profiles are built from: one axisymmetric vortex at gradient level. */
export interface VortexInput {
  /** maximum tangential wind at gradient level, m/s, in the recipe's averaging period */
  readonly maxWindMps: number;
  readonly radiusOfMaxWindM: number;
  /** |f| at the centre, 1/s */
  readonly coriolisPerS: number;
  readonly latDeg: number;
  readonly hollandB: number;
  readonly centralPressurePa: number;
  readonly ambientPressurePa: number;
  readonly airDensityKgM3: number;
  readonly translationMps: number;
  /** whether `maxWindMps` is the maximum of the gradient or of the cyclostrophic wind */
  readonly maximumIs: 'gradient' | 'cyclostrophic';
  /** numbers of single profiles, by the recipe: `vortex.exponent` and the like */
  readonly numbers: Readonly<Record<string, number>>;
}

/** A radial profile of tangential wind at gradient level. */
export interface RadialProfile {
  /** V(r) ≥ 0 for r ≥ 0, m/s, storm-relative, positive cyclonic; V(0) = 0 */
  readonly windMps: (radiusM: number) => number;
  /** p(r), Pa, where the profile itself defines it; otherwise the balance is integrated (see pressure.ts) */
  readonly pressurePa?: (radiusM: number) => number;
}

/** A published method that makes a profile. */
export interface ProfileMethod {
  /** name in a recipe: author and year */
  readonly id: string;
  /** one line for help and tables */
  readonly title: string;
  /** key of the bibliography */
  readonly source: string;
  /** whether the profile states winds only, so that its pressure has to be integrated */
  readonly kinematic: boolean;
  readonly build: (input: VortexInput) => RadialProfile;
}
