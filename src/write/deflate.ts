/**
 * Compresses bytes into a zlib stream [RFC1950]. Writers take it as a parameter, so that a browser uses its own
 * compressor and a server a faster one on its thread pool.
 */
export type Deflate = (bytes: Uint8Array) => Uint8Array | Promise<Uint8Array>;

/** The compressor that every browser has. */
export const webDeflate: Deflate = async (bytes) => {
  const stream = new Blob([bytes as Uint8Array<ArrayBuffer>]).stream().pipeThrough(new CompressionStream('deflate'));
  return new Uint8Array(await new Response(stream).arrayBuffer());
};
