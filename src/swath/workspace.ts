import { EARTH_RADIUS_M } from '../earth.js';
import type { WindModel } from '../model/wind.js';
import type { Grid } from './grid.js';
import { momentsOf } from './kernel/moments.js';
import { newTile, type TileBounds, tileRunner } from './kernel/tile.js';
import { tilingOf } from './kernel/tiling.js';
import { timelineOf } from './kernel/timeline.js';
import { twinArithmetic } from './kernel/twin.js';
import { wasmArithmetic } from './kernel/wasm.js';

/** The cells that a storm reaches, in the order of the grid's tiles. */
export interface Footprint {
  /** index = row * nx + column */
  readonly cells: Int32Array;
  /** peak wind over the storm's life, m/s, 10 m, open sea */
  readonly windMps: Float32Array;
}

/** A grid that many storms are put on, one after another. */
export interface SwathWorkspace {
  readonly grid: Grid;
  /** Cells with a peak wind of `leastMps` or more. The same winds as {@link peakSwath} gives; nothing is kept of a storm. */
  readonly footprint: (model: WindModel, options: { readonly leastMps: number }) => Footprint;
}

interface PlacedTile extends TileBounds {
  readonly cells: Int32Array;
  readonly x: Float32Array;
  readonly y: Float32Array;
  readonly z: Float32Array;
}

/** A workspace for a grid: its cells are placed on the sphere once; each storm then visits only the tiles near its track. */
export function createSwathWorkspace(grid: Grid): SwathWorkspace {
  const arithmetic = wasmArithmetic() ?? twinArithmetic();
  const tile = newTile();
  const tiles = placedTiles();
  return { grid, footprint };

  function placedTiles(): readonly PlacedTile[] {
    const tiling = tilingOf(grid);
    const placed: PlacedTile[] = [];
    for (let row = 0; row < tiling.rows; row++) {
      for (let column = 0; column < tiling.columns; column++) {
        const { centre, radiusM, corners, cells } = tiling.load(tile, arithmetic.arrays, { column, row });
        const { x, y, z } = arithmetic.arrays;
        const n = tile.count;
        if (n === 0) continue;
        placed.push({
          centre,
          radiusM,
          corners: corners.slice(),
          cells: cells.slice(0, n),
          x: x.slice(0, n),
          y: y.slice(0, n),
          z: z.slice(0, n),
        });
      }
    }
    return placed;
  }

  function footprint(model: WindModel, { leastMps }: { readonly leastMps: number }): Footprint {
    const timeline = timelineOf(model, model.path.startMs, model.path.endMs);
    arithmetic.release();
    const moments = momentsOf(model, timeline, arithmetic);
    const runner = tileRunner(timeline, moments, arithmetic, {
      outerRadiusM: model.outerRadiusM,
      thresholdsMps: [],
      hours: false,
    });
    // a leg's start, and how far from it the storm's wind may reach until the leg ends
    const reaches = timeline.legs.map(({ first, speedMps, startMs, endMs }) => {
      const frame = timeline.frame(first);
      const angle = (model.outerRadiusM + (speedMps * (endMs - startMs)) / 1000) / EARTH_RADIUS_M;
      return { x: frame[0]!, y: frame[1]!, z: frame[2]!, angle };
    });
    const cells: number[] = [];
    const winds: number[] = [];
    for (const placed of tiles) {
      const [cx, cy, cz] = placed.centre;
      const own = placed.radiusM / EARTH_RADIUS_M;
      const near = reaches.some(
        ({ x, y, z, angle }) => angle + own > Math.PI || x * cx + y * cy + z * cz > Math.cos(angle + own),
      );
      if (!near) continue;
      const { arrays } = arithmetic;
      arrays.x.set(placed.x);
      arrays.y.set(placed.y);
      arrays.z.set(placed.z);
      tile.count = placed.cells.length;
      if (!runner.run(tile, placed)) continue;
      for (let i = 0; i < tile.count; i++) {
        if (!(tile.windMps[i]! >= leastMps)) continue;
        cells.push(placed.cells[i]!);
        winds.push(tile.windMps[i]!);
      }
    }
    return { cells: Int32Array.from(cells), windMps: Float32Array.from(winds) };
  }
}
