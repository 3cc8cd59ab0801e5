/** A box on a picture, in its own units, y downward. */
export interface Box {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export function boxesMeet(a: Box, b: Box): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}

/** Whether a straight line from `a` to `b` has a part inside a box (Liang & Barsky). */
export function lineMeetsBox(a: readonly [number, number], b: readonly [number, number], box: Box): boolean {
  const [dx, dy] = [b[0] - a[0], b[1] - a[1]];
  let [from, to] = [0, 1];
  const sides: readonly (readonly [number, number])[] = [
    [-dx, a[0] - box.x],
    [dx, box.x + box.width - a[0]],
    [-dy, a[1] - box.y],
    [dy, box.y + box.height - a[1]],
  ];
  for (const [p, q] of sides) {
    if (p === 0) {
      if (q < 0) return false;
      continue;
    }
    const t = q / p;
    if (p < 0) from = Math.max(from, t);
    else to = Math.min(to, t);
    if (from > to) return false;
  }
  return true;
}

/** A label that wants a place beside a point. */
export interface LabelWish {
  readonly point: readonly [number, number];
  readonly width: number;
  readonly height: number;
  /** distance kept from the point */
  readonly gap: number;
  /** placed even where only a crossing of lines is left, never on another box */
  readonly needed?: boolean;
}

/** Directions tried around a point, best first: right, left, above right, … as [x, y] of the label's nearest side. */
const DIRECTIONS: readonly (readonly [number, number])[] = [
  [1, 0],
  [-1, 0],
  [0.75, -0.75],
  [0.75, 0.75],
  [-0.75, -0.75],
  [-0.75, 0.75],
  [0, -1],
  [0, 1],
];

/**
 * Places for labels, one after the other in the order given: beside the point, inside the frame, on no box taken before
 * and, where it can be, on no line. The same wishes give the same places. A label without a place is null.
 */
export function placeLabels(
  wishes: readonly LabelWish[],
  around: {
    readonly frame: Box;
    readonly taken: readonly Box[];
    readonly lines: readonly (readonly (readonly [number, number])[])[];
  },
): (Box | null)[] {
  const taken = [...around.taken];
  return wishes.map((wish) => {
    const free = candidates(wish).filter(
      (box) => isInside(box, around.frame) && !taken.some((other) => boxesMeet(box, other)),
    );
    const crossings = free.map((box) => crossingsOf(box, around.lines));
    const least = Math.min(...crossings);
    if (free.length === 0 || (least > 0 && !wish.needed)) return null;
    const best = free[crossings.indexOf(least)]!;
    taken.push(best);
    return best;
  });
}

function candidates({ point, width, height, gap, needed }: LabelWish): Box[] {
  const boxes: Box[] = [];
  for (const reach of needed ? [1, 2.2, 4, 7] : [1, 1.9]) {
    for (const [dx, dy] of DIRECTIONS) {
      const x = point[0] + dx * gap * reach - (dx > 0 ? 0 : dx < 0 ? width : width / 2);
      const y = point[1] + dy * gap * reach - (dy > 0 ? 0 : dy < 0 ? height : height / 2);
      boxes.push({ x, y, width, height });
    }
  }
  return boxes;
}

function isInside(box: Box, frame: Box): boolean {
  return (
    box.x >= frame.x &&
    box.y >= frame.y &&
    box.x + box.width <= frame.x + frame.width &&
    box.y + box.height <= frame.y + frame.height
  );
}

function crossingsOf(box: Box, lines: readonly (readonly (readonly [number, number])[])[]): number {
  let count = 0;
  for (const line of lines)
    for (let i = 1; i < line.length; i++) if (lineMeetsBox(line[i - 1]!, line[i]!, box)) count++;
  return count;
}
