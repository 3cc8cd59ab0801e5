import { LimitError } from '../errors.js';
import type { Grid } from '../swath/grid.js';

/** Whole units in one degree: positions on a geographic lattice are whole millionths of a degree. */
export const UNITS_PER_DEGREE = 1_000_000;
/** Whole units in one cell of a projected lattice. */
export const UNITS_PER_CELL = 1_048_576;

const TURN = 360 * UNITS_PER_DEGREE;
const HALF_TURN = 180 * UNITS_PER_DEGREE;

/** Value of an edge column: `(1 − weight)·left + weight·right` of two columns of the grid. */
export interface EdgeColumn {
  readonly left: number;
  readonly right: number;
  readonly weight: number;
}

/**
 * Where isotachs are looked for: the cell centres of a grid, or of a part of it, between an outermost row and column of
 * nodes on every side that lie on the edge of the grid (or on the meridian where it is cut).
 *
 * Edge convention: beyond the outermost centres the field keeps their values up to the outer edge of the grid, and the
 * area at or above a level is closed along that edge. A field that is everywhere at or above the level gives exactly the
 * bounds of the grid.
 *
 * Positions are whole numbers, so that what is topologically right stays so when written with six decimals.
 */
export interface Lattice {
  /** cells in a row of the field */
  readonly stride: number;
  /** columns of the grid that the lattice takes its values from: the inner columns are `first`, `first + 1` …, modulo `period` */
  readonly period: number;
  readonly first: number;
  readonly west: EdgeColumn;
  readonly east: EdgeColumn;
  /** row of the grid that each row of the lattice takes its values from */
  readonly sourceRow: Int32Array;
  /** position of each column, rising */
  readonly x: Float64Array;
  /** position of each row, falling (row 0 = north) */
  readonly y: Float64Array;
  /** distance from a node, as a part of the way to the next, that every crossing keeps */
  readonly margin: number;
  /** what a straight run along the border is broken into at most, in units */
  readonly borderStep: number;
}

/** Crossings of a geographic lattice keep a 64th of the cell away from its nodes: no hair-thin slivers. */
const MARGIN = 1 / 64;

/** Space between two lines of the lattice that leaves room for all levels to pass one above the other. */
const roomFor = (levels: number): number => 2 * (levels + 1);

/**
 * The lattices of a geographic grid, in millionths of a degree: one, or one on each side of the antimeridian where the
 * grid runs across it. A grid that goes round the Earth is cut at the antimeridian only, whatever its first column.
 * @throws LimitError `isotach.cell` when the cell is too small for six decimals
 */
export function geographicLattices(grid: Grid, levels: number): Lattice[] {
  const { nx, cell } = grid;
  const west = grid.bounds[0];
  if (cell * UNITS_PER_DEGREE < 4 * roomFor(levels)) {
    throw new LimitError(
      'isotach.cell',
      `cells of ${cell}° are too small for isotachs with six decimals at ${levels} levels; take cells of at least ${((4 * roomFor(levels)) / UNITS_PER_DEGREE).toFixed(6)}°`,
      { fields: { cell, levels } },
    );
  }
  const rows = latitudeRows(grid, levels);
  // nearer than this to a column of centres, the cut takes that column's place
  const near = Math.max(0.05, roomFor(levels) / (cell * UNITS_PER_DEGREE));
  const full = nx * cell >= 360 - 1e-9;
  const across = full ? 360 / cell : nx;
  // in columns from the western edge: where the antimeridian lies
  const cuts: number[] = [];
  for (let turn = -3; turn <= 3; turn += 2) {
    const at = (turn * 180 - west) / cell;
    if (at > near && at < across - near) cuts.push(at);
  }
  const strips: Lattice[] = [];
  if (full) {
    const columns = Math.min(nx, Math.floor(across - 0.5 - near) + 1);
    const from = ((((180 - west) / cell) % across) + across) % across;
    strips.push(strip({ grid, rows, near, from, to: from + across, period: { across, columns } }));
  } else {
    const edges = [0, ...cuts, nx];
    for (let i = 1; i < edges.length; i++) {
      strips.push(strip({ grid, rows, near, from: edges[i - 1]!, to: edges[i]!, period: null }));
    }
  }
  return strips;
}

interface Rows {
  readonly sourceRow: Int32Array;
  readonly y: Float64Array;
}

