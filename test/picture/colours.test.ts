import { describe, expect, it } from 'vitest';
import {
  contrast,
  hexOf,
  inkOn,
  LEAST_STEP,
  levelColour,
  levelColours,
  lightness,
  luminance,
  PAPER,
  type Rgb,
  rgbOf,
  scaleColour,
  windColour,
} from '../../src/picture/colours.js';
import { DARK, LIGHT, strengthColour } from '../../src/picture/page/palette.js';
import { PAGE_STYLE } from '../../src/picture/page/style.js';
import { knots } from '../../src/units.js';

const LEVELS = [34, 50, 64, 83, 96, 113, 137].map(knots);

describe('scale', () => {
  // independent: d3-scale-chromatic 3.1.1, interpolateMagma at entries of its table that are no stop here
  it.each([
    [3, '#010108'],
    [52, '#3d0f71'],
    [100, '#892881'],
    [133, '#bf3a77'],
    [201, '#fd9a6a'],
    [250, '#fcf4b6'],
  ])('is magma at entry %i', (entry, hex) => {
    const [ours, theirs] = [scaleColour(entry / 256), rgbOf(hex)];
    ours.forEach((part, i) => {
      expect(Math.abs(part - theirs[i]!)).toBeLessThan(3.5);
    });
  });

  it('rises in lightness, and evenly', () => {
    const steps = Array.from(
      { length: 64 },
      (_, i) => lightness(scaleColour((i + 1) / 64)) - lightness(scaleColour(i / 64)),
    );
    expect(Math.min(...steps)).toBeGreaterThan(0.5);
    expect(Math.max(...steps)).toBeLessThan(2.6);
  });
});

describe('contrast', () => {
  // identity: black on white is 21, a colour on itself 1
  it('runs from 1 to 21', () => {
    expect(contrast([0, 0, 0], [255, 255, 255])).toBeCloseTo(21, 10);
    expect(contrast([12, 90, 200], [12, 90, 200])).toBe(1);
  });

  // published: #767676 is the lightest grey with 4.5 on white, by the examples of the WCAG working group (from memory)
  it('gives 4.54 for #767676 on white', () => {
    expect(contrast(rgbOf('#767676'), rgbOf('#ffffff'))).toBeCloseTo(4.54, 2);
  });

  // identity: CIE L* of middle grey, Y = 0.1842 → 50
  it('knows lightness', () => {
    expect(lightness([255, 255, 255])).toBeCloseTo(100, 6);
    expect(lightness([119, 119, 119])).toBeCloseTo(50.03, 1);
    expect(luminance([0, 0, 0])).toBe(0);
  });

  it('is enough for every text on paper and in the legend', () => {
    for (const ink of [PAPER.ink, PAPER.quiet]) expect(contrast(rgbOf(ink), rgbOf(PAPER.sheet))).toBeGreaterThan(4.5);
    for (const colour of levelColours(LEVELS))
      expect(contrast(rgbOf(inkOn(rgbOf(colour))), rgbOf(colour))).toBeGreaterThan(4.5);
    for (const line of PAPER.lines) expect(contrast(rgbOf(line), rgbOf(PAPER.sheet))).toBeGreaterThan(3);
  });

  it('is enough on the page, light and dark', () => {
    for (const palette of [LIGHT, DARK]) {
      for (const ground of [palette.sea, palette.land])
        expect(contrast(rgbOf(palette.ink), rgbOf(ground))).toBeGreaterThan(7);
      expect(contrast(rgbOf(palette.quiet), rgbOf(palette.halo))).toBeGreaterThan(4.5);
    }
  });
});

describe('style of the page', () => {
  it.each(['light', 'dark'])('has enough contrast when %s', (name) => {
    const [light, dark] = [...PAGE_STYLE.matchAll(/:root[^{]*\{([^}]*)\}/g)].map(([, body]) =>
      Object.fromEntries([...body!.matchAll(/--([\w-]+):(#\w+)/g)].map(([, key, value]) => [key!, value!])),
    );
    const colour = (key: string): Rgb => {
      const hex = (name === 'light' ? light : dark)![key]!.slice(1);
      return rgbOf(hex.length === 3 ? [...hex].map((digit) => digit + digit).join('') : hex);
    };
    for (const ink of ['ink', 'quiet', 'accent', 'error'])
      for (const ground of ['ground', 'sheet'])
        expect(contrast(colour(ink), colour(ground)), `${ink} on ${ground}`).toBeGreaterThan(4.5);
    expect(contrast(colour('on-accent'), colour('accent'))).toBeGreaterThan(4.5);
  });
});

/** Machado, Oliveira & Fernandes 2009, severity 1, in linear light (from memory). */
const DEFICIENCIES: Record<string, readonly (readonly [number, number, number])[]> = {
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

function seenBy(matrix: readonly (readonly [number, number, number])[], rgb: Rgb): Rgb {
  const light = rgb.map((part) => (part / 255) ** 2.2);
  return matrix.map(
    (row) => 255 * Math.min(1, Math.max(0, row[0] * light[0]! + row[1] * light[1]! + row[2] * light[2]!)) ** (1 / 2.2),
  ) as unknown as Rgb;
}

describe('levels', () => {
  it('darken with the wind and stay apart in grey and for colour-blind readers', () => {
    const colours = levelColours(LEVELS).map(rgbOf);
    for (let i = 1; i < colours.length; i++) {
      expect(lightness(colours[i - 1]!) - lightness(colours[i]!)).toBeGreaterThanOrEqual(LEAST_STEP);
      for (const matrix of Object.values(DEFICIENCIES)) {
        const [a, b] = [lightness(seenBy(matrix, colours[i - 1]!)), lightness(seenBy(matrix, colours[i]!))];
        expect(a - b).toBeGreaterThan(4);
      }
    }
  });

  it('keep one colour for one wind, unless they stand too close', () => {
    expect(levelColour(LEVELS, knots(64))).toBe(hexOf(windColour(knots(64))));
    const close = levelColours([20, 20.5, 21, 21.5].map((mps) => mps));
    expect(new Set(close).size).toBe(4);
    expect(lightness(rgbOf(close[0]!)) - lightness(rgbOf(close[1]!))).toBeGreaterThan(LEAST_STEP);
  });

  it('go the other way on a dark ground', () => {
    expect(lightness(strengthColour(0.8, DARK))).toBeGreaterThan(lightness(strengthColour(0.2, DARK)));
    expect(lightness(strengthColour(0.8, LIGHT))).toBeLessThan(lightness(strengthColour(0.2, LIGHT)));
  });
});
