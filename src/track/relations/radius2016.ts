import { outerFall } from '../../vortex/outer-fall.js';
import { chavasKnaffEstimateM, sizeInstead } from './chavas-knaff2022.js';
import type { RadiusInput, RadiusRelation } from './radius-of-max-wind.js';

const THRESHOLD_34_MPS = (34 * 1852) / 3600;
const THRESHOLD_64_MPS = (64 * 1852) / 3600;
/** At most this share of the radius that a wind of 64 kt, or of 0.9 of the maximum, is expected at. */
const SHARE = 0.8;

/**
 * R after Chavas & Knaff (2022), kept inside the strong winds: at most 0.8 of the radius at which a wind of 64 kt (in
 * storms below 71 kt: 0.9 of the maximum) is expected from the radius of 34 kt, r = r₃₄ exp(−s(1.51 + 1.3 s − 0.75 ln(V/35))),
 * s = ln(wind/34 kt). The cap is an own calibration on HURDAT2 2004–2016; it acts mostly on hurricanes of the lowest categories.
 */
export function radius2016M(input: RadiusInput): number {
  const radius = chavasKnaffEstimateM(input);
  const wind = Math.min(THRESHOLD_64_MPS, 0.9 * input.maxWindMps);
  const step = Math.log(wind / THRESHOLD_34_MPS);
  if (step <= 0) return radius;
  const outer = input.radiusOf34KtM ?? input.sizeRadiusM;
  const inside = SHARE * outer * Math.exp(-step * outerFall(input.maxWindMps, step));
  return Math.max(5_000, Math.min(radius, inside));
}

export const radius2016: RadiusRelation = {
  id: 'calibrated-rmax-2016',
  title: 'Chavas & Knaff 2022, kept inside the strong winds (own calibration on 2004–2016)',
  source: 'ChavasKnaff2022',
  radiusM: radius2016M,
  note: sizeInstead,
};
