import { pairsOf, scoreOf, type VerificationRow, type VerificationSummary } from '../model/verify.js';
import { chart, roundDomain, roundTicks } from './chart.js';
import { hexOf, PAPER, scaleColour } from './colours.js';
import { sheet } from './sheet.js';
import { coordinate, element, textAt } from './svg.js';

const SIDE = 68;
const PANEL = 330;
const GAP = 74;
const ACROSS = 3;
const DOT = 2.6;

/** From the dark half of the scale, so that single dots stand out from white paper; strong winds are darker, as on maps. */
const dotColour = (at: number): string => hexOf(scaleColour(at));

const PANELS: readonly {
  readonly key: keyof VerificationSummary;
  readonly name: string;
  readonly unit: string;
  readonly colour: string;
}[] = [
  { key: '34kt', name: 'Radius of 34 kt, mean of the quadrants', unit: 'km', colour: dotColour(0.64) },
  { key: '50kt', name: 'Radius of 50 kt, mean of the quadrants', unit: 'km', colour: dotColour(0.42) },
  { key: '64kt', name: 'Radius of 64 kt, mean of the quadrants', unit: 'km', colour: dotColour(0.2) },
  { key: 'rmax_km', name: 'Radius of maximum wind', unit: 'km', colour: PAPER.lines[1] },
  { key: 'pressure_hpa', name: 'Central pressure', unit: 'hPa', colour: PAPER.lines[2] },
];

/**
 * Observed against modelled values, one panel a quantity: on the diagonal they agree. Quantities of which nothing is observed
 * have no panel.
 */
export function verifySvg(
  rows: readonly VerificationRow[],
  options: { readonly title: string; readonly hidden: readonly string[] },
): string {
  const panels = PANELS.map((panel) => ({ ...panel, pairs: pairsOf(rows, panel.key) })).filter(
    ({ pairs }) => pairs.length > 0,
  );
  const across = Math.max(1, Math.min(ACROSS, panels.length));
  const width = Math.max(720, 2 * SIDE + across * PANEL + (across - 1) * GAP);
  return sheet({
    width,
    side: SIDE,
    title: options.title,
    subtitle: `${rows.length} fixes. ${options.hidden.length > 0 ? `Hidden from the model: ${options.hidden.join(', ')}.` : 'The model knows everything that was observed.'}`,
    notes: [
      'Across: observed; up: modelled. Radii are means of the four quadrants where all four are observed above zero; bias is modelled minus observed.',
    ],
    content: (top) => {
      const parts: string[] = [];
      const tall = PANEL + 118;
      for (const [i, { pairs, name, unit, colour }] of panels.entries()) {
        const x = SIDE + (i % across) * (PANEL + GAP);
        const y = top + 66 + Math.floor(i / across) * tall;
        const values = pairs.flatMap(({ observed, modelled }) => [observed, modelled]);
        const low = unit === 'km' ? 0 : Math.min(...values);
        const domain = roundDomain([low, Math.max(low + 1, ...values)], 6);
        const ticks = roundTicks(domain, 6).map((value) => ({ value, text: String(value) }));
        const score = scoreOf(pairs);
        const drawn = chart({
          box: { x, y, width: PANEL, height: PANEL },
          x: domain,
          y: domain,
          xTicks: ticks,
          yTicks: ticks,
          under: (sx, sy) =>
            element(
              'g',
              { class: 'dots', fill: colour, 'fill-opacity': 0.5, stroke: colour, 'stroke-width': 0.6 },
              pairs
                .map(({ observed, modelled }) =>
                  element('circle', { cx: sx.at(observed), cy: sy.at(modelled), r: DOT }),
                )
                .join(''),
            ),
          lines: [
            {
              name: 'agreement',
              points: [
                [domain[0], domain[0]],
                [domain[1], domain[1]],
              ],
              colour: PAPER.ink,
              width: 1.4,
              dash: '6 4',
            },
          ],
        });
        parts.push(
          textAt(`${name}, ${unit}`, { x, y: y - 30, size: 16, bold: true, fill: PAPER.ink }),
          textAt(
            `n ${score.n}, bias ${score.bias!.toFixed(1)}, mean absolute error ${score.mae!.toFixed(1)}${score.r === null ? '' : `, r ${score.r.toFixed(2)}`}`,
            { x, y: y - 10, size: 14, fill: PAPER.quiet },
          ),
          drawn.svg,
          element(
            'g',
            { transform: `translate(${coordinate(x - 48)} ${coordinate(y + PANEL / 2)}) rotate(-90)` },
            textAt('modelled', { x: 0, y: 0, size: 14, fill: PAPER.ink, anchor: 'middle' }),
          ),
          textAt('observed', { x: x + PANEL / 2, y: y + PANEL + 36, size: 14, fill: PAPER.ink, anchor: 'middle' }),
        );
      }
      if (panels.length === 0)
        parts.push(
          textAt('Nothing was observed that can be compared.', { x: SIDE, y: top + 40, size: 16, fill: PAPER.ink }),
        );
      const lines = Math.ceil(panels.length / across);
      return { svg: parts.join('\n'), bottom: panels.length === 0 ? top + 70 : top + lines * tall + 24 };
    },
  });
}