/** Rows of centres within the poles, and the two edges. */
function latitudeRows(grid: Grid, levels: number): Rows {
  const { ny, cell } = grid;
  const north = grid.bounds[3];
  const units = (latDeg: number) => Math.round(Math.max(-90, Math.min(90, latDeg)) * UNITS_PER_DEGREE) + 0;
  const limit = 90 * UNITS_PER_DEGREE - roomFor(levels);
  const centres: number[] = [];
  for (let row = 0; row < ny; row++) {
    if (Math.abs(north - (row + 0.5) * cell) * UNITS_PER_DEGREE <= limit) centres.push(row);
  }
  const sourceRow = Int32Array.from([centres[0] ?? 0, ...centres, centres.at(-1) ?? 0]);
  const y = Float64Array.from(sourceRow, (row) => units(north - (row + 0.5) * cell));
  y[0] = units(north);
  y[y.length - 1] = units(north - ny * cell);
  return { sourceRow, y };
}

/** The lattice between two meridians, `from` and `to` in columns from the western edge of the grid. */
function strip(part: {
  grid: Grid;
  rows: Rows;
  near: number;
  from: number;
  to: number;
  period: { across: number; columns: number } | null;
}): Lattice {
  const { grid, rows, near, from, to, period } = part;
  const columns = period?.columns ?? grid.nx;
  /** where the centre of a column lies; columns go on past the last one where the grid goes round */
  const centre = (i: number): number => {
    if (!period) return i + 0.5;
    const lap = Math.floor(i / columns);
    return i - lap * columns + 0.5 + lap * period.across;
  };
  let first = Math.floor(from - 0.5);
  while (centre(first) <= from + near) first++;
  if (!period) first = Math.max(first, 0);
  let last = first - 1;
  while ((period || last + 1 < columns) && centre(last + 1) < to - near) last++;
  const edge = (at: number): EdgeColumn => {
    let left = Math.floor(at - 0.5) - 1;
    while (centre(left + 1) <= at) left++;
    if (!period) left = Math.max(-1, Math.min(left, columns - 1));
    const inside = (i: number): number =>
      period ? ((i % columns) + columns) % columns : Math.max(0, Math.min(columns - 1, i));
    const weight = (at - centre(left)) / (centre(left + 1) - centre(left));
    const snapped = weight < near ? 0 : weight > 1 - near ? 1 : weight;
    return { left: inside(left), right: inside(left + 1), weight: snapped };
  };
  const lonUnits = (at: number): number => Math.round((grid.bounds[0] + at * grid.cell) * UNITS_PER_DEGREE);
  // shift by whole turns so that the middle lies within ±180°
  const shift = -TURN * Math.round(lonUnits((from + to) / 2) / TURN);
  const clamp = (units: number): number => Math.max(-HALF_TURN, Math.min(HALF_TURN, units + shift)) + 0;
  const x = new Float64Array(last - first + 3);
  x[0] = clamp(lonUnits(from));
  for (let i = first; i <= last; i++) x[i - first + 1] = clamp(lonUnits(centre(i)));
  x[x.length - 1] = clamp(lonUnits(to));
  return {
    stride: grid.nx,
    period: columns,
    first: ((first % columns) + columns) % columns,
    west: edge(from),
    east: edge(to),
    ...rows,
    x,
    margin: MARGIN,
    borderStep: 60 * UNITS_PER_DEGREE,
  };
}

/** The lattice of a projected grid, in 2⁻²⁰ of a cell from its north-west corner; y falls from 0. */
export function indexLattice(grid: Grid, margin: number): Lattice {
  const { nx, ny } = grid;
  const along = (cells: number): Float64Array => {
    const at = new Float64Array(cells + 2);
    for (let i = 0; i < cells; i++) at[i + 1] = (i + 0.5) * UNITS_PER_CELL;
    at[cells + 1] = cells * UNITS_PER_CELL;
    return at;
  };
  const sourceRow = Int32Array.from({ length: ny + 2 }, (_, r) => Math.max(0, Math.min(ny - 1, r - 1)));
  return {
    stride: nx,
    period: nx,
    first: 0,
    west: { left: 0, right: 0, weight: 0 },
    east: { left: nx - 1, right: nx - 1, weight: 0 },
    sourceRow,
    x: along(nx),
    y: along(ny).map((units) => 0 - units),
    margin,
    borderStep: 0,
  };
}
