import type { Shore } from './shore.js';

/** A tree of boxes in space over the arcs of a shore. Points and chords are on the unit sphere. */
export interface ShoreTree {
  /** the arc nearest to a point; −1 when the squared chord to every arc exceeds `within` */
  readonly nearest: (x: number, y: number, z: number, within: number) => number;
  /** squared chord from a point to an arc */
  readonly chordTo: (arc: number, x: number, y: number, z: number) => number;
}

/** Arcs in a leaf, children of a node. Neighbours along the shore share a leaf. */
const LEAF = 8;
const FAN = 8;

export function shoreTree(shore: Shore): ShoreTree {
  const { ax, ay, az, bx, by, bz } = shore;
  const count = ax.length;
  const leaves = Math.ceil(count / LEAF);
  const order = alongCurve(shore, leaves);
  // levels[0] are the leaves in the order of the curve; each level above holds boxes around FAN of the one below
  const levels: Float64Array[] = [leafBoxes(shore, order)];
  while (levels[levels.length - 1]!.length > 6 * FAN) levels.push(boxesAround(levels[levels.length - 1]!));
  const { length: height } = levels;
  const stackNode = new Int32Array(height * FAN + FAN);
  const stackLevel = new Int32Array(height * FAN + FAN);
  const stackGap = new Float64Array(height * FAN + FAN);
  const [nx, ny, nz] = normals(shore);

  function nearest(x: number, y: number, z: number, within: number): number {
    let best = within;
    let found = -1;
    let top = 0;
    const push = (level: number, from: number, to: number): void => {
      const boxes = levels[level]!;
      const base = top;
      for (let node = from; node < to; node++) {
        const gap = gapSquared(boxes, node, x, y, z);
        if (gap > best) continue;
        // nearest on top of the stack
        let at = top++;
        while (at > base && stackGap[at - 1]! < gap) {
          stackGap[at] = stackGap[at - 1]!;
          stackNode[at] = stackNode[at - 1]!;
          stackLevel[at] = stackLevel[at - 1]!;
          at--;
        }
        stackGap[at] = gap;
        stackNode[at] = node;
        stackLevel[at] = level;
      }
    };
    push(height - 1, 0, levels[height - 1]!.length / 6);
    while (top > 0) {
      top--;
      if (stackGap[top]! > best) continue;
      const node = stackNode[top]!;
      const level = stackLevel[top]!;
      if (level > 0) {
        push(level - 1, node * FAN, Math.min((node + 1) * FAN, levels[level - 1]!.length / 6));
        continue;
      }
      const first = order[node]! * LEAF;
      const last = Math.min(first + LEAF, count);
      for (let i = first; i < last; i++) {
        const chord2 = chordTo(i, x, y, z);
        if (chord2 <= best) {
          best = chord2;
          found = i;
        }
      }
    }
    return found;
  }

  /** squared chord to arc i: to the foot on its great circle where that lies within the arc, else to the nearer end */
  function chordTo(i: number, x: number, y: number, z: number): number {
    const [ux, uy, uz] = [nx[i]!, ny[i]!, nz[i]!];
    const cx = y * uz - z * uy;
    const cy = z * ux - x * uz;
    const cz = x * uy - y * ux;
    const pastA = cx * ax[i]! + cy * ay[i]! + cz * az[i]!;
    const pastB = cx * bx[i]! + cy * by[i]! + cz * bz[i]!;
    if (pastA >= 0 && pastB <= 0) {
      const sine = x * ux + y * uy + z * uz;
      const s2 = sine * sine;
      if (s2 < 0.5) return (2 * s2) / (1 + Math.sqrt(1 - s2));
    }
    const toA = (x - ax[i]!) ** 2 + (y - ay[i]!) ** 2 + (z - az[i]!) ** 2;
    const toB = (x - bx[i]!) ** 2 + (y - by[i]!) ** 2 + (z - bz[i]!) ** 2;
    return Math.min(toA, toB);
  }

  return { nearest, chordTo };
}

