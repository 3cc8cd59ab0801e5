import type { Place } from '../earth.js';
import { type Grid, projection } from '../swath/grid.js';

/** Finds the cell of a grid that holds a place: its index (row 0 = north), −1 outside. A place on an edge belongs to the cell east or south of it. */
export function cellFinder(grid: Grid): (place: Place) => number {
  const { forward } = projection(grid.crs);
  const [west, , east, north] = grid.bounds;
  return ({ latDeg, lonDeg }) => {
    let [x, y] = forward(lonDeg, latDeg);
    if (grid.geographic) {
      x += 360 * Math.ceil((west - x) / 360);
      if (x >= west + 360) x -= 360;
      // the last edge of a grid is its own
      if (x > east) return -1;
    }
    if (!(x >= west && x <= east && y <= north && y >= grid.bounds[1])) return -1;
    const column = Math.min(grid.nx - 1, Math.floor((x - west) / grid.cell));
    const row = Math.min(grid.ny - 1, Math.floor((north - y) / grid.cell));
    return row * grid.nx + column;
  };
}
