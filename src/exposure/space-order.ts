/** Bits of a coordinate on the curve: cells of 0.0055° of longitude by 0.0027° of latitude. */
const BITS = 16;

/**
 * Position of a cell on the Hilbert curve over 2¹⁶ × 2¹⁶ cells   [Hilbert1891]: neighbours on the curve are neighbours in
 * the plane.
 */
export function hilbertKey(column: number, row: number): number {
  let key = 0;
  let [x, y] = [column, row];
  for (let size = 1 << (BITS - 1); size > 0; size >>= 1) {
    const rx = (x & size) > 0 ? 1 : 0;
    const ry = (y & size) > 0 ? 1 : 0;
    key = key * 4 + ((3 * rx) ^ ry);
    if (ry === 0) {
      if (rx === 1) {
        x = (1 << BITS) - 1 - x;
        y = (1 << BITS) - 1 - y;
      }
      [x, y] = [y, x];
    }
  }
  return key;
}

/** Indices of places in the order of the Hilbert curve over longitude and latitude. */
export function spaceOrder(lonDeg: Float64Array, latDeg: Float64Array): Uint32Array {
  const n = lonDeg.length;
  const keys = new Uint32Array(n);
  const last = (1 << BITS) - 1;
  for (let i = 0; i < n; i++) {
    const turns = (lonDeg[i]! + 180) / 360;
    const column = Math.min(last, Math.floor((turns - Math.floor(turns)) * (1 << BITS)));
    const row = Math.min(last, Math.max(0, Math.floor(((latDeg[i]! + 90) / 180) * (1 << BITS))));
    keys[i] = hilbertKey(column, row);
  }
  return sortedBy(keys);
}

/** Indices by rising key: two passes of a counting sort over 16 bits each, which keeps the order of equals. */
function sortedBy(keys: Uint32Array): Uint32Array {
  let order = Uint32Array.from(keys, (_, i) => i);
  for (const shift of [0, 16]) {
    const starts = new Uint32Array((1 << 16) + 1);
    for (const key of keys) starts[((key >>> shift) & 0xffff) + 1]!++;
    for (let d = 1; d < starts.length; d++) starts[d]! += starts[d - 1]!;
    const next = new Uint32Array(order.length);
    for (const i of order) next[starts[(keys[i]! >>> shift) & 0xffff]!++] = i;
    order = next;
  }
  return order;
}
