import { keepApostrophe } from '../track/read/cells.js';
import type { Track } from '../track/track.js';
import { csvLine } from './csv-cell.js';
import { trackColumns } from './track-columns.js';

/**
 * Tracks as CSV [RFC4180] with the documented headings. Units are chosen so that the table reads back to the same values
 * to the last bit: knots and nautical miles for what came in them, SI otherwise. Text that a spreadsheet would run is
 * guarded with an apostrophe, which the reader takes off.
 */
export function tracksToCsv(tracks: readonly Track[]): string {
  const columns = trackColumns(tracks);
  const lines = [csvLine(columns.map(({ key }) => key))];
  for (const track of tracks) {
    for (const fix of track.fixes) {
      const cells = columns.map((column) => column.value(fix, track));
      lines.push(csvLine(cells.map((cell) => (typeof cell === 'string' ? keepApostrophe(cell) : cell))));
    }
  }
  return lines.join('');
}
