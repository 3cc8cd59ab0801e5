import { destination, distanceM } from '../earth.js';
import { NAUTICAL_MILE_M } from '../units.js';
import { PAPER } from './colours.js';
import type { MapFrame } from './extent.js';
import type { Box } from './labels.js';
import { element, textAt } from './svg.js';

/** 1, 2 or 5 times a power of ten, not above `most`. */
export function roundBelow(most: number): number {
  const power = 10 ** Math.floor(Math.log10(most));
  return (most / power >= 5 ? 5 : most / power >= 2 ? 2 : 1) * power;
}

/** Picture units per kilometre, east–west at a place. */
export function unitsPerKm(frame: MapFrame, at: { readonly lonDeg: number; readonly latDeg: number }): number {
  const other = destination(at, { bearingDeg: 90, distanceM: 20_000 });
  const [a, b] = [frame.project([at.lonDeg, at.latDeg])!, frame.project([other.lonDeg, other.latDeg])!];
  return Math.hypot(a[0] - b[0], a[1] - b[1]) / (distanceM(at, other) / 1000);
}

export interface ScaleBar {
  readonly box: Box;
  readonly svg: string;
}

/** Kilometres above the line, nautical miles below it, both true at the latitude of `at`. */
export function scaleBar(
  frame: MapFrame,
  options: {
    readonly at: { readonly lonDeg: number; readonly latDeg: number };
    readonly size: number;
    /** places that it should not hide */
    readonly avoid: readonly (readonly [number, number])[];
  },
): ScaleBar {
  const { size } = options;
  const perKm = unitsPerKm(frame, options.at);
  const km = roundBelow((0.24 * frame.box.width) / perKm);
  const nmi = roundBelow((0.24 * frame.box.width) / (perKm * (NAUTICAL_MILE_M / 1000)));
  const kmWidth = km * perKm;
  const nmiWidth = nmi * perKm * (NAUTICAL_MILE_M / 1000);
  const width = Math.max(kmWidth, nmiWidth) + size * 3.9;
  const height = size * 3.1;
  const box = freestCorner(frame.box, { width, height }, options.avoid);
  const x = box.x + size * 0.8;
  const y = box.y + height / 2;
  const tick = (at: number, up: number): string =>
    `M${(x + at).toFixed(1)} ${y.toFixed(1)}v${(up * size * 0.5).toFixed(1)}`;
  const marks = [0, kmWidth / 2, kmWidth].map((at) => tick(at, -1)).join('');
  const sea = [0, nmiWidth / 2, nmiWidth].map((at) => tick(at, 1)).join('');
  const line = `M${x.toFixed(1)} ${y.toFixed(1)}h${Math.max(kmWidth, nmiWidth).toFixed(1)}`;
  const label = (text: string, at: number, below: boolean): string =>
    textAt(text, { x: x + at, y: below ? y + size * 1.32 : y - size * 0.62, size, fill: PAPER.ink, anchor: 'middle' });
  return {
    box,
    svg: element(
      'g',
      { class: 'scale-bar' },
      element('rect', { x: box.x, y: box.y, width, height, rx: 4, fill: PAPER.sheet, 'fill-opacity': 0.86 }) +
        element('path', { d: line + marks + sea, fill: 'none', stroke: PAPER.ink, 'stroke-width': 1.4 }) +
        label('0', 0, false) +
        label(`${km} km`, kmWidth, false) +
        label(`${nmi} nmi`, nmiWidth, true),
    ),
  };
}

/** The corner that hides the fewest of some places; below before above, right before left. */
function freestCorner(
  frame: Box,
  { width, height }: { readonly width: number; readonly height: number },
  avoid: readonly (readonly [number, number])[],
): Box {
  const right = frame.x + frame.width - width - 10;
  const low = frame.y + frame.height - height - 10;
  const corners = [
    [right, low],
    [frame.x + 10, low],
    [right, frame.y + 10],
    [frame.x + 10, frame.y + 10],
  ] as const;
  let best: Box = { x: right, y: low, width, height };
  let least = Number.POSITIVE_INFINITY;
  for (const [x, y] of corners) {
    const hidden = avoid.filter(([px, py]) => px > x - 8 && px < x + width + 8 && py > y - 8 && py < y + height + 8);
    if (hidden.length < least) {
      least = hidden.length;
      best = { x, y, width, height };
    }
  }
  return best;
}
