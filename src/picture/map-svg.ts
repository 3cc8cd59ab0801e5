import { type GeoPermissibleObjects, geoPath } from 'd3-geo';
import { HOUR_MS } from '../units.js';
import { CAUTION } from '../write/provenance.js';
import { levelColours, PAPER } from './colours.js';
import { type LonLat, type MapFrame, mapFrame, PROJECTION_NAMES } from './extent.js';
import { graticule } from './graticule.js';
import { isotachPath, type PictureIsotach } from './isotach-paths.js';
import { type Box, type LabelWish, placeLabels } from './labels.js';
import { legend } from './legend.js';
import { scaleBar } from './scale-bar.js';
import { coordinate, element, svgDocument, textAt } from './svg.js';
import { cutText, textWidth, wrapText } from './text.js';
import { averagingText, latitudeLongitudeText, levelTexts, momentText, periodText, windText } from './words.js';

/** One moment of the track. */
export interface MapFix {
  readonly timeMs: number;
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly maxWindMps: number;
}

/** Where and when the strongest wind blew. */
export interface MapPeak {
  readonly windMps: number;
  readonly gustMps: number;
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly timeMs: number;
}

/** Polygons of land as a sphere wants them: as `topojson-client` gives the land of world-atlas. */
export type Coast = GeoPermissibleObjects;

/** An area of the user's own, as RFC 7946 has it [RFC7946]. */
export interface MapZone {
  readonly name: string;
  readonly polygons: PictureIsotach['polygons'];
}

export interface MapPlace {
  readonly name: string;
  readonly lonDeg: number;
  readonly latDeg: number;
}

export interface MapInput {
  /** the storm's name and identifier as the file has them */
  readonly storm: { readonly id: string; readonly name: string | null };
  readonly fixes: readonly MapFix[];
  /** by rising threshold */
  readonly isotachs: readonly PictureIsotach[];
  readonly quantity: 'wind' | 'gust';
  /** averaging period of the sustained wind and of the gust */
  readonly averagingS: number;
  readonly gustDurationS: number;
  readonly peak: MapPeak | null;
  /** the recipe in one line */
  readonly recipe: string;
  readonly version: string;
  readonly coast: Coast | null;
  /** the user's own places and zones, in this order of drawing: zones, places */
  readonly zones?: readonly MapZone[];
  readonly places?: readonly MapPlace[];
  /** the centre at any time, for marks between fixes; the fixes alone without it */
  readonly centreAt?: (timeMs: number) => { readonly lonDeg: number; readonly latDeg: number };
}

/** A map as SVG, and the boxes of the labels on it: none meets another. */
export interface MapPicture {
  readonly svg: string;
  readonly width: number;
  readonly height: number;
  readonly labels: readonly (Box & { readonly text: string })[];
}

const WIDTH = 720;
const SIDE = 52;
const RIGHT = 22;
const LABEL = 14;

/**
 * The map of a swath: isotachs, coast, graticule, track with times, peak, scale bar, legend, recipe and caution, on a
 * sheet 720 wide and as high as the storm needs. Works anywhere on Earth, across ±180° and near the poles.
 */
