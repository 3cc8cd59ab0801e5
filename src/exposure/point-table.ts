import { wrapLongitude } from '../earth.js';
import { InputError } from '../errors.js';
import { didYouMean } from '../nearest.js';
import { type Delimiter, delimiterOf, splitCells, unguardCell } from '../track/read/cells.js';
import { cleanText, shown } from '../track/read/checks.js';

/** A named point of a user's table, with its values. */
export interface PointRow {
  readonly name: string;
  readonly latDeg: number;
  readonly lonDeg: number;
  /** in the order of `valueNames` */
  readonly values: readonly number[];
  readonly line: number;
}

/** A row that was not taken, and why. */
export interface SkippedRow {
  readonly line: number;
  readonly reason: string;
}

export interface PointTableOptions {
  /** name of the source for messages */
  readonly source: string;
  /** headings of value columns; by default every other column whose first cell is a number. `[]` for none */
  readonly values?: readonly string[];
  /** refuse what would otherwise be skipped */
  readonly strict?: boolean;
  readonly onPoint: (point: PointRow) => void;
  readonly onSkip: (row: SkippedRow) => void;
}

/** Decimals of a value that are kept. */
export const VALUE_DECIMALS = 6;
/** Largest value of a cell: sums stay exact to the last decimal. */
export const LARGEST_VALUE = 1e15;

/** Reads a table of points: lines are pushed in, points are handed out. */
export interface PointTableReader {
  readonly line: (text: string, line: number) => void;
  readonly end: () => void;
  /** headings of the values, known after the first row */
  readonly valueNames: () => readonly string[];
  /** headings that are neither name, place nor value */
  readonly unusedNames: () => readonly string[];
}

const NAMES = ['name', 'id', 'place', 'asset', 'site', 'label'];
const LATITUDES = ['lat_deg', 'lat', 'latitude', 'y'];
const LONGITUDES = ['lon_deg', 'lon', 'lng', 'long', 'longitude', 'x'];

const DECIMAL_COMMA = /^[+-]?\d+,\d+$/;

/** Says why a pair of numbers is no place, or null. */
export function placeProblem(latDeg: number, lonDeg: number): string | null {
  if (!Number.isFinite(latDeg) || !Number.isFinite(lonDeg)) return 'the coordinates are missing or not numbers';
  if (Math.abs(latDeg) > 90) {
    const swapped = Math.abs(lonDeg) <= 90 ? '; are latitude and longitude swapped?' : '';
    return `latitude ${latDeg} is beyond the poles${swapped}`;
  }
  return Math.abs(lonDeg) > 360 ? `longitude ${lonDeg} is beyond ±360` : null;
}

/** A longitude in −180 … 180; one that is so already keeps its digits. */
export function plainLongitude(lonDeg: number): number {
  if (lonDeg >= -180 && lonDeg <= 180) return lonDeg;
  // a nanodegree is a tenth of a millimetre: it takes off what the subtraction adds
  return Math.round(wrapLongitude(lonDeg) * 1e9) / 1e9;
}

/** Says why a number is no value of an asset, or null. */
export function valueProblem(value: number): string | null {
  if (!(value >= 0)) return 'is not a number of at least 0';
  return value <= LARGEST_VALUE ? null : `is above ${LARGEST_VALUE}; check the unit`;
}

/**
 * A table of points: CSV by RFC 4180, or with semicolons or tabs; headings `name, lat_deg, lon_deg` (or lat/latitude,
 * lon/longitude) and value columns. A row that cannot be right is handed to `onSkip`, or refused with `strict`.
 * @throws InputError `points.heading`, `points.values`, `points.row` (strict), `points.quote`
 */
