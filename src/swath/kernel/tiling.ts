import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import { type Grid, projection } from '../grid.js';
import type { KernelArrays } from './arithmetic.js';
import type { Tile, TileBounds } from './tile.js';

/** A tile is about this wide, m: near the size over which the wind changes little. */
const TILE_M = 20_000;
const EDGE_BOUNDS = [4, 16] as const;

/** A grid cut into tiles. */
export interface Tiling {
  readonly columns: number;
  readonly rows: number;
  /** puts the cells of a tile into `tile`; `cells` holds their indices in the grid */
  readonly load: (
    tile: Tile,
    arrays: KernelArrays,
    at: { readonly column: number; readonly row: number },
  ) => TileBounds & { readonly cells: Int32Array };
}

/** The tiles of a grid: squares of cells about 20 km wide, of 4 to 16 cells an edge. */
export function tilingOf(grid: Grid): Tiling {
  const cellM = grid.geographic ? grid.cell * RADIANS * EARTH_RADIUS_M : grid.cell;
  const edge = Math.min(EDGE_BOUNDS[1], Math.max(EDGE_BOUNDS[0], Math.round(TILE_M / cellM / 4) * 4));
  const cells = new Int32Array(edge * edge);
  const place = placesOf(grid);
  const corners = new Float64Array(12);
  const columns = Math.ceil(grid.nx / edge);
  const rows = Math.ceil(grid.ny / edge);
  return {
    columns,
    rows,
    load(tile, arrays, { column, row }) {
      const { x: cx, y: cy, z: cz } = arrays;
      const toColumn = Math.min(grid.nx, (column + 1) * edge);
      const toRow = Math.min(grid.ny, (row + 1) * edge);
      let count = 0;
      let [x, y, z] = [0, 0, 0];
      for (let j = row * edge; j < toRow; j++) {
        for (let i = column * edge; i < toColumn; i++) {
          if (!place(arrays, count, i, j)) continue;
          cells[count] = j * grid.nx + i;
          x += cx[count]!;
          y += cy[count]!;
          z += cz[count]!;
          count++;
        }
      }
      tile.count = count;
      const size = Math.hypot(x, y, z) || 1;
      const centre = [x / size, y / size, z / size] as const;
      let chord = 0;
      for (let i = 0; i < count; i++) {
        chord = Math.max(chord, (cx[i]! - centre[0]) ** 2 + (cy[i]! - centre[1]) ** 2 + (cz[i]! - centre[2]) ** 2);
      }
      // cells that have no place are at the edge of the projection: there the tile's bounds alone count
      const whole = count === (toColumn - column * edge) * (toRow - row * edge);
      const width = toColumn - column * edge;
      for (const [q, at] of [0, width - 1, count - width, count - 1].entries()) {
        const k = whole ? at : 0;
        corners[3 * q] = cx[k]!;
        corners[3 * q + 1] = cy[k]!;
        corners[3 * q + 2] = cz[k]!;
      }
      return { centre, radiusM: 2 * EARTH_RADIUS_M * Math.asin(Math.min(1, Math.sqrt(chord) / 2)) + 1, corners, cells };
    },
  };
}

/** Writes the unit vector of a cell's centre; false where the projection has no place for it. */
function placesOf(grid: Grid): (arrays: KernelArrays, at: number, column: number, row: number) => boolean {
  const [west, , , north] = grid.bounds;
  if (grid.geographic) {
    const cosLon = Float64Array.from({ length: grid.nx }, (_, i) => Math.cos((west + (i + 0.5) * grid.cell) * RADIANS));
    const sinLon = Float64Array.from({ length: grid.nx }, (_, i) => Math.sin((west + (i + 0.5) * grid.cell) * RADIANS));
    const cosLat = Float64Array.from({ length: grid.ny }, (_, j) =>
      Math.cos((north - (j + 0.5) * grid.cell) * RADIANS),
    );
    const sinLat = Float64Array.from({ length: grid.ny }, (_, j) =>
      Math.sin((north - (j + 0.5) * grid.cell) * RADIANS),
    );
    return (arrays, at, column, row) => {
      arrays.x[at] = cosLat[row]! * cosLon[column]!;
      arrays.y[at] = cosLat[row]! * sinLon[column]!;
      arrays.z[at] = sinLat[row]!;
      return true;
    };
  }
  const { inverse } = projection(grid.crs);
  return (arrays, at, column, row) => {
    const [lon, lat] = inverse(west + (column + 0.5) * grid.cell, north - (row + 0.5) * grid.cell);
    if (!Number.isFinite(lon) || !Number.isFinite(lat)) return false;
    const c = Math.cos(lat * RADIANS);
    arrays.x[at] = c * Math.cos(lon * RADIANS);
    arrays.y[at] = c * Math.sin(lon * RADIANS);
    arrays.z[at] = Math.sin(lat * RADIANS);
    return true;
  };
}
