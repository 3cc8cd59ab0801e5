import { RADIANS } from '../earth.js';
import { boxOf, cellLonLat, type LandGrid } from './land-grid.js';
import type { Shore } from './shore.js';
import type { ShoreTree } from './shore-tree.js';

/** Nearest shore of every cell of a grid, nx*ny. */
export interface NearestShore {
  /** squared chord on the unit sphere; Infinity beyond the search, NaN where a cell is nowhere on the Earth */
  readonly chord2: Float64Array;
}

/**
 * Nearest shore by handing arcs from cell to cell: a place between a cell and its nearest shore has the same nearest
 * shore, so it is enough to know the arcs in the cells they run through, those seen from the border of the grid (asked
 * from the tree), and to let each cell try the arcs of its eight neighbours in two sweeps over the grid and back.
 * Where the region nearest to an arc is narrower than a cell the hand-over can miss it: by a small share of a cell.
 * @param within squared chord beyond which nothing is looked for
 */
export function nearestShore(
  grid: LandGrid,
  { shore, tree, within }: { shore: Shore; tree: ShoreTree; within: number },
): NearestShore {
  const { nx, ny } = grid;
  const { x, y, z } = vectorsOf(grid);
  const chord2 = new Float64Array(nx * ny).fill(Number.POSITIVE_INFINITY);
  const arcOf = new Int32Array(nx * ny).fill(-1);
  const last = shore.ax.length - 1;

  function attempt(k: number, arc: number): boolean {
    const found = tree.chordTo(arc, x[k]!, y[k]!, z[k]!);
    if (!(found < chord2[k]!)) return false;
    chord2[k] = found;
    arcOf[k] = arc;
    return true;
  }
  /** tries an arc and, while it gets nearer, its neighbours along the shore */
  function follow(k: number, arc: number): void {
    if (arc < 0 || arc === arcOf[k] || !attempt(k, arc)) return;
    for (let next = arc + 1; next <= last && attempt(k, next); next++);
    for (let next = arcOf[k]! - 1; next >= 0 && attempt(k, next); next--);
  }

  seed(grid, shore, follow);
  const ask = (k: number): void => {
    const arc = Number.isNaN(x[k]!) ? -1 : tree.nearest(x[k]!, y[k]!, z[k]!, Math.min(within, chord2[k]!));
    if (arc >= 0) attempt(k, arc);
  };
  for (let column = 0; column < nx; column++) {
    ask(column);
    ask((ny - 1) * nx + column);
  }
  for (let row = 1; row < ny - 1; row++) {
    ask(row * nx);
    ask(row * nx + nx - 1);
  }

  const give = (k: number, from: number): void => {
    if (chord2[from]! <= within) follow(k, arcOf[from]!);
  };
  for (let pass = 0; pass < 2; pass++) {
    for (let row = 0; row < ny; row++) {
      const start = row * nx;
      for (let k = start; k < start + nx; k++) {
        if (k > start) give(k, k - 1);
        if (row === 0) continue;
        give(k, k - nx);
        if (k > start) give(k, k - nx - 1);
        if (k < start + nx - 1) give(k, k - nx + 1);
      }
      for (let k = start + nx - 2; k >= start; k--) give(k, k + 1);
    }
    for (let row = ny - 1; row >= 0; row--) {
      const start = row * nx;
      for (let k = start + nx - 1; k >= start; k--) {
        if (k < start + nx - 1) give(k, k + 1);
        if (row === ny - 1) continue;
        give(k, k + nx);
        if (k < start + nx - 1) give(k, k + nx + 1);
        if (k > start) give(k, k + nx - 1);
      }
      for (let k = start + 1; k < start + nx; k++) give(k, k - 1);
    }
  }
  for (let k = 0; k < chord2.length; k++) {
    if (Number.isNaN(x[k]!)) chord2[k] = Number.NaN;
    else if (chord2[k]! > within) chord2[k] = Number.POSITIVE_INFINITY;
  }
  return { chord2 };
}

/** Gives every arc to the cells that it runs through. */
function seed(grid: LandGrid, { ax, ay, az, bx, by, bz }: Shore, give: (k: number, arc: number) => void): void {
  const { nx, ny, cell, bounds } = grid;
  const box = boxOf(grid);
  const place = (x: number, y: number, z: number, arc: number): number => {
    const latDeg = Math.atan2(z, Math.hypot(x, y)) / RADIANS;
    if (latDeg < box.south - cellMarginDeg || latDeg > box.north + cellMarginDeg) return -1;
    let lonDeg = Math.atan2(y, x) / RADIANS;
    lonDeg += 360 * Math.ceil((box.west - lonDeg) / 360);
    if (lonDeg > box.east) return -1;
    const [u, v] = grid.geographic ? [lonDeg, latDeg] : grid.forward(lonDeg, latDeg);
    const column = Math.floor((u - bounds[0]) / cell);
    const row = Math.floor((bounds[3] - v) / cell);
    if (!(column >= 0 && column < nx && row >= 0 && row < ny)) return -1;
    give(row * nx + column, arc);
    return row * nx + column;
  };
  for (let i = 0; i < ax.length; i++) {
    const first = place(ax[i]!, ay[i]!, az[i]!, i);
    const second = place(bx[i]!, by[i]!, bz[i]!, i);
    if (first === second) continue;
    for (const t of BETWEEN) {
      const s = 1 - t;
      place(s * ax[i]! + t * bx[i]!, s * ay[i]! + t * by[i]!, s * az[i]! + t * bz[i]!, i);
    }
  }
}

const cellMarginDeg = 0.01;
/** Where along an arc between two cells its way is followed. */
const BETWEEN = Array.from({ length: 15 }, (_, i) => (i + 1) / 16);

function vectorsOf(grid: LandGrid): { x: Float64Array; y: Float64Array; z: Float64Array } {
  const n = grid.nx * grid.ny;
  const [x, y, z] = [new Float64Array(n), new Float64Array(n), new Float64Array(n)];
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      const [lonDeg, latDeg] = cellLonLat(grid, column, row);
      const c = Math.cos(latDeg * RADIANS);
      x[k] = c * Math.cos(lonDeg * RADIANS);
      y[k] = c * Math.sin(lonDeg * RADIANS);
      z[k] = Math.sin(latDeg * RADIANS);
    }
  }
  return { x, y, z };
}
