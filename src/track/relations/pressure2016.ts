import { type PressureWindInput, type PressureWindRelation, windOfPressure } from './pressure-wind.js';

/** Coefficients of ln Δp (hPa), from `scripts/calibrate.js` (own calibration): without and with the radius of 34 kt. */
export const PRESSURE_2016 = {
  withoutSize: { constant: 3.245, wind: 1.82, latitude: 0.011, translation: -0.002, size: 0 },
  withSize: { constant: 3.265, wind: 1.686, latitude: 0.0073, translation: -0.0045, size: 0.189 },
} as const;

/**
 * ln Δp = c₀ + c₁ ln(V/35 m/s) + c₂(|φ| − 20°) + c₃(c − 5 m/s) + c₄ ln(r₃₄/160 km), Δp in hPa below the ambient pressure
 * (own calibration on HURDAT2 2004–2016, fixes at least 100 km off land, `scripts/calibrate.js`). r₃₄ is the mean of the
 * quadrants that have 34 kt; without it c₄ = 0 and the other four have values of their own. Monotone in every variable.
 */
export function deficit2016Hpa(
  maxWindMps: number,
  input: Pick<PressureWindInput, 'radiusOf34KtM' | 'latDeg' | 'translationMps'>,
): number {
  const c = input.radiusOf34KtM === null ? PRESSURE_2016.withoutSize : PRESSURE_2016.withSize;
  return Math.exp(
    c.constant +
      c.wind * Math.log(Math.max(1, maxWindMps) / 35) +
      c.latitude * (Math.abs(input.latDeg) - 20) +
      c.translation * (Math.min(25, input.translationMps) - 5) +
      (input.radiusOf34KtM === null ? 0 : c.size * Math.log(Math.max(20_000, input.radiusOf34KtM) / 160_000)),
  );
}

const pressurePa = (maxWindMps: number, input: PressureWindInput): number =>
  input.ambientPressurePa - 100 * deficit2016Hpa(maxWindMps, input);

export const pressure2016: PressureWindRelation = {
  id: 'calibrated-pressure-2016',
  title: 'Own calibration on 2004–2016: wind, latitude, motion, radius of 34 kt',
  source: 'own calibration',
  centralPressurePa: pressurePa,
  maxWindMps: (centralPressurePa, input) => windOfPressure((wind) => pressurePa(wind, input), centralPressurePa),
};
