import type { SurfaceMap } from '../land/surface-map.js';
import { type WindModel, windOf } from '../model/wind.js';
import { cellCentre, type Grid, projection } from './grid.js';
import type { SwathFields } from './kernel/fields.js';

/** Minutes from the time that the tables gave at which the plain model is asked: a broad peak may lie off by hours. */
const AROUND_MIN = [0, -4, 4, -10, 10, -20, 20, -40, 40, -80, 80] as const;
/** The same for a second maximum. */
const RIVAL_MIN = [0, -3, 3, -8, 8, -20, 20] as const;
/** Minutes from the best of these at which it is asked again: a narrow one stands between them. */
const BESIDE_MIN = [-6, -3, -2, -1, 1, 2, 3, 6] as const;
const MINUTE_MS = 60_000;
/** Peaks below this are left as they are, m/s: nothing is promised of them. */
const CALM_MPS = 7;

/**
 * Takes each cell's peak from the plain model, at the time that the tables gave and at moments around it: for fields
 * that vary more around the centre than the tables hold, such as those fitted to observed radii. Cells are taken by time,
 * so that a moment's field is built once.
 */
export function settlePeaks(
  model: WindModel,
  grid: Grid,
  fields: SwathFields,
  period: { fromMs: number; toMs: number; surface?: SurfaceMap },
): void {
  const { windMps, windFromDeg, peakTimeS, rivalTimeS } = fields;
  const originMs = model.path.startMs;
  const first = Math.ceil((period.fromMs - originMs) / MINUTE_MS);
  const last = Math.floor((period.toMs - originMs) / MINUTE_MS);
  const { inverse } = projection(grid.crs);
  const best = new Float32Array(windMps.length);
  askAround(peakTimeS.slice(), AROUND_MIN);
  // of two maxima the tables may have taken the lower one for the higher
  if (rivalTimeS) askAround(rivalTimeS, RIVAL_MIN);
  askAround(peakTimeS.slice(), BESIDE_MIN);
  const { gustMps } = fields;
  for (let k = 0; k < best.length; k++) {
    if (!(best[k]! > 0)) continue;
    if (gustMps) gustMps[k] = (gustMps[k]! * best[k]!) / windMps[k]!;
    windMps[k] = best[k]!;
  }

  /** Asks at minutes from each cell's time, and moves the peak's time to the highest wind. */
  function askAround(timeS: Float32Array, minutes: readonly number[]): void {
    const byMinute = new Map<number, number[]>();
    for (let k = 0; k < windMps.length; k++) {
      // over a surface of their own the tables' winds stay
      if (!(windMps[k]! > CALM_MPS) || Number.isNaN(timeS[k]!) || (period.surface?.rowOf[k] ?? 0) > 0) continue;
      for (const around of minutes) {
        const minute = Math.min(last, Math.max(first, Math.round(timeS[k]! / 60) + around));
        const cells = byMinute.get(minute);
        if (!cells) byMinute.set(minute, [k]);
        else if (cells[cells.length - 1] !== k) cells.push(k);
      }
    }
    for (const [minute, cells] of byMinute) {
      const field = model.fieldAt(originMs + minute * MINUTE_MS);
      for (const k of cells) {
        const [lonDeg, latDeg] = inverse(...cellCentre(grid, k % grid.nx, Math.floor(k / grid.nx)));
        const { speedMps, fromDeg } = windOf(field, { latDeg, lonDeg });
        if (!(speedMps > best[k]!)) continue;
        best[k] = speedMps;
        windFromDeg[k] = fromDeg;
        peakTimeS[k] = minute * 60;
      }
    }
  }
}
