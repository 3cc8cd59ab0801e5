import { RADIANS } from '../earth.js';

/**
 * Unit vectors [east, north] around a circle, clockwise from north, evenly spaced. They are mirror images of each other to
 * the last bit, north and south, east and west, so that a mirrored storm has the same strongest wind.
 * @param count a multiple of 4
 */
export function circleDirections(count: number): Float64Array {
  const out = new Float64Array(2 * count);
  const quarter = count / 4;
  for (let i = 0; i <= quarter; i++) {
    // sine and cosine of complementary angles are each other
    const low = Math.min(i, quarter - i);
    const angle = (low * 360 * RADIANS) / count;
    const pair = i === quarter ? [1, 0] : [Math.sin(angle), Math.cos(angle)];
    const [east, north] = low === i || i === quarter ? pair : [pair[1]!, pair[0]!];
    for (const [at, e, n] of [
      [i, east!, north!],
      [count / 2 - i, east!, -north!],
      [count / 2 + i, -east!, -north!],
      [(count - i) % count, -east!, north!],
    ] as const) {
      out[2 * at] = e;
      out[2 * at + 1] = n;
    }
  }
  return out;
}
