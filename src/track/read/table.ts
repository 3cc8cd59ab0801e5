import type { ReadOptions, Track } from '../track.js';
import { collectCautions } from './cautions.js';
import { type Delimiter, delimiterOf, splitCells, unguardCell } from './cells.js';
import { refusal, shown, spotIn } from './checks.js';
import type { TrackParser } from './parser.js';
import { planRows } from './row.js';
import { gatherStorms, type StormRows } from './storm-rows.js';

/** Most lines that one record may take: more is a quote that somebody forgot. */
const MOST_LINES = 50;

/**
 * Reads a table of tracks: CSV by RFC 4180 [RFC4180], or the same with tabs or semicolons. The first line holds the headings
 * (see `QUANTITY_KEYS` and `PLAIN_KEYS`), in any order, units in their names; other headings are ignored. Lines before
 * it that begin with `#` are comments. Empty cells are unknown values; −99, −999 and −9999 are taken for unknown winds
 * and radii. Rows of one storm follow each other. Without a `storm` column the file is one storm.
 * @throws InputError, UsageError with codes `track.*`
 */
export function tableParser(options: ReadOptions, emit: (track: Track) => void): TrackParser {
  const spot = spotIn(options.source, collectCautions());
  let delimiter: Delimiter = ',';
  let width = 0;
  let rows: StormRows | null = null;
  /** a record whose quoted cell goes on in the next line, and the line it began in */
  let open: { text: string; line: number; lines: number } | null = null;

  const begin = (text: string): void => {
    delimiter = delimiterOf(text);
    const headings = splitCells(text, delimiter);
    if (headings === null)
      throw refusal(spot, 'track.quote', 'a quoted heading is never closed; add the missing quote');
    if (headings.every((heading) => heading.trim() === '' || Number.isFinite(Number(heading)))) {
      const problem = `'${shown(text)}' holds no headings; begin with a line as storm,time,lat_deg,lon_deg,vmax_mps,pressure_hpa`;
      throw refusal(spot, 'track.no-heading', problem, text);
    }
    width = headings.length;
    rows = gatherStorms(planRows(headings, options, spot), spot, { ...options, format: 'csv', emit });
  };

  const refuseWidth = (cells: readonly string[]): never => {
    const commas =
      delimiter === ',' && cells.length > width
        ? '; put a cell that holds a comma in quotes, and write decimals with a point'
        : '';
    const cut = cells.length < width ? '; the row is cut off or lacks separators' : '';
    throw refusal(
      spot,
      'track.cells',
      `the row has ${cells.length} cells, the heading ${width}${commas}${cut}`,
      cells.length,
    );
  };

  return {
    line(raw, line) {
      let text = raw;
      if (open === null) spot.line = line;
      else {
        text = `${open.text}\n${raw}`;
        spot.line = open.line;
        if (++open.lines > MOST_LINES) {
          throw refusal(spot, 'track.quote', 'a quoted cell is never closed; add the missing quote');
        }
      }
      if (rows === null) {
        if (text.trim() !== '' && !text.startsWith('#')) begin(text);
        return;
      }
      if (text === '') return;
      let cells = splitCells(text, delimiter);
      if (cells === null) {
        open = { text, line: spot.line, lines: open?.lines ?? 1 };
        return;
      }
      open = null;
      if (text.includes("'")) cells = cells.map((cell) => unguardCell(cell.trim()));
      if (cells.length !== width) {
        while (cells.length > width && cells[cells.length - 1]!.trim() === '') cells.pop();
        if (cells.every((cell) => cell.trim() === '')) return;
        if (cells.length !== width) refuseWidth(cells);
      } else if (cells[0] === '' && cells.every((cell) => cell.trim() === '')) return;
      rows.add(cells);
    },
    end() {
      if (open !== null) throw refusal(spot, 'track.quote', 'a quoted cell is never closed; add the missing quote');
      rows?.end();
    },
  };
}
