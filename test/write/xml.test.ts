import { inflateSync } from 'node:zlib';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { webDeflate } from '../../src/write/deflate.js';
import { xmlAscii, xmlText } from '../../src/write/xml.js';

describe('text in XML', () => {
  it.each([
    ['<img src=x onerror="alert(1)">', '&lt;img src=x onerror=&quot;alert(1)&quot;&gt;'],
    ["a & b's", 'a &amp; b&apos;s'],
    ['\u0000\u0008\u001F\uFFFE', '\uFFFD\uFFFD\uFFFD\uFFFD'],
    ['half \uD83C', 'half \uFFFD'],
    ['\uDF00 half', '\uFFFD half'],
    ['🌀 \t\n', '🌀 \t\n'],
  ])('%j is escaped', (text, xml) => expect(xmlText(text)).toBe(xml));

  it('is never markup nor forbidden', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        expect(xmlText(text)).not.toMatch(/[<>"'\u0000-\u0008\u000B\u000C\u000E-\u001F]/);
        expect(xmlAscii(text)).toMatch(/^[\x09\x0A\x0D\x20-\x7E]*$/);
      }),
    );
  });
});

it('the compressor of the browser makes a zlib stream', async () => {
  const bytes = Uint8Array.from({ length: 100_000 }, (_, i) => (i * i) % 251);
  const packed = await webDeflate(bytes);
  expect(packed.length).toBeLessThan(bytes.length);
  expect(new Uint8Array(inflateSync(packed))).toEqual(bytes);
});
