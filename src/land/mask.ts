import { clipRing, densified } from './clip.js';
import { coverage } from './coverage.js';
import type { Land } from './land.js';
import { boxOf, type LandGrid, type LonLatBox } from './land-grid.js';

/** Rows that are worked on at once, cells: bounds the memory of very large grids. */
const STRIP_CELLS = 4_000_000;
/** Shares nearer to 0 or 1 than this are rounding. */
const ROUNDING = 1e-9;

/**
 * Share of each cell that is land, 0 … 1, by exact areas in the plane of the grid; islands smaller than a cell count with
 * their area. Exactly 0 over open sea and exactly 1 inland. Where polygons overlap inside a cell the share is an upper bound.
 * @returns nx*ny, row 0 = north
 */
export function landFraction(grid: LandGrid, land: Land): Float32Array {
  const out = new Float32Array(grid.nx * grid.ny);
  const pieces = piecesOn(grid, land);
  if (pieces === null) return sampledFraction(grid, land);
  const rows = Math.max(1, Math.floor(STRIP_CELLS / grid.nx));
  for (let row = 0; row < grid.ny; row += rows) {
    const count = Math.min(rows, grid.ny - row);
    const strip = coverage(grid.nx, count);
    for (const piece of pieces) addPiece(piece, row, strip.addEdge);
    const areas = strip.areas();
    for (let k = 0, at = row * grid.nx; k < areas.length; k++, at++) {
      const share = Math.abs(areas[k]!);
      out[at] = share < ROUNDING ? 0 : share > 1 - ROUNDING ? 1 : share;
    }
  }
  return out;
}

/** A ring in cells of the grid: shared coordinates with an offset and a scale, or coordinates of its own. */
interface Piece {
  readonly points: ArrayLike<number>;
  /** column = (x + shift − west)/cell, row = (north − y)/cell */
  readonly shift: number;
  readonly west: number;
  readonly north: number;
  readonly cell: number;
}

function addPiece(
  { points, shift, west, north, cell }: Piece,
  firstRow: number,
  addEdge: (x0: number, y0: number, x1: number, y1: number) => void,
): void {
  let x = (points[0]! + shift - west) / cell;
  let y = (north - points[1]!) / cell - firstRow;
  for (let i = 2; i < points.length; i += 2) {
    const nextX = (points[i]! + shift - west) / cell;
    const nextY = (north - points[i + 1]!) / cell - firstRow;
    addEdge(x, y, nextX, nextY);
    x = nextX;
    y = nextY;
  }
}

/** The rings that touch a grid, in its plane; null where the projection tears them. */
function piecesOn(grid: LandGrid, land: Land): Piece[] | null {
  const box = boxOf(grid);
  const [west, , , north] = grid.bounds;
  const frame = { west, north, cell: grid.cell };
  const pieces: Piece[] = [];
  const carry = grid.geographic ? null : carrier(grid, box);
  if (carry === 'torn') return null;
  // a margin, so that the cut along the box stays outside the grid where it bulges
  const wide = grid.geographic ? box : widened(box);
  for (const [i, ring] of land.rings.entries()) {
    const [w, s, e, n] = land.ringBounds[i]!;
    if (n <= wide.south || s >= wide.north) continue;
    for (let shift = 360 * Math.ceil((wide.west - e) / 360); w + shift < wide.east; shift += 360) {
      if (carry === null) {
        pieces.push({ ...frame, points: ring, shift });
        continue;
      }
      const cut = densified(clipRing(ring, wide, shift));
      for (let k = 0; k < cut.length; k += 2) {
        const [x, y] = carry(cut[k]!, cut[k + 1]!);
        if (!Number.isFinite(x) || !Number.isFinite(y)) return null;
        cut[k] = x;
        cut[k + 1] = y;
      }
      if (cut.length > 0) pieces.push({ ...frame, points: cut, shift: 0 });
    }
  }
  return pieces;
}

