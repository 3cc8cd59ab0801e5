import type { ProfileMethod, RadialProfile } from './profile.js';

/** The parts of a dual-exponential profile; lengths in m. */
export interface WilloughbyParameters {
  readonly maxWindMps: number;
  readonly radiusOfMaxWindM: number;
  /** exponent inside */
  readonly n: number;
  /** share of the fast decay */
  readonly share: number;
  readonly slowDecayM: number;
  readonly fastDecayM: number;
  readonly transitionM: number;
}

/** w(ξ) = 126ξ⁵ − 420ξ⁶ + 540ξ⁷ − 315ξ⁸ + 70ξ⁹ between 0 and 1, 0 below, 1 above   [Willoughby2006, from memory]. */
export function rampWeight(xi: number): number {
  if (xi <= 0) return 0;
  if (xi >= 1) return 1;
  return xi ** 5 * (126 + xi * (-420 + xi * (540 + xi * (-315 + 70 * xi))));
}

/** ξ at which the ramp has the weight `w`, by bisection. */
function rampInverse(w: number): number {
  let low = 0;
  let high = 1;
  for (let i = 0; i < 52; i++) {
    const middle = 0.5 * (low + high);
    if (rampWeight(middle) < w) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/**
 * The parameters of the dual-exponential family from maximum flight-level wind (m/s) and latitude:
 * n = 0.4067 + 0.0144V − 0.0038φ, X1 = 317.1 − 2.026V + 1.915φ km, A = 0.0696 + 0.0049V − 0.0064φ ≥ 0, X2 = 25 km,
 * a transition of 25 km, 15 km for R ≤ 20 km   [Willoughby2006, eqs. 10a–c, from memory; V 20–70 m/s, φ 10–40°].
 * Beyond that range n stays at or above 0.1, A at or below 0.9 and X1 at or above 50 km (own choice).
 */
export function willoughbyParameters(p: {
  maxWindMps: number;
  radiusOfMaxWindM: number;
  latDeg: number;
}): WilloughbyParameters {
  const v = p.maxWindMps;
  const lat = Math.abs(p.latDeg);
  return {
    maxWindMps: v,
    radiusOfMaxWindM: p.radiusOfMaxWindM,
    n: Math.max(0.1, 0.4067 + 0.0144 * v - 0.0038 * lat),
    share: Math.min(0.9, Math.max(0, 0.0696 + 0.0049 * v - 0.0064 * lat)),
    slowDecayM: 1000 * Math.max(50, 317.1 - 2.026 * v + 1.915 * lat),
    fastDecayM: 25_000,
    transitionM: p.radiusOfMaxWindM > 20_000 ? 25_000 : 15_000,
  };
}

/**
 * Where the transition starts and ends, m. R lies inside it where V′(R) = 0, which is exactly
 * w(ξ_R) = (n/R) / (n/R + (1 − A)/X1 + A/X2). A transition that would start inside the centre is shortened.
 */
export function transitionOf(p: WilloughbyParameters): { startM: number; endM: number } {
  const inner = p.n / p.radiusOfMaxWindM;
  const xi = rampInverse(inner / (inner + (1 - p.share) / p.slowDecayM + p.share / p.fastDecayM));
  const width = Math.min(p.transitionM, (0.9 * p.radiusOfMaxWindM) / xi);
  const startM = p.radiusOfMaxWindM - xi * width;
  return { startM, endM: startM + width };
}

/**
 * V = V_m sⁿ inside the transition, V_m[(1 − A)e^{−(r−R)/X1} + A e^{−(r−R)/X2}] outside, the two blended by w within it
 * [Willoughby2006].
 */
export function willoughbyProfile(p: WilloughbyParameters): RadialProfile {
  const { startM, endM } = transitionOf(p);
  const outside = (radiusM: number): number => {
    const d = radiusM - p.radiusOfMaxWindM;
    return p.maxWindMps * ((1 - p.share) * Math.exp(-d / p.slowDecayM) + p.share * Math.exp(-d / p.fastDecayM));
  };
  return {
    windMps: (radiusM) => {
      if (radiusM <= 0) return 0;
      if (radiusM >= endM) return outside(radiusM);
      const inside = p.maxWindMps * (radiusM / p.radiusOfMaxWindM) ** p.n;
      if (radiusM <= startM) return inside;
      const w = rampWeight((radiusM - startM) / (endM - startM));
      return inside * (1 - w) + outside(radiusM) * w;
    },
    kinksM: [startM, endM],
  };
}

export const willoughby2006: ProfileMethod = {
  id: 'willoughby-2006',
  title: 'Willoughby, Darling & Rahn 2006: power law inside, two exponentials outside',
  source: 'Willoughby2006',
  kinematic: true,
  build: (input) => willoughbyProfile(willoughbyParameters(input)),
};
