import { EARTH_RADIUS_M, RADIANS, wrapBearing } from '../earth.js';
import { type WindModel, windOf } from '../model/wind.js';
import { gustFactorOf, HOURS_THRESHOLDS_MPS, type SwathOptions, shareAbove, stepTimes } from './exact.js';
import { cellCentre, cellVectors, type Grid, projection } from './grid.js';
import type { Swath } from './swath.js';

export interface PeakOptions extends SwathOptions {
  readonly jobs?: number;
  readonly signal?: AbortSignal;
  readonly onProgress?: (share: number) => void;
}

const STEP_S = 300;
const NODES = 800;
/** three directions determine a field whose squared speed has one azimuthal harmonic */
const THREE = Float64Array.from({ length: 6 }, (_, i) => (i % 2 === 0 ? Math.sin : Math.cos)((i >> 1) * 120 * RADIANS));

/** The swath from tables: the squared speed of a moment is A(r) + B(r)·east + C(r)·north. */
export async function peakSwath(model: WindModel, grid: Grid, options: PeakOptions = {}): Promise<Swath> {
  const originMs = model.path.startMs;
  const times = stepTimes(options.fromMs ?? originMs, options.toMs ?? model.path.endMs, STEP_S);
  const n = grid.nx * grid.ny;
  const { x, y, z } = cellVectors(grid);
  const best = new Float32Array(n);
  const bestStep = new Int32Array(n).fill(-1);
  const before = new Float32Array(n);
  const touched = new Int32Array(n).fill(-1);
  const hours = HOURS_THRESHOLDS_MPS.map(() => new Float32Array(n));
  const lowest = HOURS_THRESHOLDS_MPS[0]! ** 2;
  const outer = Math.sin(model.outerRadiusM / EARTH_RADIUS_M);
  const a = new Float64Array(NODES + 1);
  const b = new Float64Array(NODES + 1);
  const c = new Float64Array(NODES + 1);
  const wind = new Float64Array(6);
  for (let step = 0; step < times.length; step++) {
    options.signal?.throwIfAborted();
    const field = model.fieldAt(times[step]!);
    for (let i = 0; i <= NODES; i++) {
      const u = i / NODES;
      field.onCircle(wind, EARTH_RADIUS_M * Math.asin(outer * u * u), THREE);
      const [s0, s1, s2] = [
        wind[0]! ** 2 + wind[1]! ** 2,
        wind[2]! ** 2 + wind[3]! ** 2,
        wind[4]! ** 2 + wind[5]! ** 2,
      ];
      a[i] = (s0 + s1 + s2) / 3;
      c[i] = (2 * s0 - s1 - s2) / 3;
      b[i] = (s1 - s2) / Math.sqrt(3);
    }
    const la = field.state.latDeg * RADIANS;
    const lo = field.state.lonDeg * RADIANS;
    const [p0, p1, p2] = [Math.cos(la) * Math.cos(lo), Math.cos(la) * Math.sin(lo), Math.sin(la)];
    const [e0, e1] = [-Math.sin(lo), Math.cos(lo)];
    const [n0, n1, n2] = [-Math.sin(la) * Math.cos(lo), -Math.sin(la) * Math.sin(lo), Math.cos(la)];
    const near = Math.cos(model.outerRadiusM / EARTH_RADIUS_M);
    const dtHours = step === 0 ? 0 : (times[step]! - times[step - 1]!) / 3_600_000;
    const [row0, row1] = rowsNear(grid, field.state.latDeg, model.outerRadiusM);
    for (let k = row0 * grid.nx, end = row1 * grid.nx; k < end; k++) {
      const cx = x[k]!;
      const cy = y[k]!;
      const cz = z[k]!;
      if (!(cx * p0 + cy * p1 + cz * p2 > near)) continue;
      const east = cx * e0 + cy * e1;
      const north = cx * n0 + cy * n1 + cz * n2;
      const size = Math.sqrt(east * east + north * north);
      const u = Math.sqrt(size / outer) * NODES;
      const i = u | 0;
      if (i >= NODES) continue;
      const t = u - i;
      const inverse = size > 0 ? 1 / size : 0;
      const speed2 =
        a[i]! +
        t * (a[i + 1]! - a[i]!) +
        inverse * (east * (b[i]! + t * (b[i + 1]! - b[i]!)) + north * (c[i]! + t * (c[i + 1]! - c[i]!)));
      if (speed2 > best[k]!) {
        best[k] = speed2;
        bestStep[k] = step;
      }
      const last = touched[k] === step - 1 ? before[k]! : 0;
      if (speed2 >= lowest || last >= lowest) {
        const [v0, v1] = [Math.sqrt(last), Math.sqrt(Math.max(0, speed2))];
        for (let h = 0; h < hours.length; h++) hours[h]![k]! += dtHours * shareAbove(v0, v1, HOURS_THRESHOLDS_MPS[h]!);
      }
      before[k] = speed2;
      touched[k] = step;
    }
    if (step % 20 === 0) {
      options.onProgress?.(step / times.length);
      await new Promise((resolve) => setTimeout(resolve, 0));
    }
  }
  const windFromDeg = new Float32Array(n).fill(Number.NaN);
  const peakTimeS = new Float32Array(n).fill(Number.NaN);
  const fields = new Map<number, ReturnType<WindModel['fieldAt']>>();
  const { inverse } = projection(grid.crs);
  for (let k = 0; k < n; k++) {
    const step = bestStep[k]!;
    if (step < 0) continue;
    let field = fields.get(step);
    if (!field) {
      field = model.fieldAt(times[step]!);
      fields.set(step, field);
    }
    const [lon, lat] = inverse(...cellCentre(grid, k % grid.nx, Math.floor(k / grid.nx)));
    windFromDeg[k] = wrapBearing(windOf(field, { latDeg: lat, lonDeg: lon }).fromDeg);
    peakTimeS[k] = (times[step]! - originMs) / 1000;
  }
  const gust = gustFactorOf(model, 'at-sea');
  const windMps = best.map(Math.sqrt);
  return {
    grid,
    windMps,
    gustMps: windMps.map((speed) => speed * gust),
    windFromDeg,
    peakTimeS,
    hoursAbove: HOURS_THRESHOLDS_MPS.map((thresholdMps, i) => ({ thresholdMps, hours: hours[i]! })),
    originMs,
    averagingS: model.averagingS,
    gustDurationS: model.recipe['gust.duration_s'] as number,
    cautions: model.cautions,
  };
}

function rowsNear(grid: Grid, latDeg: number, radiusM: number): readonly [number, number] {
  if (!grid.geographic) return [0, grid.ny];
  const span = radiusM / EARTH_RADIUS_M / RADIANS;
  const north = grid.bounds[3];
  return [
    Math.max(0, Math.floor((north - latDeg - span) / grid.cell)),
    Math.min(grid.ny, Math.ceil((north - latDeg + span) / grid.cell)),
  ];
}
