/**
 * The boundary layer under a vortex by linear theory, with reduction, inflow and the asymmetry of the motion in one
 * [Kepert2001; the system is derived anew here, and what it leaves of the slip condition is below 10⁻⁹].
 *
 * With f the size of the Coriolis parameter, K the diffusivity and C_d the drag coefficient of the 10-m wind:
 *   α = (f + 2V/r)/2K, β = (f + V/r + dV/dr)/2K, γ = (V/r)/2K, δ₀ = (αβ)^−¼, δ±₁ = |√(αβ) ± γ|^−½, s = C_d V/K, χ = sδ₀.
 * The wind at the surface is the slip of the solution that decays upward. It needs β > 0: a vortex that is inertially stable.
 */

/** The layer as a recipe names it. */
export const KEPERT_2001 = {
  id: 'kepert-2001',
  title: 'Kepert 2001: linear boundary layer with constant diffusivity',
  source: 'Kepert2001',
} as const;

/** What the layer needs to know of the vortex at a radius. */
export interface LayerInput {
  readonly radiusM: number;
  /** gradient wind, m/s */
  readonly windMps: number;
  /** its slope, 1/s */
  readonly slopePerS: number;
  /** size of the Coriolis parameter, 1/s */
  readonly coriolisPerS: number;
  readonly translationMps: number;
  /** vertical diffusivity, m²/s; about 50 [Kepert2001, from memory] */
  readonly diffusivityM2ps: number;
  /** about 0.002 [Kepert2001, from memory] */
  readonly dragCoefficient: number;
}

/**
 * The 10-m wind around a circle, earth-relative, m/s: outward and along the circle (cyclonic positive), each its mean and
 * its parts with the cosine and the sine of the azimuth from the heading (clockwise in the north, mirrored in the south).
 */
export interface LayerWind {
  readonly outward: readonly [mean: number, cosine: number, sine: number];
  readonly along: readonly [mean: number, cosine: number, sine: number];
}

/** Complex numbers as pairs. */
type Complex = readonly [number, number];
const times = (a: Complex, b: Complex): Complex => [a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]];
const minus = (a: Complex, b: Complex): Complex => [a[0] - b[0], a[1] - b[1]];
const over = (a: Complex, b: Complex): Complex => {
  const size = b[0] * b[0] + b[1] * b[1];
  return [(a[0] * b[0] + a[1] * b[1]) / size, (a[1] * b[0] - a[0] * b[1]) / size];
};

/** Whether the layer has a solution: β > 0. */
export function isInertiallyStable({ radiusM, windMps, slopePerS, coriolisPerS }: LayerInput): boolean {
  return coriolisPerS + windMps / radiusM + slopePerS > 0 && coriolisPerS + (2 * windMps) / radiusM > 0;
}

/** β over α from which the layer stands alone: toward β = 0 its inflow grows without bound (own choice). */
const STABLE_SHARE = 0.2;

/** 0 where the vortex is inertially unstable, 1 where it is well stable, smooth between: what the layer counts for. */
export function stability({ radiusM, windMps, slopePerS, coriolisPerS }: LayerInput): number {
  const beta = coriolisPerS + windMps / radiusM + slopePerS;
  const alpha = coriolisPerS + (2 * windMps) / radiusM;
  const t = Math.min(1, Math.max(0, beta / (STABLE_SHARE * alpha)));
  return alpha > 0 ? t * t * (3 - 2 * t) : 0;
}

/** The wind under a vortex at a radius; null where the vortex is inertially unstable. */
export function kepert2001(input: LayerInput): LayerWind | null {
  if (!isInertiallyStable(input)) return null;
  const { radiusM, windMps: v, slopePerS, coriolisPerS: f, translationMps: ut, diffusivityM2ps: k } = input;
  const alpha = (f + (2 * v) / radiusM) / (2 * k);
  const beta = (f + v / radiusM + slopePerS) / (2 * k);
  const gamma = v / radiusM / (2 * k);
  const root = Math.sqrt(alpha * beta);
  const drag = (input.dragCoefficient * v) / k;
  const chi = drag * (alpha * beta) ** -0.25;
  // symmetric part: A₀ = −χV[1 + i(1 + χ)]/(2χ² + 3χ + 2)
  const share = (-chi * v) / (2 * chi * chi + 3 * chi + 2);
  const stretch = Math.sqrt(alpha / beta);
  const inward = stretch * share;
  const along = v + share * (1 + chi);
  const q = 1 / stretch;
  const { plus, minusOne } = asymmetry({ root, gamma, drag, q, translationMps: ut });
  // λ runs the other way round than the azimuth: its sine changes sign
  return {
    outward: [inward, (plus[0] + minusOne[0]) / q + ut, (plus[1] - minusOne[1]) / q],
    along: [along, plus[1] + minusOne[1], ut - (plus[0] - minusOne[0])],
  };
}

/**
 * The two waves of the motion: (p₁ + 1.5s)A₁ − 0.5sB = −sU(q/2 − 1), −0.5sA₁ + (p₋₁* + 1.5s)B = −sU(q/2 + 1), A₋₁ = B*,
 * with p₁ = (1 + i)/δ₁ and p₋₁ = (1 + i)/δ₋₁, or (1 − i)/δ₋₁ where γ exceeds √(αβ).
 */
export function asymmetry({
  root,
  gamma,
  drag: s,
  q,
  translationMps: u,
}: {
  root: number;
  gamma: number;
  drag: number;
  q: number;
  translationMps: number;
}): { plus: Complex; minusOne: Complex } {
  if (u === 0 || s === 0) return { plus: [0, 0], minusOne: [0, 0] };
  const one = Math.sqrt(root + gamma);
  const other = Math.sqrt(Math.abs(root - gamma));
  const conjugate = root > gamma ? -1 : 1;
  const a: Complex = [one + 1.5 * s, one];
  const d: Complex = [other + 1.5 * s, conjugate * other];
  const b: Complex = [-0.5 * s, 0];
  const first: Complex = [-s * u * (q / 2 - 1), 0];
  const second: Complex = [-s * u * (q / 2 + 1), 0];
  const determinant = minus(times(a, d), times(b, b));
  const plus = over(minus(times(first, d), times(b, second)), determinant);
  const conjugated = over(minus(times(a, second), times(b, first)), determinant);
  return { plus, minusOne: [conjugated[0], -conjugated[1]] };
}
