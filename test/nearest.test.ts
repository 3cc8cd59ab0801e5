import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { didYouMean, editDistance, nearest } from '../src/nearest.js';

describe('the edit distance', () => {
  // identity: counted by hand
  it.each([
    ['', '', 0],
    ['', 'abc', 3],
    ['kitten', 'sitting', 3],
    ['levels', 'levles', 1],
    ['abc', 'abc', 0],
    ['flaw', 'lawn', 2],
  ])('%j to %j takes %d', (a, b, edits) => expect(editDistance(a, b)).toBe(edits));

  it('is a distance: symmetric, zero for equal words alone, no more than the longer word', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 12 }), fc.string({ maxLength: 12 }), (a, b) => {
        const edits = editDistance(a, b);
        expect(edits).toBe(editDistance(b, a));
        expect(edits === 0).toBe(a === b);
        expect(edits).toBeLessThanOrEqual(Math.max(a.length, b.length));
        expect(editDistance(a, b, 3)).toBe(Math.min(edits, 4));
      }),
    );
  });
});

describe('the nearest word', () => {
  it.each([
    ['levles', 'levels'],
    ['LEVELS', 'levels'],
    ['strom', 'storm'],
    ['crs', 'crs'],
    ['xyz', undefined],
    ['l', undefined],
  ])('to %s is %s', (word, found) => expect(nearest(word, ['levels', 'storm', 'crs'])).toBe(found));

  it('stands in a message, or nothing does', () => {
    expect(didYouMean('strom', ['storm'])).toBe(' (did you mean storm?)');
    expect(didYouMean('wind', ['storm'])).toBe('');
  });
});
