import { HOUR_MS, toKnots } from '../units.js';
import { chart, lineKey, roundDomain, roundTicks, type Tick } from './chart.js';
import { PAPER } from './colours.js';
import { sheet } from './sheet.js';
import { element, textAt } from './svg.js';
import { cutText } from './text.js';
import { averagingText, dayText, levelTexts, momentText } from './words.js';

/** What is drawn of one place; {@link SiteRecord} of the exposure floor fits. */
export interface DrawnSeries {
  readonly site: { readonly name: string };
  readonly peakWindMps: number;
  readonly peakGustMps: number;
  readonly peakTimeMs: number | null;
  readonly series: readonly { readonly timeMs: number; readonly windMps: number; readonly gustMps: number }[];
}

export interface SeriesOptions {
  readonly averagingS: number;
  readonly gustDurationS: number;
  readonly levelsMps: readonly number[];
  readonly stormName: string;
}

const WIDTH = 720;
const SIDE = 56;
const HEIGHT = 170;
/** Places drawn on one sheet. */
const MOST = 60;
const TIME_STEPS_H = [1, 2, 3, 6, 12, 24, 48, 120, 240];

/** Wind and gust against time, one panel a place, all on the same axes. */
export function seriesSvg(records: readonly DrawnSeries[], options: SeriesOptions): string {
  const drawn = records.filter((record) => record.series.length > 0).slice(0, MOST);
  const times = drawn.flatMap(({ series }) => [series[0]!.timeMs, series[series.length - 1]!.timeMs]);
  const [from, to] = times.length > 0 ? [Math.min(...times), Math.max(...times)] : [0, HOUR_MS];
  const hours = Math.max(1, (to - from) / HOUR_MS);
  const step = TIME_STEPS_H.find((size) => hours / size <= 8) ?? 240;
  const xTicks: Tick[] = [];
  for (let at = Math.ceil(from / (step * HOUR_MS)); at * step * HOUR_MS <= to; at++) {
    const timeMs = at * step * HOUR_MS;
    const clock = momentText(timeMs).slice(-5);
    xTicks.push({ value: timeMs, text: clock === '00:00' ? dayText(timeMs) : clock });
  }
  const strongest = Math.max(10, ...drawn.map((record) => record.peakGustMps));
  const y = roundDomain([0, strongest], 5);
  const yTicks = roundTicks(y, 5).map((value) => ({ value, text: String(value) }));
  const lines = [
    { name: `wind, ${averagingText(options.averagingS)}`, colour: PAPER.lines[0], width: 2.4 },
    { name: averagingText(options.gustDurationS, 'gust'), colour: PAPER.lines[1], width: 1.8, dash: '6 3' },
  ];
  const missing = records.length - drawn.length;
  return sheet({
    width: WIDTH,
    side: SIDE,
    title: `${options.stormName}: wind at places`,
    subtitle: `10 m, in m/s; levels in knots on the right; times in UTC`,
    notes: missing > 0 ? [`${missing} of ${records.length} places are not drawn here.`] : [],
    content: (top) => {
      const key = lineKey(lines, { x: SIDE, y: top + 14, width: WIDTH - 2 * SIDE });
      const parts = [key.svg];
      let at = top + 14 + key.height + 24;
      for (const record of drawn) {
        parts.push(
          panelOf(record, {
            y: at,
            lines,
            xTicks,
            yTicks,
            x: [from, Math.max(to, from + HOUR_MS)],
            yDomain: y,
            options,
          }),
        );
        at += HEIGHT + 58;
      }
      return { svg: parts.join('\n'), bottom: at - 24 };
    },
  });
}

function panelOf(
  record: DrawnSeries,
  at: {
    readonly y: number;
    readonly lines: readonly {
      readonly name: string;
      readonly colour: string;
      readonly width: number;
      readonly dash?: string;
    }[];
    readonly x: readonly [number, number];
    readonly yDomain: readonly [number, number];
    readonly xTicks: readonly Tick[];
    readonly yTicks: readonly Tick[];
    readonly options: SeriesOptions;
  },
): string {
  const width = WIDTH - 2 * SIDE;
  const box = { x: SIDE, y: at.y, width, height: HEIGHT };
  const [wind, gust] = at.lines;
  const levels = at.options.levelsMps.filter((level) => level < at.yDomain[1]);
  const drawn = chart({
    box,
    x: at.x,
    y: at.yDomain,
    xTicks: at.xTicks,
    yTicks: at.yTicks,
    lines: [
      { ...gust!, points: record.series.map((row) => [row.timeMs, row.gustMps] as const) },
      { ...wind!, points: record.series.map((row) => [row.timeMs, row.windMps] as const) },
    ],
  });
  let lastY = Number.POSITIVE_INFINITY;
  const marks = levels.map((level) => {
    const y = drawn.y.at(level);
    const rule = element('path', {
      class: 'level',
      d: `M${box.x} ${y.toFixed(1)}h${width}`,
      stroke: PAPER.quiet,
      'stroke-width': 1,
      'stroke-dasharray': '1 3',
      fill: 'none',
    });
    if (lastY - y < 13) return rule;
    lastY = y;
    return rule + textAt(levelTexts(level).knots, { x: box.x + width + 6, y: y + 5, size: 14, fill: PAPER.quiet });
  });
  const peak =
    record.peakTimeMs === null || record.peakWindMps <= 0
      ? 'no wind here'
      : `peak ${record.peakWindMps.toFixed(1)} m/s (${toKnots(record.peakWindMps).toFixed(0)} kt), gust ${record.peakGustMps.toFixed(1)} m/s, ${momentText(record.peakTimeMs)}`;
  const mark =
    record.peakTimeMs === null || record.peakWindMps <= 0
      ? ''
      : element('circle', {
          class: 'peak',
          cx: drawn.x.at(record.peakTimeMs),
          cy: drawn.y.at(record.peakWindMps),
          r: 4.5,
          fill: PAPER.sheet,
          stroke: wind!.colour,
          'stroke-width': 2,
        });
  return element(
    'g',
    { class: 'place' },
    [
      textAt(cutText(record.site.name, { size: 16, bold: true, width: 230 }), {
        x: SIDE,
        y: at.y - 9,
        size: 16,
        bold: true,
        fill: PAPER.ink,
      }),
      textAt(peak, { x: SIDE + width, y: at.y - 9, size: 14, fill: PAPER.ink, anchor: 'end' }),
      drawn.svg,
      ...marks,
      mark,
    ].join('\n'),
  );
}
