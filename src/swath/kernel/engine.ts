import { HEAP } from './places.js';

/** The hot loops and the memory that they work on: WebAssembly, or its twin in plain JavaScript with the same results. */
export interface Engine {
  readonly name: 'webassembly' | 'javascript';
  /** views of the whole memory; new ones after {@link Engine.reserve} */
  readonly f64: Float64Array;
  readonly f32: Float32Array;
  readonly i32: Int32Array;
  /** makes room for so many bytes above the fixed places, before any is allocated */
  readonly reserve: (bytes: number) => void;
  /** address of so many bytes, 64-byte aligned; all are given back by {@link Engine.release} */
  readonly allocate: (bytes: number) => number;
  readonly release: () => void;
  /** peaks and hours of the first `count` points, whole groups of four: see `assembly/trace.ts` */
  readonly trace: (count: number) => void;
  /** the same for winds (1) or gusts (2) over the points' own surfaces */
  readonly traceLocal: (count: number, kind: 1 | 2) => void;
  /** numbers in single precision on the parabola through those at `a` (share 0), `m` (½) and `b` (1), whole groups of four */
  readonly mix: (to: number, a: number, m: number, b: number, share: number, count: number) => void;
  /** winds of the first `count` points at the moments in their column */
  readonly winds: (count: number) => void;
}

/** Hands out addresses of a memory from its heap on. */
export function allocator(): Pick<Engine, 'allocate' | 'release'> {
  let top = HEAP;
  return {
    allocate(bytes) {
      const at = top;
      top += (bytes + 63) & ~63;
      return at;
    },
    release() {
      top = HEAP;
    },
  };
}

export function viewsOf(buffer: ArrayBuffer): Pick<Engine, 'f64' | 'f32' | 'i32'> {
  return { f64: new Float64Array(buffer), f32: new Float32Array(buffer), i32: new Int32Array(buffer) };
}
