import { coriolisPerS } from '../../earth.js';
import { RADIUS_BOUNDS_M, type RadiusInput, type RadiusRelation } from './radius-of-max-wind.js';

/** A mean of quadrant maxima is a maximum of azimuths: the mean radius is taken as this share of it [ChavasKnaff2022, from memory]. */
const SHARE_OF_QUADRANT_MEAN = 0.85;
/** 34 kt as the relation has it, m/s. */
const OUTER_WIND_MPS = 17.5;

/**
 * R from the radius of 34 kt by angular momentum: M₁₇ = r·17.5 + ½fr²,
 * M_max = 0.699 M₁₇ exp(−0.00618 (V − 17.5) − 0.00210 (V − 17.5) ½fr),  R = (V/f)(√(1 + 2fM_max/V²) − 1)
 * V is the azimuthal mean of the maximum, taken as V_max − 0.55 of the translation, r = 0.85 of the mean of the quadrants
 * [ChavasKnaff2022, from memory]. Towards the equator R → M_max/V.
 */
export function chavasKnaffRadiusM(p: { windMps: number; radiusOf34KtM: number; latDeg: number }): number {
  const f = Math.abs(coriolisPerS(p.latDeg));
  const r = SHARE_OF_QUADRANT_MEAN * p.radiusOf34KtM;
  const v = Math.max(10, p.windMps);
  const half = 0.5 * f * r;
  const outer = r * OUTER_WIND_MPS + half * r;
  const inner = 0.699 * outer * Math.exp(-0.00618 * (v - OUTER_WIND_MPS) - 0.0021 * (v - OUTER_WIND_MPS) * half);
  // (√(1 + 2x) − 1)/x without cancellation
  const x = (f * inner) / (v * v);
  return ((inner / v) * 2) / (Math.sqrt(1 + 2 * x) + 1);
}

/** The same for what a recipe's relation is given: observed radius of 34 kt, else the size. */
export function chavasKnaffEstimateM({
  maxWindMps,
  latDeg,
  translationMps,
  radiusOf34KtM,
  sizeRadiusM,
}: RadiusInput): number {
  const windMps = Math.max(maxWindMps - 0.55 * translationMps, 0.5 * maxWindMps);
  const radius = chavasKnaffRadiusM({ windMps, radiusOf34KtM: radiusOf34KtM ?? sizeRadiusM, latDeg });
  return Math.min(RADIUS_BOUNDS_M[1], Math.max(RADIUS_BOUNDS_M[0], radius));
}

/** What both relations from the radius of 34 kt do without it. */
export const sizeInstead = ({ radiusOf34KtM }: Pick<RadiusInput, 'radiusOf34KtM'>): string | null =>
  radiusOf34KtM === null ? 'no radius of 34 kt: from the size relation' : null;

export const chavasKnaff2022: RadiusRelation = {
  id: 'chavas-knaff-2022',
  title: 'Chavas & Knaff 2022: radius of 34 kt (observed, or of the size relation), wind, latitude',
  source: 'ChavasKnaff2022',
  radiusM: chavasKnaffEstimateM,
  note: sizeInstead,
};
