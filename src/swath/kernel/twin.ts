import { allocator, type Engine, viewsOf } from './engine.js';
import { HEAP } from './places.js';
import { mix } from './twin-lanes.js';
import { bind } from './twin-memory.js';
import { trace, traceLocal, winds } from './twin-trace.js';

/** The hot loops in plain JavaScript: the same results as WebAssembly, bit for bit. */
export function twinEngine(): Engine {
  let views = viewsOf(new ArrayBuffer(HEAP));
  return {
    name: 'javascript',
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
      if (HEAP + bytes <= views.f64.buffer.byteLength) return;
      const larger = new Float64Array((HEAP + bytes + 7) >> 3);
      larger.set(views.f64);
      views = viewsOf(larger.buffer);
    },
    trace(count) {
      bind(views);
      trace(count);
    },
    traceLocal(count, kind) {
      bind(views);
      traceLocal(count, kind);
    },
    mix(to, a, m, b, share, count) {
      bind(views);
      mix(to, a, m, b, share, count);
    },
    winds(count) {
      bind(views);
      winds(count);
    },
  };
}
