/**
 * −Δ ln r/Δ ln V of the outer wind over a step |Δ ln V| from 34 kt (own calibration, `scripts/calibrate.js`): smaller for
 * stronger storms, larger for longer steps; at least 0.8. Maximum wind as a 1-min mean, m/s. It bounds the radius of maximum
 * wind where only the wind and one size are known.
 */
export function outerFall(maxWindMps: number, step: number): number {
  return Math.max(0.8, 1.51 + 1.3 * Math.min(1, step) - 0.75 * Math.log(maxWindMps / 35));
}

/** Coefficients of `fallOfRadii`, from `scripts/calibrate.js` (own calibration). */
export const FALL_2016 = {
  constant: 1.642,
  step: 1.336,
  /** ln(V/35 m/s) */
  wind: -0.898,
  /** ln(size/130 km), the size by the recipe's relation */
  size: -0.231,
  /** share of the stretch against the base vortex that is taken back for each unit of |Δ ln V| */
  back: 0.521,
} as const;

/**
 * −Δ ln r/Δ ln V of the wind of a quadrant beyond an observed radius, over a step |Δ ln V|: smaller for stronger and for larger
 * storms, larger for longer steps; at least 0.8 (own calibration on 2004–2016). Winds as 1-min means, m/s.
 */
export function fallOfRadii(storm: { maxWindMps: number; sizeRadiusM: number }, step: number): number {
  const c = FALL_2016;
  const fall =
    c.constant +
    c.step * Math.min(1, step) +
    c.wind * Math.log(storm.maxWindMps / 35) +
    c.size * Math.log(storm.sizeRadiusM / 130_000);
  return Math.max(0.8, fall);
}
