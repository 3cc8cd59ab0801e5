import { type SurfaceMap, sectorValue } from '../land/surface-map.js';
import type { WindField } from '../model/field.js';
import { type WindModel, windOf } from '../model/wind.js';
import { cellCentre, type Grid, projection } from './grid.js';
import type { SwathFields } from './kernel/fields.js';

/** Minutes from the time that the tables gave at which the plain model is asked: a broad peak may lie off by hours. */
const AROUND_MIN = [0, -4, 4, -10, 10, -18, 18, -28, 28, -40, 40, -55, 55, -80, 80] as const;
/** The same for a second maximum. */
const RIVAL_MIN = [0, -3, 3, -8, 8, -20, 20] as const;
/** Minutes from the best of these at which it is asked again: a narrow one stands between them. */
const BESIDE_MIN = [-6, -3, -2, -1, 1, 2, 3, 6] as const;
/** The same at the time of a neighbour, where that is farther off than this, s; and how often. */
const NEIGHBOUR_MIN = [0, -3, 3] as const;
const OTHER_S = 480;
const NEIGHBOUR_ROUNDS = 2;
/** Fields that are kept for the next question: they are dear to make. */
const MOST_FIELDS = 15_000;
const MINUTE_MS = 60_000;
/** Peaks below this are left as they are, m/s: nothing is promised of them. */
const CALM_MPS = 7;

/**
 * Takes each cell's peak wind and peak gust from the plain model, at the times that the tables gave and at moments around
 * them: for fields that vary more around the centre than the tables hold, such as those fitted to observed radii. Cells are
 * taken by time, and a moment's field is kept.
 */
export function settlePeaks(
  model: WindModel,
  grid: Grid,
  fields: SwathFields,
  period: { fromMs: number; toMs: number; gustAtSea: number; surface?: SurfaceMap },
): void {
  const { windMps, windFromDeg, peakTimeS, rivalTimeS, gustMps, gustTimeS, gustRivalTimeS } = fields;
  const { surface, gustAtSea } = period;
  const originMs = model.path.startMs;
  const first = Math.ceil((period.fromMs - originMs) / MINUTE_MS);
  const last = Math.floor((period.toMs - originMs) / MINUTE_MS);
  const { inverse } = projection(grid.crs);
  const [lonDeg, latDeg] = [new Float64Array(windMps.length), new Float64Array(windMps.length)];
  const fieldsKept = new Map<number, WindField>();
  const asked = windMps.map((wind, k) => (Math.max(wind, gustMps ? gustMps[k]! / gustAtSea : 0) > CALM_MPS ? 1 : 0));
  for (let k = 0; k < windMps.length; k++)
    if (asked[k] === 1) [lonDeg[k], latDeg[k]] = inverse(...cellCentre(grid, k % grid.nx, Math.floor(k / grid.nx)));
  const best = new Float32Array(windMps.length);
  const bestGust = gustMps ? new Float32Array(windMps.length) : null;
  gustTimeS?.forEach((time, k) => {
    if (Number.isNaN(time)) gustTimeS[k] = peakTimeS[k]!;
  });
  const gustTimesGiven = gustTimeS?.slice();
  askAround(peakTimeS.slice(), AROUND_MIN);
  // of two maxima the tables may have taken the lower one for the higher
  if (rivalTimeS) askAround(rivalTimeS, RIVAL_MIN);
  if (gustTimesGiven) askAround(gustTimesGiven, AROUND_MIN);
  if (gustRivalTimeS) askAround(gustRivalTimeS, RIVAL_MIN);
  askAround(peakTimeS.slice(), BESIDE_MIN);
  if (gustTimeS) askAround(gustTimeS.slice(), BESIDE_MIN);
  // which of two maxima is the highest changes from cell to cell: what a neighbour found may serve here too
  for (let round = 0; round < NEIGHBOUR_ROUNDS; round++)
    for (const times of gustTimeS ? [peakTimeS, gustTimeS] : [peakTimeS]) askNeighbours(times);
  for (let k = 0; k < best.length; k++) {
    if (!(best[k]! > 0)) continue;
    windMps[k] = best[k]!;
    if (gustMps) gustMps[k] = bestGust![k]!;
  }

  function fieldAt(minute: number): WindField {
    const known = fieldsKept.get(minute);
    if (known) return known;
    const field = model.fieldAt(originMs + minute * MINUTE_MS);
    if (fieldsKept.size < MOST_FIELDS) fieldsKept.set(minute, field);
    return field;
  }

  /** Asks at the times of the cells beside each that are others than its own, and around what that finds. */
  function askNeighbours(timeS: Float32Array): void {
    const { nx } = grid;
    const given = timeS.slice();
    for (const [across, down] of [
      [-1, 0],
      [1, 0],
      [0, -1],
      [0, 1],
    ] as const) {
      const others = new Float32Array(given.length).fill(Number.NaN);
      for (let k = 0; k < given.length; k++) {
        const column = (k % nx) + across;
        const other = column < 0 || column >= nx ? Number.NaN : (given[k + across + down * nx] ?? Number.NaN);
        if (Math.abs(other - given[k]!) > OTHER_S) others[k] = other;
      }
      askAround(others, NEIGHBOUR_MIN);
    }
    // those that another time served better
    askAround(
      timeS.map((time, k) => (Math.abs(time - given[k]!) > OTHER_S ? time : Number.NaN)),
      BESIDE_MIN,
    );
  }

  /** Asks at minutes from each cell's time, and moves the times of the peaks to the highest wind and gust. */
  function askAround(timeS: Float32Array, minutes: readonly number[]): void {
    const byMinute = new Map<number, number[]>();
    for (let k = 0; k < windMps.length; k++) {
      if (asked[k] === 0 || Number.isNaN(timeS[k]!)) continue;
      for (const around of minutes) {
        const minute = Math.min(last, Math.max(first, Math.round(timeS[k]! / 60) + around));
        const cells = byMinute.get(minute);
        if (!cells) byMinute.set(minute, [k]);
        else if (cells[cells.length - 1] !== k) cells.push(k);
      }
    }
    for (const [minute, cells] of byMinute) {
      const field = fieldAt(minute);
      for (const k of cells) {
        const place = { latDeg: latDeg[k]!, lonDeg: lonDeg[k]! };
        const { speedMps, eastMps, northMps, fromDeg } = windOf(field, place);
        const row = surface?.rowOf[k] ?? 0;
        const wind = row > 0 ? speedMps * sectorValue(surface!.windRatio, row, eastMps, northMps) : speedMps;
        if (wind > best[k]!) {
          best[k] = wind;
          windFromDeg[k] = fromDeg;
          peakTimeS[k] = minute * 60;
        }
        if (!bestGust) continue;
        const gust =
          row > 0 ? speedMps * sectorValue(surface!.gustRatio, row, eastMps, northMps) : speedMps * gustAtSea;
        if (!(gust > bestGust[k]!)) continue;
        bestGust[k] = gust;
        if (gustTimeS) gustTimeS[k] = minute * 60;
      }
    }
  }
}
