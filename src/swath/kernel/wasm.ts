import type { Arithmetic, KernelArrays } from './arithmetic.js';
import { KERNEL_BASE64 } from './kernel-bytes.js';
import { MOST_CELLS_OF_TILE, THRESHOLD_SLOTS } from './tile-size.js';

interface Exports {
  readonly sample: (
    cells: number,
    pitch: number,
    quads: number,
    table: number,
    groups: number,
    lastRow: number,
    e0: number,
    e1: number,
    n0: number,
    n1: number,
    n2: number,
    maxWind: number,
    out: number,
  ) => void;
  readonly maxima: (
    first: number,
    middle: number,
    last: number,
    state: number,
    pitch: number,
    quads: number,
    moment: number,
    t0: number,
    t2: number,
    has0: number,
    has2: number,
  ) => void;
  readonly settle: (
    cells: number,
    pitch: number,
    count: number,
    frames: number,
    speeds: number,
    winds: number,
    groups: number,
    lastRow: number,
    windHarmonics: number,
    outSpeed: number,
    outEast: number,
    outNorth: number,
    outX: number,
  ) => void;
  readonly addHours: (
    first: number,
    a: number,
    b: number,
    hours: number,
    quads: number,
    threshold: number,
    stepHours: number,
    ratio: number,
    has0: number,
  ) => void;
}

const PAGE = 65_536;
/** bytes of one array of a tile */
const PITCH = MOST_CELLS_OF_TILE * 4;
/** the module's own data lies below this */
const START = 4096;
const CELLS = START;
const WINDS = CELLS + 3 * PITCH;
const STATE = WINDS + 3 * PITCH;
const HOURS = STATE + 4 * PITCH;
const PROBE = HOURS + THRESHOLD_SLOTS * PITCH;
const POINTERS = PROBE + 4 * PITCH;
const SETTLED = POINTERS + 3 * PITCH;
const HEAP = SETTLED + 4 * PITCH;

let compiled: WebAssembly.Module | null | undefined;

/** The compiled module, made once; null where WebAssembly with SIMD is missing. */
function kernelModule(): WebAssembly.Module | null {
  if (compiled !== undefined) return compiled;
  try {
    const bytes = Uint8Array.from(atob(KERNEL_BASE64), (character) => character.charCodeAt(0));
    compiled = new WebAssembly.Module(bytes);
  } catch {
    compiled = null;
  }
  return compiled;
}

/** The hot loops in WebAssembly; null where it or its SIMD is missing. */
export function wasmArithmetic(): Arithmetic | null {
  const module = kernelModule();
  if (!module) return null;
  const memory = new WebAssembly.Memory({ initial: Math.ceil(HEAP / PAGE) + 1, maximum: 65_536 });
  const { sample, maxima, addHours, settle } = new WebAssembly.Instance(module, { env: { memory } })
    .exports as unknown as Exports;
  let top = HEAP;
  let arrays = viewsOf(memory.buffer);
  const windAt = (index: number): number => WINDS + Math.max(0, index) * PITCH;
  return {
    name: 'webassembly',
    get arrays() {
      return arrays;
    },
    reserve(floats) {
      const need = HEAP + 4 * floats - memory.buffer.byteLength;
      if (need <= 0) return;
      memory.grow(Math.ceil(need / PAGE));
      arrays = viewsOf(memory.buffer);
    },
    allocate(length) {
      const bytes = (4 * length + 15) & ~15;
      if (top + bytes > memory.buffer.byteLength) throw new RangeError('the kernel’s memory was reserved too small');
      const view = new Float32Array(memory.buffer, top, length);
      top += bytes;
      return view;
    },
    release() {
      top = HEAP;
    },
    sample(quads, table, groups, lastRow, frame, to) {
      sample(
        CELLS,
        PITCH,
        quads,
        table.byteOffset,
        groups,
        lastRow,
        frame[3]!,
        frame[4]!,
        frame[5]!,
        frame[6]!,
        frame[7]!,
        frame[9]!,
        windAt(to),
      );
    },
    probe(table, groups, lastRow, frame) {
      sample(
        PROBE,
        PITCH,
        2,
        table.byteOffset,
        groups,
        lastRow,
        frame[3]!,
        frame[4]!,
        frame[5]!,
        frame[6]!,
        frame[7]!,
        frame[9]!,
        PROBE + 3 * PITCH,
      );
    },
    settle(count, groups, lastRow, windHarmonics) {
      settle(
        CELLS,
        PITCH,
        count,
        POINTERS,
        POINTERS + PITCH,
        POINTERS + 2 * PITCH,
        groups,
        lastRow,
        windHarmonics,
        SETTLED,
        SETTLED + PITCH,
        SETTLED + 2 * PITCH,
        SETTLED + 3 * PITCH,
      );
    },
    maxima(quads, first, middle, last, moment, t0, t2) {
      maxima(
        windAt(first),
        windAt(middle),
        windAt(last),
        STATE,
        PITCH,
        quads,
        moment,
        t0,
        t2,
        first >= 0 ? 1 : 0,
        last >= 0 ? 1 : 0,
      );
    },
    addHours(quads, first, middle, last, { slot, thresholdMps, stepHours, ratio }) {
      addHours(
        windAt(first),
        windAt(middle),
        windAt(last),
        HOURS + slot * PITCH,
        quads,
        thresholdMps,
        stepHours,
        ratio,
        first >= 0 ? 1 : 0,
      );
    },
  };
}

function viewsOf(buffer: ArrayBuffer): KernelArrays {
  const at = (offset: number): Float32Array => new Float32Array(buffer, offset, MOST_CELLS_OF_TILE);
  return {
    x: at(CELLS),
    y: at(CELLS + PITCH),
    z: at(CELLS + 2 * PITCH),
    winds: [at(WINDS), at(WINDS + PITCH), at(WINDS + 2 * PITCH)],
    state: [at(STATE), at(STATE + PITCH), at(STATE + 2 * PITCH), at(STATE + 3 * PITCH)],
    hours: Array.from({ length: THRESHOLD_SLOTS }, (_, i) => at(HOURS + i * PITCH)),
    probe: [at(PROBE), at(PROBE + PITCH), at(PROBE + 2 * PITCH), at(PROBE + 3 * PITCH)],
    frameAt: new Int32Array(buffer, POINTERS, MOST_CELLS_OF_TILE),
    speedAt: new Int32Array(buffer, POINTERS + PITCH, MOST_CELLS_OF_TILE),
    windAt: new Int32Array(buffer, POINTERS + 2 * PITCH, MOST_CELLS_OF_TILE),
    settled: [at(SETTLED), at(SETTLED + PITCH), at(SETTLED + 2 * PITCH), at(SETTLED + 3 * PITCH)],
  };
}
