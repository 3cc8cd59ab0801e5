import { promisify } from 'node:util';
import { deflate } from 'node:zlib';
import type { Deflate } from '../write/deflate.js';

const deflateOnPool = promisify<Uint8Array, { level: number }, Buffer>(deflate);

/** Compresses on Node's thread pool, so that the tiles of a raster take all cores. */
export const poolDeflate: Deflate = (bytes) => deflateOnPool(bytes, { level: 6 });
