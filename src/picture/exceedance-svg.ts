import { chart, lineKey, roundDomain, roundTicks, type Scale, type Tick } from './chart.js';
import { PAPER } from './colours.js';
import { sheet } from './sheet.js';
import { coordinate, element, textAt } from './svg.js';
import { cutText } from './text.js';

/** What is drawn of one place. */
export interface DrawnCurve {
  readonly name: string;
  /** of the curve of a place, values falling */
  readonly points: readonly {
    readonly value: number;
    readonly exceedanceRate: number;
    readonly lower: number;
    readonly upper: number;
  }[];
  /** what the rate of values above the highest may be, at most */
  readonly beyondUpper: number;
  /** [years, value] of a fitted tail, years rising */
  readonly tail: readonly (readonly [number, number])[];
  /** a line beside the name */
  readonly remark: string;
}

export interface ExceedanceOptions {
  readonly title: string;
  /** `wind, 1-minute mean` */
  readonly quantity: string;
  /** return period of the rarest event: beyond it no curve of the set goes */
  readonly setYears: number;
  /** longest return period that is drawn, years */
  readonly longestYears: number;
  readonly confidence: number;
  readonly notes: readonly string[];
}

const TAIL_LINE = { name: 'generalised Pareto tail', colour: PAPER.lines[1], width: 1.8, dash: '6 3' };
const WIDTH = 720;
const SIDE = 56;
const HEIGHT = 230;
/** Places drawn on one sheet. */
const MOST = 60;
/** Least distance of two drawn points along the axis, decades. */
const LEAST_DECADES = 0.004;
const PERIODS = [0.1, 0.2, 0.5, 1, 2, 5, 10, 25, 50, 100, 250, 500, 1000, 2500, 5000, 10_000, 25_000, 50_000, 100_000];

/** Curves of exceedance against the return period on a logarithmic axis, one panel a place, all on the same axes. */
export function exceedanceSvg(curves: readonly DrawnCurve[], options: ExceedanceOptions): string {
  const drawn = curves.slice(0, MOST);
  const shortest = Math.min(1, ...drawn.map(({ points }) => 1 / (points[points.length - 1]?.exceedanceRate ?? 1)));
  const x = [Math.log10(Math.max(0.1, shortest)), Math.log10(Math.max(10, options.longestYears))] as const;
  const values = drawn.flatMap(({ points, tail }) => [
    ...(points.length > 0 ? [points[0]!.value, points[points.length - 1]!.value] : []),
    ...tail.filter(([years]) => Math.log10(years) <= x[1] + 1e-9).map(([, value]) => value),
  ]);
  const y = roundDomain(values.length > 0 ? [Math.min(...values), Math.max(...values)] : [0, 10], 6);
  const yTicks = roundTicks(y, 6).map((value) => ({ value, text: String(value) }));
  const xTicks: Tick[] = PERIODS.map((years) => ({ value: Math.log10(years), text: String(years) })).filter(
    ({ value }) => value >= x[0] - 1e-9 && value <= x[1] + 1e-9,
  );
  const hasTail = drawn.some(({ tail }) => tail.length > 0);
  const percent = Number((100 * options.confidence).toFixed(1));
  const lines = [
    { name: options.quantity, colour: PAPER.lines[0], width: 2.4 },
    { name: `sampling interval of ${percent} %`, colour: PAPER.rule, width: 9 },
    ...(hasTail ? [TAIL_LINE] : []),
    ...(options.longestYears > 1.001 * options.setYears
      ? [{ name: 'return period of the rarest event', colour: PAPER.quiet, width: 1.2, dash: '2 3' }]
      : []),
  ];
  const missing = curves.length - drawn.length;
  return sheet({
    width: WIDTH,
    side: SIDE,
    title: options.title,
    subtitle: 'Value that is exceeded once in the return period on average, 10 m, m/s; across: return period in years',
    notes: [...options.notes, ...(missing > 0 ? [`${missing} of ${curves.length} places are not drawn here.`] : [])],
    content: (top) => {
      const key = lineKey(lines, { x: SIDE, y: top + 14, width: WIDTH - 2 * SIDE });
      const parts = [key.svg];
      let at = top + 14 + key.height + 24;
      for (const curve of drawn) {
        parts.push(panelOf(curve, { top: at, x, y, xTicks, yTicks, setYears: options.setYears }));
        at += HEIGHT + 62;
      }
      return { svg: parts.join('\n'), bottom: at - 28 };
    },
  });
}

