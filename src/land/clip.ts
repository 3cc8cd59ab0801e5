import type { LonLatBox } from './land-grid.js';

/** Longest edge that is carried into a projection as one straight piece, degrees. */
const LONGEST_DEG = 0.25;

/**
 * A ring cut to a box of longitudes and latitudes (Sutherland & Hodgman: one side after the other; parts that fall
 * outside run along the box, which leaves areas inside it as they are). `shift` is added to the longitudes first.
 * @returns lon, lat, … closed; empty where the ring and the box have nothing in common
 */
export function clipRing(ring: Float64Array, box: LonLatBox, shift: number): number[] {
  let points: number[] = [];
  for (let i = 0; i + 3 < ring.length; i += 2) points.push(ring[i]! + shift, ring[i + 1]!);
  points = half(points, 0, box.west, 1);
  points = half(points, 0, box.east, -1);
  points = half(points, 1, box.south, 1);
  points = half(points, 1, box.north, -1);
  if (points.length > 0) points.push(points[0]!, points[1]!);
  return points;
}

/** Keeps what lies on one side of a line: coordinate `axis` × `sense` ≥ `limit` × `sense`. */
function half(points: readonly number[], axis: 0 | 1, limit: number, sense: 1 | -1): number[] {
  const out: number[] = [];
  const n = points.length;
  if (n === 0) return out;
  let [px, py] = [points[n - 2]!, points[n - 1]!];
  let before = sense * ((axis === 0 ? px : py) - limit);
  for (let i = 0; i < n; i += 2) {
    const x = points[i]!;
    const y = points[i + 1]!;
    const now = sense * ((axis === 0 ? x : y) - limit);
    if (before >= 0 !== now >= 0) {
      const t = before / (before - now);
      if (axis === 0) out.push(limit, py + t * (y - py));
      else out.push(px + t * (x - px), limit);
    }
    if (now >= 0) out.push(x, y);
    [px, py, before] = [x, y, now];
  }
  return out;
}

/** The same ring with positions put between, so that no edge is longer than a quarter of a degree in either direction. */
export function densified(ring: readonly number[], longestDeg = LONGEST_DEG): number[] {
  const out: number[] = [];
  for (let i = 0; i + 3 < ring.length; i += 2) {
    const [x, y] = [ring[i]!, ring[i + 1]!];
    const [dx, dy] = [ring[i + 2]! - x, ring[i + 3]! - y];
    const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(dx), Math.abs(dy)) / longestDeg));
    for (let k = 0; k < pieces; k++) out.push(x + (dx * k) / pieces, y + (dy * k) / pieces);
  }
  if (ring.length > 0) out.push(ring[ring.length - 2]!, ring[ring.length - 1]!);
  return out;
}
