import { InputError } from '../errors.js';
import { delimiterOf, splitCells, unguardCell } from '../track/read/cells.js';
import { cleanText, shown, shownList } from '../track/read/checks.js';
import { KNOT_MPS, STATUTE_MILE_M } from '../units.js';
import { type CurvePoint, type DamageCurve, tableCurve } from './curve.js';

const SPEEDS: Readonly<Record<string, number>> = {
  mps: 1,
  kt: KNOT_MPS,
  kmh: 1 / 3.6,
  mph: STATUTE_MILE_M / 3600,
};
/** `wind_kt`, `gust_mps`, `wind_kmh_10min`, `gust_mph_3s` */
const WIND_HEADING = /^(wind|gust)_(mps|kt|kmh|mph)(?:_(\d+)(s|min))?$/;
const RATIOS = ['ratio', 'damage_ratio', 'loss_ratio'];

/**
 * A damage curve from a table: a column of winds whose heading says the unit (`wind_mps`, `gust_kt`, and with the
 * averaging period `wind_kt_10min`, `gust_mps_3s`), and a column `ratio` of 0 to 1. What the heading does not say of
 * gust or mean and of the averaging period, the options must.
 * @throws InputError `curve.heading`, `curve.statement`, `curve.cell`, and those of {@link tableCurve}
 */
export function curveFromTable(
  text: string,
  options: { source: string; of?: 'wind' | 'gust'; averagingS?: number },
): DamageCurve {
  const { source } = options;
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  const first = lines.findIndex((line) => line.trim() !== '' && !line.startsWith('#'));
  if (first === -1)
    throw new InputError(
      'curve.heading',
      `${source}: is empty; give rows of wind and ratio under a heading such as wind_mps,ratio`,
    );
  const delimiter = delimiterOf(lines[first]!);
  const cellsOf = (line: number): string[] => {
    const cells = splitCells(lines[line]!, delimiter);
    if (!cells) throw new InputError('curve.cell', `${source}:${line + 1}: a quoted cell is never closed`);
    return cells.map((cell) => cleanText(unguardCell(cell.trim())));
  };
  const headings = cellsOf(first);
  const lower = headings.map((heading) => heading.toLowerCase());
  const winds = lower.flatMap((heading, i) => (WIND_HEADING.test(heading) ? [i] : []));
  const ratios = lower.flatMap((heading, i) => (RATIOS.includes(heading) ? [i] : []));
  if (winds.length !== 1 || ratios.length !== 1) {
    throw new InputError(
      'curve.heading',
      `${source}:${first + 1}: the headings are ${shownList(headings)}; a curve needs one of wind_mps, wind_kt, wind_kmh, wind_mph (or gust_…) and one ratio`,
    );
  }
  const [windColumn, ratioColumn] = [winds[0]!, ratios[0]!];
  const [, kind, unit, count, per] = WIND_HEADING.exec(lower[windColumn]!)!;
  const said = {
    of: kind === 'gust' ? ('gust' as const) : undefined,
    averagingS: count === undefined ? undefined : Number(count) * (per === 'min' ? 60 : 1),
  };
  for (const [key, name] of [
    ['of', '--curve-of'],
    ['averagingS', '--curve-averaging'],
  ] as const) {
    if (said[key] !== undefined && options[key] !== undefined && said[key] !== options[key])
      throw new InputError(
        'curve.statement',
        `${source}: the heading ${headings[windColumn]} says ${said[key]}, ${name} says ${options[key]}; mend one of them`,
      );
  }
  const of = said.of ?? options.of;
  const averagingS = said.averagingS ?? options.averagingS;
  if (of === undefined || averagingS === undefined) {
    throw new InputError(
      'curve.statement',
      `${source}: a curve must say ${of === undefined ? 'whether it takes the gust or the sustained wind (--curve-of gust, --curve-of wind)' : ''}${of === undefined && averagingS === undefined ? ' and ' : ''}${averagingS === undefined ? 'the averaging period of its wind (--curve-averaging 1min, or a heading such as wind_mps_1min)' : ''}`,
    );
  }
  const points: CurvePoint[] = [];
  for (let line = first + 1; line < lines.length; line++) {
    if (lines[line]!.trim() === '' || lines[line]!.startsWith('#')) continue;
    const cells = cellsOf(line);
    if (cells.every((cell) => cell === '')) continue;
    if (cells.length !== headings.length)
      throw new InputError(
        'curve.cell',
        `${source}:${line + 1}: the row has ${cells.length} cells, the heading ${headings.length}${delimiter === ',' && cells.length > headings.length ? ' (a decimal comma?)' : ''}`,
      );
    const number = (column: number): number => {
      const cell = cells[column]!;
      const value = Number(delimiter !== ',' && /^[+-]?\d+,\d+$/.test(cell) ? cell.replace(',', '.') : cell);
      if (cell === '' || !Number.isFinite(value) || /[xob]/i.test(cell))
        throw new InputError(
          'curve.cell',
          `${source}:${line + 1}: ${headings[column]} '${shown(cell)}' is not a number${cell.endsWith('%') ? '; write a share of 1, not a percentage' : ''}`,
        );
      return value;
    };
    points.push({ windMps: number(windColumn) * SPEEDS[unit!]!, ratio: number(ratioColumn), line: line + 1 });
  }
  return tableCurve(points, { source, of, averagingS });
}
