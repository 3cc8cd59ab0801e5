import { PAPER } from './colours.js';
import type { Box } from './labels.js';
import { coordinate, element, textAt } from './svg.js';
import { textWidth } from './text.js';

/** A straight scale from values to a picture. */
export interface Scale {
  readonly from: number;
  readonly to: number;
  readonly at: (value: number) => number;
}

/** Values `domain` on picture coordinates `range`. */
export function straightScale(domain: readonly [number, number], range: readonly [number, number]): Scale {
  const [from, to] = domain;
  const span = to - from || 1;
  return { from, to, at: (value) => range[0] + ((value - from) / span) * (range[1] - range[0]) };
}

/** Round values (1, 2, 2.5 or 5 times a power of ten apart) within a domain, at most `most` of them. */
export function roundTicks([from, to]: readonly [number, number], most: number): number[] {
  const span = to - from;
  if (!(span > 0) || !Number.isFinite(span)) return [from];
  const power = 10 ** Math.floor(Math.log10(span / most));
  const step = [1, 2, 2.5, 5, 10].map((factor) => factor * power).find((size) => span / size <= most)!;
  const ticks: number[] = [];
  for (let i = Math.ceil(from / step - 1e-9); i * step <= to + 1e-9 * step; i++)
    ticks.push(Number((i * step).toPrecision(12)));
  return ticks;
}

/** A domain made larger to the round values around it. */
export function roundDomain([from, to]: readonly [number, number], most: number): readonly [number, number] {
  const ticks = roundTicks([from, to], most);
  const step = ticks.length > 1 ? ticks[1]! - ticks[0]! : 1;
  return [Math.floor(from / step + 1e-9) * step, Math.ceil(to / step - 1e-9) * step];
}

/** One tick of an axis. */
export interface Tick {
  readonly value: number;
  readonly text: string;
}

export interface ChartLine {
  /** [x, y] values; a piece ends where y is null */
  readonly points: readonly (readonly [number, number | null])[];
  readonly name: string;
  readonly colour: string;
  readonly dash?: string;
  readonly width?: number;
}

export interface Chart {
  readonly box: Box;
  readonly x: Scale;
  readonly y: Scale;
  readonly svg: string;
}

const SIZE = 14;

/** A frame with light rules, ticks and lines. Texts stand outside the frame: values left, below what `xTicks` says. */
export function chart(options: {
  readonly box: Box;
  readonly x: readonly [number, number];
  readonly y: readonly [number, number];
  readonly xTicks: readonly Tick[];
  readonly yTicks: readonly Tick[];
  /** drawn beneath the lines */
  readonly under?: (x: Scale, y: Scale) => string;
  readonly lines: readonly ChartLine[];
}): Chart {
  const { box } = options;
  const x = straightScale(options.x, [box.x, box.x + box.width]);
  const y = straightScale(options.y, [box.y + box.height, box.y]);
  const rules =
    options.yTicks
      .map(({ value }) => `M${coordinate(box.x)} ${coordinate(y.at(value))}h${coordinate(box.width)}`)
      .join('') +
    options.xTicks
      .map(({ value }) => `M${coordinate(x.at(value))} ${coordinate(box.y)}v${coordinate(box.height)}`)
      .join('');
  let lastEnd = Number.NEGATIVE_INFINITY;
  const below = options.xTicks.map(({ value, text }) => {
    const half = textWidth(text, { size: SIZE }) / 2;
    if (text === '' || x.at(value) - half < lastEnd + 4) return '';
    lastEnd = x.at(value) + half;
    return textAt(text, {
      x: x.at(value),
      y: box.y + box.height + SIZE * 1.2,
      size: SIZE,
      fill: PAPER.quiet,
      anchor: 'middle',
    });
  });
  const left = options.yTicks.map(({ value, text }) =>
    textAt(text, { x: box.x - 6, y: y.at(value) + SIZE * 0.35, size: SIZE, fill: PAPER.quiet, anchor: 'end' }),
  );
  const lines = options.lines.map((line) =>
    element('path', {
      class: 'line',
      d: linePath(line.points, x, y),
      fill: 'none',
      stroke: line.colour,
      'stroke-width': line.width ?? 2,
      'stroke-dasharray': line.dash,
      'stroke-linejoin': 'round',
    }),
  );
  return {
    box,
    x,
    y,
    svg: [
      element('rect', { x: box.x, y: box.y, width: box.width, height: box.height, fill: PAPER.sheet }),
      options.under?.(x, y) ?? '',
      element('path', {
        class: 'rules',
        d: rules,
        stroke: PAPER.rule,
        'stroke-width': 0.8,
        'stroke-opacity': 0.8,
        fill: 'none',
      }),
      ...lines,
      element('rect', { x: box.x, y: box.y, width: box.width, height: box.height, fill: 'none', stroke: PAPER.quiet }),
      ...below,
      ...left,
    ].join('\n'),
  };
}

function linePath(points: ChartLine['points'], x: Scale, y: Scale): string {
  let d = '';
  let pen = 'M';
  for (const [px, py] of points) {
    if (py === null || !Number.isFinite(py)) {
      pen = 'M';
      continue;
    }
    d += `${pen}${coordinate(x.at(px))} ${coordinate(y.at(py))}`;
    pen = 'L';
  }
  return d;
}

/** Names of lines in a row, each after a piece of its line; breaks into rows within `width`. */
export function lineKey(
  lines: readonly Pick<ChartLine, 'name' | 'colour' | 'dash' | 'width'>[],
  at: { readonly x: number; readonly y: number; readonly width: number },
): { readonly svg: string; readonly height: number } {
  let [x, y] = [at.x, at.y];
  const parts: string[] = [];
  for (const { name, colour, dash, width } of lines) {
    const wide = 34 + textWidth(name, { size: SIZE });
    if (x > at.x && x + wide > at.x + at.width) [x, y] = [at.x, y + SIZE * 1.4];
    parts.push(
      element('path', {
        d: `M${coordinate(x)} ${coordinate(y - SIZE * 0.35)}h26`,
        stroke: colour,
        'stroke-width': width ?? 2,
        'stroke-dasharray': dash,
        fill: 'none',
      }),
      textAt(name, { x: x + 32, y, size: SIZE, fill: PAPER.ink }),
    );
    x += wide + 18;
  }
  return { svg: element('g', { class: 'key' }, parts.join('')), height: y - at.y + SIZE * 1.4 };
}
