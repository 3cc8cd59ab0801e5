import { type BorderEvent, borderNode } from './border.js';
import type { Contours } from './marching-squares.js';

/** Polygons in units of a lattice, stored flat. Rings are open (the first vertex is not repeated). */
export interface FlatPolygons {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** ring i has the vertices `rings[i]` to `rings[i + 1] − 1` */
  readonly rings: Float64Array;
  /** polygon i has the rings `polygons[i]` to `polygons[i + 1] − 1`: its shell, anticlockwise, then its holes, clockwise */
  readonly polygons: readonly number[];
}

/** Pieces of rings before they are written out: chains by `2 · chain + (1 if reversed)`, border nodes by `−1 − step`. */
interface Rings {
  /** all pieces, ring after ring; ring i has the pieces `starts[i]` to `starts[i + 1] − 1` */
  readonly pieces: Int32Array;
  readonly starts: Int32Array;
  readonly shell: Uint8Array;
  readonly count: number;
}

/**
 * The polygons of a level: the area at or above it, or, with `upper`, the band below the next level `upper`.
 * Open chains are joined along the border. A hole belongs to the ring met first on the way west from its first crossing
 * of a row; all rings are met in one scan of the crossings, so the work is linear in the number of vertices.
 */
export function assemblePolygons(contours: Contours, level: number, upper: number | null): FlatPolygons {
  const ringOfChain = new Int32Array(contours.turning.length).fill(-1);
  const { bordering, westRing } = joinAlongBorder(contours, level, upper, ringOfChain);
  const rings = gatherRings(contours, { level, upper }, bordering, ringOfChain);
  const parents = findShells({ contours, level, upper, ringOfChain, westRing }, rings);
  return flatten(contours, rings, parents);
}

/** The rings along the border, all of them shells, and after them the closed chains. */
function gatherRings(
  { turning, levelChains }: Contours,
  of: { level: number; upper: number | null },
  bordering: readonly (readonly number[])[],
  ringOfChain: Int32Array,
): Rings {
  const chains = (level: number | null): number => (level === null ? 0 : levelChains[level + 1]! - levelChains[level]!);
  const most = bordering.length + chains(of.level) + chains(of.upper);
  const starts = new Int32Array(most + 1);
  const shell = new Uint8Array(most);
  const pieces = new Int32Array(most + bordering.reduce((sum, ring) => sum + ring.length, 0));
  let count = 0;
  let n = 0;
  for (const ring of bordering) {
    shell[count] = 1;
    for (const piece of ring) pieces[n++] = piece;
    starts[++count] = n;
  }
  for (const level of of.upper === null ? [of.level] : [of.level, of.upper]) {
    // the lines of the upper level bound a band from above: they are taken backwards
    const reversed = level === of.upper ? 1 : 0;
    for (let chain = levelChains[level]!; chain < levelChains[level + 1]!; chain++) {
      if (turning[chain] === 0) continue;
      ringOfChain[chain] = count;
      shell[count] = (turning[chain] === 1) === (reversed === 0) ? 1 : 0;
      pieces[n++] = 2 * chain + reversed;
      starts[++count] = n;
    }
  }
  return { pieces, starts, shell, count };
}

/** Rings that run along the border, and which of them holds the western border in each row. */
function joinAlongBorder(
  contours: Contours,
  level: number,
  upper: number | null,
  ringOfChain: Int32Array,
): { bordering: number[][]; westRing: Int32Array } {
  const { lattice, border, cornerClass } = contours;
  const across = lattice.x.length - 1;
  const down = lattice.y.length - 1;
  const steps = 2 * (across + down);
  const rings: number[][] = [];
  const westRing = new Int32Array(down + 1).fill(-1);
  const addNodes = (pieces: number[], from: number, count: number): void => {
    let [lastColumn, lastRow] = borderNode(lattice, from + steps - 1);
    for (let i = 0; i < count; i++) {
      const step = (from + i) % steps;
      const [column, row] = borderNode(lattice, step);
      if (column === 0) westRing[row] = rings.length;
      const corner = (column === 0 || column === across) && (row === 0 || row === down);
      const away =
        Math.abs(lattice.x[column]! - lattice.x[lastColumn]!) + Math.abs(lattice.y[row]! - lattice.y[lastRow]!);
      if (!corner && away < lattice.borderStep) continue;
      pieces.push(-1 - step);
      lastColumn = column;
      lastRow = row;
    }
  };

  const events = border.filter((event) => event.level === level || event.level === upper);
  if (events.length === 0) {
    if (cornerClass > level && (upper === null || cornerClass <= upper)) {
      const pieces: number[] = [];
      addNodes(pieces, 0, steps);
      rings.push(pieces);
    }
    return { bordering: rings, westRing };
  }
  /** the area is left here: the start of a chain, or the end of one of the upper level, which is taken backwards */
  const leaves = (event: BorderEvent): boolean => event.rises === (event.level === upper);
  const entryOf = new Map<number, number>();
  events.forEach((event, i) => {
    if (!leaves(event)) entryOf.set(event.chain, i);
  });
  const done = new Uint8Array(events.length);
  for (let start = 0; start < events.length; start++) {
    if (done[start] || !leaves(events[start]!)) continue;
    const pieces: number[] = [];
    let at = start;
    do {
      done[at] = 1;
      const event = events[at]!;
      pieces.push(2 * event.chain + (event.level === upper ? 1 : 0));
      ringOfChain[event.chain] = rings.length;
      const entry = entryOf.get(event.chain)!;
      at = (entry + 1) % events.length;
      const from = events[entry]!.step;
      let count = events[at]!.step - from;
      if (count < 0 || (count === 0 && at <= entry)) count += steps;
      addNodes(pieces, from + 1, count);
    } while (at !== start);
    rings.push(pieces);
  }
  return { bordering: rings, westRing };
}

