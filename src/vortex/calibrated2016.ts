import type { ProfileMethod } from './profile.js';

/** Coefficients of the profile, from `scripts/calibrate.js` (own calibration). */
export const PROFILE_2016 = {
  /** p = outer + outerWind · ln(V/35 m/s), within `outerBounds` */
  outer: 0.82,
  outerWind: 0.405,
  outerBounds: [0.2, 4],
  /** k */
  stretch: 0.801,
  /** δ: set by hand, as narrow as a ridge may be that grids of some kilometres can show */
  ridge: 0.25,
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

/**
 * Wind over maximum wind, as a function of radius: an outer vortex that knows only the size, and a ridge that leads from
 * it to the maximum:
 * ln S = ln 17.5 + p(1 − (r/r₁₇)ᵏ) + D w(s) for s = r/R ≥ 1, w = 1/(1 + ((s − 1)/δ)²), D such that S(R) is the maximum;
 * 2s/(1 + s²) of it inside, as in Jelesnianski's profile   [Jelesnianski1966, from memory].
 * The outer vortex is a stretched exponential as in DeMaria et al.'s profile   [DeMariaEtAl1992, from memory]. Where it is
 * stronger at R than the maximum (D < 0: a weak, large storm) w = s⁻ᵐ, m = min(4, 0.9 pk(R/r₁₇)ᵏ/|D|), so that the wind falls
 * everywhere outside R.
 */
export function stretchedExponential(p: StretchedExponential): (radiusM: number) => number {
  const { ridge } = PROFILE_2016;
  const { radiusOfMaxWindM: r0, sizeRadiusM, outer, stretch: k } = p;
  const atRidge = Math.log(17.5) + outer * (1 - (r0 / sizeRadiusM) ** k);
  const lift = Math.log(p.maxWindMps) - atRidge;
  const fall = outer * k * (r0 / sizeRadiusM) ** k;
  const m = Math.min(GENTLE, (0.9 * fall) / Math.max(1e-9, -lift));
  const inverse = 17.5 / p.maxWindMps;
  return (radiusM) => {
    const s = radiusM / r0;
    if (s <= 1) return (2 * s) / (1 + s * s);
    const weight = lift >= 0 ? 1 / (1 + ((s - 1) / ridge) ** 2) : s ** -m;
    return inverse * Math.exp(outer * (1 - (radiusM / sizeRadiusM) ** k) + lift * weight);
  };
}

/**
 * The calibrated vortex (own calibration on HURDAT2 2004–2016 by `scripts/calibrate.js`; skill in README). Its radii of 34,
 * 50 and 64 kt all follow from one size; the maximum and its radius are kept. The shape is one of 10-m winds; at gradient
 * level it is the same divided by the reduction at the maximum.
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
