import { type GeoProjection, geoPath } from 'd3-geo';
import { HOUR_MS } from '../units.js';
import { coastNear } from './coast-near.js';
import { PAPER } from './colours.js';
import type { MapFrame } from './extent.js';
import type { Graticule } from './graticule.js';
import { isotachPath, type PictureIsotach } from './isotach-paths.js';
import type { Box } from './labels.js';
import type { Coast, MapInput } from './map-input.js';
import { coordinate, element } from './svg.js';

export const rectOf = ({ x, y, width, height }: Box) => ({ x, y, width, height });

/** Filled areas by rising level, and their edges above all of them. */
export function areasOf(
  isotachs: readonly PictureIsotach[],
  { colours, projection }: { readonly colours: readonly string[]; readonly projection: GeoProjection },
): string {
  const areas: string[] = [];
  const edges: string[] = [];
  isotachs.forEach((isotach, i) => {
    const { area, edge } = isotachPath(isotach, projection);
    const fill = colours[i]!;
    if (area)
      areas.push(
        element('path', { class: 'area', d: area, fill, stroke: fill, 'stroke-width': 0.7, 'fill-rule': 'evenodd' }),
      );
    if (edge)
      edges.push(
        element('path', {
          class: 'isotach',
          'data-mps': isotach.thresholdMps.toFixed(3),
          d: edge,
          fill: 'none',
          stroke: PAPER.ink,
          'stroke-opacity': 0.42,
          'stroke-width': 0.7,
        }),
      );
  });
  return [...areas, ...edges].join('\n');
}

export function graticuleOf(grid: Graticule): string {
  return element('path', {
    class: 'graticule',
    d: pathOf(grid.lines),
    fill: 'none',
    stroke: PAPER.grid,
    'stroke-width': 0.7,
    'stroke-opacity': 0.75,
  });
}

/** Sea and land, and the shore that is drawn above the wind. */
export function groundOf(frame: MapFrame, coast: Coast | null): { land: string; shore: string } {
  const sea = element('rect', { ...rectOf(frame.box), fill: PAPER.sea });
  const d = coast ? geoPath(frame.projection).digits(1)(coastNear(coast, frame)) : null;
  if (!d) return { land: sea, shore: '' };
  return {
    land: sea + element('path', { class: 'land', d, fill: PAPER.land }),
    shore: element('path', {
      class: 'shore',
      d,
      fill: 'none',
      stroke: PAPER.shore,
      'stroke-width': 0.9,
      'stroke-linejoin': 'round',
    }),
  };
}

/** The user's zones and places: grounds beneath the wind, outlines and marks above it. */
export function ownOf(input: MapInput, frame: MapFrame): { grounds: string; outlines: string; marks: string } {
  const zones = (input.zones ?? []).map(({ polygons }) =>
    isotachPath({ thresholdMps: 0, polygons, areaM2: 0 }, frame.projection),
  );
  const marks = (input.places ?? []).map(({ lonDeg, latDeg }) => {
    const at = frame.project([lonDeg, latDeg]);
    return at
      ? element('rect', {
          class: 'place',
          x: at[0] - 3.5,
          y: at[1] - 3.5,
          width: 7,
          height: 7,
          fill: PAPER.ink,
          stroke: PAPER.halo,
          'stroke-width': 1.5,
        })
      : '';
  });
  return {
    grounds: zones
      .map(({ area }) => (area ? element('path', { class: 'zone', d: area, fill: PAPER.land }) : ''))
      .join(''),
    outlines: zones
      .map(({ edge }) =>
        edge
          ? element('path', {
              d: edge,
              fill: 'none',
              stroke: PAPER.ink,
              'stroke-width': 1.2,
              'stroke-linejoin': 'round',
            })
          : '',
      )
      .join(''),
    marks: marks.join(''),
  };
}

function pathOf(lines: readonly (readonly (readonly [number, number])[])[]): string {
  return lines.map((line) => `M${line.map(([x, y]) => `${coordinate(x)} ${coordinate(y)}`).join('L')}`).join('');
}

/** The track as drawn. */
export interface TrackOnMap {
  readonly svg: string;
  readonly line: readonly (readonly [number, number])[];
  /** marks that want a time beside them */
  readonly marks: readonly { readonly timeMs: number; readonly at: readonly [number, number] }[];
}

const MARK_HOURS = [1, 3, 6, 12, 24, 48, 72, 120, 240];

/** The track, and the moments that are marked on it. */
export function trackOf(input: MapInput, frame: MapFrame): TrackOnMap {
  const { fixes } = input;
  const line = fixes.map((fix) => frame.project([fix.lonDeg, fix.latDeg])).filter((point) => point !== null);
  const first = fixes[0];
  const last = fixes[fixes.length - 1];
  if (!first || !last) return { svg: '', line, marks: [] };
  const hours = (last.timeMs - first.timeMs) / HOUR_MS;
  const every = MARK_HOURS.find((step) => hours / step <= 9) ?? 240;
  const marks: { timeMs: number; at: readonly [number, number] }[] = [];
  const mark = (timeMs: number, lonDeg: number, latDeg: number): void => {
    const at = frame.project([lonDeg, latDeg]);
    if (at) marks.push({ timeMs, at });
  };
  if (input.centreAt && fixes.length > 1) {
    for (let i = Math.ceil(first.timeMs / (every * HOUR_MS)); i * every * HOUR_MS <= last.timeMs; i++) {
      const centre = input.centreAt(i * every * HOUR_MS);
      mark(i * every * HOUR_MS, centre.lonDeg, centre.latDeg);
    }
  } else {
    for (const fix of fixes) if (fix.timeMs % (every * HOUR_MS) === 0) mark(fix.timeMs, fix.lonDeg, fix.latDeg);
  }
  if (marks.length === 0) mark(first.timeMs, first.lonDeg, first.latDeg);
  const course = geoPath(frame.projection).digits(1)({
    type: 'LineString',
    coordinates: fixes.map((fix) => [fix.lonDeg, fix.latDeg]),
  });
  const dots = line.map(([x, y]) => element('circle', { cx: x, cy: y, r: 1.9, fill: PAPER.track })).join('');
  const rings = marks
    .map(({ at: [x, y] }) =>
      element('circle', {
        class: 'time',
        cx: x,
        cy: y,
        r: 4.2,
        fill: PAPER.halo,
        stroke: PAPER.track,
        'stroke-width': 1.8,
      }),
    )
    .join('');
  const svg = element(
    'g',
    { class: 'track', fill: 'none', 'stroke-linejoin': 'round', 'stroke-linecap': 'round' },
    (course && fixes.length > 1
      ? element('path', { d: course, stroke: PAPER.halo, 'stroke-width': 4.2, 'stroke-opacity': 0.85 }) +
        element('path', { d: course, stroke: PAPER.track, 'stroke-width': 2 })
      : '') +
      dots +
      rings,
  );
  return { svg, line, marks };
}

/** A ring around a dot: the place of the strongest wind. */
export function peakMark(input: MapInput, frame: MapFrame): string {
  const at = input.peak ? frame.project([input.peak.lonDeg, input.peak.latDeg]) : null;
  if (!at) return '';
  const [cx, cy] = at;
  return element(
    'g',
    { class: 'peak', fill: 'none' },
    element('circle', { cx, cy, r: 8.5, stroke: PAPER.halo, 'stroke-width': 5.5 }) +
      element('circle', { cx, cy, r: 8.5, stroke: PAPER.track, 'stroke-width': 2.4 }) +
      element('circle', { cx, cy, r: 3, fill: PAPER.track, stroke: PAPER.halo, 'stroke-width': 1.2 }),
  );
}
