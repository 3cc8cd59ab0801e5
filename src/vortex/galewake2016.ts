import type { ProfileMethod } from './profile.js';

/** Coefficients of the profile, from `scripts/calibrate.js` (own calibration). */
export const PROFILE_2016 = {
  /** p = outer + outerWind · ln(V/35 m/s), within `outerBounds` */
  outer: 0.778,
  outerWind: 0.359,
  outerBounds: [0.2, 4],
  /** k */
  stretch: 0.849,
  /** m */
  ridge: 8,
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
}

/** p of a storm: stronger storms fall off more steeply about r₁₇. */
export function outerParameter(fieldMaxMps: number): number {
  const { outer, outerWind, outerBounds } = PROFILE_2016;
  return Math.min(outerBounds[1], Math.max(outerBounds[0], outer + outerWind * Math.log(fieldMaxMps / 35)));
}

/**
 * Wind over maximum wind, as a function of radius: an outer vortex that knows only the size, and a ridge that leads from
 * it to the maximum:
 * ln S = ln 17.5 + p(1 − (r/r₁₇)ᵏ) + D s⁻ᵐ for s = r/R ≥ 1, D such that S(R) is the maximum; 2s/(1 + s²) of it inside.
 * The outer vortex is a stretched exponential as in DeMaria et al.'s profile. Where it is stronger at R than the maximum
 * (D < 0: a weak, large storm) the ridge is made gentler, so that the wind falls everywhere outside R:
 * m ≤ 0.9 pk(R/r₁₇)ᵏ/|D|.
 */
export function stretchedExponential(p: StretchedExponential): (radiusM: number) => number {
  const { stretch: k, ridge } = PROFILE_2016;
  const { radiusOfMaxWindM: r0, sizeRadiusM, outer } = p;
  const atRidge = Math.log(17.5) + outer * (1 - (r0 / sizeRadiusM) ** k);
  const lift = Math.log(p.maxWindMps) - atRidge;
  const fall = outer * k * (r0 / sizeRadiusM) ** k;
  const m = lift >= 0 ? ridge : Math.min(ridge, (0.9 * fall) / -lift);
  const inverse = 1 / p.maxWindMps;
  return (radiusM) => {
    const s = radiusM / r0;
    if (s <= 1) return (2 * s) / (1 + s * s);
    return inverse * 17.5 * Math.exp(outer * (1 - (radiusM / sizeRadiusM) ** k) + lift * s ** -m);
  };
}

/**
 * The calibrated vortex (own calibration on HURDAT2 2004–2016 by `scripts/calibrate.js`; skill in README). Its radii of 34,
 * 50 and 64 kt all follow from one size; the maximum and its radius are kept. The shape is one of 10-m winds; at gradient
 * level it is the same divided by the reduction at the maximum.
 */
export const galewake2016: ProfileMethod = {
  id: 'galewake-2016',
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
    });
    return { windMps: (radiusM) => (radiusM <= 0 ? 0 : maxWindMps * shape(radiusM)) };
  },
};
