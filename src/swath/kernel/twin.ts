import type { Arithmetic, KernelArrays } from './arithmetic.js';
import { rowOf, rowShare } from './table.js';
import { MOST_CELLS_OF_TILE, THRESHOLD_SLOTS } from './tile-size.js';

const f = Math.fround;
/** The hot loops in plain JavaScript: every step rounded to single precision, in the order of assembly/kernel.ts. */
export function twinArithmetic(): Arithmetic {
  const floats = (): Float32Array => new Float32Array(MOST_CELLS_OF_TILE);
  const arrays: KernelArrays = {
    x: floats(),
    y: floats(),
    z: floats(),
    winds: [floats(), floats(), floats()],
    state: [floats(), floats(), floats(), floats()],
    hours: Array.from({ length: THRESHOLD_SLOTS }, floats),
    probe: [floats(), floats(), floats(), floats()],
    frameAt: new Int32Array(MOST_CELLS_OF_TILE),
    speedAt: new Int32Array(MOST_CELLS_OF_TILE),
    windAt: new Int32Array(MOST_CELLS_OF_TILE),
    settled: [floats(), floats(), floats(), floats()],
  };
  const products = new Float32Array(24);
  let heap = new Float32Array(0);
  let top = 0;
  return {
    name: 'javascript',
    arrays,
    reserve(floats) {
      if (heap.length < floats) heap = new Float32Array(floats);
    },
    allocate(length) {
      const padded = (length + 3) & ~3;
      if (top + padded > heap.length) throw new RangeError('the kernel’s memory was reserved too small');
      const view = new Float32Array(heap.buffer, 4 * top, length);
      top += padded;
      return view;
    },
    release() {
      top = 0;
    },
    sample(quads, table, groups, lastRow, frame, to) {
      sampleInto([arrays.x, arrays.y, arrays.z, arrays.winds[to]!], quads, table, groups, lastRow, frame);
    },
    probe(table, groups, lastRow, frame) {
      sampleInto(arrays.probe, 2, table, groups, lastRow, frame);
    },
    settle,
    maxima(quads, first, middle, last, moment, t0, t2) {
      const [best, bestMoment, second, secondMoment] = arrays.state;
      const [w0, w2] = [f(t0), f(t2)];
      const divisor = f(1 / f(f(w0 * w2) * f(w0 - w2)));
      const perT0 = f(1 / w0);
      const m = f(moment);
      const both = first >= 0 && last >= 0;
      const before = arrays.winds[Math.max(0, first)]!;
      const now = arrays.winds[middle]!;
      const after = arrays.winds[Math.max(0, last)]!;
      for (let i = 0; i < quads * 4; i++) {
        const b = now[i]!;
        const a = first >= 0 ? before[i]! : -1;
        const c = last >= 0 ? after[i]! : -1;
        if (!(b > a && b >= c)) continue;
        let estimate = b;
        let at = m;
        if (both) {
          const d0 = f(a - b);
          const d2 = f(c - b);
          const bend = f(f(f(d0 * w2) - f(d2 * w0)) * divisor);
          if (bend < 0) {
            const slope = f(f(d0 - f(bend * f(w0 * w0))) * perT0);
            const vertex = Math.min(w2, Math.max(w0, f(slope / f(-2 * bend))));
            estimate = f(b + f(f(slope * vertex) + f(bend * f(vertex * vertex))));
            at = f(m + vertex);
          }
        }
        if (estimate > best[i]!) {
          second[i] = best[i]!;
          secondMoment[i] = bestMoment[i]!;
          best[i] = estimate;
          bestMoment[i] = at;
        } else if (estimate > second[i]!) {
          second[i] = estimate;
          secondMoment[i] = at;
        }
      }
    },
    addHours(quads, first, middle, last, { slot, thresholdMps, stepHours, ratio }) {
      const before = arrays.winds[Math.max(0, first)]!;
      const a = arrays.winds[middle]!;
      const b = arrays.winds[last]!;
      const hours = arrays.hours[slot]!;
      const [threshold, step, r] = [f(thresholdMps), f(stepHours), f(ratio)];
      const perRatio = first >= 0 ? f(1 / r) : 0;
      const perBoth = first >= 0 ? f(1 / f(1 + r)) : 0;
      for (let i = 0; i < quads * 4; i++) {
        const from = a[i]!;
        const to = b[i]!;
        const rise = f(to - from);
        const bend = first >= 0 ? f(f(rise - f(f(from - before[i]!) * perRatio)) * perBoth) : 0;
        const size = f(Math.abs(bend) * 0.5);
        if (f(Math.max(from, to) + size) < threshold) continue;
        let share = 1;
        if (f(Math.min(from, to) - size) < threshold) {
          const need = f(threshold - from);
          const slope = f(rise - bend);
          const inner = f(f(slope * slope) + f(4 * f(bend * need)));
          const root = f(Math.sqrt(Math.max(inner, 0)));
          const twice = f(need + need);
          const vertex = f(slope / f(-2 * bend));
          const across = vertex > 0 && vertex < 1 && inner > 0 ? clamped(f(root / Math.abs(bend))) : 0;
          if (from >= threshold)
            share = to >= threshold ? f(1 - (bend > 0 ? across : 0)) : clamped(f(twice / f(slope - root)));
          else if (to >= threshold) share = f(1 - clamped(f(twice / f(slope + root))));
          else share = bend < 0 ? across : 0;
        }
        hours[i] = f(hours[i]! + f(step * share));
      }
    },
  };

  function sampleInto(
    [x, y, z, out]: readonly [Float32Array, Float32Array, Float32Array, Float32Array],
    quads: number,
    table: Float32Array,
    groups: number,
    lastRow: number,
    frame: Float64Array,
  ): void {
    const [e0, e1] = [f(frame[3]!), f(frame[4]!)];
    const [n0, n1, n2] = [f(frame[5]!), f(frame[6]!), f(frame[7]!)];
    const maxWind = f(frame[9]!);
    const stride = groups * 4;
    for (let i = 0; i < quads * 4; i++) {
      const cx = x[i]!;
      const cy = y[i]!;
      const east = f(f(cx * e0) + f(cy * e1));
      const north = f(f(f(cx * n0) + f(cy * n1)) + f(z[i]! * n2));
      const s2 = f(f(east * east) + f(north * north));
      const row = rowOf(s2, lastRow);
      const t = f(rowShare);
      const a = row * stride;
      const b = a + stride;
      const mean = f(table[a]! + f(t * f(table[b]! - table[a]!)));
      const sine = f(table[a + 1]! + f(t * f(table[b + 1]! - table[a + 1]!)));
      const cosine = f(table[a + 2]! + f(t * f(table[b + 2]! - table[a + 2]!)));
      let value: number;
      if (groups === 1) value = f(f(mean + f(east * sine)) + f(north * cosine));
      else {
        basis(east, north, s2, stride);
        value = 0;
        for (let c = 0; c < stride; c++) {
          const column = f(table[a + c]! + f(t * f(table[b + c]! - table[a + c]!)));
          value = f(value + f(column * products[c]!));
        }
      }
      out[i] = f(f(Math.sqrt(Math.max(value, 0))) * maxWind);
    }
  }

  function settle(count: number, groups: number, lastRow: number, windHarmonics: number): void {
    const [speeds, easts, norths, places] = arrays.settled;
    const stride = groups * 4;
    const part = 1 + 2 * windHarmonics;
    const column = (at: number, step: number, t: number): number =>
      f(heap[at]! + f(t * f(heap[at + step]! - heap[at]!)));
    for (let i = 0; i < count; i++) {
      const frame = arrays.frameAt[i]! >> 2;
      const [x, y, z] = [arrays.x[i]!, arrays.y[i]!, arrays.z[i]!];
      const east = f(f(x * heap[frame]!) + f(y * heap[frame + 1]!));
      const north = f(f(f(x * heap[frame + 2]!) + f(y * heap[frame + 3]!)) + f(z * heap[frame + 4]!));
      const maxWind = heap[frame + 5]!;
      const s2 = f(f(east * east) + f(north * north));
      const row = rowOf(s2, lastRow);
      const t = f(rowShare);
      const inverse = s2 > 0 ? f(1 / f(Math.sqrt(s2))) : 0;
      const c = f(north * inverse);
      const s = f(east * inverse);
      let p = (arrays.speedAt[i]! >> 2) + row * stride;
      let value = column(p, stride, t);
      let e = east;
      let n = north;
      for (let k = 1; k < stride; k += 2) {
        value = f(value + f(e * column(p + k, stride, t)));
        if (k + 1 < stride) value = f(value + f(n * column(p + k + 1, stride, t)));
        const nextE = f(f(e * c) + f(n * s));
        n = f(f(n * c) - f(e * s));
        e = nextE;
      }
      speeds[i] = f(f(Math.sqrt(Math.max(value, 0))) * maxWind);
      p = (arrays.windAt[i]! >> 2) + row * 2 * part;
      const q = p + part;
      let u = column(p, 2 * part, t);
      let v = column(q, 2 * part, t);
      e = east;
      n = north;
      for (let k = 1; k <= windHarmonics; k++) {
        const o = 2 * k - 1;
        u = f(u + f(f(e * column(p + o, 2 * part, t)) + f(n * column(p + o + 1, 2 * part, t))));
        v = f(v + f(f(e * column(q + o, 2 * part, t)) + f(n * column(q + o + 1, 2 * part, t))));
        const nextE = f(f(e * c) + f(n * s));
        n = f(f(n * c) - f(e * s));
        e = nextE;
      }
      places[i] = s2;
      easts[i] = f(u * maxWind);
      norths[i] = f(v * maxWind);
    }
  }

  function basis(east: number, north: number, s2: number, columns: number): void {
    const inverse = s2 > 0 ? f(1 / f(Math.sqrt(s2))) : 0;
    const c = f(north * inverse);
    const s = f(east * inverse);
    let e = east;
    let n = north;
    products[0] = 1;
    products[1] = e;
    products[2] = n;
    for (let k = 3; k < columns; k += 2) {
      const nextE = f(f(e * c) + f(n * s));
      n = f(f(n * c) - f(e * s));
      e = nextE;
      products[k] = e;
      products[k + 1] = n;
    }
  }
}

/** Within 0 and 1; 0 for what is not a number. */
function clamped(value: number): number {
  return value > 0 ? Math.min(1, value) : 0;
}
