import { geoPath } from 'd3-geo';
import { PAPER } from './colours.js';
import type { MapFrame } from './extent.js';
import { type Box, type LabelWish, placeLabels } from './labels.js';
import type { MapInput, MapZone } from './map-input.js';
import { rectOf, type TrackOnMap } from './map-layers.js';
import { element, textAt } from './svg.js';
import { cutText, textWidth } from './text.js';
import { levelTexts, momentText, windText } from './words.js';

/** Size of the letters on a map. */
export const LABEL_SIZE = 14;

/** A label where it was placed. */
export interface MapLabel {
  readonly text: string;
  readonly box: Box;
  readonly svg: string;
}

/** Peak, times, places and zones, in this order of right of way. */
export function labelsOf(
  input: MapInput,
  frame: MapFrame,
  { track, taken }: { readonly track: TrackOnMap; readonly taken: readonly Box[] },
): MapLabel[] {
  const wishes: (LabelWish & { readonly lines: readonly string[]; readonly bold: boolean })[] = [];
  const wish = (
    lines: readonly string[],
    point: readonly [number, number],
    options: { bold: boolean; gap: number; needed?: boolean },
  ): void => {
    const width = Math.max(...lines.map((line) => textWidth(line, { size: LABEL_SIZE, bold: options.bold }))) + 4;
    wishes.push({ ...options, lines, point, width, height: lines.length * LABEL_SIZE * 1.2 });
  };
  const marks: Box[] = track.marks.map(({ at: [x, y] }) => ({ x: x - 5, y: y - 5, width: 10, height: 10 }));
  const at = input.peak ? frame.project([input.peak.lonDeg, input.peak.latDeg]) : null;
  if (input.peak && at) {
    marks.push({ x: at[0] - 9, y: at[1] - 9, width: 18, height: 18 });
    const value = input.quantity === 'wind' ? input.peak.windMps : input.peak.gustMps;
    wish([`Peak ${windText(value)}`, `${momentText(input.peak.timeMs)}`], at, { bold: true, gap: 15, needed: true });
  }
  for (const { timeMs, at: point } of track.marks)
    wish([momentText(timeMs, { short: true })], point, { bold: false, gap: 9 });
  for (const { name, lonDeg, latDeg } of input.places ?? []) {
    const point = frame.project([lonDeg, latDeg]);
    if (!point) continue;
    marks.push({ x: point[0] - 5, y: point[1] - 5, width: 10, height: 10 });
    wish([cutText(name, { size: LABEL_SIZE, width: 160 })], point, { bold: false, gap: 8 });
  }
  for (const { name, polygons } of input.zones ?? []) {
    const point = zoneMiddle(polygons, frame);
    if (point) wish([cutText(name, { size: LABEL_SIZE, width: 160 })], point, { bold: false, gap: 2 });
  }
  const { box } = frame;
  const places = placeLabels(wishes, {
    frame: { x: box.x + 4, y: box.y + 4, width: box.width - 8, height: box.height - 8 },
    taken: [...taken, ...marks],
    lines: [track.line],
  });
  return wishes.flatMap(({ lines, bold }, i) => {
    const place = places[i];
    if (!place) return [];
    const svg = lines
      .map((line, k) =>
        textAt(line, {
          x: place.x + 2,
          y: place.y + LABEL_SIZE * (0.94 + 1.2 * k),
          size: LABEL_SIZE,
          bold,
          fill: PAPER.ink,
          halo: PAPER.halo,
          class: bold ? 'peak-label' : 'time-label',
        }),
      )
      .join('');
    return [{ text: lines.join(' '), box: place, svg }];
  });
}

/** What stands on a map without areas. */
export function noticeOf(
  input: MapInput,
  frame: MapFrame,
  levels: readonly number[],
): { box: Box; svg: string } | null {
  const lowest = levels[0];
  if (lowest === undefined) return null;
  const { knots, mps } = levelTexts(lowest);
  const text = `No ${input.quantity} at or above ${knots} kt (${mps} m/s)`;
  const width = textWidth(text, { size: 17, bold: true }) + 28;
  const box: Box = { x: frame.box.x + (frame.box.width - width) / 2, y: frame.box.y + 14, width, height: 34 };
  return {
    box,
    svg:
      element('rect', { ...rectOf(box), rx: 5, fill: PAPER.sheet, 'fill-opacity': 0.92, stroke: PAPER.rule }) +
      textAt(text, {
        x: box.x + width / 2,
        y: box.y + 23,
        size: 17,
        bold: true,
        anchor: 'middle',
        fill: PAPER.ink,
        class: 'notice',
      }),
  };
}

/** The middle of a zone's largest shell on the picture. */
function zoneMiddle(polygons: MapZone['polygons'], frame: MapFrame): readonly [number, number] | null {
  const path = geoPath(frame.projection);
  const shells = polygons.flatMap(([shell]) => (shell ? [[...shell].reverse().map(([x, y]) => [x!, y!])] : []));
  const areas = shells.map((shell) => path.area({ type: 'Polygon', coordinates: [shell] }));
  const largest = shells[areas.indexOf(Math.max(...areas))];
  if (!largest) return null;
  const at = path.centroid({ type: 'Polygon', coordinates: [largest] });
  return Number.isFinite(at[0]) ? at : null;
}
