/** Exposure categories of the standard: B suburban, C open country, D flat shore. */
export type Asce7Category = 'B' | 'C' | 'D';

/** Exponent α and gradient height z_g (feet) of the 2005 to 2016 editions   [ASCE2005]. */
const CATEGORIES: Readonly<Record<Asce7Category, { alpha: number; gradientFt: number }>> = {
  B: { alpha: 7, gradientFt: 1200 },
  C: { alpha: 9.5, gradientFt: 900 },
  D: { alpha: 11.5, gradientFt: 700 },
};
const FOOT_M = 0.3048;

/**
 * Velocity pressure coefficient K_z = 2.01 (z/z_g)^(2/α)   [ASCE2005].
 * It multiplies a pressure: a ratio of winds is the square root of a ratio of coefficients. Below 15 ft it is held.
 */
export function asce7Kz(category: Asce7Category, heightM: number): number {
  const { alpha, gradientFt } = CATEGORIES[category];
  return 2.01 * (Math.max(15, heightM / FOOT_M) / gradientFt) ** (2 / alpha);
}

/** Wind in one category over the wind in open country (C), both at the same height. */
export function asce7WindRatio(category: Asce7Category, heightM = 10): number {
  return Math.sqrt(asce7Kz(category, heightM) / asce7Kz('C', heightM));
}
