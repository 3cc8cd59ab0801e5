import { type BorderEvent, borderEdge, borderStepOf, walkBorder } from './border.js';
import type { Lattice } from './lattice.js';
import {
  classify,
  crossingDistance,
  edgeValue,
  type Field,
  type LatticeEdge,
  type Nodes,
  OUTSIDE,
} from './node-classes.js';

/** The lines of all levels on one lattice: chains of vertices with the higher ground on their left (seen with north up). */
export interface Contours {
  readonly lattice: Lattice;
  readonly levels: readonly number[];
  /** vertices of all chains, one chain after the other */
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** chain i has the vertices `offsets[i]` to `offsets[i + 1] − 1` */
  readonly offsets: Float64Array;
  /** +1 anticlockwise, −1 clockwise, 0 open (from border to border) */
  readonly turning: Int8Array;
  /** chains of level i are `levelChains[i]` to `levelChains[i + 1] − 1` */
  readonly levelChains: readonly number[];
  /** anticlockwise from the south-west corner; on one edge in the order met */
  readonly border: readonly BorderEvent[];
  /** number of levels at or below the south-west corner node */
  readonly cornerClass: number;
  /** crossings of the rows of the lattice by level, from north to south, in a row from west to east */
  readonly crossings: RowCrossings;
}

/** Every crossing of a row of the lattice: which chain crosses. Grouped by level: `start[i]` to `start[i + 1] − 1`. */
export interface RowCrossings {
  readonly start: Float64Array;
  readonly row: Int32Array;
  readonly column: Int32Array;
  readonly chain: Int32Array;
  /** the field falls eastward */
  readonly falls: Uint8Array;
}

/**
 * Marching squares for all levels in one pass over the field.
 *
 * At or above a level is inside. Every node gets a class, the number of levels at or below its value, so that a value
 * equal to a level, a plateau and NaN (class 0) are no special cases; a line crosses an edge of the lattice at most once
 * for each level, strictly between its nodes and, where several levels cross, at different places in the order of the
 * levels. A saddle is joined where the mean of its four nodes is at or above the level. Lines of one level therefore
 * never touch themselves or each other, and lines of a higher level lie strictly inside those of a lower one.
 *
 * @param levels rising, at most `MOST_LEVELS`
 */
export function traceContours(field: Field, lattice: Lattice, levels: readonly number[]): Contours {
  const nodes = classify(field, lattice, levels);
  return new Tracer(field, lattice, levels, nodes).trace();
}

/** Follows the lines of every level through the classified nodes. */
class Tracer {
  private x = new Float64Array(1 << 14);
  private y = new Float64Array(1 << 14);
  private vertices = 0;
  private readonly offsets: number[] = [0];
  private readonly turning: number[] = [];
  /** chain of each crossing of a row, −1 before it is met */
  private readonly owner: Int32Array;
  /** used again for every edge */
  private readonly edge: LatticeEdge;

  constructor(
    private readonly field: Field,
    private readonly lattice: Lattice,
    private readonly levels: readonly number[],
    private readonly nodes: Nodes,
  ) {
    this.owner = new Int32Array(nodes.count).fill(-1);
    this.edge = { low: 0.5, high: 0.5, lowClass: 0, highClass: 0, length: 0.5, margin: lattice.margin };
  }

  trace(): Contours {
    const { lattice, levels, nodes, owner } = this;
    const { width, classes } = nodes;
    const { border, firstAt } = walkBorder(lattice, nodes);
    const start = new Float64Array(levels.length + 1);
    const order = sortedByLevel(nodes, start);
    const levelChains: number[] = [];
    for (let level = 0; level < levels.length; level++) {
      levelChains.push(this.turning.length);
      for (const event of border) {
        if (event.level !== level || event.rises) continue;
        const [above, below] = borderEdge(lattice, width, event.step);
        event.chain = this.turning.length;
        const [lastAbove, lastBelow] = this.follow(level, above, below);
        const step = borderStepOf(lattice, width, lastBelow, lastAbove);
        border[firstAt.get(step)! + level - classes[lastBelow]!]!.chain = event.chain;
      }
      for (let i = start[level]!; i < start[level + 1]!; i++) {
        const crossing = order[i]!;
        if (owner[crossing] !== -1) continue;
        const west = nodes.node[crossing]!;
        if (classes[west]! > level) this.follow(level, west, west + 1);
        else this.follow(level, west + 1, west);
      }
    }
    levelChains.push(this.turning.length);

    const crossings = {
      start,
      row: new Int32Array(order.length),
      column: new Int32Array(order.length),
      chain: new Int32Array(order.length),
      falls: new Uint8Array(order.length),
    };
    for (let i = 0; i < order.length; i++) {
      const west = nodes.node[order[i]!]!;
      const row = (west / width) | 0;
      crossings.row[i] = row - 1;
      crossings.column[i] = west - row * width - 1;
      crossings.chain[i] = owner[order[i]!]!;
      crossings.falls[i] = classes[west]! > classes[west + 1]! ? 1 : 0;
    }
    return {
      lattice,
      levels,
      x: this.x.subarray(0, this.vertices),
      y: this.y.subarray(0, this.vertices),
      offsets: Float64Array.from(this.offsets),
      turning: Int8Array.from(this.turning),
      levelChains,
      border,
      cornerClass: classes[lattice.sourceRow.length * width + 1]!,
      crossings,
    };
  }

