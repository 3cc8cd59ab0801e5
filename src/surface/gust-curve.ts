import { InputError } from '../errors.js';

/**
 * Highest mean wind over t seconds in an hour, over the hourly mean, open country, no tropical cyclone:
 * 1.277 + 0.296 tanh(0.9 log₁₀(45/t)) for 1 ≤ t ≤ 3600 s, 1.5334 − 0.15 log₁₀ t from there to 36,000 s
 * [USACE2002, after Durst1960; the first branch from memory].
 * @throws InputError `gust.duration`
 */
export function durstFactor(durationS: number): number {
  if (!(durationS >= 1 && durationS <= 36_000))
    throw new InputError('gust.duration', `a mean over ${durationS} s: the gust curve knows 1 to 36000 s`);
  return durationS <= 3600
    ? 1.277 + 0.296 * Math.tanh(0.9 * Math.log10(45 / durationS))
    : 1.5334 - 0.15 * Math.log10(durationS);
}

/** Highest 2-s gust over the 10-min mean in hurricanes, at 10 m over open country   [KrayerMarshall1992, from memory]. */
export const KRAYER_MARSHALL_2S_600S = 1.55;

/**
 * Gust factor of hurricanes over land: the excess of the Durst curve over 1, enlarged so that a 2-s gust over ten minutes
 * gets the published factor 1.55   [KrayerMarshall1992]. The enlargement by one ratio for all durations is our own.
 */
export function krayerMarshallFactor({ durationS, periodS }: { durationS: number; periodS: number }): number {
  const excess = (gustS: number, meanS: number): number => durstFactor(gustS) / durstFactor(meanS) - 1;
  return 1 + (excess(durationS, periodS) * (KRAYER_MARSHALL_2S_600S - 1)) / excess(2, 600);
}

/** c(t) at t seconds: how many standard deviations the highest t-second mean of an hour lies above it. */
const SIMIU_SCANLAN_C: readonly (readonly [number, number])[] = [
  [1, 3],
  [10, 2.32],
  [20, 2],
  [30, 1.73],
  [50, 1.35],
  [100, 1.02],
  [200, 0.7],
  [300, 0.54],
  [600, 0.36],
  [1000, 0.16],
  [3600, 0],
];
/** Ratio of the variance to the squared friction velocity; 6 for open country   [SimiuScanlan1996, from memory]. */
const BETA = 6;

/**
 * Gust factor from the roughness: U_t/U_3600 = 1 + √β c(t) I/2.5 with the turbulence intensity I = 1/ln(10/z₀), so
 * 1 + √β c(t)/(2.5 ln(10/z₀)); c is linear in log t between its published values   [SimiuScanlan1996, from memory].
 * A gust within another period is the ratio of two such factors.
 */
export function turbulenceGustFactor(
  intensity: number,
  { durationS, periodS }: { durationS: number; periodS: number },
): number {
  const onTheHour = (t: number): number => 1 + (Math.sqrt(BETA) * peakFactor(t) * intensity) / 2.5;
  return onTheHour(durationS) / onTheHour(periodS);
}

function peakFactor(t: number): number {
  if (!(t >= 1 && t <= 3600))
    throw new InputError('gust.duration', `a mean over ${t} s: the peak factors run from 1 to 3600 s`);
  const next = Math.max(
    1,
    SIMIU_SCANLAN_C.findIndex(([at]) => at >= t),
  );
  const [t0, c0] = SIMIU_SCANLAN_C[next - 1]!;
  const [t1, c1] = SIMIU_SCANLAN_C[next]!;
  return c0 + ((c1 - c0) * Math.log(t / t0)) / Math.log(t1 / t0);
}
