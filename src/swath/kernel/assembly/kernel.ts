// What the kernel exports.
export { trace, winds } from './trace';
export { mix } from './lanes';
