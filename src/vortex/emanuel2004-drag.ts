import { OUTER_STEPS } from './emanuel2004.js';

/** Drag coefficient of the sea for a wind, both at 10 m. */
export type DragOfWind = (windMps: number) => number;

/** 6.2·10⁻⁴ up to 6 m/s, a straight line to 2.35·10⁻³ at 35.4 m/s, constant above   [DonelanEtAl2004, from memory]. */
export const donelanDrag: DragOfWind = (windMps) =>
  6.2e-4 + ((2.35e-3 - 6.2e-4) * Math.min(29.4, Math.max(0, windMps - 6))) / 29.4;

/** What the outer solution depends on. */
export interface OuterVortex {
  /** where the wind vanishes, m */
  readonly outerRadiusM: number;
  readonly coriolisPerS: number;
  /** W_c, speed of the sinking air, m/s */
  readonly subsidenceMps: number;
  readonly dragOf: DragOfWind;
}

/**
 * The outer solution with a drag that depends on the wind: dM/dr = (2C_d(V)/W_c)(rV)²/(r0² − r²), V(r0) = 0, M = rV + ½|f|r²
 * [Emanuel2004]. Integrated inward from r0 in t = √(1 − r/r0) by the classical Runge–Kutta method; the wind at `radiusM`, m/s.
 */
export function outerWindByDrag(p: OuterVortex): (radiusM: number) => number {
  const r0 = p.outerRadiusM;
  const f = Math.abs(p.coriolisPerS);
  /** d(rV)/dt at t, rV in units of ½|f|r0² */
  const slope = (t: number, g: number): number => {
    if (t === 0) return 0;
    const t2 = t * t;
    const x = 1 - t2;
    const gamma = (p.dragOf((0.5 * f * r0 * Math.max(0, g)) / Math.max(1e-6, x)) * f * r0) / p.subsidenceMps;
    return -2 * t * ((gamma * g * g) / (t2 * (2 - t2)) - 2 * x);
  };
  const h = 1 / OUTER_STEPS;
  const g = new Float64Array(OUTER_STEPS + 1);
  for (let i = 0; i < OUTER_STEPS; i++) {
    const t = i * h;
    const y = g[i]!;
    const k1 = slope(t, y);
    const k2 = slope(t + h / 2, y + (h / 2) * k1);
    const k3 = slope(t + h / 2, y + (h / 2) * k2);
    const k4 = slope(t + h, y + h * k3);
    g[i + 1] = y + (h / 6) * (k1 + 2 * k2 + 2 * k3 + k4);
  }
  return (radiusM) => {
    if (radiusM >= r0 || radiusM <= 0) return 0;
    const position = Math.sqrt(1 - radiusM / r0) * OUTER_STEPS;
    const i = Math.min(OUTER_STEPS - 1, Math.floor(position));
    const a = position - i;
    const b = 1 - a;
    const [g0, g1] = [g[i]!, g[i + 1]!];
    const [s0, s1] = [h * slope(i * h, g0), h * slope((i + 1) * h, g1)];
    const at = g0 * (1 + 2 * a) * b * b + s0 * a * b * b + g1 * a * a * (3 - 2 * a) - s1 * a * a * b;
    return Math.max(0, (at * 0.5 * f * r0 * r0) / radiusM);
  };
}
