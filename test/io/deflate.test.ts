import { inflateSync } from 'node:zlib';
import { expect, it } from 'vitest';
import { poolDeflate } from '../../src/io/deflate.js';

it('the compressor of the thread pool makes a zlib stream', async () => {
  const bytes = Uint8Array.from({ length: 300_000 }, (_, i) => (i * i) % 251);
  const packed = await poolDeflate(bytes);
  expect(packed.length).toBeLessThan(bytes.length);
  expect(new Uint8Array(inflateSync(packed))).toEqual(bytes);
});
