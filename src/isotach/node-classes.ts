import type { EdgeColumn, Lattice } from './lattice.js';

/** Levels that one pass can tell apart. */
export const MOST_LEVELS = 250;
/** Class of the nodes around the lattice: no level, the end of every line. */
export const OUTSIDE = 255;

/** A field on the cells of a grid: row 0 = north, index = row * nx + column, NaN = below every level. */
export type Field = Float32Array | Float64Array;

/** The nodes of a lattice by class, and where the levels cross its rows. */
export interface Nodes {
  /** number of levels at or below each node, with a ring of {@link OUTSIDE} around; index = (row + 1) · width + column + 1 */
  readonly classes: Uint8Array;
  readonly width: number;
  /** first of the crossings on the edge from this node to its eastern neighbour; set only where there are any */
  readonly first: Int32Array;
  /** number of crossings; of each one the node west of it, its level and its position */
  readonly count: number;
  readonly node: Int32Array;
  readonly level: Uint8Array;
  readonly at: Float64Array;
}

/** Value of an edge column in the row of the field that begins at `base`. */
export function edgeValue(field: Field, base: number, edge: EdgeColumn): number {
  const left = field[base + edge.left]!;
  const right = field[base + edge.right]!;
  if (edge.weight === 0 || edge.left === edge.right) return left;
  if (edge.weight === 1) return right;
  const value = left + (right - left) * edge.weight;
  // beside a cell without data: the nearer cell decides
  return Number.isFinite(value) ? value : edge.weight < 0.5 ? left : right;
}

/** An edge between two nodes, from the one of the lower class to the one of the higher. */
export interface LatticeEdge {
  low: number;
  high: number;
  lowClass: number;
  highClass: number;
  /** whole units */
  length: number;
  margin: number;
}

/**
 * How far from its lower node a level crosses an edge, in whole units: linear in between, halfway where a value is NaN
 * or infinite, with room kept at both nodes and between levels.
 */
export function crossingDistance(edge: LatticeEdge, level: number, levels: readonly number[]): number {
  const { low, high, lowClass, highClass, length, margin } = edge;
  const count = highClass - lowClass;
  const space = Math.max(
    1,
    Math.floor(count === 1 ? length * Math.min(margin, 0.25) : Math.min(length * margin, length / (2 * (count + 1)))),
  );
  const perUnit = 1 / (high - low);
  let distance = 0;
  for (let i = lowClass; i <= level; i++) {
    const part = (levels[i]! - low) * perUnit;
    const place = Math.floor((part >= 0 && part <= 1 ? part : 0.5) * length + 0.5);
    distance = Math.max(place, distance + space);
  }
  return Math.min(distance, length - (highClass - level) * space);
}

/** One pass over the field: the classes of all nodes, and where the levels cross the rows. */
export function classify(field: Field, lattice: Lattice, levels: readonly number[]): Nodes {
  const { x, sourceRow, stride, period, first: firstColumn } = lattice;
  const columns = x.length;
  const rows = sourceRow.length;
  const width = columns + 1;
  const classes = new Uint8Array(width * (rows + 2) + 1);
  classes.fill(OUTSIDE, 0, width + 1);
  classes.fill(OUTSIDE, width * (rows + 1));
  const crossings = new Crossings(lattice, levels, width);
  // bounds[k] ≤ value < bounds[k + 1] is class k
  const bounds = Float64Array.from([Number.NEGATIVE_INFINITY, ...levels, Number.POSITIVE_INFINITY]);

  for (let row = 0; row < rows; row++) {
    const base = sourceRow[row]! * stride;
    let to = (row + 1) * width;
    classes[to++] = OUTSIDE;
    let before = edgeValue(field, base, lattice.west);
    let current = classOf(before, bounds);
    let low = bounds[current]!;
    let high = bounds[current + 1]!;
    classes[to++] = current;
    let left = columns - 2;
    let from = firstColumn;
    while (left > 0) {
      const run = Math.min(left, period - from);
      const begin = base + from;
      const end = begin + run;
      for (let k = begin; k < end; k++, to++) {
        const value = field[k]!;
        if (!(value >= low && value < high)) {
          const next = classOf(value, bounds);
          if (next !== current) {
            crossings.add(to, current, next, k === begin ? before : field[k - 1]!, value);
            current = next;
            low = bounds[current]!;
            high = bounds[current + 1]!;
          }
        }
        classes[to] = current;
      }
      before = field[end - 1]!;
      left -= run;
      from = 0;
    }
    const value = edgeValue(field, base, lattice.east);
    const next = classOf(value, bounds);
    if (next !== current) crossings.add(to, current, next, before, value);
    classes[to] = next;
  }
  const { first, count, node, level, at } = crossings;
  return { classes, width, first, count, node, level, at };
}

function classOf(value: number, bounds: Float64Array): number {
  if (Number.isNaN(value)) return 0;
  const top = bounds.length - 2;
  let k = 0;
  while (k < top && value >= bounds[k + 1]!) k++;
  return k;
}

/** Gathers the crossings of the rows in scan order; those of one edge by rising level. */
class Crossings {
  readonly first: Int32Array;
  count = 0;
  node = new Int32Array(1 << 14);
  level = new Uint8Array(1 << 14);
  at = new Float64Array(1 << 14);
  /** used again for every edge */
  private readonly edge: LatticeEdge;

  constructor(
    private readonly lattice: Lattice,
    private readonly levels: readonly number[],
    private readonly width: number,
  ) {
    this.first = new Int32Array(width * (lattice.sourceRow.length + 2) + 1);
    this.edge = { low: 0.5, high: 0.5, lowClass: 0, highClass: 0, length: 0.5, margin: lattice.margin };
  }

  /** The class changes between node `to − 1` and node `to`. */
  add(to: number, classBefore: number, classAfter: number, valueBefore: number, value: number): void {
    const { x } = this.lattice;
    const column = (to % this.width) - 1;
    const west = x[column - 1]!;
    const east = x[column]!;
    const rising = classBefore < classAfter;
    const { edge } = this;
    edge.low = rising ? valueBefore : value;
    edge.high = rising ? value : valueBefore;
    edge.lowClass = rising ? classBefore : classAfter;
    edge.highClass = rising ? classAfter : classBefore;
    edge.length = east - west;
    if (this.count + this.levels.length > this.node.length) this.grow();
    this.first[to - 1] = this.count;
    for (let level = edge.lowClass; level < edge.highClass; level++) {
      const distance = crossingDistance(edge, level, this.levels);
      this.node[this.count] = to - 1;
      this.level[this.count] = level;
      this.at[this.count++] = rising ? west + distance : east - distance;
    }
  }

  private grow(): void {
    const capacity = this.node.length * 2;
    const node = new Int32Array(capacity);
    const level = new Uint8Array(capacity);
    const at = new Float64Array(capacity);
    node.set(this.node);
    level.set(this.level);
    at.set(this.at);
    this.node = node;
    this.level = level;
    this.at = at;
  }
}
