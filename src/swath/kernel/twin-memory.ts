/**
 * How the shared code of `assembly/trace.ts` reads and writes memory in plain JavaScript. Addresses are bytes. The memory is
 * bound before each call: there is one thread, and a call does not wait.
 */
let f64: Float64Array = new Float64Array(0);
let f32: Float32Array = new Float32Array(0);
let i32: Int32Array = new Int32Array(0);

export function bind(views: { f64: Float64Array; f32: Float32Array; i32: Int32Array }): void {
  ({ f64, f32, i32 } = views);
}

export function f64At(at: number): number {
  return f64[at >> 3]!;
}

export function setF64(at: number, value: number): void {
  f64[at >> 3] = value;
}

export function f32At(at: number): number {
  return f32[at >> 2]!;
}

export function setF32(at: number, value: number): void {
  f32[at >> 2] = value;
}

export function i32At(at: number): number {
  return i32[at >> 2]!;
}

const single = new Float32Array(1);
const word = new Int32Array(single.buffer);

/** The bits of a number in single precision. */
export function bitsOf(value: number): number {
  single[0] = value;
  return word[0]!;
}

/** Towards zero. */
export function whole(value: number): number {
  return Math.trunc(value);
}

export function root(value: number): number {
  return Math.sqrt(value);
}

/** Zero bits before the first one. */
export function zeros(value: number): number {
  return Math.clz32(value);
}
