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
 * nodes on every side that lie on the edge of the grid.
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

/** Crossings keep a 64th of the cell away from the nodes, at least this many units: no hair-thin slivers. */
const LEAST_MARGIN = 8;

/** Space between two lines of the lattice that leaves room for all levels to pass one above the other. */
const roomFor = (levels: number): number => Math.max(16, 2 * (levels + 1));

/**
 * The lattice of a geographic grid, in millionths of a degree; longitudes may run on past ±180°. A grid that goes round
 * the Earth is opened at the antimeridian, whatever its first column, between two columns of nodes with the values there.
 * @throws LimitError `isotach.cell` when the cell is too small for six decimals
 */
export function geographicLattice(grid: Grid, levels: number): Lattice {
  const { nx, cell } = grid;
  if (cell * UNITS_PER_DEGREE < 4 * roomFor(levels)) {
    throw new LimitError(
      'isotach.cell',
      `cells of ${cell}° are too small for isotachs with six decimals at ${levels} levels; take cells of at least ${((4 * roomFor(levels)) / UNITS_PER_DEGREE).toFixed(6)}°`,
      { fields: { cell, levels } },
    );
  }
  const columns = nx * cell >= 360 - 1e-9 ? roundTheEarth(grid, levels) : partOfTheEarth(grid);
  return {
    stride: nx,
    ...columns,
    ...latitudeRows(grid, levels),
    margin: Math.max(1 / 64, LEAST_MARGIN / (cell * UNITS_PER_DEGREE)),
    borderStep: 60 * UNITS_PER_DEGREE,
  };
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

type Columns = Pick<Lattice, 'first' | 'period' | 'west' | 'east' | 'x'>;

/** All columns of the grid between its edges, moved by whole turns to within ±180° as far as it goes. */
function partOfTheEarth({ nx, cell, bounds }: Grid): Columns {
  const lonUnits = (at: number): number => Math.round((bounds[0] + at * cell) * UNITS_PER_DEGREE);
  const shift = TURN * Math.round(lonUnits(nx / 2) / TURN);
  const x = Float64Array.from({ length: nx + 2 }, (_, i) => {
    const at = i === 0 ? 0 : i > nx ? nx : i - 0.5;
    return lonUnits(at) - shift + 0;
  });
  return {
    first: 0,
    period: nx,
    west: { left: 0, right: 0, weight: 0 },
    east: { left: nx - 1, right: nx - 1, weight: 0 },
    x,
  };
}

/** The columns of one turn from −180° to 180°, in between the values on the antimeridian. */
function roundTheEarth({ nx, cell, bounds }: Grid, levels: number): Columns {
  // in columns from the western edge of the grid; a last column that lies over the first again is left out
  const turn = 360 / cell;
  // nearer than this to the antimeridian, a column of centres stands for it
  const near = Math.max(0.05, roomFor(levels) / (cell * UNITS_PER_DEGREE));
  const period = Math.min(nx, Math.floor(turn - 0.5 - near) + 1);
  const from = ((((180 - bounds[0]) / cell) % turn) + turn) % turn;
  /** where the centre of a column lies; columns go on past the last one, round the Earth */
  const centre = (i: number): number => {
    const lap = Math.floor(i / period);
    return i - lap * period + 0.5 + lap * turn;
  };
  const wrapped = (i: number): number => ((i % period) + period) % period;
  let left = Math.floor(from - 0.5) - 1;
  while (centre(left + 1) <= from) left++;
  const weight = (from - centre(left)) / (centre(left + 1) - centre(left));
  const first = from + near >= centre(left + 1) ? left + 2 : left + 1;
  let last = first;
  while (centre(last + 1) < from + turn - near) last++;
  const edge: EdgeColumn = {
    left: wrapped(left),
    right: wrapped(left + 1),
    weight: from - centre(left) <= near ? 0 : first === left + 2 ? 1 : weight,
  };
  const x = new Float64Array(last - first + 3);
  x[0] = -HALF_TURN;
  for (let i = first; i <= last; i++)
    x[i - first + 1] = Math.round((centre(i) - from - turn / 2) * cell * UNITS_PER_DEGREE) + 0;
  x[x.length - 1] = HALF_TURN;
  return { first: wrapped(first), period, west: edge, east: edge, x };
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
