import type { WindField } from '../model/field.js';
import { type RadialRow, radialTable } from '../model/radial.js';
import { type Recipe, recipeNumber } from '../model/recipe.js';
import type { StormState } from '../track/path.js';
import { toKnots } from '../units.js';
import type { BalanceRegime } from '../vortex/balance.js';
import { type ChartLine, chart, lineKey, roundDomain, roundTicks, type Scale, type Tick } from './chart.js';
import { PAPER } from './colours.js';
import { sheet } from './sheet.js';
import { element, textAt } from './svg.js';
import { cutText, textWidth } from './text.js';
import { reductionText } from './words.js';

/** One vortex of a drawing. */
export interface DrawnVortex {
  readonly name: string;
  readonly recipe: Recipe;
  readonly state: StormState;
  readonly field: WindField;
  /** the table that is drawn from its first to its last radius */
  readonly rows: readonly Pick<RadialRow, 'radiusM'>[];
}

const SIDE = 64;
const PANEL = 460;
const GAP = 62;
const RADII = 240;

const LINES = [
  { key: 'gradientWindMps', name: 'gradient wind', colour: PAPER.lines[0], width: 2.6 },
  { key: 'surfaceWindMps', name: '10-m wind, mean around the circle', colour: PAPER.lines[1], width: 2.6 },
  { key: 'cyclostrophicWindMps', name: 'cyclostrophic wind', colour: PAPER.lines[2], dash: '7 4' },
  { key: 'geostrophicWindMps', name: 'geostrophic wind', colour: PAPER.lines[3], dash: '2 4' },
] as const;

const REGIMES: Readonly<Record<BalanceRegime, string>> = {
  cyclostrophic: '#f7d9e3',
  gradient: '#e9edf3',
  geostrophic: '#dcecea',
};

/**
 * Radial profiles side by side on common axes: winds, pressure, and which balance rules where by the local Rossby number.
 */
export function profileSvg(
  vortices: readonly DrawnVortex[],
  options: { readonly regimeBounds?: { readonly above: number; readonly below: number } } = {},
): string {
  const regimeBounds = options.regimeBounds ?? { above: 10, below: 0.1 };
  const farthestM = Math.max(1000, ...vortices.flatMap(({ rows }) => rows.map((row) => row.radiusM)));
  const radiiM = Array.from({ length: RADII }, (_, i) => farthestM * ((i + 1) / RADII) ** 1.6);
  const tables = vortices.map(({ field, recipe }) =>
    radialTable(field, { radiiM, airDensityKgM3: recipeNumber(recipe, 'vortex.density_kgm3'), regimeBounds }),
  );
  const all = tables.flat();
  const strongest = Math.max(
    10,
    ...all.flatMap((row) => [row.gradientWindMps, row.surfaceWindMps, row.cyclostrophicWindMps]),
  );
  const windDomain = roundDomain([0, strongest * 1.04], 7);
  const pressures = all.map((row) => row.pressurePa / 100).filter(Number.isFinite);
  const pressureDomain = roundDomain([Math.min(...pressures), Math.max(...pressures)], 5);
  const first = vortices[0];
  const width = Math.max(720, 2 * SIDE + vortices.length * PANEL + (vortices.length - 1) * GAP);
  const panel = vortices.length === 1 ? width - 2 * SIDE : PANEL;
  const state = first?.state;
  const subtitle = state
    ? `Maximum sustained wind ${state.maxWindMps.toFixed(1)} m/s (${toKnots(state.maxWindMps).toFixed(0)} kt) at 10 m, radius of maximum wind ${(state.radiusOfMaxWindM / 1000).toFixed(0)} km, central pressure ${(state.centralPressurePa / 100).toFixed(1)} hPa, latitude ${Math.abs(state.latDeg).toFixed(1)}°${state.latDeg < 0 ? 'S' : 'N'}.`
    : '';
  return sheet({
    width,
    side: SIDE,
    title: vortices.length > 1 ? 'Radial profiles' : 'Radial profile',
    subtitle,
    notes: [
      `Shaded: the balance that rules by the local Rossby number (cyclostrophic above ${regimeBounds.above}, geostrophic below ${regimeBounds.below}; common practice). ${first ? `Reduction to 10 m: ${reductionText(first.recipe)}.` : ''}`,
    ],
    content: (top) => {
      const key = lineKey(LINES, { x: SIDE, y: top + 16, width: width - 2 * SIDE });
      const shades = shadeKey({ x: SIDE, y: top + 16 + key.height });
      const y = top + 16 + key.height + 68;
      const panels = vortices.map((vortex, i) =>
        panelOf(vortex, tables[i]!, {
          x: SIDE + i * (PANEL + GAP),
          y,
          width: panel,
          farthestM,
          windDomain,
          pressureDomain,
        }),
      );
      return { svg: [key.svg, shades, ...panels].join('\n'), bottom: y + 280 + 44 + 120 + 60 };
    },
  });
}

