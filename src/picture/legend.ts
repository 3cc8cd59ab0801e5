import { inkOn, PAPER, rgbOf } from './colours.js';
import { element, textAt } from './svg.js';
import { textWidth } from './text.js';
import { levelTexts } from './words.js';

/** The colours of the levels side by side, each with its threshold in knots on it and in m/s below. */
export function legend(options: {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly levelsMps: readonly number[];
  readonly colours: readonly string[];
  readonly title: string;
  readonly bands: boolean;
}): { readonly svg: string; readonly bottom: number } {
  const { x, y, levelsMps, colours } = options;
  const size = 15;
  const count = levelsMps.length;
  if (count === 0) return { svg: '', bottom: y };
  const unitWidth = 44;
  const cell = Math.min(96, (options.width - unitWidth) / count);
  const texts = levelsMps.map(levelTexts);
  const wide = Math.max(
    ...texts.map(({ mps, knots }) => textWidth(`${mps.length > knots.length ? mps : knots}`, { size })),
  );
  // where the levels stand too close for their numbers, every second (third …) number is written
  const every = Math.max(1, Math.ceil((wide + 12) / cell));
  const top = y + 10;
  const parts = [
    textAt(`${options.title} ${options.bands ? 'from … to the next level' : 'at or above'}`, {
      x,
      y,
      size,
      fill: PAPER.ink,
    }),
  ];
  texts.forEach(({ knots, mps }, i) => {
    const colour = colours[i]!;
    parts.push(
      element('rect', {
        class: 'level',
        x: x + i * cell,
        y: top,
        width: cell,
        height: 30,
        fill: colour,
        stroke: PAPER.ink,
        'stroke-opacity': 0.42,
        'stroke-width': 0.7,
      }),
    );
    if (i % every !== 0) return;
    const middle = x + i * cell + 8;
    parts.push(textAt(knots, { x: middle, y: top + 20.5, size: 16, bold: true, fill: inkOn(rgbOf(colour)) }));
    parts.push(textAt(mps, { x: middle, y: top + 48, size, fill: PAPER.ink }));
  });
  const end = x + count * cell + 8;
  parts.push(textAt('kt', { x: end, y: top + 20.5, size: 16, bold: true, fill: PAPER.ink }));
  parts.push(textAt('m/s', { x: end, y: top + 48, size, fill: PAPER.ink }));
  return { svg: element('g', { class: 'legend' }, parts.join('\n')), bottom: top + 50 };
}
