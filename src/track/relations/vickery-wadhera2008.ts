import type { RadiusRelation } from './radius-of-max-wind.js';

/** ln R (km) = 3.015 − 6.291·10⁻⁵ Δp² + 0.0337 |φ|, Δp in hPa; σ of ln R 0.448 to 0.186   [VickeryWadhera2008, from memory]. */
export function vickeryWadheraRadiusM(pressureDeficitPa: number, latDeg: number): number {
  return 1000 * Math.exp(3.015 - 6.291e-5 * (pressureDeficitPa / 100) ** 2 + 0.0337 * Math.abs(latDeg));
}

/** The same for storms of the Gulf of Mexico: ln R (km) = 3.859 − 7.700·10⁻⁵ Δp²   [VickeryWadhera2008, from memory]. */
export function vickeryWadheraGulfRadiusM(pressureDeficitPa: number): number {
  return 1000 * Math.exp(3.859 - 7.7e-5 * (pressureDeficitPa / 100) ** 2);
}

/** ln R (km) = 2.636 − 5.086·10⁻⁵ Δp² + 0.0394899 |φ|, Δp in hPa   [VickeryEtAl2000, from memory]. */
export function vickeryRadiusM(pressureDeficitPa: number, latDeg: number): number {
  return 1000 * Math.exp(2.636 - 5.086e-5 * (pressureDeficitPa / 100) ** 2 + 0.0394899 * Math.abs(latDeg));
}

export const vickeryWadhera2008: RadiusRelation = {
  id: 'vickery-wadhera-2008',
  title: 'Vickery & Wadhera 2008, all hurricanes: deficit and latitude',
  source: 'VickeryWadhera2008',
  radiusM: ({ pressureDeficitPa, latDeg }) => vickeryWadheraRadiusM(pressureDeficitPa, latDeg),
};

export const vickeryWadheraGulf2008: RadiusRelation = {
  id: 'vickery-wadhera-2008-gulf',
  title: 'Vickery & Wadhera 2008, Gulf of Mexico: deficit alone',
  source: 'VickeryWadhera2008',
  radiusM: ({ pressureDeficitPa }) => vickeryWadheraGulfRadiusM(pressureDeficitPa),
};

export const vickery2000: RadiusRelation = {
  id: 'vickery-2000',
  title: 'Vickery et al. 2000: deficit and latitude',
  source: 'VickeryEtAl2000',
  radiusM: ({ pressureDeficitPa, latDeg }) => vickeryRadiusM(pressureDeficitPa, latDeg),
};
