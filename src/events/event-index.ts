import { InputError, UsageError } from '../errors.js';
import { didYouMean } from '../nearest.js';
import { isTrackKey, radiusKeyOf, TRACK_KEYS } from '../track/read/columns.js';

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
  /** a column of storms beside that of events */
  readonly stormAt?: number;
}

/**
 * The heading of an event table, under the names that it is read by.
 * @param mapped the user's own headings by key: `event`, `rate` and those of a track table
 * @throws InputError `events.heading`; UsageError `events.columns`
 */
export function eventHeading(
  line: string,
  source: string,
  mapped: Readonly<Record<string, string>> = {},
): EventHeading {
  const columns = line
    .replace(/^\uFEFF/, '')
    .split(',')
    .map((word) => word.trim());
  const own = new Map<number, string>();
  for (const [key, heading] of Object.entries(mapped)) {
    if (key !== 'event' && key !== 'rate' && !isTrackKey(key))
      throw new UsageError(
        'events.columns',
        `--columns: '${key}' is no key of an event table${didYouMean(key, ['event', 'rate', ...TRACK_KEYS])}; keys are event, rate, ${TRACK_KEYS.join(', ')}, r34_ne_nmi …`,
      );
    const at = columns.indexOf(heading);
    if (at < 0)
      throw new UsageError(
        'events.columns',
        `--columns: ${source} has no heading '${heading}'${didYouMean(heading, columns)}; it has ${columns.join(', ')}`,
      );
    if (own.has(at))
      throw new UsageError('events.columns', `--columns: '${heading}' is given to both ${own.get(at)} and ${key}`);
    own.set(at, key);
  }
  // the user's own names go before those of the file
  for (const [i, name] of columns.entries()) {
    const key = own.get(i);
    columns[i] = key ?? (Object.hasOwn(mapped, name) ? `unused_${name}` : name);
  }
  const twice = columns.find((name, i) => name !== '' && columns.indexOf(name) !== i);
  if (twice !== undefined)
    throw new InputError('events.heading', `${source}: two columns are called '${twice}'; rename one`);
  const eventAt = columns.indexOf('event');
  if (eventAt < 0)
    throw new InputError(
      'events.heading',
      `${source}: there is no column 'event'; an event table has event,time,lat_deg,lon_deg and the columns of a track, and a rate a year in 'rate' or by --years`,
    );
  return {
    text: columns.join(','),
    eventAt,
    rateAt: columns.indexOf('rate'),
    stormAt: columns.indexOf('storm'),
  };
}

/** Whether a table has columns of observed wind radii. */
export function hasRadii({ text }: EventHeading): boolean {
  return text.split(',').some((name) => radiusKeyOf(name.trim().toLowerCase()) !== null);
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

/** Rows of an event table as a track table: the event is the storm; the rate and the file's own storms are left out. */
export function trackText({ text, eventAt, rateAt, stormAt = -1 }: EventHeading, rows: string): string {
  const columns = text.split(',');
  columns[eventAt] = 'storm';
  if (rateAt < 0 && stormAt < 0) return `${columns.join(',')}\n${rows}`;
  const without = (cells: string[]): string => cells.filter((_, i) => i !== rateAt && i !== stormAt).join(',');
  const lines = rows.split(/\r?\n/).filter((line) => line.trim() !== '');
  return `${without(columns)}\n${lines.map((line) => without(line.split(','))).join('\n')}\n`;
}

/**
 * Events with the rates of a second table.
 * @param table event and rate, row by row
 * @throws InputError `events.rates` for an event without a rate, with two, or that the set does not have
 */
export function withRates(
  events: readonly EventRange[],
  table: Iterable<{ readonly event: string; readonly rate: number; readonly row: number }>,
  source: string,
): EventRange[] {
  const rates = new Map<string, { readonly rate: number; readonly row: number }>();
  for (const { event, rate, row } of table) {
    const known = rates.get(event);
    if (known)
      throw new InputError(
        'events.rates',
        `${source}, row ${row}: event '${event}' has a rate already in row ${known.row}; an event has one rate`,
      );
    rates.set(event, { rate, row });
  }
  const rated = events.map((event) => {
    const found = rates.get(event.id);
    if (!found)
      throw new InputError(
        'events.rates',
        `${source}: event '${event.id}' (row ${event.row} of the set) has no rate in it; add a row, or take the event out of the set`,
      );
    rates.delete(event.id);
    return { ...event, rate: found.rate };
  });
  for (const [event, { row }] of rates)
    throw new InputError(
      'events.rates',
      `${source}, row ${row}: the set has no event '${event}'; remove the row, or give the set that it belongs to`,
    );
  return rated;
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
