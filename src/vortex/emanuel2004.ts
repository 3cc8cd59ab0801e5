/**
 * The wind outside the convection, where sinking air balances the friction of the boundary layer   [Emanuel2004]:
 * dM/dr = (2C_d/W_c)(rV)²/(r0² − r²), V(r0) = 0, M = rV + ½|f|r².
 * With x = r/r0 and g = rV/(½|f|r0²) it has one parameter, γ = C_d|f|r0/W_c: dg/dx = γg²/(1 − x²) − 2x, g(1) = 0.
 * The solutions are integrated once a γ in t = √(1 − x), in which they are smooth and not stiff, and kept.
 */

/** Steps of t between the outer edge and the centre. */
export const OUTER_STEPS = 256;
/** Spacing of the kept solutions in ln γ, and their range. */
const SPACING = 0.1;
const LN_GAMMA = [-6, 9] as const;
export const GAMMA_BOUNDS = [Math.exp(LN_GAMMA[0] + SPACING), Math.exp(LN_GAMMA[1] - 2 * SPACING)] as const;

const rows = new Map<number, Float64Array>();

/** dg/dt at t. */
function slope(t: number, g: number, gamma: number): number {
  if (t === 0) return 0;
  const t2 = t * t;
  return -2 * t * ((gamma * g * g) / (t2 * (2 - t2)) - 2 * (1 - t2));
}

/** g on the nodes t = i/OUTER_STEPS for one γ, by the classical Runge–Kutta method. */
export function integrateOuter(gamma: number): Float64Array {
  const g = new Float64Array(OUTER_STEPS + 1);
  const h = 1 / OUTER_STEPS;
  for (let i = 0; i < OUTER_STEPS; i++) {
    const t = i * h;
    const y = g[i]!;
    const k1 = slope(t, y, gamma);
    const k2 = slope(t + h / 2, y + (h / 2) * k1, gamma);
    const k3 = slope(t + h / 2, y + (h / 2) * k2, gamma);
    const k4 = slope(t + h, y + h * k3, gamma);
    g[i + 1] = y + (h / 6) * (k1 + 2 * k2 + 2 * k3 + k4);
  }
  return g;
}

function rowOf(index: number): Float64Array {
  let row = rows.get(index);
  if (!row) {
    row = integrateOuter(Math.exp(LN_GAMMA[0] + SPACING * index));
    rows.set(index, row);
  }
  return row;
}

/** The four kept solutions next to γ and their weights of cubic interpolation in ln γ. */
function neighbours(gamma: number): { rows: readonly Float64Array[]; weights: readonly number[] } {
  const u = (Math.log(gamma) - LN_GAMMA[0]) / SPACING;
  const base = Math.floor(u);
  const a = u - base;
  return {
    rows: [rowOf(base - 1), rowOf(base), rowOf(base + 1), rowOf(base + 2)],
    weights: [
      (-a * (a - 1) * (a - 2)) / 6,
      ((a + 1) * (a - 1) * (a - 2)) / 2,
      (-(a + 1) * a * (a - 2)) / 2,
      ((a + 1) * a * (a - 1)) / 6,
    ],
  };
}

/** Cubic Hermite between two nodes, with the slopes of the equation itself. */
function between(g0: number, g1: number, at: { i: number; a: number; gamma: number }): number {
  const h = 1 / OUTER_STEPS;
  const { i, a, gamma } = at;
  const s0 = h * slope(i * h, g0, gamma);
  const s1 = h * slope((i + 1) * h, g1, gamma);
  const b = 1 - a;
  return g0 * (1 + 2 * a) * b * b + s0 * a * b * b + g1 * a * a * (3 - 2 * a) - s1 * a * a * b;
}

/** g(x; γ) = rV/(½|f|r0²) for 0 ≤ x ≤ 1; γ within GAMMA_BOUNDS. */
export function outerWindShare(x: number, gamma: number): number {
  const position = Math.sqrt(Math.max(0, 1 - x)) * OUTER_STEPS;
  const i = Math.min(OUTER_STEPS - 1, Math.floor(position));
  const { rows: four, weights } = neighbours(gamma);
  let g0 = 0;
  let g1 = 0;
  for (let k = 0; k < 4; k++) {
    g0 += weights[k]! * four[k]![i]!;
    g1 += weights[k]! * four[k]![i + 1]!;
  }
  return between(g0, g1, { i, a: position - i, gamma });
}

/** The same for many x of one γ: the solution is put together once. */
export function outerSolution(gamma: number): (x: number) => number {
  const { rows: four, weights } = neighbours(gamma);
  const g = new Float64Array(OUTER_STEPS + 1);
  for (let k = 0; k < 4; k++) for (let i = 0; i <= OUTER_STEPS; i++) g[i]! += weights[k]! * four[k]![i]!;
  return (x) => {
    if (x >= 1) return 0;
    const position = Math.sqrt(1 - x) * OUTER_STEPS;
    const i = Math.min(OUTER_STEPS - 1, Math.floor(position));
    return between(g[i]!, g[i + 1]!, { i, a: position - i, gamma });
  };
}
