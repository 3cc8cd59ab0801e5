import { coriolisPerS } from '../../earth.js';

/** Gas constant of dry air, J/(kg K). */
const DRY_AIR_JPKGK = 287.05;

/** What a relation for Holland's B may use. */
export interface HollandBInput {
  /** maximum of the storm's own wind at gradient level (as in flight), m/s */
  readonly gradientWindMps: number;
  readonly radiusOfMaxWindM: number;
  readonly pressureDeficitPa: number;
  readonly centralPressurePa: number;
  readonly latDeg: number;
  /** temperature of the sea, K */
  readonly seaTemperatureK: number;
}

/** A relation that gives Holland's B. */
export interface HollandBRelation {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  readonly hollandB: (input: HollandBInput) => number;
}

/** A = R|f|/√(2 R_d T ln(1 + Δp/(p_c e))): the size of the core against the storm's strength   [VickeryWadhera2008, from memory]. */
export function vickeryWadheraA(p: HollandBInput): number {
  const strength =
    2 * DRY_AIR_JPKGK * p.seaTemperatureK * Math.log(1 + p.pressureDeficitPa / (p.centralPressurePa * Math.E));
  return (p.radiusOfMaxWindM * Math.abs(coriolisPerS(p.latDeg))) / Math.sqrt(strength);
}

/** Every relation for B that a recipe may name; all of them from memory, of pressure profiles at gradient level. */
export const HOLLAND_B_RELATIONS: readonly HollandBRelation[] = [
  {
    // B = 1.7642 − 1.2098 √A, σ = 0.226   [VickeryWadhera2008, from memory]
    id: 'vickery-wadhera-2008',
    title: 'Vickery & Wadhera 2008: R, latitude, deficit, sea temperature',
    source: 'VickeryWadhera2008',
    hollandB: (p) => 1.7642 - 1.2098 * Math.sqrt(vickeryWadheraA(p)),
  },
  {
    // B = 1.833 − 0.326 √(|f|R), |f|R in m/s   [VickeryWadhera2008, from memory]
    id: 'vickery-wadhera-2008-fr',
    title: 'Vickery & Wadhera 2008, second form: R and latitude',
    source: 'VickeryWadhera2008',
    hollandB: (p) => 1.833 - 0.326 * Math.sqrt(Math.abs(coriolisPerS(p.latDeg)) * p.radiusOfMaxWindM),
  },
  {
    // B = 1.881093 − 0.010917 |φ| − 0.005567 R (km), σ = 0.286   [PowellEtAl2005, from memory]
    id: 'powell-2005',
    title: 'Powell et al. 2005: R and latitude',
    source: 'PowellEtAl2005',
    hollandB: (p) => 1.881093 - 0.010917 * Math.abs(p.latDeg) - 5.567e-6 * p.radiusOfMaxWindM,
  },
  {
    // B = 1.0036 + 0.0173 V − 0.0313 ln R + 0.0087 |φ|, V in flight in m/s, R in km   [WilloughbyRahn2004, from memory]
    id: 'willoughby-rahn-2004',
    title: 'Willoughby & Rahn 2004: wind, R and latitude',
    source: 'WilloughbyRahn2004',
    hollandB: (p) =>
      1.0036 + 0.0173 * p.gradientWindMps - 0.0313 * Math.log(p.radiusOfMaxWindM / 1000) + 0.0087 * Math.abs(p.latDeg),
  },
  {
    // B = 1.38 + 0.00184 Δp − 0.00309 R, hPa and km   [VickeryEtAl2000, from memory]
    id: 'vickery-2000',
    title: 'Vickery et al. 2000: deficit and R',
    source: 'VickeryEtAl2000',
    hollandB: (p) => 1.38 + 1.84e-5 * p.pressureDeficitPa - 3.09e-6 * p.radiusOfMaxWindM,
  },
  {
    // B = 2 − (p_c − 900)/160, hPa   [HarperHolland1999, from memory]
    id: 'harper-holland-1999',
    title: 'Harper & Holland 1999: central pressure',
    source: 'HarperHolland1999',
    hollandB: (p) => 2 - (p.centralPressurePa - 90_000) / 16_000,
  },
  {
    // B = 1.5 + (980 − p_c)/120, hPa   [HubbertEtAl1991, from memory]
    id: 'hubbert-1991',
    title: 'Hubbert et al. 1991: central pressure',
    source: 'HubbertEtAl1991',
    hollandB: (p) => 1.5 + (98_000 - p.centralPressurePa) / 12_000,
  },
];
