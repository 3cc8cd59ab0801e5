import { InputError } from '../../errors.js';
import { delimiterOf, splitCells } from './cells.js';
import { shown } from './checks.js';
import { isTrackKey } from './columns.js';
import { isHurdat2Header } from './hurdat2.js';

/** Formats that tracks are read from. A CSV may also have tabs or semicolons. */
export const TRACK_FORMATS = ['hurdat2', 'ibtracs', 'b-deck', 'a-deck', 'csv', 'geojson'] as const;
export type TrackFormat = (typeof TRACK_FORMATS)[number];

const ATCF = /^\s*[A-Za-z]{2}\s*,\s*\d{1,2}\s*,\s*\d{10}\s*,[^,]*,([^,]*),/;

/**
 * The format of a file by its first line that is neither blank nor a comment.
 * @throws InputError `track.format` when it is like none of them
 */
export function detectFormat(
  line: string,
  options: {
    readonly source: string;
    readonly line: number;
    readonly columns?: Readonly<Record<string, string>> | undefined;
  },
): TrackFormat {
  const text = line.trim();
  if (text.startsWith('{') || text.startsWith('[')) return 'geojson';
  if (isHurdat2Header(text)) return 'hurdat2';
  const deck = ATCF.exec(text);
  if (deck) return deck[1]!.trim().toUpperCase() === 'BEST' ? 'b-deck' : 'a-deck';
  const headings = (splitCells(text, delimiterOf(text)) ?? []).map((cell) => cell.trim());
  if (headings.includes('SID') && headings.includes('ISO_TIME')) return 'ibtracs';
  const mapped = Object.values(options.columns ?? {}).map((heading) => heading.trim().toLowerCase());
  const known = headings
    .map((heading) => heading.toLowerCase())
    .some((heading) => isTrackKey(heading) || mapped.includes(heading));
  // a line of several words is a heading of somebody's own: the table reader says which columns it needs
  if (known || headings.length >= 3) return 'csv';
  throw new InputError(
    'track.format',
    `${options.source}:${options.line}: '${shown(text)}' begins no track format; give HURDAT2, IBTrACS CSV, an ATCF deck, CSV with the documented headings, or GeoJSON`,
    { fields: { source: options.source, line: options.line, value: shown(text) } },
  );
}