export function mapPicture(input: MapInput): MapPicture {
  const title = input.storm.name ?? input.storm.id;
  const first = input.fixes[0];
  const last = input.fixes[input.fixes.length - 1];
  const period = first && last ? periodText(first.timeMs, last.timeMs) : '';
  const kind = input.quantity === 'wind' ? 'Peak sustained wind' : 'Peak gust';
  const mean = input.quantity === 'wind' ? averagingText(input.averagingS) : averagingText(input.gustDurationS, 'gust');
  const subtitle = `${kind} at 10 m, ${mean}`;

  const places = placesOf(input);
  const frame = mapFrame(places, {
    x: SIDE,
    y: 104,
    width: WIDTH - SIDE - RIGHT,
    heights: [400, 680],
    margin: 0.07,
  });
  const levels = input.isotachs.map((isotach) => isotach.thresholdMps);
  const colours = levelColours(levels);
  const shown = input.isotachs.some((isotach) => isotach.polygons.length > 0);

  const ground = groundOf(frame, input.coast);
  const own = ownOf(input, frame);
  const grid = graticule(frame, { size: LABEL });
  const areas = input.isotachs.map((isotach, i) => ({
    ...isotachPath(isotach, frame.projection),
    isotach,
    colour: colours[i]!,
  }));
  const track = trackOf(input, frame);
  const bar = scaleBar(frame, {
    at: middleOf(frame),
    size: LABEL,
    avoid: places.map(frame.project).filter((point) => point !== null),
  });
  const notice = shown ? null : noticeOf(input, frame, levels);
  const labels = labelsOf(input, frame, {
    track,
    taken: [bar.box, ...(notice ? [notice.box] : []), ...grid.labels.filter((l) => l.inside).map((l) => l.box)],
  });

  const foot = frame.box.y + frame.box.height + LABEL * 1.15 + 22;
  const scale = legend({
    x: SIDE,
    y: foot,
    width: frame.box.width,
    levelsMps: levels,
    colours,
    title: `${kind} (${mean})`,
    bands: input.isotachs.some((i) => i.upperMps != null),
  });
  const peakLine = input.peak
    ? `Strongest: ${windText(input.peak.windMps)}, gust ${windText(input.peak.gustMps)}, at ${latitudeLongitudeText(input.peak)}, ${momentText(input.peak.timeMs)} UTC`
    : 'No wind on this map.';
  const notes = [
    { text: peakLine, fill: PAPER.ink, bold: false },
    { text: CAUTION, fill: PAPER.ink, bold: true },
    { text: `Recipe: ${input.recipe}`, fill: PAPER.quiet, bold: false },
    {
      text: `Galewake ${input.version} · ${PROJECTION_NAMES[frame.kind]} projection · times in UTC${input.coast ? ' · coast: Natural Earth' : ''}`,
      fill: PAPER.quiet,
      bold: false,
    },
  ];
  let y = scale.bottom + 26;
  const noteLines: string[] = [];
  for (const note of notes) {
    for (const line of wrapText(note.text, { size: LABEL, bold: note.bold, width: frame.box.width })) {
      noteLines.push(textAt(line, { x: SIDE, y, size: LABEL, fill: note.fill, bold: note.bold }));
      y += LABEL * 1.32;
    }
    y += 5;
  }
  const height = Math.ceil(y + 8);

  const clip = element('clipPath', { id: 'frame' }, element('rect', rectOf(frame.box)));
  const content = [
    element('defs', {}, clip),
    element('rect', { width: WIDTH, height, fill: PAPER.sheet }),
    textAt(cutText(title, { size: 34, bold: true, width: frame.box.width }), {
      x: SIDE,
      y: 46,
      size: 34,
      bold: true,
      fill: PAPER.ink,
      class: 'storm',
    }),
    textAt(subtitle, { x: SIDE, y: 70, size: 17, fill: PAPER.ink }),
    textAt(input.storm.name && input.storm.id !== input.storm.name ? `${period} · ${input.storm.id}` : period, {
      x: SIDE,
      y: 92,
      size: 15,
      fill: PAPER.quiet,
    }),
    element(
      'g',
      { 'clip-path': 'url(#frame)' },
      ground.land +
        own.grounds +
        areas
          .map(({ area, colour }) =>
            area
              ? element('path', {
                  class: 'area',
                  d: area,
                  fill: colour,
                  stroke: colour,
                  'stroke-width': 0.7,
                  'fill-rule': 'evenodd',
                })
              : '',
          )
          .join('\n') +
        areas
          .map(({ edge, isotach }) =>
            edge
              ? element('path', {
                  class: 'isotach',
                  'data-mps': isotach.thresholdMps.toFixed(3),
                  d: edge,
                  fill: 'none',
                  stroke: PAPER.ink,
                  'stroke-opacity': 0.42,
                  'stroke-width': 0.7,
                })
              : '',
          )
          .join('\n') +
        element('path', {
          class: 'graticule',
          d: pathOf(grid.lines),
          fill: 'none',
          stroke: PAPER.grid,
          'stroke-width': 0.7,
          'stroke-opacity': 0.75,
        }) +
        ground.shore +
        own.outlines +
        track.svg +
        own.marks +
        peakMark(input, frame),
    ),
    element('rect', { ...rectOf(frame.box), fill: 'none', stroke: PAPER.ink, 'stroke-width': 1.2 }),
    grid.labels
      .map(({ text, x, y: at, anchor, inside }) =>
        textAt(text, {
          x,
          y: at,
          anchor,
          size: LABEL,
          fill: PAPER.quiet,
          class: 'degrees',
          ...(inside ? { halo: PAPER.halo } : {}),
        }),
      )
      .join('\n'),
    bar.svg,
    notice?.svg ?? '',
    labels.map(({ svg }) => svg).join('\n'),
    scale.svg,
    ...noteLines,
  ].join('\n');
  const description = `${subtitle}. ${period}. ${peakLine} ${CAUTION}`;
  return {
    svg: svgDocument({ width: WIDTH, height, title: `${title}: ${subtitle}`, description }, content),
    width: WIDTH,
    height,
    labels: [
      ...labels.map(({ box, text }) => ({ ...box, text })),
      ...grid.labels.map(({ box, text }) => ({ ...box, text })),
      { ...bar.box, text: 'scale bar' },
    ],
  };
}

