import { HOURS_THRESHOLDS_MPS } from '../exact.js';

/** Fields of a swath while it is made; each nx*ny. */
export interface SwathFields {
  readonly windMps: Float32Array;
  readonly windFromDeg: Float32Array;
  readonly peakTimeS: Float32Array;
  readonly hours: readonly Float32Array[];
  /** where a surface is given */
  readonly gustMps: Float32Array | null;
  /** time of the second highest maximum in time, where it was asked for */
  readonly rivalTimeS: Float32Array | null;
  /** time of the highest gust, where rivals are asked for and a surface is given; NaN where it is that of the wind */
  readonly gustTimeS: Float32Array | null;
  /** that of the second highest maximum of the gust */
  readonly gustRivalTimeS: Float32Array | null;
}

/** @param shared whether several threads write into them */
export function newFields(
  cells: number,
  { shared, rivals = false, gusts = false }: { shared: boolean; rivals?: boolean; gusts?: boolean },
): SwathFields {
  const field = (): Float32Array =>
    shared ? new Float32Array(new SharedArrayBuffer(4 * cells)) : new Float32Array(cells);
  return {
    windMps: field(),
    windFromDeg: field().fill(Number.NaN),
    peakTimeS: field().fill(Number.NaN),
    hours: HOURS_THRESHOLDS_MPS.map(field),
    gustMps: gusts ? field() : null,
    rivalTimeS: rivals ? field().fill(Number.NaN) : null,
    gustTimeS: rivals && gusts ? field().fill(Number.NaN) : null,
    gustRivalTimeS: rivals && gusts ? field().fill(Number.NaN) : null,
  };
}
