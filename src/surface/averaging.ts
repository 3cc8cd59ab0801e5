import { InputError } from '../errors.js';

/** Exposure of a place to the wind of a tropical cyclone, rough to smooth. */
export const EXPOSURES = ['in-land', 'off-land', 'off-sea', 'at-sea'] as const;
export type Exposure = (typeof EXPOSURES)[number];

/** Gust durations τ of the table's columns, s. */
const DURATIONS_S = [3, 60, 120, 180, 600] as const;
/** Reference periods T₀ of the table's rows, s. */
const PERIODS_S = [3600, 600, 180, 120, 60] as const;

/**
 * Gust factors G(τ, T₀) of WMO/TD-No. 1555, table 1.1   [HarperKepertGinger2010, from memory; the ratios of the
 * 600-s to the 60-s column reproduce the published conversions 0.84, 0.87, 0.90 and 0.93].
 * Rows by T₀ as in PERIODS_S, columns by τ as in DURATIONS_S; τ ≤ T₀.
 */
const GUST_FACTORS: Readonly<Record<Exposure, readonly (readonly number[])[]>> = {
  'in-land': [
    [1.75, 1.28, 1.19, 1.15, 1.08],
    [1.66, 1.21, 1.12, 1.09, 1],
    [1.58, 1.15, 1.07, 1],
    [1.55, 1.13, 1],
    [1.49, 1],
  ],
  'off-land': [
    [1.6, 1.22, 1.15, 1.12, 1.06],
    [1.52, 1.16, 1.09, 1.06, 1],
    [1.44, 1.1, 1.04, 1],
    [1.42, 1.08, 1],
    [1.36, 1],
  ],
  'off-sea': [
    [1.45, 1.17, 1.11, 1.09, 1.05],
    [1.38, 1.11, 1.05, 1.03, 1],
    [1.31, 1.05, 1, 1],
    [1.28, 1.03, 1],
    [1.23, 1],
  ],
  'at-sea': [
    [1.3, 1.11, 1.07, 1.06, 1.03],
    [1.23, 1.05, 1.02, 1, 1],
    [1.17, 1, 1, 1],
    [1.15, 1, 1],
    [1.11, 1],
  ],
};

/** Averaging periods that the table knows, s. */
export const AVERAGING_PERIODS_S: readonly number[] = [60, 120, 180, 600, 3600];

function column(durationS: number): number {
  return (DURATIONS_S as readonly number[]).indexOf(durationS);
}

/**
 * Gust factor: the highest mean over `durationS` within a period, over the mean of that period   [HarperKepertGinger2010].
 * @throws InputError `gust.period` for a pair that is not in the table
 */
export function gustFactor(exposure: Exposure, { durationS, periodS }: { durationS: number; periodS: number }): number {
  if (durationS === periodS) return 1;
  const row = GUST_FACTORS[exposure][(PERIODS_S as readonly number[]).indexOf(periodS)];
  const factor = durationS < periodS ? row?.[column(durationS)] : undefined;
  if (factor === undefined) {
    throw new InputError(
      'gust.period',
      `no gust factor for a ${durationS}-s gust within ${periodS} s; durations are 3, 60, 120, 180 and 600 s, periods 60, 120, 180, 600 and 3600 s`,
    );
  }
  return factor;
}

/**
 * Factor that turns a maximum sustained wind over `fromS` into one over `toS`: the ratio of two gust factors on the
 * hour, G(to, 3600)/G(from, 3600)   [HarperKepertGinger2010]. It is not a gust factor: from 1 to 10 minutes at sea it is
 * 0.93, where 1/G(60, 600) would be 0.95.
 * @throws InputError `averaging.period`
 */
export function averagingFactor(exposure: Exposure, { fromS, toS }: { fromS: number; toS: number }): number {
  if (fromS === toS) return 1;
  const onTheHour = (periodS: number): number => {
    if (periodS === 3600) return 1;
    const factor = periodS === 3 ? undefined : GUST_FACTORS[exposure][0]![column(periodS)];
    if (factor === undefined) {
      throw new InputError(
        'averaging.period',
        `no conversion for winds averaged over ${periodS} s; known periods are ${AVERAGING_PERIODS_S.join(', ')} s`,
      );
    }
    return factor;
  };
  return onTheHour(toS) / onTheHour(fromS);
}