/** Unit normals of the arcs' planes. */
function normals({ ax, ay, az, bx, by, bz }: Shore): [Float64Array, Float64Array, Float64Array] {
  const n = ax.length;
  const [x, y, z] = [new Float64Array(n), new Float64Array(n), new Float64Array(n)];
  for (let i = 0; i < n; i++) {
    // a × (b − a): no cancellation for near ends
    const [dx, dy, dz] = [bx[i]! - ax[i]!, by[i]! - ay[i]!, bz[i]! - az[i]!];
    const cx = ay[i]! * dz - az[i]! * dy;
    const cy = az[i]! * dx - ax[i]! * dz;
    const cz = ax[i]! * dy - ay[i]! * dx;
    const size = Math.hypot(cx, cy, cz) || 1;
    x[i] = cx / size;
    y[i] = cy / size;
    z[i] = cz / size;
  }
  return [x, y, z];
}

function gapSquared(boxes: Float64Array, node: number, x: number, y: number, z: number): number {
  const at = 6 * node;
  const dx = Math.max(boxes[at]! - x, 0, x - boxes[at + 3]!);
  const dy = Math.max(boxes[at + 1]! - y, 0, y - boxes[at + 4]!);
  const dz = Math.max(boxes[at + 2]! - z, 0, z - boxes[at + 5]!);
  return dx * dx + dy * dy + dz * dz;
}

function leafBoxes({ ax, ay, az, bx, by, bz }: Shore, order: Uint32Array): Float64Array {
  const boxes = new Float64Array(6 * order.length);
  for (let node = 0; node < order.length; node++) {
    const at = 6 * node;
    boxes.fill(Number.POSITIVE_INFINITY, at, at + 3);
    boxes.fill(Number.NEGATIVE_INFINITY, at + 3, at + 6);
    const first = order[node]! * LEAF;
    const last = Math.min(first + LEAF, ax.length);
    let bulge = 0;
    for (let i = first; i < last; i++) {
      const ends = [ax[i]!, ay[i]!, az[i]!, bx[i]!, by[i]!, bz[i]!];
      for (let c = 0; c < 6; c++) {
        boxes[at + (c % 3)] = Math.min(boxes[at + (c % 3)]!, ends[c]!);
        boxes[at + 3 + (c % 3)] = Math.max(boxes[at + 3 + (c % 3)]!, ends[c]!);
      }
      const chord2 = (bx[i]! - ax[i]!) ** 2 + (by[i]! - ay[i]!) ** 2 + (bz[i]! - az[i]!) ** 2;
      bulge = Math.max(bulge, chord2 / 7);
    }
    // an arc rises above its chord by c²/8
    for (let c = 0; c < 3; c++) {
      boxes[at + c]! -= bulge;
      boxes[at + 3 + c]! += bulge;
    }
  }
  return boxes;
}

function boxesAround(below: Float64Array): Float64Array {
  const count = below.length / 6;
  const boxes = new Float64Array(6 * Math.ceil(count / FAN));
  for (let node = 0; node < boxes.length / 6; node++) {
    const at = 6 * node;
    for (let c = 0; c < 3; c++) {
      let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
      for (let child = node * FAN; child < Math.min(count, (node + 1) * FAN); child++) {
        low = Math.min(low, below[6 * child + c]!);
        high = Math.max(high, below[6 * child + 3 + c]!);
      }
      boxes[at + c] = low;
      boxes[at + 3 + c] = high;
    }
  }
  return boxes;
}

/** Leaves in the order of a Morton curve through space (10 bits an axis), so that neighbours share a node. */
function alongCurve({ ax, ay, az }: Shore, leaves: number): Uint32Array {
  const keys = new Float64Array(leaves);
  for (let leaf = 0; leaf < leaves; leaf++) {
    const i = Math.min(ax.length - 1, leaf * LEAF + LEAF / 2);
    const key = spread(ax[i]!) * 4 + spread(ay[i]!) * 2 + spread(az[i]!);
    keys[leaf] = key * 2 ** 22 + leaf;
  }
  keys.sort();
  return Uint32Array.from(keys, (key) => key % 2 ** 22);
}

/** The ten bits of a coordinate in −1 … 1, three places apart. */
function spread(coordinate: number): number {
  const cell = Math.min(1023, Math.floor((coordinate + 1) * 512));
  let out = 0;
  for (let bit = 0; bit < 10; bit++) out += ((cell >> bit) & 1) * 2 ** (3 * bit);
  return out;
}
