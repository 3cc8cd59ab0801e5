import { type Grid, projection } from '../swath/grid.js';
import type { Field } from './node-classes.js';

/** What of a projected grid the projection shows: places that come back to themselves by way of longitude and latitude. */
export interface ProjectionExtent {
  /** longitude and latitude of a place in cells from the north-west corner, x rising eastward, y falling southward */
  readonly lonLat: (x: number, y: number) => readonly [number, number];
  /** a place on a line between cell centres; where the extent ends on the way to the next centre, moved inside */
  readonly inside: (x: number, y: number) => readonly [number, number];
  /** the field with NaN in cells that are not shown, or are too near to the end of what is */
  readonly withinProjection: (field: Field) => Field;
}

/** A cell counts as shown when this part of a cell on all sides of its centre is, too. */
const ROOM = 1 / 16;
/** The outer edge is tried this far inside, cells: on the edge itself 180° may come back as −180°. */
const INSET = 1e-3;

/** The extent of a grid's projection. The outermost cells and corners are tried first; only where one fails are all. */
export function projectionExtent(grid: Grid): ProjectionExtent {
  const { nx, ny, cell, bounds } = grid;
  const { inverse, forward } = projection(grid.crs);
  const lonLat = (x: number, y: number): readonly [number, number] =>
    inverse(bounds[0] + x * cell, bounds[3] + y * cell);
  const shown = (x: number, y: number): boolean => {
    try {
      const [lon, lat] = lonLat(x, y);
      const [backX, backY] = forward(lon, lat);
      return Math.hypot(backX - bounds[0] - x * cell, backY - bounds[3] - y * cell) < 1e-3 * cell;
    } catch {
      return false;
    }
  };
  if (edgeShown(grid, shown)) return { lonLat, inside: (x, y) => [x, y], withinProjection: (field) => field };

  const cellShown = (column: number, row: number): boolean => {
    const west = column === 0 ? 0.5 - INSET : ROOM;
    const east = column === nx - 1 ? 0.5 - INSET : ROOM;
    const north = row === 0 ? 0.5 - INSET : ROOM;
    const south = row === ny - 1 ? 0.5 - INSET : ROOM;
    const [x, y] = [column + 0.5, -row - 0.5];
    for (const dx of [-west, 0, east]) for (const dy of [-south, 0, north]) if (!shown(x + dx, y + dy)) return false;
    return true;
  };
  const cells = new Uint8Array(nx * ny);
  for (let row = 0, k = 0; row < ny; row++) {
    for (let column = 0; column < nx; column++, k++) cells[k] = cellShown(column, row) ? 1 : 0;
  }

  const inside = (x: number, y: number): readonly [number, number] => {
    const column = Math.floor(x - 0.5);
    const row = Math.floor(-y - 0.5);
    const onRow = row === -y - 0.5;
    const nextColumn = onRow ? column + 1 : column;
    const nextRow = onRow ? row : row + 1;
    if (column < 0 || row < 0 || nextColumn >= nx || nextRow >= ny) return [x, y];
    const first = cells[row * nx + column]!;
    if (first === cells[nextRow * nx + nextColumn]) return [x, y];
    // between a cell that is shown and one that is not: the whole way is drawn together into the part that is shown
    const [cx, cy] = first ? [column + 0.5, -row - 0.5] : [nextColumn + 0.5, -nextRow - 0.5];
    const [dx, dy] = first ? [nextColumn - column, row - nextRow] : [column - nextColumn, nextRow - row];
    let near = 0;
    let far = 1;
    for (let i = 0; i < 30; i++) {
      const middle = (near + far) / 2;
      if (shown(cx + middle * dx, cy + middle * dy)) near = middle;
      else far = middle;
    }
    return [cx + near * (x - cx), cy + near * (y - cy)];
  };
  const withinProjection = (field: Field): Field => field.map((value, k) => (cells[k] ? value : Number.NaN));
  return { lonLat, inside, withinProjection };
}

/** Whether everything along the outer edge of the grid is shown, at each column and row. */
function edgeShown(grid: Grid, shown: (x: number, y: number) => boolean): boolean {
  const { nx, ny } = grid;
  const [west, east, north, south] = [INSET, nx - INSET, -INSET, INSET - ny];
  for (let column = 0; column < nx; column++) {
    if (!shown(column + INSET, north) || !shown(column + INSET, south)) return false;
  }
  for (let row = 0; row < ny; row++) if (!shown(west, -row - INSET) || !shown(east, -row - INSET)) return false;
  return shown(east, south) && shown(east, north) && shown(west, south);
}
