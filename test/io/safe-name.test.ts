import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { safeName } from '../../src/io/safe-name.js';

const SAFE = /^[A-Za-z0-9_](?:[A-Za-z0-9._-]*[A-Za-z0-9_])?$/;
const DEVICE = /^(con|prn|aux|nul|com\d|lpt\d)(\..*)?$/i;

describe('the name of a folder', () => {
  it.each(['AL092021', 'demo-north', '2004086S29318', 'a_b.c'])('of %s is the id itself', (id) => {
    expect(safeName(id)).toBe(id);
  });

  it.each([
    ['../../x', /^x-[0-9a-f]{8}$/],
    ['', /^storm-[0-9a-f]{8}$/],
    ['..', /^storm-[0-9a-f]{8}$/],
    ['CON', /^storm-CON-[0-9a-f]{8}$/],
    ['lpt1.txt', /^storm-lpt1\.txt-[0-9a-f]{8}$/],
    ['.hidden', /^hidden-[0-9a-f]{8}$/],
    ['-rf', /^rf-[0-9a-f]{8}$/],
    ['a/b\\c:d', /^a-b-c-d-[0-9a-f]{8}$/],
    ['Zoë', /^Zoe-[0-9a-f]{8}$/],
    ['台風', /^storm-[0-9a-f]{8}$/],
    ['x\u0000y', /^x-y-[0-9a-f]{8}$/],
    ['x'.repeat(5000), /^x{64}-[0-9a-f]{8}$/],
    ['<img src=x onerror=alert(1)>', /^img-src-x-onerror-alert-1-[0-9a-f]{8}$/],
  ])('of %j is safe', (id, name) => expect(safeName(id)).toMatch(name));

  it('is always safe, and differs where the ids differ', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), fc.string({ unit: 'binary' }), (a, b) => {
        const name = safeName(a);
        expect(name).toMatch(SAFE);
        expect(name).not.toMatch(DEVICE);
        expect(name.length).toBeLessThanOrEqual(80);
        expect(safeName(a)).toBe(name);
        if (a !== b) expect(safeName(b)).not.toBe(name);
      }),
    );
  });
});
