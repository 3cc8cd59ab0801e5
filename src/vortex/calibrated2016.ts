import type { ProfileMethod } from './profile.js';

/** Coefficients of the profile, from `scripts/calibrate.js` (own calibration). */
export const PROFILE_2016 = {
  /** p = outer + outerWind · ln(V/35 m/s), within `outerBounds` */
  outer: 0.813,
  outerWind: 0.413,
  outerBounds: [0.2, 4],
  /** k */
  stretch: 0.808,
  /** δ = ridge, at least ridgeLift · D: set by hand; angular momentum then falls outward nowhere, or by less than 3 % */
  ridge: 0.3,
  ridgeLift: 1.6,
} as const;

/** Size that is taken where no size is known, m: about the median of the calibration data. */
const MIDDLING_SIZE_M = 130_000;

/** The parts of the profile; winds are 10-m winds of the vortex alone, m/s, 1-min means. */
export interface StretchedExponential {
  readonly maxWindMps: number;
  readonly radiusOfMaxWindM: number;
  /** r₁₇ of the outer vortex, m */
  readonly sizeRadiusM: number;
  /** p */
  readonly outer: number;
  /** k */
  readonly stretch: number;
}

/** p of a storm: stronger storms fall off more steeply about r₁₇. */
export function outerParameter(fieldMaxMps: number): number {
  const { outer, outerWind, outerBounds } = PROFILE_2016;
  return Math.min(outerBounds[1], Math.max(outerBounds[0], outer + outerWind * Math.log(fieldMaxMps / 35)));
}

/** m of the gentle ridge. */
const GENTLE = 4;
/** F/D at most: below it a low ridge stays the highest place. */
const LEVEL_LIFT = 10;

/**
 * Wind over maximum wind, as a function of radius: an outer vortex that knows only the size, and a ridge that leads from
 * it to the maximum:
 * ln S = ln 17.5 + p(1 − (r/r₁₇)ᵏ) + (D + F(s − 1)) exp(−((s − 1)/δ)²) for s = r/R ≥ 1, D such that S(R) is the maximum,
 * F = min(pk(R/r₁₇)ᵏ, 10 D), which makes it level at R, δ = max(0.3, 1.6 D);
 * ½s(1 + 4s − 3s²) of the maximum inside: hollow as eyes are and level at R (own choice; flight-level winds rise about so in
 * the profile of Willoughby et al.   [Willoughby2006, from memory]).
 * The outer vortex is a stretched exponential as in DeMaria et al.'s profile   [DeMariaEtAl1992, from memory]. Where it is
 * stronger at R than the maximum (D < 0: a weak, large storm) the last term is D s⁻ᵐ, m = min(4, 0.9 pk(R/r₁₇)ᵏ/|D|), so that
 * the wind falls everywhere outside R.
 */
export function stretchedExponential(p: StretchedExponential): (radiusM: number) => number {
  const { radiusOfMaxWindM: r0, sizeRadiusM, outer, stretch: k } = p;
  const atRidge = Math.log(17.5) + outer * (1 - (r0 / sizeRadiusM) ** k);
  const lift = Math.log(p.maxWindMps) - atRidge;
  const ridge = Math.max(PROFILE_2016.ridge, PROFILE_2016.ridgeLift * lift);
  const fall = outer * k * (r0 / sizeRadiusM) ** k;
  const m = Math.min(GENTLE, (0.9 * fall) / Math.max(1e-9, -lift));
  const slope = Math.min(fall, LEVEL_LIFT * lift);
  const inverse = 17.5 / p.maxWindMps;
  return (radiusM) => {
    const s = radiusM / r0;
    if (s <= 1) return 0.5 * s * (1 + s * (4 - 3 * s));
    const added = lift >= 0 ? (lift + slope * (s - 1)) * Math.exp(-(((s - 1) / ridge) ** 2)) : lift * s ** -m;
    return inverse * Math.exp(outer * (1 - (radiusM / sizeRadiusM) ** k) + added);
  };
}

/**
 * The calibrated vortex (own calibration on HURDAT2 2004–2016 by `scripts/calibrate.js`; skill in README). Its radii of 34,
 * 50 and 64 kt all follow from one size; the maximum and its radius are kept. The shape is one of 10-m winds; at gradient
 * level it is the same divided by the reduction at the maximum.
 *
 * Beside R the wind of a hurricane falls by up to a third, about as steeply as constant angular momentum allows, to the
 * level of the outer vortex: a best track's maximum is a local wind, not the mean around the eye. The pressure that balances
 * the winds out to 1000 km rises by 1.09 of the given deficit (median of the calibration data; 0.84–1.46 in nine fixes of
 * ten): where that is more than the deficit, the pressure far out exceeds the ambient one.
 */
export const calibrated2016: ProfileMethod = {
  id: 'calibrated-2016',
  title: 'Own calibration on 2004–2016: stretched-exponential outer vortex of the storm’s size, ridge of maximum wind',
  source: 'own calibration',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM, size }) => {
    const ownMaxMps = Math.max(1, size?.ownMaxMps ?? 0.9 * maxWindMps);
    const shape = stretchedExponential({
      maxWindMps: ownMaxMps,
      radiusOfMaxWindM,
      sizeRadiusM: Math.max(1.05 * radiusOfMaxWindM, size?.radiusM ?? MIDDLING_SIZE_M),
      outer: outerParameter(size?.fieldMaxMps ?? ownMaxMps),
      stretch: PROFILE_2016.stretch,
    });
    return { windMps: (radiusM) => (radiusM <= 0 ? 0 : maxWindMps * shape(radiusM)) };
  },
};
