import { CAUTION } from '../write/provenance.js';
import { levelColours, PAPER } from './colours.js';
import { type LonLat, type MapFrame, mapFrame, PROJECTION_NAMES } from './extent.js';
import { graticule } from './graticule.js';
import type { Box } from './labels.js';
import { legend } from './legend.js';
import { knownPeak, type MapInput } from './map-input.js';
import { LABEL_SIZE, labelsOf, noticeOf } from './map-labels.js';
import { areasOf, graticuleOf, groundOf, ownOf, peakMark, rectOf, trackOf } from './map-layers.js';
import { scaleBar } from './scale-bar.js';
import { element, svgDocument, textAt } from './svg.js';
import { cutText, wrapText } from './text.js';
import { averagingText, latitudeLongitudeText, momentText, periodText, windText } from './words.js';

export type { Coast, MapFix, MapInput, MapPeak, MapPlace, MapZone } from './map-input.js';

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

/**
 * The map of a swath: isotachs, coast, graticule, track with times, peak, scale bar, legend, recipe and caution, on a
 * sheet 720 wide and as high as the storm needs. Works anywhere on Earth, across ±180° and near the poles.
 */
export function mapPicture(given: MapInput): MapPicture {
  const input = { ...given, peak: knownPeak(given.peak) };
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
  const grid = graticule(frame, { size: LABEL_SIZE });
  const areas = areasOf(input.isotachs, { colours, projection: frame.projection });
  const track = trackOf(input, frame);
  const bar = scaleBar(frame, {
    at: middleOf(frame),
    size: LABEL_SIZE,
    avoid: places.map(frame.project).filter((point) => point !== null),
  });
  const notice = shown ? null : noticeOf(input, frame, levels);
  const labels = labelsOf(input, frame, {
    track,
    taken: [bar.box, ...(notice ? [notice.box] : []), ...grid.labels.filter((l) => l.inside).map((l) => l.box)],
  });

  const foot = frame.box.y + frame.box.height + LABEL_SIZE * 1.15 + 22;
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
    ? `Strongest: ${windText(input.peak.windMps)} at ${latitudeLongitudeText(input.peak)}, ${momentText(input.peak.timeMs)} UTC; highest gust ${windText(input.peak.gustMps)}`
    : 'No wind on this map.';
  const notes = [
    { text: peakLine, fill: PAPER.ink, bold: false },
    { text: CAUTION, fill: PAPER.ink, bold: true },
    { text: `Recipe: ${input.recipe}`, fill: PAPER.quiet, bold: false },
    {
      text: `Galewake ${input.version} · ${PROJECTION_NAMES[frame.kind]} projection · times in UTC${input.coast ? ` · coast: ${input.coastCredit ?? 'Natural Earth'}` : ''}`,
      fill: PAPER.quiet,
      bold: false,
    },
  ];
  let y = scale.bottom + 26;
  const noteLines: string[] = [];
  for (const note of notes) {
    for (const line of wrapText(note.text, { size: LABEL_SIZE, bold: note.bold, width: frame.box.width })) {
      noteLines.push(textAt(line, { x: SIDE, y, size: LABEL_SIZE, fill: note.fill, bold: note.bold }));
      y += LABEL_SIZE * 1.32;
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
        areas +
        graticuleOf(grid) +
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
          size: LABEL_SIZE,
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