/** For each hole the ring that is its shell, −1 for shells. */
function findShells(
  of: { contours: Contours; level: number; upper: number | null; ringOfChain: Int32Array; westRing: Int32Array },
  rings: Rings,
): Int32Array {
  const { crossings } = of.contours;
  const { start, row, column, chain, falls } = crossings;
  const { shell, count } = rings;
  const { ringOfChain, westRing } = of;
  const parents = new Int32Array(count).fill(-1);
  if (!shell.subarray(0, count).includes(0)) return parents;
  let lastRow = -1;
  let lastRing = -1;
  const meet = (i: number): void => {
    if (row[i] !== lastRow) {
      lastRow = row[i]!;
      lastRing = westRing[lastRow]!;
    }
    const ring = ringOfChain[chain[i]!]!;
    if (ring === lastRing) return;
    if (!shell[ring] && parents[ring] === -1) parents[ring] = shell[lastRing] ? lastRing : parents[lastRing]!;
    lastRing = ring;
  };
  let a = start[of.level]!;
  const endA = start[of.level + 1]!;
  let b = of.upper === null ? 0 : start[of.upper]!;
  const endB = of.upper === null ? 0 : start[of.upper + 1]!;
  while (a < endA || b < endB) {
    const order = a >= endA ? 1 : b >= endB ? -1 : row[a]! - row[b]! || column[a]! - column[b]! || (falls[a] ? 1 : -1);
    if (order < 0) meet(a++);
    else meet(b++);
  }
  return parents;
}

/** Writes the rings out, each shell followed by its holes. */
function flatten(contours: Contours, rings: Rings, parents: Int32Array): FlatPolygons {
  const { lattice, offsets } = contours;
  const { pieces, starts, shell, count } = rings;
  // holes of each shell as linked lists, in the order found
  const nextHole = new Int32Array(count).fill(-1);
  const firstHole = new Int32Array(count).fill(-1);
  for (let i = count - 1; i >= 0; i--) {
    const parent = parents[i]!;
    if (parent < 0) continue;
    nextHole[i] = firstHole[parent]!;
    firstHole[parent] = i;
  }
  let vertices = 0;
  for (let i = 0; i < starts[count]!; i++) {
    const piece = pieces[i]!;
    vertices += piece < 0 ? 1 : offsets[(piece >> 1) + 1]! - offsets[piece >> 1]!;
  }
  const x = new Float64Array(vertices);
  const y = new Float64Array(vertices);
  const ringStarts = new Float64Array(count + 1);
  const polygonStarts: number[] = [];
  let written = 0;
  let n = 0;
  const write = (ring: number): void => {
    ringStarts[written++] = n;
    for (let i = starts[ring]!; i < starts[ring + 1]!; i++) {
      const piece = pieces[i]!;
      if (piece < 0) {
        const [column, row] = borderNode(lattice, -1 - piece);
        x[n] = lattice.x[column]!;
        y[n++] = lattice.y[row]!;
        continue;
      }
      const from = offsets[piece >> 1]!;
      const to = offsets[(piece >> 1) + 1]!;
      const step = piece & 1 ? -1 : 1;
      for (let k = piece & 1 ? to - 1 : from, left = to - from; left > 0; left--, k += step, n++) {
        x[n] = contours.x[k]!;
        y[n] = contours.y[k]!;
      }
    }
  };
  for (let i = 0; i < count; i++) {
    if (!shell[i]) continue;
    polygonStarts.push(written);
    write(i);
    for (let hole = firstHole[i]!; hole >= 0; hole = nextHole[hole]!) write(hole);
  }
  ringStarts[written] = n;
  polygonStarts.push(written);
  return { x, y, rings: ringStarts, polygons: polygonStarts };
}
