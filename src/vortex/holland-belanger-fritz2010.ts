import { InputError } from '../errors.js';
import type { ProfileMethod } from './profile.js';

/** A wind of the vortex outside its core. */
export interface OuterWind {
  readonly radiusM: number;
  readonly windMps: number;
}

/**
 * The exponent at the outer radius: x_n = ln(v_n/v_m) / ln[(R/r_n)ᵇ exp(1 − (R/r_n)ᵇ)]   [HollandBelangerFritz2010, solved
 * for x].
 * @throws InputError `profile.outer-wind` unless v_n < v_m and r_n > R
 */
export function outerExponent(
  outer: OuterWind,
  core: { maxWindMps: number; radiusOfMaxWindM: number; b: number },
): number {
  if (!(outer.windMps > 0 && outer.windMps < core.maxWindMps) || !(outer.radiusM > core.radiusOfMaxWindM)) {
    throw new InputError(
      'profile.outer-wind',
      `an outer wind of ${outer.windMps} m/s at ${outer.radiusM / 1000} km: it lies below the maximum (${core.maxWindMps} m/s) and outside the radius of maximum wind (${core.radiusOfMaxWindM / 1000} km)`,
    );
  }
  const u = (core.radiusOfMaxWindM / outer.radiusM) ** core.b;
  return Math.log(outer.windMps / core.maxWindMps) / (Math.log(u) + 1 - u);
}

/** Largest x_n in a model that runs through all stages of a storm; own choice. */
const MOST_EXPONENT = 1.5;

/** The least x_n with which the wind does not rise again before the outer wind: its slope there is not positive. */
function leastExponent(outerRadiusM: number, core: { readonly radiusOfMaxWindM: number; readonly b: number }): number {
  const u = (core.radiusOfMaxWindM / outerRadiusM) ** core.b;
  const gain = (u - 1 - Math.log(u)) / (outerRadiusM - core.radiusOfMaxWindM);
  return (0.5 * gain) / ((core.b * (1 - u)) / outerRadiusM + gain);
}

/**
 * V = V_m [s⁻ᵇ exp(1 − s⁻ᵇ)]ˣ, s = r/R; x = ½ inside R, outside x = ½ + (r − R)(x_n − ½)/(r_n − R), held at x_n beyond r_n
 * (own choice: it would grow without limit)   [HollandBelangerFritz2010, from memory].
 * b is the storm's B. The outer wind is a 10-m wind of the vortex, without the motion's part (`vortex.outer_wind_mps` at
 * `vortex.outer_wind_radius_km`), brought to the profile's level by `surface.factor`; without one x is ½ everywhere. While
 * the storm is too weak or too wide for the observation, x_n is limited to 1.5 and to what keeps the wind falling outward.
 */
export const hollandBelangerFritz2010: ProfileMethod = {
  id: 'holland-belanger-fritz-2010',
  title: 'Holland, Belanger & Fritz 2010: exponential winds, exponent from an outer wind',
  source: 'HollandBelangerFritz2010',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM, hollandB: b, numbers }) => {
    const radiusKm = numbers['outer_wind_radius_km'];
    const outer =
      radiusKm === undefined
        ? null
        : {
            radiusM: Math.max(radiusKm * 1000, 1.2 * radiusOfMaxWindM),
            windMps: Math.min((numbers['outer_wind_mps'] ?? 17.5) / (numbers['factor'] ?? 0.9), 0.99 * maxWindMps),
          };
    const core = { maxWindMps, radiusOfMaxWindM, b };
    const xn = outer
      ? Math.min(MOST_EXPONENT, Math.max(leastExponent(outer.radiusM, core), outerExponent(outer, core)))
      : 0.5;
    const reach = outer ? outer.radiusM - radiusOfMaxWindM : 1;
    return {
      windMps: (radiusM) => {
        if (radiusM <= 0) return 0;
        const u = (radiusOfMaxWindM / radiusM) ** b;
        const x = 0.5 + (xn - 0.5) * Math.min(1, Math.max(0, (radiusM - radiusOfMaxWindM) / reach));
        return Number.isFinite(u) ? maxWindMps * Math.exp(x * (Math.log(u) + 1 - u)) : 0;
      },
      kinksM: [radiusOfMaxWindM, radiusOfMaxWindM + reach],
    };
  },
};
