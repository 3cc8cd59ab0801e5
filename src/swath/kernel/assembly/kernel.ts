// What the kernel exports.
export { trace, winds } from './trace';
