import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import { type Grid, projection } from '../grid.js';

/** Cells along the edge of a tile; a multiple of every lattice spacing. */
export const TILE_EDGE = 64;

/** Places of a grid's cells, and of the lattice that goes on beyond its right and lower edge. */
export interface Placing {
  /** writes the unit vector of a cell's centre; false where the projection has no place for it */
  readonly place: (
    to: { readonly x: Float64Array; readonly y: Float64Array; readonly z: Float64Array },
    at: number,
    column: number,
    row: number,
  ) => boolean;
  /** tiles in a row and in a column */
  readonly columns: number;
  readonly rows: number;
  /** edge of a cell, m; of a projected grid in its own metres */
  readonly cellM: number;
}

export function placingOf(grid: Grid): Placing {
  const columns = Math.ceil(grid.nx / TILE_EDGE);
  const rows = Math.ceil(grid.ny / TILE_EDGE);
  const [west, , , north] = grid.bounds;
  if (grid.geographic) {
    const across = columns * TILE_EDGE + 1;
    const down = rows * TILE_EDGE + 1;
    const of = (n: number, angleDeg: (k: number) => number, part: (radians: number) => number): Float64Array =>
      Float64Array.from({ length: n }, (_, k) => part(angleDeg(k) * RADIANS));
    const lonDeg = (i: number): number => west + (i + 0.5) * grid.cell;
    const latDeg = (j: number): number => north - (j + 0.5) * grid.cell;
    const cosLon = of(across, lonDeg, Math.cos);
    const sinLon = of(across, lonDeg, Math.sin);
    const cosLat = of(down, latDeg, Math.cos);
    const sinLat = of(down, latDeg, Math.sin);
    return {
      columns,
      rows,
      cellM: grid.cell * RADIANS * EARTH_RADIUS_M,
      place({ x, y, z }, at, column, row) {
        x[at] = cosLat[row]! * cosLon[column]!;
        y[at] = cosLat[row]! * sinLon[column]!;
        z[at] = sinLat[row]!;
        return true;
      },
    };
  }
  const { inverse } = projection(grid.crs);
  return {
    columns,
    rows,
    cellM: grid.cell,
    place({ x, y, z }, at, column, row) {
      const [lon, lat] = inverse(west + (column + 0.5) * grid.cell, north - (row + 0.5) * grid.cell);
      if (!Number.isFinite(lon) || !Number.isFinite(lat)) return false;
      const c = Math.cos(lat * RADIANS);
      x[at] = c * Math.cos(lon * RADIANS);
      y[at] = c * Math.sin(lon * RADIANS);
      z[at] = Math.sin(lat * RADIANS);
      return true;
    },
  };
}
