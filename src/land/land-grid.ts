import { RADIANS } from '../earth.js';

/**
 * A grid as the land sees it: cells in a plane and the way from the plane to the sphere and back.
 * Layout of fields on it: row 0 = north, index = row * nx + column, values of the cell or at its centre.
 */
export interface LandGrid {
  readonly nx: number;
  readonly ny: number;
  /** cell size in units of the plane: degrees or metres */
  readonly cell: number;
  /** [west, south, east, north] in units of the plane */
  readonly bounds: readonly [number, number, number, number];
  /** whether the plane is longitude and latitude */
  readonly geographic: boolean;
  /** plane → [longitude, latitude], degrees */
  readonly inverse: (x: number, y: number) => readonly [number, number];
  /** [longitude, latitude], degrees → plane */
  readonly forward: (lonDeg: number, latDeg: number) => readonly [number, number];
}

/** Longitude and latitude of a cell's centre, degrees. */
export function cellLonLat(grid: LandGrid, column: number, row: number): readonly [number, number] {
  return grid.inverse(grid.bounds[0] + (column + 0.5) * grid.cell, grid.bounds[3] - (row + 0.5) * grid.cell);
}

/** Longitudes and latitudes that a grid spans; east − west ≤ 360, east may exceed 180. */
export interface LonLatBox {
  readonly west: number;
  readonly south: number;
  readonly east: number;
  readonly north: number;
}

/** Points along each side of a grid at which its edge is followed. */
const POINTS_A_SIDE = 256;

/**
 * The box of longitudes and latitudes that holds a grid. A grid over a pole gets all longitudes.
 * Longitudes are followed along the grid's edge, so a grid across ±180° has a narrow box.
 */
export function boxOf(grid: LandGrid): LonLatBox {
  const [x0, y0, x1, y1] = grid.bounds;
  if (grid.geographic) return { west: x0, south: y0, east: x1, north: y1 };
  let [west, south, east, north] = [Infinity, Infinity, -Infinity, -Infinity];
  let lon = Number.NaN;
  let begin = Number.NaN;
  const visit = (x: number, y: number): void => {
    const [nextLon, lat] = grid.inverse(x, y);
    if (!Number.isFinite(nextLon) || !Number.isFinite(lat)) return;
    lon = Number.isNaN(lon) ? nextLon : lon + turnDeg(nextLon - lon);
    if (Number.isNaN(begin)) begin = lon;
    west = Math.min(west, lon);
    east = Math.max(east, lon);
    south = Math.min(south, lat);
    north = Math.max(north, lat);
  };
  const m = POINTS_A_SIDE;
  for (let i = 0; i < m; i++) visit(x0 + ((x1 - x0) * i) / m, y0);
  for (let i = 0; i < m; i++) visit(x1, y0 + ((y1 - y0) * i) / m);
  for (let i = 0; i < m; i++) visit(x1 + ((x0 - x1) * i) / m, y1);
  for (let i = 0; i < m; i++) visit(x0, y1 + ((y0 - y1) * i) / m);
  visit(x0, y0);
  if (Number.isNaN(begin)) return { west: -180, south: -90, east: 180, north: 90 };
  for (const pole of [-90, 90]) {
    const [px, py] = grid.forward(0, pole);
    const inside = px >= x0 && px <= x1 && py >= y0 && py <= y1;
    if (!(inside && Math.abs(grid.inverse(px, py)[1] - pole) < 1e-6)) continue;
    if (pole < 0) south = -90;
    else north = 90;
    [west, east] = [-180, 180];
  }
  if (Math.abs(lon - begin) > 180 || east - west > 360) [west, east] = [-180, 180];
  // parallels bulge between the points of the edge
  const margin = 0.02 * (north - south) + 0.01;
  return { west, east, south: Math.max(-90, south - margin), north: Math.min(90, north + margin) };
}

function turnDeg(degrees: number): number {
  return degrees - 360 * Math.round(degrees / 360);
}

/** Size of a cell on the ground at the middle of the grid, m (the shorter side in a geographic grid). */
export function cellSizeM(grid: LandGrid, radiusM: number): number {
  if (!grid.geographic) return grid.cell;
  const middle = 0.5 * (grid.bounds[1] + grid.bounds[3]);
  return grid.cell * RADIANS * radiusM * Math.max(0.05, Math.cos(middle * RADIANS));
}
