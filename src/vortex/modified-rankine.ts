import { InputError } from '../errors.js';
import type { ProfileMethod } from './profile.js';

/**
 * V = V_m s inside R, V_m s⁻ˣ outside, s = r/R, with x usually 0.3–0.8   [Hughes1952, from memory].
 * It never reaches zero: the model's outer radius and taper end it.
 * @throws InputError `profile.exponent` for x outside 0–1.5
 */
export const modifiedRankine: ProfileMethod = {
  id: 'modified-rankine',
  title: 'Modified Rankine vortex: rigid core, V ∝ r⁻ˣ outside',
  source: 'Hughes1952',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM, numbers }) => {
    const x = numbers['exponent'] ?? 0.5;
    if (!(x > 0 && x <= 1.5)) {
      throw new InputError(
        'profile.exponent',
        `vortex.exponent is ${x}: the modified Rankine exponent lies above 0 and at most at 1.5`,
      );
    }
    return {
      windMps: (radiusM) => {
        const s = radiusM / radiusOfMaxWindM;
        return s <= 1 ? maxWindMps * s : maxWindMps * s ** -x;
      },
    };
  },
};

/** The exponent through two radii with two winds: x = ln(V₁/V₂)/ln(r₂/r₁). */
export function exponentThrough(
  inner: { radiusM: number; windMps: number },
  outer: { radiusM: number; windMps: number },
): number {
  return Math.log(inner.windMps / outer.windMps) / Math.log(outer.radiusM / inner.radiusM);
}