export function pointTable(options: PointTableOptions): PointTableReader {
  let delimiter: Delimiter = ',';
  let headings: readonly string[] | null = null;
  let columns = { name: -1, lat: -1, lon: -1 };
  let valueColumns: number[] | null = null;
  let open: { text: string; line: number } | null = null;

  const skip = (line: number, reason: string): void => {
    if (options.strict) {
      throw new InputError(
        'points.row',
        `${options.source}:${line}: ${reason}; mend the row, or leave out --strict to skip it`,
        { fields: { line } },
      );
    }
    options.onSkip({ line, reason });
  };

  const begin = (text: string, line: number): void => {
    delimiter = delimiterOf(text);
    const cells = splitCells(text, delimiter);
    if (cells === null)
      throw new InputError('points.quote', `${options.source}:${line}: a quoted heading is never closed`);
    headings = cells.map((cell) => cleanText(unguardCell(cell.trim())));
    const lower = headings.map((heading) => heading.toLowerCase());
    const twice = lower.find((heading, i) => heading !== '' && lower.indexOf(heading) !== i);
    if (twice !== undefined)
      throw new InputError(
        'points.heading',
        `${options.source}:${line}: two columns have the heading ${shown(twice)}; give each its own`,
      );
    // the first alias that stands there, so that a name goes before an id
    const find = (aliases: readonly string[]): number =>
      aliases.map((alias) => lower.indexOf(alias)).find((column) => column !== -1) ?? -1;
    columns = { name: find(NAMES), lat: find(LATITUDES), lon: find(LONGITUDES) };
    if (columns.lat === -1 || columns.lon === -1) {
      throw new InputError(
        'points.heading',
        `${options.source}:${line}: no heading ${columns.lat === -1 ? 'lat_deg' : 'lon_deg'}; found ${headings.map(shown).join(', ')}. Name the columns name, lat_deg and lon_deg`,
      );
    }
    if (options.values) {
      valueColumns = options.values.map((name) => {
        const column = lower.indexOf(name.toLowerCase());
        if (column === -1)
          throw new InputError(
            'points.values',
            `${options.source}: has no value column '${shown(name)}'${didYouMean(name, headings ?? [])}; its headings are ${headings!.map(shown).join(', ')}`,
          );
        return column;
      });
    }
  };

  /** decimal comma only where the comma separates nothing else */
  const number = (text: string): number => {
    const written = text.trim();
    if (written === '') return Number.NaN;
    if (/[xob]/i.test(written)) return Number.NaN;
    return Number(delimiter !== ',' && DECIMAL_COMMA.test(written) ? written.replace(',', '.') : written);
  };
  const mayHoldValues = (column: number): boolean => {
    const heading = headings![column]!.toLowerCase();
    return heading !== '' && ![NAMES, LATITUDES, LONGITUDES].some((aliases) => aliases.includes(heading));
  };

  return {
    valueNames: () => (valueColumns ?? []).map((column) => headings![column]!),
    unusedNames: () =>
      (headings ?? []).filter((heading, i) => heading !== '' && mayHoldValues(i) && !valueColumns?.includes(i)),
    line(raw, line) {
      const text = open ? `${open.text}\n${raw}` : raw;
      const start = open?.line ?? line;
      if (headings === null) {
        if (text.trim() !== '' && !text.startsWith('#')) begin(text, line);
        return;
      }
      if (text.trim() === '') return;
      const cells = splitCells(text, delimiter);
      if (cells === null) {
        if (line - start > 50)
          throw new InputError(
            'points.quote',
            `${options.source}:${start}: a quoted cell is never closed; add the missing quote`,
          );
        open = { text, line: start };
        return;
      }
      open = null;
      if (cells.every((cell) => cell.trim() === '')) return;
      if (cells.length !== headings.length) {
        skip(
          start,
          `the row has ${cells.length} cells, the heading ${headings.length}${delimiter === ',' && cells.length > headings.length ? ' (a decimal comma, or a comma in a cell without quotes?)' : ''}`,
        );
        return;
      }
      valueColumns ??= headings.flatMap((_, i) => (mayHoldValues(i) && Number.isFinite(number(cells[i]!)) ? [i] : []));
      const latDeg = number(cells[columns.lat]!);
      const lonDeg = number(cells[columns.lon]!);
      const problem = placeProblem(latDeg, lonDeg);
      if (problem !== null) {
        skip(start, `${problem} ('${shown(cells[columns.lat]!)}', '${shown(cells[columns.lon]!)}')`);
        return;
      }
      const values: number[] = [];
      for (const column of valueColumns) {
        const value = number(cells[column]!);
        const problem = valueProblem(value);
        if (problem !== null) {
          skip(
            start,
            `${shown(headings[column]!)} '${shown(cells[column]!)}' ${problem}${Number.isNaN(value) ? ' (units, thousands separators and words do not belong in a cell)' : ''}`,
          );
          return;
        }
        values.push(value);
      }
      const name = columns.name === -1 ? `row ${start}` : cleanText(unguardCell(cells[columns.name]!.trim()));
      if (name === '') {
        skip(start, 'the name is empty');
        return;
      }
      options.onPoint({ name, latDeg, lonDeg, values, line: start });
    },
    end() {
      if (open)
        throw new InputError(
          'points.quote',
          `${options.source}:${open.line}: a quoted cell is never closed; add the missing quote`,
        );
      if (headings === null)
        throw new InputError(
          'points.empty',
          `${options.source}: is empty; give a table with headings name, lat_deg, lon_deg`,
        );
    },
  };
}
