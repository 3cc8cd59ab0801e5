/** Rectangle of a feature: west, south, east, north. */
export type Box = readonly [west: number, south: number, east: number, north: number];

/** Children of one node. */
export const NODE_SIZE = 16;
const NODE_BYTES = 40;
/** Cells along one edge of the Hilbert curve. */
const HILBERT_CELLS = 2 ** 16;

/** The box around boxes; empty (∞ … −∞) for none. */
export function boxAround(boxes: Iterable<Box>): Box {
  let [west, south, east, north] = [
    Number.POSITIVE_INFINITY,
    Number.POSITIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
  ];
  for (const box of boxes) {
    west = Math.min(west, box[0]);
    south = Math.min(south, box[1]);
    east = Math.max(east, box[2]);
    north = Math.max(north, box[3]);
  }
  return [west, south, east, north];
}

/**
 * The order in which neighbours stand together: by the place of each box's centre along a Hilbert curve
 * [KamelFaloutsos1993]. As many features as one node holds keep their order.
 */
export function hilbertOrder(boxes: readonly Box[]): number[] {
  const order = boxes.map((_, index) => index);
  if (boxes.length <= NODE_SIZE) return order;
  const extent = boxAround(boxes);
  const cell = (from: number, to: number, axis: 0 | 1): number => {
    const span = extent[axis + 2]! - extent[axis]!;
    return span > 0
      ? Math.min(HILBERT_CELLS - 1, Math.floor((((from + to) / 2 - extent[axis]!) / span) * HILBERT_CELLS))
      : 0;
  };
  const keys = boxes.map((box) => hilbertDistance(cell(box[0], box[2], 0), cell(box[1], box[3], 1)));
  return order.sort((a, b) => keys[a]! - keys[b]! || a - b);
}

/** Steps along the Hilbert curve to a cell. */
export function hilbertDistance(column: number, row: number): number {
  let [x, y] = [column, row];
  let distance = 0;
  for (let side = HILBERT_CELLS / 2; side >= 1; side /= 2) {
    const right = (x & side) > 0 ? 1 : 0;
    const upper = (y & side) > 0 ? 1 : 0;
    distance += side * side * ((3 * right) ^ upper);
    if (upper === 0) {
      if (right === 1) [x, y] = [HILBERT_CELLS - 1 - x, HILBERT_CELLS - 1 - y];
      [x, y] = [y, x];
    }
  }
  return distance;
}

/**
 * A packed R-tree as FlatGeobuf stores it [Harrtell2020]: nodes of 40 bytes (box, then the first child's index or, in a
 * leaf, the feature's byte offset), the root first, the leaves last.
 */
export function packedTree(boxes: readonly Box[], offsets: readonly number[]): Uint8Array {
  const sizes = [boxes.length];
  do sizes.push(Math.ceil(sizes.at(-1)! / NODE_SIZE));
  while (sizes.at(-1) !== 1);
  const total = sizes.reduce((sum, size) => sum + size, 0);
  const out = new Uint8Array(total * NODE_BYTES);
  const view = new DataView(out.buffer);
  const put = (node: number, box: Box, offset: number): void => {
    box.forEach((edge, i) => {
      view.setFloat64(node * NODE_BYTES + 8 * i, edge, true);
    });
    view.setBigUint64(node * NODE_BYTES + 32, BigInt(offset), true);
  };
  let start = total - boxes.length;
  let level: readonly Box[] = boxes;
  boxes.forEach((box, index) => {
    put(start + index, box, offsets[index]!);
  });
  for (const size of sizes.slice(1)) {
    const parents: Box[] = [];
    const firstParent = start - size;
    for (let parent = 0; parent < size; parent++) {
      const box = boxAround(level.slice(parent * NODE_SIZE, (parent + 1) * NODE_SIZE));
      parents.push(box);
      put(firstParent + parent, box, start + parent * NODE_SIZE);
    }
    level = parents;
    start = firstParent;
  }
  return out;
}
