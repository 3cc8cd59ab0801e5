// What the kernel exports.
export { trace, traceLocal, winds } from './trace';
export { mix } from './lanes';
