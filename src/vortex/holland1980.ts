import { gradientWindOf } from './balance.js';
import type { ProfileMethod, RadialProfile, VortexInput } from './profile.js';

/** The parameters of Holland's pressure profile. */
export interface HollandParameters {
  readonly pressureDeficitPa: number;
  readonly radiusOfMaxWindM: number;
  readonly hollandB: number;
  /** f, 1/s; only its magnitude counts */
  readonly coriolisPerS: number;
  readonly airDensityKgM3: number;
}

/**
 * Gradient-level wind of the Holland profile at `radiusM` (m ≥ 0), m/s.
 * V = √(BΔp/ρ · s⁻ᴮ e^(−s⁻ᴮ) + (rf/2)²) − r|f|/2,  s = r/R   [Holland1980]
 * Its maximum lies a little inside R when f ≠ 0. Valid for B in 0.8–2.5.
 */
export function hollandWind(radiusM: number, p: HollandParameters): number {
  if (radiusM <= 0) return 0;
  const x = (p.radiusOfMaxWindM / radiusM) ** p.hollandB;
  const cyclostrophicSquared = ((p.hollandB * p.pressureDeficitPa) / p.airDensityKgM3) * x * Math.exp(-x);
  // x overflows next to the centre, where the exponential has long won
  return Number.isFinite(x) ? gradientWindOf(cyclostrophicSquared, 0.5 * Math.abs(p.coriolisPerS) * radiusM) : 0;
}

/** Pressure above the central one at `radiusM`, Pa: Δp·e^(−s⁻ᴮ)   [Holland1980]. */
export function hollandPressureRise(
  radiusM: number,
  p: Pick<HollandParameters, 'pressureDeficitPa' | 'radiusOfMaxWindM' | 'hollandB'>,
): number {
  return radiusM <= 0 ? 0 : p.pressureDeficitPa * Math.exp(-((p.radiusOfMaxWindM / radiusM) ** p.hollandB));
}

/** Which wind of which vortex B is asked for. */
export interface HollandBInput {
  readonly maxWindMps: number;
  readonly pressureDeficitPa: number;
  readonly airDensityKgM3: number;
  /** 0 for the cyclostrophic identity */
  readonly coriolisPerS: number;
  readonly radiusOfMaxWindM: number;
}

/**
 * The B whose gradient wind at R is the given maximum:
 * B = (V² + |f|RV) ρe/Δp; the cyclostrophic identity V²ρe/Δp for f = 0   [Holland1980, eq. at r = R].
 */
export function gradientConsistentB(p: HollandBInput): number {
  const v = p.maxWindMps;
  return (
    ((v * v + Math.abs(p.coriolisPerS) * p.radiusOfMaxWindM * v) * p.airDensityKgM3 * Math.E) / p.pressureDeficitPa
  );
}

/** Bounds within which B is kept: the range of Holland (1980) with a margin; a declared policy of this model. */
export const HOLLAND_B_BOUNDS = [0.8, 2.5] as const;

/** The profile for a maximum wind, R and B: Δp in the wind formula is what makes the wind at R the maximum. */
export function hollandProfile(input: VortexInput, hollandB: number): RadialProfile {
  const { maxWindMps: v, radiusOfMaxWindM: r, airDensityKgM3 } = input;
  const f = input.maximumIs === 'gradient' ? input.coriolisPerS : 0;
  const wind: HollandParameters = {
    pressureDeficitPa: ((v * v + Math.abs(f) * r * v) * airDensityKgM3 * Math.E) / hollandB,
    radiusOfMaxWindM: r,
    hollandB,
    coriolisPerS: input.coriolisPerS,
    airDensityKgM3,
  };
  const pressure = { ...wind, pressureDeficitPa: input.ambientPressurePa - input.centralPressurePa };
  return {
    windMps: (radiusM) => hollandWind(radiusM, wind),
    pressurePa: (radiusM) => input.centralPressurePa + hollandPressureRise(radiusM, pressure),
    impliedDeficitPa: wind.pressureDeficitPa,
  };
}

export const holland1980: ProfileMethod = {
  id: 'holland-1980',
  title: 'Holland 1980: exponential pressure profile with shape parameter B',
  source: 'Holland1980',
  kinematic: false,
  build: (input) => hollandProfile(input, input.hollandB),
};