function widened(box: LonLatBox): LonLatBox {
  const dLon = 0.05 * (box.east - box.west) + 0.1;
  const dLat = 0.05 * (box.north - box.south) + 0.1;
  const all = box.east - box.west + 2 * dLon >= 360;
  return {
    west: all ? box.west : box.west - dLon,
    east: all ? box.west + 360 : box.east + dLon,
    south: Math.max(-90, box.south - dLat),
    north: Math.min(90, box.north + dLat),
  };
}

/**
 * Longitude and latitude of a box → plane, without a jump inside the box. On a cylindrical projection the plane repeats
 * itself every 360°, so a grid past its border is served as well.
 */
function carrier(grid: LandGrid, box: LonLatBox): LandGrid['forward'] | 'torn' {
  const [x0, y0, x1, y1] = grid.bounds;
  const polar = box.north === 90 || box.south === -90;
  const fromCell = (u: number, v: number): { off: number; x: number; lon: number } => {
    const [x, y] = [x0 + u * (x1 - x0), y0 + v * (y1 - y0)];
    const [lon, lat] = grid.inverse(x, y);
    // a cell beyond the rim of the projection is nowhere on the Earth
    if (!Number.isFinite(lon) || !Number.isFinite(lat)) return { off: 0, x, lon: Number.NaN };
    const [backX, backY] = grid.forward(lon, lat);
    return { off: Math.hypot(backX - x, backY - y), x, lon };
  };
  let returns = true;
  let here = fromCell(0.5, 0.5);
  for (let i = 0; i <= 8; i++) {
    for (let j = 0; j <= 8; j++) {
      const there = fromCell(i / 8, j / 8);
      if (!(there.off < 0.01 * grid.cell)) returns = false;
      if (Number.isNaN(here.lon)) here = there;
    }
  }
  if (Number.isNaN(here.lon)) return grid.forward;
  if (returns && (polar || box.east - box.west < 300)) return grid.forward;
  // cylindrical: x is in proportion to the longitude and repeats itself
  const lat = 0.5 * (Math.max(-80, box.south) + Math.min(80, box.north));
  const x = (lonDeg: number, latDeg: number): number => grid.forward(lonDeg, latDeg)[0];
  const steps = [x(here.lon + 0.5, lat) - x(here.lon, lat), x(here.lon, lat) - x(here.lon - 0.5, lat)];
  // one of the two may step over the border of the projection
  const degree = 2 * (Math.abs(steps[0]!) < Math.abs(steps[1]!) ? steps[0]! : steps[1]!);
  const period = 360 * degree;
  for (const [lonStep, atLat] of [
    [0.1, lat],
    [-0.3, lat - 5],
    [0.4, lat + 5],
  ] as const) {
    const turns = (x(here.lon + lonStep, atLat) - x(here.lon, lat) - lonStep * degree) / period;
    if (!(Math.abs(turns - Math.round(turns)) < 1e-6)) return 'torn';
  }
  return (lon, atLat) => {
    // forward of a latitude at a pole is endless in some projections: the cut box keeps to where cells can be
    const [ownX, y] = grid.forward(lon, Math.max(-89.5, Math.min(89.5, atLat)));
    const expected = here.x + (lon - here.lon) * degree;
    return [ownX + period * Math.round((expected - ownX) / period), y];
  };
}

/** Sub-samples a side, where a projection is torn inside the grid. */
const SAMPLES = 4;

/** The share of land by asking at 16 places in each cell: slow, for any projection. */
function sampledFraction(grid: LandGrid, land: Land): Float32Array {
  const out = new Float32Array(grid.nx * grid.ny);
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      let hits = 0;
      for (let i = 0; i < SAMPLES * SAMPLES; i++) {
        const x = grid.bounds[0] + (column + ((i % SAMPLES) + 0.5) / SAMPLES) * grid.cell;
        const y = grid.bounds[3] - (row + (Math.floor(i / SAMPLES) + 0.5) / SAMPLES) * grid.cell;
        const [lonDeg, latDeg] = grid.inverse(x, y);
        if (Number.isFinite(lonDeg) && Number.isFinite(latDeg) && land.isLand({ lonDeg, latDeg })) hits++;
      }
      out[k] = hits / (SAMPLES * SAMPLES);
    }
  }
  return out;
}