/** {@link mapPicture} as text. */
export function mapSvg(input: MapInput): string {
  return mapPicture(input).svg;
}

const rectOf = ({ x, y, width, height }: Box) => ({ x, y, width, height });

/** Everything that must be on the map: the track and the areas. */
function placesOf(input: MapInput): LonLat[] {
  const places: LonLat[] = input.fixes.map((fix) => [fix.lonDeg, fix.latDeg]);
  for (const { polygons } of input.isotachs) {
    for (const [shell] of polygons) {
      const every = Math.max(1, Math.floor((shell?.length ?? 0) / 400));
      for (let i = 0; i < (shell?.length ?? 0); i += every) places.push([shell![i]![0]!, shell![i]![1]!]);
    }
  }
  if (input.peak) places.push([input.peak.lonDeg, input.peak.latDeg]);
  return places.length > 0 ? places : [[0, 0]];
}

function middleOf({ projection, box }: MapFrame): { lonDeg: number; latDeg: number } {
  const at = projection.invert?.([box.x + box.width / 2, box.y + box.height / 2]) ?? [0, 0];
  return { lonDeg: at[0], latDeg: at[1] };
}

function groundOf(frame: MapFrame, coast: Coast | null): { land: string; shore: string } {
  const sea = element('rect', { ...rectOf(frame.box), fill: PAPER.sea });
  const d = coast ? geoPath(frame.projection).digits(1)(coast) : null;
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
function ownOf(input: MapInput, frame: MapFrame): { grounds: string; outlines: string; marks: string } {
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

interface TrackOnMap {
  readonly svg: string;
  readonly line: readonly (readonly [number, number])[];
  /** marks that want a time beside them */
  readonly marks: readonly { readonly timeMs: number; readonly at: readonly [number, number] }[];
}

const MARK_HOURS = [1, 3, 6, 12, 24, 48, 72, 120, 240];

function trackOf(input: MapInput, frame: MapFrame): TrackOnMap {
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
function peakMark(input: MapInput, frame: MapFrame): string {
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

interface MapLabel {
  readonly text: string;
  readonly box: Box;
  readonly svg: string;
}

function labelsOf(
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
    const width = Math.max(...lines.map((line) => textWidth(line, { size: LABEL, bold: options.bold }))) + 4;
    wishes.push({ ...options, lines, point, width, height: lines.length * LABEL * 1.2 });
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
    wish([cutText(name, { size: LABEL, width: 160 })], point, { bold: false, gap: 8 });
  }
  for (const { name, polygons } of input.zones ?? []) {
    const point = zoneMiddle(polygons, frame);
    if (point) wish([cutText(name, { size: LABEL, width: 160 })], point, { bold: false, gap: 2 });
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
          y: place.y + LABEL * (0.94 + 1.2 * k),
          size: LABEL,
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
function noticeOf(input: MapInput, frame: MapFrame, levels: readonly number[]): { box: Box; svg: string } | null {
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
