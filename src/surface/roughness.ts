import { InputError } from '../errors.js';

/** A class of the surface by its roughness length. */
export interface RoughnessClass {
  readonly id: string;
  readonly title: string;
  /** roughness length z₀, m */
  readonly z0M: number;
}

/** The classes of Davenport as revised by Wieringa, smooth to rough   [Wieringa1992; Stull2000]. */
export const ROUGHNESS_CLASSES: readonly RoughnessClass[] = [
  { id: 'sea', title: 'Open sea, fetch over 5 km', z0M: 0.0002 },
  { id: 'smooth', title: 'Mud flats, snow, little vegetation', z0M: 0.005 },
  { id: 'open', title: 'Flat grass, few isolated obstacles', z0M: 0.03 },
  { id: 'roughly-open', title: 'Low crops, occasional obstacles', z0M: 0.1 },
  { id: 'rough', title: 'High crops, scattered obstacles', z0M: 0.25 },
  { id: 'very-rough', title: 'Orchards, bushes, many obstacles', z0M: 0.5 },
  { id: 'closed', title: 'Suburbs, villages, forest', z0M: 1 },
  { id: 'chaotic', title: 'Centres of large towns, irregular forest', z0M: 2 },
];

/** Roughness length of the open sea, m   [Wieringa1992]. */
export const SEA_Z0_M = 0.0002;
/** Height at which the wind no longer knows the local surface, m   [Wieringa1976, from memory]. */
export const BLENDING_HEIGHT_M = 60;
/** Height of surface winds, m. */
const ANEMOMETER_M = 10;

/**
 * Mean wind at one height over that at another by the log law, U ∝ ln(z/z₀)   [Wieringa1992].
 * @throws InputError `roughness.length` when z₀ is not between 0 and either height
 */
export function logLawRatio(z0M: number, { fromM, toM }: { fromM: number; toM: number }): number {
  checkLength(z0M, Math.min(fromM, toM));
  return Math.log(toM / z0M) / Math.log(fromM / z0M);
}

/**
 * Local 10-m wind over the 10-m wind of another surface, through the wind at a blending height that both share:
 * [ln(h/z₁) ln(10/z₂)] / [ln(10/z₁) ln(h/z₂)], z₁ the known surface, z₂ the local one   [Wieringa1976, from memory].
 * @param z0M local roughness length, m, below 10 m
 * @param fromZ0M roughness length of the known wind, m; the open sea by default
 * @throws InputError `roughness.length`
 */
export function blendingRatio(
  z0M: number,
  { fromZ0M = SEA_Z0_M, blendingHeightM = BLENDING_HEIGHT_M }: { fromZ0M?: number; blendingHeightM?: number } = {},
): number {
  if (z0M === fromZ0M) return 1;
  checkLength(z0M, ANEMOMETER_M);
  checkLength(fromZ0M, ANEMOMETER_M);
  const up = Math.log(blendingHeightM / fromZ0M) / Math.log(ANEMOMETER_M / fromZ0M);
  return (up * Math.log(ANEMOMETER_M / z0M)) / Math.log(blendingHeightM / z0M);
}

/**
 * Turbulence intensity of the along-wind component at 10 m, about 1/ln(10/z₀)   [SimiuScanlan1996, from memory].
 * @throws InputError `roughness.length`
 */
export function turbulenceIntensity(z0M: number): number {
  checkLength(z0M, ANEMOMETER_M);
  return 1 / Math.log(ANEMOMETER_M / z0M);
}

function checkLength(z0M: number, belowM: number): void {
  if (z0M > 0 && z0M < belowM) return;
  throw new InputError(
    'roughness.length',
    `a roughness length of ${z0M} m: the log law needs one between 0 and ${belowM} m (the sea has 0.0002 m, towns 1–2 m)`,
    { fields: { z0M } },
  );
}
