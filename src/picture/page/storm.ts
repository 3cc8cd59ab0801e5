import { distanceM, type Place } from '../../earth.js';
import type { WindField } from '../../model/field.js';
import { type WindAt, type WindModel, windModel, windOf } from '../../model/wind.js';
import type { PageFacts } from '../page-data.js';

/** The storm at the chosen moment: the engine itself, in the page. */
export interface PageStorm {
  readonly model: WindModel;
  readonly fieldAt: (timeMs: number) => WindField;
  readonly windAt: (place: Place, timeMs: number) => WindAt;
  /** maximum wind over time, for the ruler */
  readonly intensities: readonly { readonly timeMs: number; readonly windMps: number }[];
}

export function pageStorm(facts: PageFacts): PageStorm {
  const model = windModel(facts.track, facts.recipe, { lowestLevelMps: facts.lowestLevelMps });
  let last: WindField | null = null;
  const fieldAt = (timeMs: number): WindField => {
    if (last?.state.timeMs !== timeMs) last = model.fieldAt(timeMs);
    return last;
  };
  const span = facts.toMs - facts.fromMs;
  const count = span === 0 ? 1 : 160;
  const intensities = Array.from({ length: count }, (_, i) => {
    const timeMs = facts.fromMs + (span * i) / Math.max(1, count - 1);
    return { timeMs, windMps: model.path.at(timeMs).maxWindMps };
  });
  return { model, fieldAt, windAt: (place, timeMs) => windOf(fieldAt(timeMs), place), intensities };
}

/** Speeds of a moment at many places; places beyond the model's radius are 0. */
export function speedsOf(field: WindField, lon: Float32Array, lat: Float32Array, out: Float32Array): void {
  const reachDeg = (field.outerRadiusM / 111_195) * 1.01;
  for (let k = 0; k < lon.length; k++) {
    const latDeg = lat[k]!;
    if (!(Math.abs(latDeg - field.state.latDeg) < reachDeg)) {
      out[k] = 0;
      continue;
    }
    out[k] = windOf(field, { latDeg, lonDeg: lon[k]! }).speedMps;
  }
}

export function kilometresFrom(field: WindField, place: Place): number {
  return distanceM(field.state, place) / 1000;
}
