import { EXPOSURE_CODES, exposureField, type SurfaceMap } from '../land/surface-map.js';
import type { Swath } from '../swath/swath.js';
import { toKnots } from '../units.js';
import type { OverviewRule } from './overview.js';

/** One field of a swath as every raster and table format writes it. */
export interface PeakBand {
  readonly kind: 'wind' | 'gust' | 'wind-from' | 'peak-time' | 'hours' | 'surface';
  /** name in a raster, without unit */
  readonly name: string;
  /** heading in a table, with unit */
  readonly heading: string;
  readonly unit: string;
  /** decimals in a table */
  readonly decimals: number;
  readonly description: string;
  readonly values: Float32Array;
  readonly overview: OverviewRule;
  /** set for hours */
  readonly thresholdMps?: number;
  readonly items: Readonly<Record<string, string>>;
}

/** `34kt` for a whole number of knots, else `20mps`, `17.5mps`. */
export function thresholdName(thresholdMps: number): string {
  const knots = Math.round(toKnots(thresholdMps));
  return Math.abs(toKnots(thresholdMps) - knots) < 0.005 ? `${knots}kt` : `${Number(thresholdMps.toFixed(3))}mps`;
}

/** The fields of a swath in the order in which every format has them. */
export function peakBands(swath: Swath): PeakBand[] {
  const { averagingS, gustDurationS } = swath;
  const origin = new Date(swath.originMs).toISOString();
  const hours = swath.hoursAbove.map((one): PeakBand => {
    const name = thresholdName(one.thresholdMps);
    return {
      kind: 'hours',
      name: `hours_${name}`,
      heading: `hours_${name}`,
      unit: 'h',
      decimals: 3,
      description: `hours with a sustained wind of ${name} or more`,
      values: one.hours,
      overview: 'max',
      thresholdMps: one.thresholdMps,
      items: { threshold_mps: String(one.thresholdMps), averaging_s: String(averagingS) },
    };
  });
  return [
    {
      kind: 'wind',
      name: 'peak_wind',
      heading: 'peak_wind_mps',
      unit: 'm/s',
      decimals: 3,
      description: `peak sustained wind at 10 m, mean over ${averagingS} s`,
      values: swath.windMps,
      overview: 'max',
      items: { averaging_s: String(averagingS), height_m: '10' },
    },
    {
      kind: 'gust',
      name: 'peak_gust',
      heading: 'peak_gust_mps',
      unit: 'm/s',
      decimals: 3,
      description: `peak gust at 10 m, mean over ${gustDurationS} s`,
      values: swath.gustMps,
      overview: 'max',
      items: { averaging_s: String(gustDurationS), height_m: '10' },
    },
    {
      kind: 'wind-from',
      name: 'wind_from_direction',
      heading: 'wind_from_deg',
      unit: 'degree',
      decimals: 2,
      description: 'direction that the wind blows from at the time of the peak, clockwise from north',
      values: swath.windFromDeg,
      overview: 'like-first',
      items: {},
    },
    {
      kind: 'peak-time',
      name: 'peak_time',
      heading: 'peak_time_s',
      unit: 's',
      decimals: 1,
      description: `time of the peak wind, seconds after ${origin}`,
      values: swath.peakTimeS,
      overview: 'like-first',
      items: { time_origin: origin },
    },
    ...hours,
  ];
}

/** The fields of a surface: share of land, exposure for the wind at the peak, roughness length. */
export function surfaceBands(swath: Swath, surface: SurfaceMap): PeakBand[] {
  const codes = EXPOSURE_CODES.map((exposure, code) => `${code} ${exposure}`).join(', ');
  const band = (
    name: string,
    unit: string,
    description: string,
    values: Float32Array,
    overview: OverviewRule,
  ): PeakBand => ({
    kind: 'surface',
    name,
    heading: name,
    unit,
    decimals: 4,
    description,
    values,
    overview,
    items: {},
  });
  return [
    band('land_fraction', '1', 'share of the cell that is land', surface.landFraction, 'max'),
    band(
      'exposure_class',
      '1',
      `exposure for the wind at its peak: ${codes}`,
      exposureField(surface, swath.windFromDeg),
      'like-first',
    ),
    band('roughness_length', 'm', 'roughness length of the cell, z0', surface.roughnessM, 'max'),
  ];
}
