import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { boxesMeet, lineMeetsBox, placeLabels } from '../../src/picture/labels.js';
import { cutText, textWidth, wrapText } from '../../src/picture/text.js';

const FRAME = { x: 0, y: 0, width: 600, height: 400 };

describe('labels', () => {
  it('never meet each other or leave the frame, and are the same each time', () => {
    const wish = fc.record({
      point: fc.tuple(fc.double({ min: 0, max: 600, noNaN: true }), fc.double({ min: 0, max: 400, noNaN: true })),
      width: fc.integer({ min: 10, max: 160 }),
      height: fc.integer({ min: 10, max: 40 }),
      gap: fc.integer({ min: 1, max: 16 }),
      needed: fc.boolean(),
    });
    fc.assert(
      fc.property(fc.array(wish, { maxLength: 25 }), (wishes) => {
        const around = {
          frame: FRAME,
          taken: [{ x: 500, y: 340, width: 100, height: 60 }],
          lines: [wishes.map((one) => one.point)],
        };
        const places = placeLabels(wishes, around);
        const boxes = [...around.taken, ...places.filter((box) => box !== null)];
        boxes.forEach((box, i) => {
          expect(box.x >= 0 && box.y >= 0 && box.x + box.width <= 600 && box.y + box.height <= 400).toBe(true);
          for (const other of boxes.slice(i + 1)) expect(boxesMeet(box, other)).toBe(false);
        });
        expect(placeLabels(wishes, around)).toEqual(places);
      }),
      { numRuns: 150 },
    );
  });

  it('keep off lines where they can', () => {
    const line = [
      [0, 200],
      [600, 200],
    ] as const;
    const [place] = placeLabels([{ point: [300, 200], width: 60, height: 20, gap: 8 }], {
      frame: FRAME,
      taken: [],
      lines: [line],
    });
    expect(place).not.toBeNull();
    expect(lineMeetsBox(line[0], line[1], place!)).toBe(false);
  });

  // identity: a line through the middle meets the box, one beside it does not
  it('know lines from boxes', () => {
    const box = { x: 10, y: 10, width: 10, height: 10 };
    expect(lineMeetsBox([0, 15], [40, 15], box)).toBe(true);
    expect(lineMeetsBox([0, 25], [40, 25], box)).toBe(false);
    expect(lineMeetsBox([0, 0], [9, 9], box)).toBe(false);
    expect(lineMeetsBox([12, 12], [13, 13], box)).toBe(true);
  });
});

describe('text', () => {
  it('is broken into lines that fit, with no word lost', () => {
    const words = 'one storm with a long name and then some more words of it';
    const lines = wrapText(words, { size: 14, width: 120 });
    for (const line of lines) expect(textWidth(line, { size: 14 })).toBeLessThanOrEqual(120);
    expect(lines.join(' ')).toBe(words);
  });

  it('is cut with an ellipsis', () => {
    const cut = cutText('Supercalifragilistic', { size: 14, width: 60 });
    expect(cut.endsWith('…')).toBe(true);
    expect(textWidth(cut, { size: 14 })).toBeLessThanOrEqual(60);
  });
});
