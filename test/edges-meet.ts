/** How two straight edges between whole positions meet, exactly. */

export interface Edge {
  readonly ax: number;
  readonly ay: number;
  readonly bx: number;
  readonly by: number;
  readonly ring: number;
  readonly index: number;
}

/** +1 when c lies left of the line from a to b, −1 right, 0 on it. */
export function orientation(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  const left = (bx - ax) * (cy - ay);
  const right = (by - ay) * (cx - ax);
  const det = left - right;
  if (Math.abs(det) > 1e-14 * (Math.abs(left) + Math.abs(right))) return Math.sign(det);
  const exact = BigInt(bx - ax) * BigInt(cy - ay) - BigInt(by - ay) * BigInt(cx - ax);
  return exact > 0n ? 1 : exact < 0n ? -1 : 0;
}

/** `touch`: one common point that is the end of one of them. */
export function meet(p: Edge, q: Edge): 'apart' | 'touch' | 'cross' | 'overlap' {
  if (Math.max(p.ax, p.bx) < Math.min(q.ax, q.bx) || Math.max(q.ax, q.bx) < Math.min(p.ax, p.bx)) return 'apart';
  if (Math.max(p.ay, p.by) < Math.min(q.ay, q.by) || Math.max(q.ay, q.by) < Math.min(p.ay, p.by)) return 'apart';
  const o1 = orientation(p.ax, p.ay, p.bx, p.by, q.ax, q.ay);
  const o2 = orientation(p.ax, p.ay, p.bx, p.by, q.bx, q.by);
  const o3 = orientation(q.ax, q.ay, q.bx, q.by, p.ax, p.ay);
  const o4 = orientation(q.ax, q.ay, q.bx, q.by, p.bx, p.by);
  if (o1 === 0 && o2 === 0) {
    // on one line: more than one common point?
    const along = Math.abs(p.bx - p.ax) >= Math.abs(p.by - p.ay);
    const [p1, p2, q1, q2] = along ? [p.ax, p.bx, q.ax, q.bx] : [p.ay, p.by, q.ay, q.by];
    const common = Math.min(Math.max(p1, p2), Math.max(q1, q2)) - Math.max(Math.min(p1, p2), Math.min(q1, q2));
    return common > 0 ? 'overlap' : common === 0 ? 'touch' : 'apart';
  }
  if (o1 * o2 > 0 || o3 * o4 > 0) return 'apart';
  return o1 * o2 < 0 && o3 * o4 < 0 ? 'cross' : 'touch';
}
