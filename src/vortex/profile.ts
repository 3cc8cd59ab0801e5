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
  /** what the calibrated vortex is built from; without it that profile takes a storm of middling size */
  readonly size?: {
    /** the radius at which the storm's own 10-m wind would be 17.5 m/s, m */
    readonly radiusM: number;
    /** maximum 10-m wind of the vortex alone, and of the whole field, m/s, 1-min means */
    readonly ownMaxMps: number;
    readonly fieldMaxMps: number;
  };
  /** numbers of single profiles, by the recipe: `exponent` and the like; 1 for an entry that is a word: `outer_drag=donelan-2004` */
  readonly numbers: Readonly<Record<string, number>>;
}

/** A radial profile of tangential wind at gradient level. */
export interface RadialProfile {
  /** V(r) ≥ 0 for r ≥ 0, m/s, storm-relative, positive cyclonic; V(0) = 0 */
  readonly windMps: (radiusM: number) => number;
  /** p(r), Pa, where the profile itself defines it; otherwise the balance is integrated (see pressure.ts) */
  readonly pressurePa?: (radiusM: number) => number;
  /**
   * ∫ρ(V²/r + |f|V)dr over all radii, Pa, where it has a closed form: the pressure deficit that the winds imply. It is
   * the input's own deficit only where B or the maximum was chosen to fit it.
   */
  readonly impliedDeficitPa?: number;
  /** where the maximum is, if the method places it itself, m */
  readonly radiusOfMaxWindM?: number;
  /** what the method had to leave out for this vortex, for the model's cautions */
  readonly note?: string;
  /** radii where the slope of the wind jumps, m; the radius of maximum wind where not stated */
  readonly kinksM?: readonly number[];
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
