import { InputError } from '../errors.js';
import { HOLLAND_B_BOUNDS, hollandProfile } from './holland1980.js';
import type { ProfileMethod } from './profile.js';

/** What the surface shape parameter depends on. */
export interface SurfaceShapeInput {
  readonly pressureDeficitPa: number;
  /** change of the central pressure, Pa/s, positive when filling */
  readonly pressureTrendPaPerS: number;
  readonly latDeg: number;
  readonly translationMps: number;
}

/**
 * b_s = −4.4·10⁻⁵Δp² + 0.01Δp + 0.03 ∂p_c/∂t − 0.014|φ| + 0.15 v_t^x + 1, x = 0.6(1 − Δp/215), in hPa, hPa/h, degrees
 * and m/s   [Holland2008, from memory]. It belongs to winds at 10 m. Valid for Δp below 215 hPa.
 * @throws InputError `profile.deficit` from 215 hPa up
 */
export function surfaceShape(input: SurfaceShapeInput): number {
  const dp = input.pressureDeficitPa / 100;
  if (!(dp < 215)) {
    throw new InputError(
      'profile.deficit',
      `a pressure deficit of ${dp.toFixed(0)} hPa: Holland 2008 is defined below 215 hPa; choose another vortex.profile`,
    );
  }
  const trend = input.pressureTrendPaPerS * 36;
  const motion = 0.15 * input.translationMps ** (0.6 * (1 - dp / 215));
  return -4.4e-5 * dp * dp + 0.01 * dp + 0.03 * trend - 0.014 * Math.abs(input.latDeg) + motion + 1;
}

/**
 * Holland's profile with B from b_s. With the same air density at both levels a 10-m wind of g times the gradient wind
 * has b_s = g²B, so the gradient level takes B = b_s/g², g the reduction at the maximum   [Holland2008]; limited to 0.8–2.5.
 */
export const holland2008: ProfileMethod = {
  id: 'holland-2008',
  title: 'Holland 2008: exponential profile, shape from deficit, its trend, latitude and motion',
  source: 'Holland2008',
  kinematic: false,
  build: (input) => {
    const factor = input.numbers['factor'] ?? 0.9;
    const shape = surfaceShape({
      pressureDeficitPa: input.ambientPressurePa - input.centralPressurePa,
      pressureTrendPaPerS: (input.numbers['pressure_trend_hpa_h'] ?? 0) / 36,
      latDeg: input.latDeg,
      translationMps: input.translationMps,
    });
    const [least, most] = HOLLAND_B_BOUNDS;
    return hollandProfile(input, Math.min(most, Math.max(least, shape / (factor * factor))));
  },
};
