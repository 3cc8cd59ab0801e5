import { allocator, type Engine, viewsOf } from './engine.js';
import { KERNEL_BASE64 } from './kernel-bytes.js';
import { HEAP } from './places.js';
import { twinEngine } from './twin.js';

const PAGE = 65_536;
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
export function wasmEngine(): Engine | null {
  const module = kernelModule();
  if (!module) return null;
  const memory = new WebAssembly.Memory({ initial: Math.ceil(HEAP / PAGE) + 1, maximum: 65_536 });
  const { trace, traceLocal, winds, mix } = new WebAssembly.Instance(module, { env: { memory } })
    .exports as unknown as Pick<Engine, 'trace' | 'traceLocal' | 'winds' | 'mix'>;
  let views = viewsOf(memory.buffer);
  return {
    name: 'webassembly',
    get f64() {
      return views.f64;
    },
    get f32() {
      return views.f32;
    },
    get i32() {
      return views.i32;
    },
    ...allocator(),
    reserve(bytes) {
      const missing = HEAP + bytes - memory.buffer.byteLength;
      if (missing <= 0) return;
      memory.grow(Math.ceil(missing / PAGE));
      views = viewsOf(memory.buffer);
    },
    trace,
    traceLocal,
    winds,
    mix,
  };
}

/** The engine to use: WebAssembly where there is any. */
export function newEngine(): Engine {
  return wasmEngine() ?? twinEngine();
}