  /**
   * Follows one line from the edge with the node `above` on its left and `below` on its right, to the border or round.
   * @returns the last edge
   */
  private follow(level: number, above: number, below: number): [number, number] {
    const { classes, width, first, at } = this.nodes;
    const { x: columnAt, y: rowAt } = this.lattice;
    const chain = this.turning.length;
    const firstAbove = above;
    const firstBelow = below;
    const { owner } = this;
    let { x, y, vertices: n } = this;
    let turns = 0;
    let open = false;
    for (;;) {
      if (n === x.length) {
        x = doubled(x);
        y = doubled(y);
      }
      const across = below - above;
      let ahead: number;
      if (across === 1 || across === -1) {
        const west = across === 1 ? above : below;
        const crossing = first[west]! + level - classes[below]!;
        owner[crossing] = chain;
        x[n] = at[crossing]!;
        y[n++] = rowAt[((west / width) | 0) - 1]!;
        ahead = across === 1 ? -width : width;
      } else {
        const north = across === width ? above : below;
        const row = (north / width) | 0;
        const column = north - row * width - 1;
        x[n] = columnAt[column]!;
        y[n++] = this.columnCrossing(level, above, below, row - 1, column);
        ahead = across === width ? 1 : -1;
      }
      const left = above + ahead;
      const right = below + ahead;
      const leftClass = classes[left]!;
      const rightClass = classes[right]!;
      if (leftClass === OUTSIDE || rightClass === OUTSIDE) {
        open = true;
        break;
      }
      if (leftClass > level) {
        if (rightClass > level) {
          above = right;
          turns--;
        } else {
          above = left;
          below = right;
        }
      } else if (rightClass > level && this.joined(level, above, below, left, right)) {
        above = right;
        turns--;
      } else {
        below = left;
        turns++;
      }
      if (above === firstAbove && below === firstBelow) break;
    }
    this.x = x;
    this.y = y;
    this.vertices = n;
    this.offsets.push(n);
    this.turning.push(open ? 0 : turns > 0 ? 1 : -1);
    return [above, below];
  }

  /** Position of a level between two nodes of one column. */
  private columnCrossing(level: number, above: number, below: number, row: number, column: number): number {
    const { classes } = this.nodes;
    const { y } = this.lattice;
    const { edge } = this;
    const [north, south] = [y[row]!, y[row + 1]!];
    const rising = below > above;
    edge.low = this.value(rising ? row + 1 : row, column);
    edge.high = this.value(rising ? row : row + 1, column);
    edge.lowClass = classes[below]!;
    edge.highClass = classes[above]!;
    edge.length = north - south;
    const distance = crossingDistance(edge, level, this.levels);
    return rising ? south + distance : north - distance;
  }

  /** Whether the two high corners of a saddle hold together. Added in pairs, so that a mirrored field gives the mirror. */
  private joined(level: number, above: number, below: number, left: number, right: number): boolean {
    const mean = (this.nodeValue(above) + this.nodeValue(right) + (this.nodeValue(below) + this.nodeValue(left))) / 4;
    return mean >= this.levels[level]!;
  }

  private nodeValue(node: number): number {
    const row = (node / this.nodes.width) | 0;
    return this.value(row - 1, node - row * this.nodes.width - 1);
  }

  private value(row: number, column: number): number {
    const { lattice, field } = this;
    const base = lattice.sourceRow[row]! * lattice.stride;
    if (column === 0) return edgeValue(field, base, lattice.west);
    if (column === lattice.x.length - 1) return edgeValue(field, base, lattice.east);
    const source = lattice.first + column - 1;
    return field[base + (source < lattice.period ? source : source - lattice.period)]!;
  }
}

/** The crossings of the rows grouped by level, scan order kept; `start` receives where each level begins. */
function sortedByLevel(nodes: Nodes, start: Float64Array): Int32Array {
  const { count, level } = nodes;
  for (let i = 0; i < count; i++) start[level[i]! + 1]!++;
  for (let i = 1; i < start.length; i++) start[i]! += start[i - 1]!;
  const next = start.slice();
  const order = new Int32Array(count);
  for (let i = 0; i < count; i++) order[next[level[i]!]!++] = i;
  return order;
}

function doubled(array: Float64Array): Float64Array<ArrayBuffer> {
  const larger = new Float64Array(array.length * 2);
  larger.set(array);
  return larger;
}