function panelOf(
  vortex: DrawnVortex,
  rows: readonly RadialRow[],
  at: {
    readonly x: number;
    readonly y: number;
    readonly width: number;
    readonly farthestM: number;
    readonly windDomain: readonly [number, number];
    readonly pressureDomain: readonly [number, number];
  },
): string {
  const { x, y, width } = at;
  const km = (row: RadialRow): number => row.radiusM / 1000;
  const xDomain = [0, at.farthestM / 1000] as const;
  const ticks = (domain: readonly [number, number], most: number): Tick[] =>
    roundTicks(domain, most).map((value) => ({ value, text: String(value) }));
  const lines: ChartLine[] = LINES.map(({ key, ...look }) => ({
    ...look,
    points: rows.map((row) => {
      const value = row[key];
      return [km(row), value === null || value > at.windDomain[1] ? null : value] as const;
    }),
  }));
  const wind = chart({
    box: { x, y, width, height: 280 },
    x: xDomain,
    y: at.windDomain,
    xTicks: ticks(xDomain, 6).map(({ value }) => ({ value, text: '' })),
    yTicks: ticks(at.windDomain, 7),
    under: (scale) => regimeBands(rows, scale, { y, height: 280 }),
    lines,
  });
  const pressure = chart({
    box: { x, y: y + 280 + 44, width, height: 120 },
    x: xDomain,
    y: at.pressureDomain,
    xTicks: ticks(xDomain, 6),
    yTicks: ticks(at.pressureDomain, 4),
    lines: [
      { name: 'pressure', colour: PAPER.lines[0], points: rows.map((row) => [km(row), row.pressurePa / 100] as const) },
    ],
  });
  const caption = (text: string, offset: number, bold = false): string =>
    textAt(bold ? cutText(text, { size: 16, bold, width }) : text, {
      x,
      y: y + offset,
      size: bold ? 16 : 14,
      bold,
      fill: bold ? PAPER.ink : PAPER.quiet,
    });
  return [
    caption(vortex.name, -26, true),
    caption('wind, m/s', -8),
    wind.svg,
    caption('pressure, hPa', 280 + 36),
    pressure.svg,
    textAt('distance from the centre, km', {
      x: x + width / 2,
      y: y + 280 + 44 + 120 + 36,
      size: 14,
      fill: PAPER.quiet,
      anchor: 'middle',
    }),
  ].join('\n');
}

/** What the shades mean, in a row. */
function shadeKey(at: { readonly x: number; readonly y: number }): string {
  let { x } = at;
  const parts: string[] = [];
  for (const regime of ['cyclostrophic', 'gradient', 'geostrophic'] as const) {
    const name = `${regime} balance`;
    parts.push(
      element('rect', { x, y: at.y - 12, width: 26, height: 14, fill: REGIMES[regime], stroke: PAPER.rule }),
      textAt(name, { x: x + 32, y: at.y, size: 14, fill: PAPER.ink }),
    );
    x += 50 + textWidth(name, { size: 14 });
  }
  return element('g', { class: 'key' }, parts.join(''));
}

/** Stripes of the balance that rules, with their names where there is room. */
function regimeBands(
  rows: readonly RadialRow[],
  x: Scale,
  at: { readonly y: number; readonly height: number },
): string {
  const parts: string[] = [];
  let start = 0;
  for (let i = 1; i <= rows.length; i++) {
    if (i < rows.length && rows[i]!.balance === rows[start]!.balance) continue;
    const regime = rows[start]!.balance;
    const from = x.at(start === 0 ? 0 : rows[start]!.radiusM / 1000);
    const to = x.at(i < rows.length ? rows[i]!.radiusM / 1000 : rows[rows.length - 1]!.radiusM / 1000);
    parts.push(
      element('rect', {
        class: `regime ${regime}`,
        x: from,
        y: at.y,
        width: to - from,
        height: at.height,
        fill: REGIMES[regime],
      }),
    );
    if (to - from > textWidth(regime, { size: 14 }) + 10)
      parts.push(textAt(regime, { x: (from + to) / 2, y: at.y + 18, size: 14, fill: PAPER.quiet, anchor: 'middle' }));
    start = i;
  }
  return parts.join('');
}
