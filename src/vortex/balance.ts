/**
 * Forces on air that circles a low, in the rotating frame: pressure gradient, Coriolis and centrifugal force.
 * All speeds are positive for cyclonic flow, f enters by its absolute value: the hemisphere turns the wind, not its speed.
 */

/** Which force balances the pressure gradient, by the local Rossby number. */
export type BalanceRegime = 'cyclostrophic' | 'gradient' | 'geostrophic';

/** What drives the balance at one radius. */
export interface Driving {
  readonly radiusM: number;
  /** (1/ρ) ∂p/∂r, m/s², positive outward from a low */
  readonly pressureGradientMps2: number;
  /** f, 1/s; only its magnitude counts */
  readonly coriolisPerS: number;
}

/**
 * Cyclostrophic wind, m/s: the centrifugal force alone balances the pressure gradient.
 * V_c = √(r/ρ · ∂p/∂r); NaN for a gradient that points inward (a local high).
 */
export function cyclostrophicWind({ radiusM, pressureGradientMps2 }: Driving): number {
  return Math.sqrt(radiusM * pressureGradientMps2);
}

/** Geostrophic wind, m/s: the Coriolis force alone balances the pressure gradient. V_g = (∂p/∂r)/(ρ|f|); ∞ on the equator. */
export function geostrophicWind({ pressureGradientMps2, coriolisPerS }: Driving): number {
  return pressureGradientMps2 === 0 ? 0 : pressureGradientMps2 / Math.abs(coriolisPerS);
}

/**
 * Gradient wind around a low, m/s: V²/r + |f|V = (1/ρ)∂p/∂r, the regular root in the form without cancellation
 * V = G / (c + √(c² + G)), G = (r/ρ)∂p/∂r, c = |f|r/2   [Holton2004, ch. 3, from memory].
 * Limits: V_c for f → 0, V_g for r → ∞. NaN where the gradient points inward (see {@link anticyclonicWind}).
 */
export function gradientWind({ radiusM, pressureGradientMps2, coriolisPerS }: Driving): number {
  return gradientWindOf(radiusM * pressureGradientMps2, 0.5 * Math.abs(coriolisPerS) * radiusM);
}

/** The same root from G = V_c² (m²/s²) and c = |f|r/2 (m/s), for callers that hold those already. */
export function gradientWindOf(cyclostrophicSquared: number, halfCoriolisMps: number): number {
  if (cyclostrophicSquared === 0) return 0;
  if (!(cyclostrophicSquared > 0)) return Number.NaN;
  return cyclostrophicSquared / (halfCoriolisMps + Math.sqrt(halfCoriolisMps * halfCoriolisMps + cyclostrophicSquared));
}

/**
 * Speed of the regular flow around a high, m/s, for a gradient of the given magnitude that points inward:
 * V = 2G / (c' + √(c'² − 4G)) with c' = |f|r; NaN where the gradient is stronger than a high can hold (4G > c'²).
 */
export function anticyclonicWind({ radiusM, pressureGradientMps2, coriolisPerS }: Driving): number {
  const g = radiusM * Math.abs(pressureGradientMps2);
  const c = Math.abs(coriolisPerS) * radiusM;
  return g === 0 ? 0 : (2 * g) / (c + Math.sqrt(c * c - 4 * g));
}

/** Local Rossby number V/(|f|r): the centrifugal over the Coriolis force; ∞ on the equator and at the centre of a rotating core. */
export function rossbyNumber(
  windMps: number,
  { radiusM, coriolisPerS }: { radiusM: number; coriolisPerS: number },
): number {
  return windMps === 0 ? 0 : windMps / (Math.abs(coriolisPerS) * radiusM);
}

/** Absolute angular momentum about the centre, m²/s: M = rV + ½|f|r². */
export function angularMomentum(
  windMps: number,
  { radiusM, coriolisPerS }: { radiusM: number; coriolisPerS: number },
): number {
  return radiusM * windMps + 0.5 * Math.abs(coriolisPerS) * radiusM * radiusM;
}

/** Forces per mass at one radius, m/s², each positive: the pressure gradient inward, the other two outward. */
export interface ForceBudget {
  readonly pressureGradientMps2: number;
  readonly coriolisMps2: number;
  readonly centrifugalMps2: number;
}

/** The budget that a wind in gradient balance implies. */
export function forceBudget(
  windMps: number,
  { radiusM, coriolisPerS }: { radiusM: number; coriolisPerS: number },
): ForceBudget {
  const coriolisMps2 = Math.abs(coriolisPerS) * windMps;
  const centrifugalMps2 = radiusM === 0 ? 0 : (windMps * windMps) / radiusM;
  return { pressureGradientMps2: coriolisMps2 + centrifugalMps2, coriolisMps2, centrifugalMps2 };
}

/**
 * The regime by the local Rossby number. Common practice: above 10 cyclostrophic, below 0.1 geostrophic, gradient between.
 */
export function balanceRegime(
  rossby: number,
  bounds: { above: number; below: number } = { above: 10, below: 0.1 },
): BalanceRegime {
  if (rossby > bounds.above) return 'cyclostrophic';
  return rossby < bounds.below ? 'geostrophic' : 'gradient';
}
