import { InputError } from '../errors.js';

/** Where the rows of an event stand in a file. */
export interface EventRange {
  readonly id: string;
  /** bytes, from the first of its first row to the one after its last row */
  readonly start: number;
  readonly end: number;
  /** number of its first row in the file, the heading being 1 */
  readonly row: number;
  /** expected number a year; NaN where the file does not say */
  readonly rate: number;
}

/** Columns of an event table that its index needs. */
export interface EventHeading {
  readonly text: string;
  readonly eventAt: number;
  readonly rateAt: number;
}

/**
 * The heading of an event table.
 * @throws InputError `events.heading`
 */
export function eventHeading(line: string, source: string): EventHeading {
  const columns = line
    .replace(/^\uFEFF/, '')
    .split(',')
    .map((word) => word.trim());
  const eventAt = columns.indexOf('event');
  if (eventAt < 0)
    throw new InputError(
      'events.heading',
      `${source}: there is no column 'event'; an event table has event,time,lat_deg,lon_deg and the columns of a track, and a rate a year in 'rate' or by --years`,
    );
  return { text: line.replace(/^\uFEFF/, ''), eventAt, rateAt: columns.indexOf('rate') };
}

/** Gathers the index of a table row by row: rows of an event follow each other. */
export function eventIndexer(heading: EventHeading, source: string) {
  const seen = new Set<string>();
  const events: EventRange[] = [];
  let id: string | null = null;
  let [start, end, row, rate] = [0, 0, 0, Number.NaN];
  const close = (): void => {
    if (id !== null) events.push({ id, start, end, row, rate });
  };
  return {
    /** @param from, to bytes of the line with its end */
    add(line: string, from: number, to: number, number: number): void {
      if (line.trim() === '') return;
      if (line.includes('"'))
        throw new InputError(
          'events.quote',
          `${source}, row ${number}: a cell is quoted; an event table has plain cells without quotes and commas`,
        );
      const cells = line.split(',');
      const own = (cells[heading.eventAt] ?? '').trim();
      if (own === '')
        throw new InputError(
          'events.id',
          `${source}, row ${number}: the event has no id; write one in the column 'event'`,
        );
      const text = heading.rateAt < 0 ? '' : (cells[heading.rateAt] ?? '').trim();
      const value = text === '' ? Number.NaN : Number(text);
      if (own === id) {
        if (text !== '' && value !== rate)
          throw new InputError(
            'events.rate',
            `${source}, row ${number}, event '${own}': the rate '${text}' is not that of its first row ${row}; an event has one rate`,
          );
        end = to;
        return;
      }
      if (seen.has(own))
        throw new InputError(
          'events.order',
          `${source}, row ${number}: event '${own}' comes again after another one; sort the table by event`,
        );
      close();
      seen.add(own);
      if (text !== '' && !(value > 0 && Number.isFinite(value)))
        throw new InputError(
          'events.rate',
          `${source}, row ${number}, event '${own}': the rate '${text}' is no number above zero; it is the expected number a year`,
        );
      [id, start, end, row, rate] = [own, from, to, number, value];
    },
    finish(): readonly EventRange[] {
      close();
      if (events.length === 0) throw new InputError('events.empty', `${source}: holds no event`);
      return events;
    },
  };
}

/** Rows of an event table as a track table: the event is the storm, the rate is left out. */
export function trackText(heading: EventHeading, rows: string): string {
  const columns = heading.text.split(',');
  columns[heading.eventAt] = 'storm';
  if (heading.rateAt < 0) return `${columns.join(',')}\n${rows}`;
  const without = (cells: string[]): string => cells.filter((_, i) => i !== heading.rateAt).join(',');
  const lines = rows.split(/\r?\n/).filter((line) => line.trim() !== '');
  return `${without(columns)}\n${lines.map((line) => without(line.split(','))).join('\n')}\n`;
}

/**
 * Parts that a set is cut into where nobody says: 200 events each, so that a part's memory does not grow with the set; a
 * thousand at most, as batch engines take no more by default.
 */
export function usualShards(events: number): number {
  return Math.max(1, Math.min(1000, Math.ceil(events / 200)));
}

/** Events of a shard: ⌊E·i/n⌋ to ⌊E·(i+1)/n⌋ − 1. */
export function shardRange(events: number, shards: number, shard: number): readonly [first: number, end: number] {
  return [Math.floor((events * shard) / shards), Math.floor((events * (shard + 1)) / shards)];
}
