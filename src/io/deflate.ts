import { promisify } from 'node:util';
import { deflate, type ZlibOptions } from 'node:zlib';
import type { Deflate } from '../write/deflate.js';

const deflateOnPool = promisify<Uint8Array, ZlibOptions, Buffer>(deflate);

/**
 * On seven fields of a real swath level 4 takes 0.6 of the time of level 6 for a file 2 % larger; room for a whole tile
 * in one piece saves its joining.
 */
const OPTIONS: ZlibOptions = { level: 4, memLevel: 9, chunkSize: 1 << 18 };

/** Compresses on Node's thread pool, so that the tiles of a raster take all cores. */
export const poolDeflate: Deflate = (bytes) => deflateOnPool(bytes, OPTIONS);
