import { geoPath } from 'd3-geo';
import type { Track } from '../track/track.js';
import { knots, toKnots } from '../units.js';
import { coastNear } from './coast-near.js';
import { hexOf, PAPER, windColour } from './colours.js';
import { type LonLat, mapFrame } from './extent.js';
import { graticule } from './graticule.js';
import { type Box, placeLabels } from './labels.js';
import type { Coast } from './map-svg.js';
import { scaleBar } from './scale-bar.js';
import { sheet } from './sheet.js';
import { coordinate, element, textAt } from './svg.js';
import { textWidth } from './text.js';
import { periodText } from './words.js';

const WIDTH = 720;
const SIDE = 52;
const SIZE = 14;
/** Winds in the key, kt. */
const KEY_KT = [25, 34, 50, 64, 83, 96, 113, 137];

/** Tracks with the wind of every fix as the file has it; fixes without a wind are hollow. */
export function trackSvg(tracks: readonly Track[], options: { readonly coast?: Coast | null } = {}): string {
  const fixes = tracks.flatMap((track) => track.fixes);
  const times = fixes.map((fix) => fix.timeMs);
  const from = times.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  const to = times.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  const [only] = tracks;
  const strongest = fixes.reduce((most, fix) => Math.max(most, fix.maxWindMps ?? 0), 0);
  const most = strongest > 0 ? `; strongest ${strongest.toFixed(1)} m/s (${toKnots(strongest).toFixed(0)} kt)` : '';
  return sheet({
    width: WIDTH,
    side: SIDE,
    title: tracks.length === 1 && only ? (only.name ?? only.id) : `${tracks.length} storms`,
    subtitle: fixes.length > 0 ? `${periodText(from, to)}; ${fixes.length} fixes${most}` : 'no fixes',
    notes: ['Maximum sustained winds as the source gives them, in its averaging period.'],
    content: (top) => {
      const map = mapOf(tracks, { top: top - 4, coast: options.coast ?? null });
      const key = keyOf(map.bottom + SIZE * 1.2 + 26);
      return { svg: [map.svg, key.svg].join('\n'), bottom: key.bottom };
    },
  });
}

