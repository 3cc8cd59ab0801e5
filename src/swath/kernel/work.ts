import type { SurfaceMap } from '../../land/surface-map.js';
import type { WindModel } from '../../model/wind.js';
import { gustFactorOf, HOURS_THRESHOLDS_MPS } from '../exact.js';
import type { Grid } from '../grid.js';
import type { Engine } from './engine.js';
import type { SwathFields } from './fields.js';
import { eachCell, overLand } from './over-land.js';
import { type StormTables, stormTables } from './storm-tables.js';
import { tileRunner } from './tile.js';
import { placingOf } from './tiling.js';
import { type Timeline, timelineOf } from './timeline.js';
import { tracerOf } from './tracer.js';
import { newEngine } from './wasm.js';

/** Other maxima in time within this of the highest are kept, m/s: what tables may be off where fields are fitted to radii. */
const RIVALS_MPS = 1.5;
/** The same for gusts over a surface, m/s. */
const GUST_SLACK_MPS = 2;

/** All that is needed to make a swath, as plain data: every thread makes its part from the same tables. */
export interface SwathPlan {
  readonly grid: Grid;
  readonly timeline: Timeline;
  readonly tables: StormTables;
  readonly outerRadiusM: number;
  /** from the track's first fix to the timeline's start, s */
  readonly offsetS: number;
  readonly hours: boolean;
  /** whether other maxima in time than the highest are looked for as well, at every cell */
  readonly rivals: boolean;
  readonly surface: SurfaceMap | null;
  /** gust over the mean wind over open sea */
  readonly gustAtSea: number;
}

export function swathPlan(
  model: WindModel,
  grid: Grid,
  options: {
    readonly fromMs?: number;
    readonly toMs?: number;
    readonly peakOnly?: boolean;
    readonly fitted?: boolean;
    readonly surface?: SurfaceMap;
  },
): SwathPlan {
  const fromMs = options.fromMs ?? model.path.startMs;
  const timeline = timelineOf(model, fromMs, options.toMs ?? model.path.endMs);
  const tables = stormTables(model, timeline);
  return {
    grid,
    timeline,
    tables,
    rivals: options.fitted === true || !tables.complete,
    outerRadiusM: model.outerRadiusM,
    offsetS: (fromMs - model.path.startMs) / 1000,
    hours: options.peakOnly !== true,
    surface: options.surface ?? null,
    gustAtSea: gustFactorOf(model, 'at-sea'),
  };
}

/** A swath cut into tiles that can be done in any order. */
export interface SwathWork {
  readonly tiles: number;
  readonly runTile: (tile: number, fields: SwathFields) => void;
  /** gives the engine's memory back for the next swath */
  readonly done: () => void;
}

/** Engines that no swath is using: their memory is kept. */
const idle: Engine[] = [];

export function swathWork({ grid, timeline, tables, ...plan }: SwathPlan, given?: Engine): SwathWork {
  const engine = given ?? idle.pop() ?? newEngine();
  const thresholdsMps = plan.hours ? HOURS_THRESHOLDS_MPS : [];
  const tracer = tracerOf(engine, timeline, tables, {
    outerRadiusM: plan.outerRadiusM,
    thresholdsMps,
    rivalsMps: plan.rivals ? RIVALS_MPS : 0,
    ...(plan.surface ? { surface: plan.surface } : {}),
  });
  const placing = placingOf(grid);
  const runner = tileRunner(tracer, placing, thresholdsMps, { everyCell: plan.rivals });
  const onLand = plan.surface
    ? overLand(tracer, placing, plan.surface, {
        thresholdsMps,
        offsetS: plan.offsetS,
        slackMps: plan.rivals ? GUST_SLACK_MPS : 0,
        sea: runner.fields,
      })
    : null;
  const { nx, ny } = grid;
  return {
    tiles: placing.columns * placing.rows,
    done: () => {
      if (!given) idle.push(engine);
    },
    runTile(number, fields) {
      const tile = { column: number % placing.columns, row: Math.trunc(number / placing.columns), nx, ny };
      if (!runner.run(tile)) return;
      const { windMps, timeS, fromDeg, hours, rivalTimeS } = runner.fields;
      eachCell(tile, (k, at) => {
        const wind = windMps[at]!;
        if (!(wind > 0)) return;
        fields.windMps[k] = wind;
        fields.peakTimeS[k] = plan.offsetS + timeS[at]!;
        fields.windFromDeg[k] = fromDeg[at]!;
        if (fields.gustMps) fields.gustMps[k] = fields.windMps[k]! * plan.gustAtSea;
        if (fields.rivalTimeS) fields.rivalTimeS[k] = plan.offsetS + rivalTimeS[at]!;
        for (let h = 0; h < hours.length; h++) fields.hours[h]![k] = hours[h]![at]!;
      });
      onLand?.(tile, fields);
    },
  };
}
