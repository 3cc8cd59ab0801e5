import { mkdir, readdir, stat } from 'node:fs/promises';
import { basename, join } from 'node:path';
import type { DuckDBValue } from '@duckdb/node-api';
import { GalewakeError, InputError } from '../errors.js';
import { formatTime } from '../track/read/time.js';
import type { Track } from '../track/track.js';
import { KNOT_MPS } from '../units.js';
import { writeDurablyInPieces } from './durable.js';
import { chunksOf, withDuckDb } from './event-query.js';
import { unreadable } from './input.js';
import { readLines } from './lines.js';
import { readTrackFile } from './tracks.js';
import { unwritable } from './unwritable.js';

/** What a cell of an event table cannot hold. */
const UNFIT = /[",\r\n]/;

/**
 * The event table of an input: a CSV as it is; a Parquet file or a folder of track files is written once into the run's
 * folder as CSV, under a name that its content gives, so that every shard reads the same bytes.
 * @throws InputError `events.input`, `events.cell`, `io.*`, and what the readers of tracks throw
 */
export async function eventTableOf(input: string, folder: string): Promise<string> {
  const found = await stat(input).catch((error: unknown) => {
    throw unreadable(input, error);
  });
  const lines = found.isDirectory() ? folderLines(input) : isParquet(input) ? parquetLines(input) : null;
  if (!lines) return input;
  await mkdir(folder, { recursive: true }).catch((error: unknown) => {
    throw unwritable(folder, error);
  });
  return (await writeDurablyInPieces(folder, lines, (sha256) => `input.${sha256.slice(0, 12)}.csv`)).path;
}

const isParquet = (path: string): boolean => /\.parquet$/i.test(path);

/** Rates of a second table: headings `event` and `rate`; CSV or Parquet. */
export async function readRates(path: string): Promise<{ event: string; rate: number; row: number }[]> {
  const source = basename(path);
  const rows: { event: string; rate: number; row: number }[] = [];
  let row = 0;
  let [eventAt, rateAt] = [-1, -1];
  const take = (line: string): void => {
    row++;
    if (line.trim() === '') return;
    const cells = line
      .replace(/^\uFEFF/, '')
      .split(',')
      .map((cell) => cell.trim());
    if (row === 1) {
      [eventAt, rateAt] = [cells.indexOf('event'), cells.indexOf('rate')];
      if (eventAt < 0 || rateAt < 0)
        throw new InputError(
          'events.rates',
          `${source}: the table of rates has the headings event,rate; found ${cells.join(',')}`,
        );
      return;
    }
    const [event, rate] = [cells[eventAt] ?? '', Number(cells[rateAt] || Number.NaN)];
    if (event === '' || !(rate > 0 && Number.isFinite(rate)))
      throw new InputError(
        'events.rates',
        `${source}, row ${row}: '${line.slice(0, 80)}' is no event and rate above zero, such as E1,0.002 (expected number a year)`,
      );
    rows.push({ event, rate, row });
  };
  if (isParquet(path))
    await parquetLines(path)(async (piece) => {
      for (const line of piece.trimEnd().split('\n')) take(line);
    });
  else for await (const line of readLines(path)) take(line);
  if (rows.length === 0) throw new InputError('events.rates', `${source}: holds no rate`);
  return rows;
}

type Write = (piece: string) => Promise<void>;

/** A Parquet table as lines of CSV, some thousand rows at a time: every value as text, times by ISO 8601. */
function parquetLines(path: string): (write: Write) => Promise<void> {
  const source = basename(path);
  const plain = (text: string, row: number, name: string): string => {
    if (!UNFIT.test(text)) return text;
    throw new InputError(
      'events.cell',
      `${source}, row ${row}, ${name}: ${JSON.stringify(text).slice(0, 60)} holds a comma, a quote or a line break; an event table has plain cells`,
    );
  };
  return (write) =>
    withDuckDb(async (connection) => {
      // a pattern that matches this file alone
      const file = path.replace(/[[*?]/g, '[$&]');
      const names = (await connection.run('select * from read_parquet($1) limit 0', [file])).columnNames();
      await write(`${names.map((name) => plain(name, 0, 'heading')).join(',')}\n`);
      let row = 1;
      for await (const columns of chunksOf(connection, 'select columns(*)::varchar from read_parquet($1)', [file])) {
        let text = '';
        for (let i = 0; i < columns[0]!.length; i++) {
          row++;
          text += `${columns.map((column, c) => plain(timeText(column[i]!), row, names[c]!)).join(',')}\n`;
        }
        await write(text);
      }
    }).catch((error: unknown) => {
      if (error instanceof GalewakeError) throw error;
      throw new InputError(
        'events.input',
        `${source}: this is no Parquet file that can be read (${messageOf(error)})`,
        {
          cause: error,
        },
      );
    });
}

const messageOf = (error: unknown): string => (error as Error).message.split('\n')[0]!.slice(0, 120);

/** A value as text; a time of the database as ISO 8601. */
function timeText(value: DuckDBValue): string {
  if (value === null) return '';
  const text = String(value);
  const time = /^(\d{4}-\d\d-\d\d) (\d\d:\d\d:\d\d(?:\.\d+)?)(?:\+00(?::?00)?)?$/.exec(text);
  return time ? `${time[1]}T${time[2]}Z` : text;
}

/** Thresholds whose radii an event table of a folder has columns for, kt. */
const RADII_KT = [34, 50, 64] as const;
const QUADRANTS = ['ne', 'se', 'sw', 'nw'] as const;
const HEADINGS = [
  'event',
  'name',
  'basin',
  'time',
  'lat_deg',
  'lon_deg',
  'status',
  'averaging_s',
  'vmax_mps',
  'pressure_pa',
  'ambient_pa',
  'outer_isobar_pa',
  'outer_isobar_radius_m',
  'rmax_m',
  'holland_b',
  ...RADII_KT.flatMap((kt) => QUADRANTS.map((quadrant) => `r${kt}_${quadrant}_m`)),
];

/** The storms of all track files of a folder, in the order of the files' names; a storm's id is its event. */
function folderLines(folder: string): (write: Write) => Promise<void> {
  return async (write) => {
    const names = (await readdir(folder, { withFileTypes: true }))
      .filter((entry) => entry.isFile() && !entry.name.startsWith('.'))
      .map(({ name }) => name)
      .sort();
    if (names.length === 0)
      throw new InputError('events.input', `${folder}: the folder holds no file; give one with track files`);
    await write(`${HEADINGS.join(',')}\n`);
    const seen = new Map<string, string>();
    for (const name of names) {
      for await (const track of readTrackFile(join(folder, name))) {
        const other = seen.get(track.id);
        if (other !== undefined)
          throw new InputError(
            'events.input',
            `${name}: storm '${track.id}' stands in ${other} too; every event has an id of its own, rename one`,
          );
        seen.set(track.id, name);
        await write(trackLines(track, name));
      }
    }
  };
}

function trackLines(track: Track, source: string): string {
  if (UNFIT.test(track.id))
    throw new InputError(
      'events.cell',
      `${source}: the id ${JSON.stringify(track.id).slice(0, 60)} holds a comma, a quote or a line break; rename the storm`,
    );
  const plain = (text: string | null): string => (text ?? '').replace(/[",\r\n]/g, ' ');
  const number = (value: number | null): string => (value === null ? '' : String(value));
  const lines = track.fixes.map((fix) => {
    const radii = RADII_KT.flatMap((kt) => {
      const own = fix.windRadii.find(({ thresholdMps }) => thresholdMps === kt * KNOT_MPS);
      return [0, 1, 2, 3].map((quadrant) => number(own?.radiiM[quadrant] ?? null));
    });
    const others = fix.windRadii.find(({ thresholdMps }) => !RADII_KT.some((kt) => thresholdMps === kt * KNOT_MPS));
    if (others)
      throw new InputError(
        'events.input',
        `${source}, storm '${track.id}': radii of ${others.thresholdMps} m/s; an event set takes those of ${RADII_KT.join(', ')} kt`,
      );
    return [
      track.id,
      plain(track.name),
      plain(track.basin),
      formatTime(fix.timeMs),
      number(fix.latDeg),
      number(fix.lonDeg),
      plain(fix.status),
      number(fix.averagingS),
      number(fix.maxWindMps),
      number(fix.centralPressurePa),
      number(fix.ambientPressurePa),
      number(fix.outerIsobarPa),
      number(fix.outerIsobarRadiusM),
      number(fix.radiusOfMaxWindM),
      number(fix.hollandB),
      ...radii,
    ].join(',');
  });
  return `${lines.join('\n')}\n`;
}
