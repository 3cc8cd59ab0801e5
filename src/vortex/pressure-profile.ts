import { gradientWindOf } from './balance.js';
import type { RadialProfile, VortexInput } from './profile.js';

/** A pressure profile of one scale: the rise from the centre as a share of the deficit, by s = r/R. */
export interface PressureShape {
  /** (p(r) − p_c)/Δp: 0 at the centre, 1 far away */
  readonly riseShare: (s: number) => number;
  /** s · d(riseShare)/ds: the cyclostrophic wind squared over Δp/ρ; largest at s = 1 */
  readonly windShare: (s: number) => number;
}

/**
 * The gradient wind of a pressure profile whose wind at R is the given maximum. The deficit in the wind is the one that
 * does this: Δp = ρ(V² + |f|RV)/windShare(1).
 */
export function pressureProfile(input: VortexInput, shape: PressureShape): RadialProfile {
  const { maxWindMps: v, radiusOfMaxWindM, airDensityKgM3, centralPressurePa } = input;
  const f = Math.abs(input.coriolisPerS);
  const coriolisPart = input.maximumIs === 'gradient' ? f * radiusOfMaxWindM * v : 0;
  const scale = (v * v + coriolisPart) / shape.windShare(1);
  const deficitPa = input.ambientPressurePa - centralPressurePa;
  return {
    windMps: (radiusM) =>
      radiusM <= 0 ? 0 : gradientWindOf(scale * shape.windShare(radiusM / radiusOfMaxWindM), 0.5 * f * radiusM),
    pressurePa: (radiusM) =>
      centralPressurePa + (radiusM <= 0 ? 0 : deficitPa * shape.riseShare(radiusM / radiusOfMaxWindM)),
    impliedDeficitPa: airDensityKgM3 * scale,
    kinksM: [],
  };
}
