import type { WindModel } from '../model/wind.js';
import type { Grid } from './grid.js';
import { stormTables } from './kernel/storm-tables.js';
import { tileRunner } from './kernel/tile.js';
import { placingOf, TILE_EDGE } from './kernel/tiling.js';
import { timelineOf } from './kernel/timeline.js';
import { tracerOf } from './kernel/tracer.js';
import { newEngine } from './kernel/wasm.js';

/** The cells that a storm reaches, in the order of the grid's tiles. */
export interface Footprint {
  /** index = row * nx + column */
  readonly cells: Int32Array;
  /** peak wind over the storm's life, m/s, 10 m, open sea */
  readonly windMps: Float32Array;
}

/** Winds that are lower than the least one wanted by this need not be right, m/s. */
const MARGIN_MPS = 1;

/** Winds below this share of the least one are left out altogether. */
const LEFT_OUT_SHARE = 0.7;

/** A grid that many storms are put on, one after another. */
export interface SwathWorkspace {
  readonly grid: Grid;
  /** Cells with a peak wind of `leastMps` or more, as near to the plain model as those of {@link peakSwath}; nothing is kept of a storm. */
  readonly footprint: (model: WindModel, options: { readonly leastMps: number }) => Footprint;
}

/** A workspace for a grid: its cells are placed on the sphere once; each storm then visits only the tiles near its track. */
export function createSwathWorkspace(grid: Grid): SwathWorkspace {
  const engine = newEngine();
  const placing = placingOf(grid);
  const { nx, ny } = grid;
  return { grid, footprint };

  function footprint(model: WindModel, { leastMps }: { readonly leastMps: number }): Footprint {
    const timeline = timelineOf(model, model.path.startMs, model.path.endMs);
    const tracer = tracerOf(engine, timeline, stormTables(model, timeline, { leastMps }), {
      outerRadiusM: model.outerRadiusM,
      thresholdsMps: [],
      windOnly: true,
    });
    // what lies below the least is thrown away
    const { run, fields } = tileRunner(tracer, placing, [], {
      windOnly: true,
      calmMps: leastMps - MARGIN_MPS,
      leastMps: LEFT_OUT_SHARE * leastMps,
    });
    const cells: number[] = [];
    const winds: number[] = [];
    for (let row = 0; row < placing.rows; row++) {
      for (let column = 0; column < placing.columns; column++) {
        if (!run({ column, row, nx, ny })) continue;
        const width = Math.min(TILE_EDGE, nx - column * TILE_EDGE);
        const height = Math.min(TILE_EDGE, ny - row * TILE_EDGE);
        for (let j = 0; j < height; j++) {
          for (let i = 0; i < width; i++) {
            const wind = fields.windMps[j * (TILE_EDGE + 1) + i]!;
            if (!(wind >= leastMps)) continue;
            cells.push((row * TILE_EDGE + j) * nx + column * TILE_EDGE + i);
            winds.push(wind);
          }
        }
      }
    }
    return { cells: Int32Array.from(cells), windMps: Float32Array.from(winds) };
  }
}