/** A staircase: from each rate to the next larger one the value holds. In decades of years, from the left. */
function stairs(
  points: DrawnCurve['points'],
  { of, end }: { of: (point: DrawnCurve['points'][number]) => number; end: number },
): [number, number][] {
  const steps: [number, number][] = [];
  let last = Number.POSITIVE_INFINITY;
  // values rising, return periods rising
  for (let i = points.length - 1; i >= 0; i--) {
    const point = points[i]!;
    const from = -Math.log10(of(point));
    if (!Number.isFinite(from)) continue;
    if (i > 0 && i < points.length - 1 && Math.abs(from - last) < LEAST_DECADES) continue;
    if (steps.length > 0) steps.push([from, steps[steps.length - 1]![1]]);
    steps.push([from, point.value]);
    last = from;
  }
  if (steps.length > 0 && end > steps[steps.length - 1]![0]) steps.push([end, steps[steps.length - 1]![1]]);
  return steps;
}

/** The part of a line within a domain, its last step cut at the edges. */
function within(
  steps: readonly (readonly [number, number])[],
  [from, to]: readonly [number, number],
): [number, number][] {
  return steps
    .filter(([x], i) => x <= to || (steps[i - 1]?.[0] ?? to) < to)
    .filter(([x], i, all) => x >= from || (all[i + 1]?.[0] ?? from) > from)
    .map(([x, y]) => [Math.min(to, Math.max(from, x)), y]);
}

function panelOf(
  curve: DrawnCurve,
  at: {
    readonly top: number;
    readonly x: readonly [number, number];
    readonly y: readonly [number, number];
    readonly xTicks: readonly Tick[];
    readonly yTicks: readonly Tick[];
    readonly setYears: number;
  },
): string {
  const width = WIDTH - 2 * SIDE;
  const box = { x: SIDE, y: at.top, width, height: HEIGHT };
  const { points } = curve;
  const setEnd = Math.log10(at.setYears);
  const own = within(stairs(points, { of: (point) => point.exceedanceRate, end: setEnd }), at.x);
  // the value of a period is least where rates are, and is not bounded above where a stronger event may be as frequent
  const least = within(stairs(points, { of: (point) => point.lower, end: setEnd }), at.x);
  const most = within(stairs(points, { of: (point) => point.upper, end: -Math.log10(curve.beyondUpper) }), at.x);
  const band = (sx: Scale, sy: Scale): string => {
    if (least.length === 0 || most.length === 0) return '';
    const place = ([px, py]: readonly [number, number]): string => `${coordinate(sx.at(px))} ${coordinate(sy.at(py))}`;
    const open = most[most.length - 1]!;
    const end = Math.min(at.x[1], Math.max(open[0], least[least.length - 1]![0]));
    const top = open[0] < end ? [...most, [open[0], at.y[1]] as const, [end, at.y[1]] as const] : most;
    const first: readonly [number, number] = [least[0]![0], at.y[0]];
    const path = [...top, ...[...least].reverse(), first, [most[0]![0], at.y[0]] as const].map(place).join('L');
    return element('path', { class: 'interval', d: `M${path}Z`, fill: PAPER.rule, 'fill-opacity': 0.55 });
  };
  const edge = (sx: Scale): string =>
    setEnd > at.x[0] && setEnd < at.x[1]
      ? element('path', {
          class: 'set-length',
          d: `M${coordinate(sx.at(setEnd))} ${coordinate(box.y)}v${HEIGHT}`,
          stroke: PAPER.quiet,
          'stroke-width': 1.2,
          'stroke-dasharray': '2 3',
          fill: 'none',
        })
      : '';
  const drawn = chart({
    box,
    x: at.x,
    y: at.y,
    xTicks: at.xTicks,
    yTicks: at.yTicks,
    under: (sx, sy) => band(sx, sy) + edge(sx),
    lines: [
      { name: 'curve', colour: PAPER.lines[0], width: 2.4, points: own },
      ...(curve.tail.length > 0
        ? [
            {
              ...TAIL_LINE,
              points: curve.tail
                .map(([years, value]) => [Math.log10(years), value] as const)
                .filter(([px, py]) => px >= at.x[0] && px <= at.x[1] + 1e-9 && py >= at.y[0] && py <= at.y[1]),
            },
          ]
        : []),
    ],
  });
  return element(
    'g',
    { class: 'place' },
    [
      textAt(cutText(curve.name, { size: 16, bold: true, width: 230 }), {
        x: SIDE,
        y: at.top - 9,
        size: 16,
        bold: true,
        fill: PAPER.ink,
      }),
      textAt(curve.remark, { x: SIDE + width, y: at.top - 9, size: 14, fill: PAPER.ink, anchor: 'end' }),
      drawn.svg,
    ].join('\n'),
  );
}
