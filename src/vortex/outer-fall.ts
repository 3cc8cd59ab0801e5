/**
 * −Δ ln r/Δ ln V of the outer wind over a step |Δ ln V| from 34 kt (own calibration, `scripts/calibrate.js`): smaller for
 * stronger storms, larger for longer steps; at least 0.8. Maximum wind as a 1-min mean, m/s.
 */
export function outerFall(maxWindMps: number, step: number): number {
  return Math.max(0.8, 1.51 + 1.3 * Math.min(1, step) - 0.75 * Math.log(maxWindMps / 35));
}