function mapOf(tracks: readonly Track[], at: { readonly top: number; readonly coast: Coast | null }) {
  const places = tracks.flatMap((track) => track.fixes.map((fix): LonLat => [fix.lonDeg, fix.latDeg]));
  const frame = mapFrame(places.length > 0 ? places : [[0, 0]], {
    x: SIDE,
    y: at.top,
    width: WIDTH - SIDE - 22,
    heights: [380, 680],
    margin: 0.08,
  });
  const { box } = frame;
  const path = geoPath(frame.projection).digits(1);
  const grid = graticule(frame, { size: SIZE });
  const land = at.coast ? (path(coastNear(at.coast, frame)) ?? '') : '';
  const thin = places.length > 400;
  const courses: string[] = [];
  const lines: (readonly (readonly [number, number])[])[] = [];
  for (const track of tracks) {
    const line = track.fixes.map((fix) => frame.project([fix.lonDeg, fix.latDeg])).filter((point) => point !== null);
    lines.push(line);
    const d = path({ type: 'LineString', coordinates: track.fixes.map((fix) => [fix.lonDeg, fix.latDeg]) });
    if (d && track.fixes.length > 1)
      courses.push(
        element('path', {
          class: 'course',
          d,
          fill: 'none',
          stroke: PAPER.track,
          'stroke-width': thin ? 0.8 : 1.6,
          'stroke-linejoin': 'round',
        }),
      );
    track.fixes.forEach((fix) => {
      const point = frame.project([fix.lonDeg, fix.latDeg]);
      if (!point) return;
      courses.push(
        element('circle', {
          class: 'fix',
          cx: point[0],
          cy: point[1],
          r: thin ? 2.4 : 5,
          fill: fix.maxWindMps === null ? PAPER.sheet : hexOf(windColour(fix.maxWindMps)),
          stroke: PAPER.track,
          'stroke-width': thin ? 0.6 : 1.1,
        }),
      );
    });
  }
  const bar = scaleBar(frame, { at: middle(frame), size: SIZE, avoid: lines.flat() });
  const names = tracks.length > 1 ? tracks.filter((track) => track.fixes.length > 0) : [];
  const wishes = names.map((track, i) => {
    const last = lines[i]!.at(-1) ?? [box.x, box.y];
    return {
      point: last,
      gap: 9,
      width: textWidth(track.name ?? track.id, { size: SIZE, bold: true }) + 4,
      height: SIZE * 1.2,
    };
  });
  const inner: Box = { x: box.x + 4, y: box.y + 4, width: box.width - 8, height: box.height - 8 };
  const spots = placeLabels(wishes, {
    frame: inner,
    taken: [bar.box, ...grid.labels.filter((label) => label.inside).map((label) => label.box)],
    lines: names.length > 40 ? [] : lines,
  });
  const labels = names.map((track, i) => {
    const spot = spots[i];
    if (!spot) return '';
    return textAt(track.name ?? track.id, {
      x: spot.x + 2,
      y: spot.y + SIZE * 0.94,
      size: SIZE,
      bold: true,
      fill: PAPER.ink,
      halo: PAPER.halo,
      class: 'name',
    });
  });
  const rect = { x: box.x, y: box.y, width: box.width, height: box.height };
  const grids = grid.lines
    .map((line) => `M${line.map(([x, y]) => `${coordinate(x)} ${coordinate(y)}`).join('L')}`)
    .join('');
  const svg = [
    element('clipPath', { id: 'frame' }, element('rect', rect)),
    element(
      'g',
      { 'clip-path': 'url(#frame)' },
      element('rect', { ...rect, fill: PAPER.sea }) +
        (land ? element('path', { d: land, fill: PAPER.land, stroke: PAPER.shore, 'stroke-width': 0.8 }) : '') +
        element('path', { d: grids, fill: 'none', stroke: PAPER.grid, 'stroke-width': 0.7 }) +
        courses.join(''),
    ),
    element('rect', { ...rect, fill: 'none', stroke: PAPER.ink, 'stroke-width': 1.2 }),
    ...grid.labels.map(({ text, x, y, anchor, inside }) =>
      textAt(text, { x, y, anchor, size: SIZE, fill: PAPER.quiet, ...(inside ? { halo: PAPER.halo } : {}) }),
    ),
    bar.svg,
    ...labels,
  ].join('\n');
  return { svg, bottom: box.y + box.height };
}

function middle(frame: ReturnType<typeof mapFrame>): { lonDeg: number; latDeg: number } {
  const { box, projection } = frame;
  const at = projection.invert?.([box.x + box.width / 2, box.y + box.height / 2]) ?? [0, 0];
  return { lonDeg: at[0], latDeg: at[1] };
}

/** A dot for each of some winds, in knots. */
function keyOf(y: number): { readonly svg: string; readonly bottom: number } {
  const parts = [textAt('wind, kt', { x: SIDE, y, size: SIZE, fill: PAPER.ink })];
  KEY_KT.forEach((kt, i) => {
    const x = SIDE + 84 + i * 58;
    parts.push(
      element('circle', {
        cx: x,
        cy: y - 5,
        r: 6,
        fill: hexOf(windColour(knots(kt))),
        stroke: PAPER.track,
        'stroke-width': 1.1,
      }),
      textAt(String(kt), { x: x + 11, y, size: SIZE, fill: PAPER.ink }),
    );
  });
  const x = SIDE + 84 + KEY_KT.length * 58;
  parts.push(
    element('circle', { cx: x, cy: y - 5, r: 6, fill: PAPER.sheet, stroke: PAPER.track, 'stroke-width': 1.1 }),
  );
  parts.push(textAt('none', { x: x + 11, y, size: SIZE, fill: PAPER.ink }));
  return { svg: element('g', { class: 'key' }, parts.join('')), bottom: y + 12 };
}
