import { LimitError } from '../errors.js';
import type { WindModel } from '../model/wind.js';
import { gustFactorOf, HOURS_THRESHOLDS_MPS, type SwathOptions } from './exact.js';
import type { Grid } from './grid.js';
import type { Engine } from './kernel/engine.js';
import { newFields, type SwathFields } from './kernel/fields.js';
import type { Tiles } from './kernel/pool.js';
import { swathPlan, swathWork } from './kernel/work.js';
import { settlePeaks } from './settle-peaks.js';
import type { Swath } from './swath.js';

export interface PeakOptions extends SwathOptions {
  /** without hours above 34, 50 and 64 kt, which then are zero */
  readonly peakOnly?: boolean;
  /** threads; by default one a core. The result is the same for any number */
  readonly jobs?: number;
  /** the hot loops, on this thread alone; WebAssembly where there is any */
  readonly engine?: Engine;
  readonly signal?: AbortSignal;
  readonly onProgress?: (share: number) => void;
}

/** Cells from which on other threads help: for fewer they are not worth their start. */
const CELLS_FOR_THREADS = 100_000;
/** So often others get their turn: progress, an abort. */
const PAUSE_MS = 40;
/** Seven fields of single precision. */
const BYTES_OF_CELL = 28;

/**
 * The swath of a storm: the peak over continuous time, its direction and time, and the hours above 34, 50 and 64 kt.
 * Within 0.05 m/s of {@link exactSwath} at one-minute steps wherever the peak is 8 m/s or more; where the wind has a sharp
 * corner the peak between two minutes may be higher than those steps see.
 * @throws LimitError `grid.memory` where the fields would not fit into memory, before any is allocated
 */
export async function peakSwath(model: WindModel, grid: Grid, options: PeakOptions = {}): Promise<Swath> {
  const cells = grid.nx * grid.ny;
  checkMemory(grid, cells);
  options.signal?.throwIfAborted();
  const plan = swathPlan(model, grid, { ...options, fitted: isFitted(model) || isSharp(model) });
  const threads = options.engine || cells < CELLS_FOR_THREADS ? null : await threadsFor(options.jobs);
  const fields = newFields(cells, { shared: threads !== null, rivals: plan.rivals, gusts: plan.surface !== null });
  const work = swathWork(plan, options.engine);
  const { tiles } = work;
  const helped: Tiles | null = threads?.start(plan, fields, tiles) ?? null;
  try {
    let next = 0;
    const take = helped ? helped.take : () => next++;
    let pauseAt = performance.now() + PAUSE_MS;
    for (let tile = take(); tile < tiles; tile = take()) {
      options.signal?.throwIfAborted();
      work.runTile(tile, fields);
      if (performance.now() < pauseAt) continue;
      options.onProgress?.(tile / tiles);
      await new Promise((resolve) => setTimeout(resolve, 0));
      pauseAt = performance.now() + PAUSE_MS;
    }
    await helped?.finished;
    options.signal?.throwIfAborted();
  } catch (error) {
    helped?.stop();
    await helped?.finished.catch(() => undefined);
    throw error;
  } finally {
    work.done();
  }
  const cautions = plan.tables.complete && !isSharp(model) ? [] : [INCOMPLETE];
  cautions.push(...(options.surface?.cautions ?? []));
  const own = helped ? unshared(fields) : fields;
  // what the few probes of the tables may miss in a field that was fitted, the plain model knows
  if (plan.rivals) {
    settlePeaks(model, grid, own, {
      fromMs: options.fromMs ?? model.path.startMs,
      toMs: options.toMs ?? model.path.endMs,
      gustAtSea: plan.gustAtSea,
      ...(options.surface ? { surface: options.surface } : {}),
    });
  }
  return swathFrom(model, grid, own, cautions);
}

/**
 * Whether a model's wind has edges that tables blur: a boundary layer beside the radius of maximum wind, and a balance that
 * holds the motion at the centre.
 */
export function isSharp({ methods }: WindModel): boolean {
  return methods.layer || methods.movingBalance;
}

/** Whether observed wind radii shape the field of a model. */
function isFitted(model: WindModel): boolean {
  const observed = ({ radiiM }: { radiiM: readonly (number | null)[] }): boolean =>
    radiiM.some((radius) => radius !== null);
  return (
    model.recipe['vortex.radii'] === 'fit' && model.completed.fixes.some(({ fix }) => fix.windRadii.some(observed))
  );
}

const INCOMPLETE =
  'the wind varies more sharply than the fast tables hold: peaks were taken from the plain model at the times that the tables gave, mostly to 0.05 m/s, but up to 2 m/s low where the wind changes abruptly in time; hours may be off by more than 1 %';

/** Fields in memory of this thread alone, which every writer takes. */
function unshared({
  windMps,
  windFromDeg,
  peakTimeS,
  hours,
  gustMps,
  rivalTimeS,
  gustTimeS,
  gustRivalTimeS,
}: SwathFields): SwathFields {
  return {
    windMps: windMps.slice(),
    windFromDeg: windFromDeg.slice(),
    peakTimeS: peakTimeS.slice(),
    hours: hours.map((field) => field.slice()),
    gustMps: gustMps?.slice() ?? null,
    rivalTimeS,
    gustTimeS,
    gustRivalTimeS,
  };
}

/** Other threads, where there are any to be had and asked for. */
async function threadsFor(jobs: number | undefined) {
  if (jobs === 1 || typeof process === 'undefined' || !process.versions?.node) return null;
  const { threads } = await import('./kernel/pool.js');
  return threads(jobs);
}

function checkMemory(grid: Grid, cells: number): void {
  const free = typeof process === 'undefined' ? undefined : process.availableMemory?.();
  const need = cells * BYTES_OF_CELL;
  if (free === undefined || need < free) return;
  const size = (bytes: number): string => `${(bytes / 1e9).toFixed(1)} GB`;
  throw new LimitError(
    'grid.memory',
    `the grid of ${grid.nx} × ${grid.ny} cells would take ${size(need)} of the ${size(free)} of memory that are free; take a larger --cell or smaller --bounds`,
    { fields: { nx: grid.nx, ny: grid.ny, bytes: need } },
  );
}

function swathFrom(model: WindModel, grid: Grid, fields: SwathFields, cautions: readonly string[]): Swath {
  const gust = gustFactorOf(model, 'at-sea');
  const gustMps = fields.gustMps ?? fields.windMps.map((wind) => wind * gust);
  return {
    grid,
    windMps: fields.windMps,
    gustMps,
    windFromDeg: fields.windFromDeg,
    peakTimeS: fields.peakTimeS,
    hoursAbove: HOURS_THRESHOLDS_MPS.map((thresholdMps, i) => ({ thresholdMps, hours: fields.hours[i]! })),
    originMs: model.path.startMs,
    averagingS: model.averagingS,
    gustDurationS: model.recipe['gust.duration_s'] as number,
    cautions: [...model.cautions, ...cautions],
  };
}
