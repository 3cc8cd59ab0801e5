import type { WindModel } from '../model/wind.js';
import { type PointWindOptions, windAtPoints } from './wind-at-points.js';
import { sharesAbove, type ZoneSamples, type ZoneShape, zoneSamples } from './zones.js';

/** Samples of all zones together, and the most and least rows of samples for one. */
const SAMPLES = 1_000_000;
const ROWS = [40, 400] as const;
/** Samples that are held at once, about. */
const BATCH = 500_000;

/** Rows of samples for each of some zones: 400 for up to six zones, fewer for many. */
export function sampleRows(zones: number): number {
  return Math.max(ROWS[0], Math.min(ROWS[1], Math.floor(Math.sqrt(SAMPLES / zones))));
}

/**
 * The share of each zone's area at or above each level: the model at points spread over the zone.
 * @param options.levelsMps of the sustained wind
 */
export async function zoneShares(
  model: WindModel,
  zones: readonly ZoneShape[],
  options: { levelsMps: readonly number[] } & Pick<PointWindOptions, 'fromMs' | 'toMs' | 'signal'>,
): Promise<number[][]> {
  const rows = sampleRows(zones.length);
  const shares: number[][] = [];
  let waiting: ZoneSamples[] = [];
  let held = 0;
  const work = async (): Promise<void> => {
    const lonDeg = new Float64Array(held);
    const latDeg = new Float64Array(held);
    let at = 0;
    for (const samples of waiting) {
      lonDeg.set(samples.lonDeg, at);
      latDeg.set(samples.latDeg, at);
      at += samples.lonDeg.length;
    }
    const { fromMs, toMs, signal } = options;
    const { windMps } = await windAtPoints(
      model,
      { lonDeg, latDeg },
      {
        ...(fromMs === undefined ? {} : { fromMs }),
        ...(toMs === undefined ? {} : { toMs }),
        ...(signal ? { signal } : {}),
      },
    );
    at = 0;
    for (const samples of waiting) {
      const end = at + samples.lonDeg.length;
      shares.push(sharesAbove(samples, windMps.subarray(at, end), options.levelsMps));
      at = end;
    }
    waiting = [];
    held = 0;
  };
  for (const zone of zones) {
    const samples = zoneSamples(zone, { rows });
    waiting.push(samples);
    held += samples.lonDeg.length;
    if (held >= BATCH) await work();
  }
  if (waiting.length > 0) await work();
  return shares;
}
