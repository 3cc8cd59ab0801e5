import type { Lattice } from './lattice.js';
import type { Nodes } from './node-classes.js';

/** Where a line of a level meets the border of the lattice, met when walking round it anticlockwise. */
export interface BorderEvent {
  readonly level: number;
  /** the field rises through the level here: the end of an open chain; falling: the start of one */
  readonly rises: boolean;
  /** between border nodes `step` and `step + 1` */
  readonly step: number;
  /** the open chain that starts or ends here */
  chain: number;
}

/** Column and row of border node `step`, anticlockwise from the south-west corner. */
export function borderNode(lattice: Lattice, step: number): [column: number, row: number] {
  const across = lattice.x.length - 1;
  const down = lattice.y.length - 1;
  const s = step % (2 * (across + down));
  if (s < across) return [s, down];
  if (s < across + down) return [across, down - (s - across)];
  if (s < 2 * across + down) return [across - (s - across - down), 0];
  return [0, s - 2 * across - down];
}

/** Nodes before and after on the border edge `step`, as indices into the classified nodes. */
export function borderEdge(lattice: Lattice, width: number, step: number): [number, number] {
  const [column, row] = borderNode(lattice, step);
  const [nextColumn, nextRow] = borderNode(lattice, step + 1);
  return [(row + 1) * width + column + 1, (nextRow + 1) * width + nextColumn + 1];
}

/** The step of the border edge between two neighbouring nodes, the earlier one first. */
export function borderStepOf(lattice: Lattice, width: number, before: number, after: number): number {
  const across = lattice.x.length - 1;
  const down = lattice.y.length - 1;
  const row = Math.floor(before / width) - 1;
  const column = before - (row + 1) * width - 1;
  const along = after - before;
  if (along === 1) return column;
  if (along === -width) return across + (down - row);
  if (along === -1) return across + down + (across - column);
  return 2 * across + down + row;
}

/** Every place where a level crosses the border, and for each border edge the first of its crossings. */
export function walkBorder(lattice: Lattice, nodes: Nodes): { border: BorderEvent[]; firstAt: Map<number, number> } {
  const border: BorderEvent[] = [];
  const firstAt = new Map<number, number>();
  const steps = 2 * (lattice.x.length - 1 + lattice.y.length - 1);
  for (let step = 0; step < steps; step++) {
    const [before, after] = borderEdge(lattice, nodes.width, step);
    const a = nodes.classes[before]!;
    const b = nodes.classes[after]!;
    if (a === b) continue;
    firstAt.set(step, border.length);
    for (let level = a; level < b; level++) border.push({ level, rises: true, step, chain: -1 });
    for (let level = a - 1; level >= b; level--) border.push({ level, rises: false, step, chain: -1 });
  }
  return { border, firstAt };
}
