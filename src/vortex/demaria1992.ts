import { InputError } from '../errors.js';
import type { ProfileMethod } from './profile.js';

/**
 * V = V_m s exp[(1 − s^d)/d], s = r/R, with the size parameter d usually 0.3–1 (`vortex.size_exponent`)
 * [DeMariaEtAl1992, from memory]. The maximum is at R for every d.
 * @throws InputError `profile.exponent` for d outside 0–3
 */
export const demaria1992: ProfileMethod = {
  id: 'demaria-1992',
  title: 'DeMaria et al. 1992: V ∝ s exp[(1 − s^d)/d]',
  source: 'DeMariaEtAl1992',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM, numbers }) => {
    const d = numbers['size_exponent'] ?? 0.5;
    if (!(d > 0 && d <= 3)) {
      throw new InputError(
        'profile.exponent',
        `vortex.size_exponent is ${d}: the exponent of DeMaria et al. lies above 0 and at most at 3`,
      );
    }
    return {
      windMps: (radiusM) => {
        const s = radiusM / radiusOfMaxWindM;
        return s <= 0 ? 0 : maxWindMps * s * Math.exp((1 - s ** d) / d);
      },
      kinksM: [],
    };
  },
};
