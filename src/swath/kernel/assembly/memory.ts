// How the shared code of `trace.ts` reads and writes memory, in AssemblyScript. `../twin-memory.ts` does the same in plain
// JavaScript. Addresses are bytes.

// @ts-ignore: decorator
@inline
export function f64At(at: i32): f64 {
  return load<f64>(<usize>at);
}

// @ts-ignore: decorator
@inline
export function setF64(at: i32, value: f64): void {
  store<f64>(<usize>at, value);
}

// @ts-ignore: decorator
@inline
export function f32At(at: i32): f64 {
  return <f64>load<f32>(<usize>at);
}

// @ts-ignore: decorator
@inline
export function setF32(at: i32, value: f64): void {
  store<f32>(<usize>at, <f32>value);
}

// @ts-ignore: decorator
@inline
export function i32At(at: i32): i32 {
  return load<i32>(<usize>at);
}

/** The bits of a number in single precision. */
// @ts-ignore: decorator
@inline
export function bitsOf(value: f64): i32 {
  return reinterpret<i32>(<f32>value);
}

/** Towards zero. */
// @ts-ignore: decorator
@inline
export function whole(value: f64): i32 {
  return <i32>value;
}

// @ts-ignore: decorator
@inline
export function root(value: f64): f64 {
  return sqrt<f64>(value);
}

/** Zero bits before the first one. */
// @ts-ignore: decorator
@inline
export function zeros(value: i32): i32 {
  return clz<i32>(value);
}
