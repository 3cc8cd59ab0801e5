import { type Exposure, gustFactor } from './averaging.js';
import { krayerMarshallFactor, turbulenceGustFactor } from './gust-curve.js';
import { turbulenceIntensity } from './roughness.js';

/** A rule for the gust over the local mean wind. */
export interface GustMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** gust over `durationS` within `periodS`, over the mean of that period */
  readonly factor: (input: {
    exposure: Exposure;
    /** roughness length upwind, m */
    z0M: number;
    durationS: number;
    periodS: number;
  }) => number;
}

/** Every gust rule that a recipe may name. */
export const GUST_METHODS: readonly GustMethod[] = [
  {
    id: 'wmo-2010',
    title: 'Table by exposure class: at sea, off the sea, off the land, in land',
    source: 'HarperKepertGinger2010',
    factor: ({ exposure, durationS, periodS }) => gustFactor(exposure, { durationS, periodS }),
  },
  {
    id: 'simiu-scanlan-1996',
    title: 'From the turbulence intensity of the roughness',
    source: 'SimiuScanlan1996',
    factor: ({ z0M, durationS, periodS }) => turbulenceGustFactor(turbulenceIntensity(z0M), { durationS, periodS }),
  },
  {
    id: 'krayer-marshall-1992',
    title: 'Hurricanes over land, steeper than the table; off the sea and at sea the table',
    source: 'KrayerMarshall1992',
    factor: ({ exposure, durationS, periodS }) =>
      exposure === 'in-land' || exposure === 'off-land'
        ? krayerMarshallFactor({ durationS, periodS })
        : gustFactor(exposure, { durationS, periodS }),
  },
];

/** The gust rule of a name, `wmo-2010` where there is none of it. */
export function gustMethod(id: unknown): GustMethod {
  return GUST_METHODS.find((method) => method.id === id) ?? GUST_METHODS[0]!;
}
