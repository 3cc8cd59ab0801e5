import type { Grid } from './grid.js';

/** Hours at or above one wind. */
export interface HoursAbove {
  readonly thresholdMps: number;
  /** nx*ny, hours; 0 where the wind never reaches the threshold */
  readonly hours: Float32Array;
}

/**
 * What a storm did to every cell of a grid over the life of its track.
 * Fields: row 0 = north, index = row * nx + column. Winds are earth-relative, at 10 m.
 */
export interface Swath {
  readonly grid: Grid;
  /** peak sustained wind, m/s; 0 where the model has none */
  readonly windMps: Float32Array;
  /** peak gust, m/s */
  readonly gustMps: Float32Array;
  /** direction that the wind blows from at the time of the peak, degrees; NaN where the peak is 0 */
  readonly windFromDeg: Float32Array;
  /** time of the peak, seconds after `originMs`; NaN where the peak is 0 */
  readonly peakTimeS: Float32Array;
  readonly hoursAbove: readonly HoursAbove[];
  /** time of the track's first fix */
  readonly originMs: number;
  /** averaging period of `windMps` */
  readonly averagingS: number;
  /** averaging period of `gustMps` */
  readonly gustDurationS: number;
  readonly cautions: readonly string[];
}
