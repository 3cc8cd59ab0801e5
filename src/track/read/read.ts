import { InputError } from '../../errors.js';
import type { ReadOptions, Track } from '../track.js';
import { atcfParser } from './atcf.js';
import { detectFormat, type TrackFormat } from './detect.js';
import { geojsonParser } from './geojson.js';
import { hurdat2Parser } from './hurdat2.js';
import { ibtracsParser } from './ibtracs.js';
import { lineSplitter } from './lines.js';
import type { TrackParser } from './parser.js';
import { tableParser } from './table.js';

export interface ReadTracksOptions extends ReadOptions {
  /** instead of the one that the content shows */
  readonly format?: TrackFormat;
}

/** Lines one by one, or many at a time (faster), without their line ends. */
export type LineSource = Iterable<string | readonly string[]> | AsyncIterable<string | readonly string[]>;

function parserOf(format: TrackFormat, options: ReadTracksOptions, emit: (track: Track) => void): TrackParser {
  switch (format) {
    case 'hurdat2':
      return hurdat2Parser(options, emit);
    case 'ibtracs':
      return ibtracsParser(options, emit);
    case 'a-deck':
    case 'b-deck':
      return atcfParser({ ...options, deck: format }, emit);
    case 'csv':
      return tableParser(options, emit);
    case 'geojson':
      return geojsonParser(options, emit);
  }
}

/** Storms as they come: lines in, finished storms out. */
function trackReader(options: ReadTracksOptions): {
  push(lines: readonly string[]): void;
  end(): void;
  /** storms that are finished and were not taken yet */
  take(): readonly Track[];
} {
  const { source } = options;
  let parser: TrackParser | null = null;
  let format = options.format;
  let ready: Track[] = [];
  let line = 0;
  let storms = 0;
  const emit = (track: Track): void => {
    storms++;
    ready.push(track);
  };
  return {
    push(lines) {
      for (const given of lines) {
        line++;
        const text = line === 1 && given.charCodeAt(0) === 0xfeff ? given.slice(1) : given;
        if (parser === null) {
          if (text.trim() === '' || (text.startsWith('#') && format === undefined)) continue;
          format ??= detectFormat(text, { source, line, columns: options.columns });
          parser = parserOf(format, options, emit);
        }
        parser.line(text, line);
      }
    },
    end() {
      if (parser === null) {
        throw new InputError('track.empty', `${source}: is empty; give a file with at least one storm`, {
          fields: { source },
        });
      }
      parser.end();
      if (storms === 0) {
        throw new InputError(
          'track.none',
          `${source}: holds no storm (a heading without rows?); give a file with at least one row`,
          {
            fields: { source, format: format ?? null },
          },
        );
      }
    },
    take() {
      if (ready.length === 0) return ready;
      const taken = ready;
      ready = [];
      return taken;
    },
  };
}

/**
 * Reads tracks, storm after storm, from the lines of a file; the format shows in the content unless it is named. HURDAT2,
 * IBTrACS and CSV are read as a stream that holds one storm at a time; an ATCF deck and GeoJSON are held as a whole.
 *
 * What cannot be right (a latitude of 95, a time that goes back, a negative wind) is refused with the place, the value and
 * the remedy; what is merely odd is kept, or taken as missing, and told in `cautions`.
 * @throws InputError `track.*` for the content; UsageError `track.*` for an option that does not fit the file;
 * LimitError `track.too-large`
 */
export async function* readTracks(
  lines: LineSource,
  options: ReadTracksOptions,
): AsyncGenerator<Track, void, undefined> {
  const reader = trackReader(options);
  for await (const some of lines) {
    reader.push(typeof some === 'string' ? [some] : some);
    yield* reader.take();
  }
  reader.end();
  yield* reader.take();
}

/** As {@link readTracks}, for lines that are at hand. */
export function* readTracksSync(
  lines: Iterable<string | readonly string[]>,
  options: ReadTracksOptions,
): Generator<Track, void, undefined> {
  const reader = trackReader(options);
  for (const some of lines) {
    reader.push(typeof some === 'string' ? [some] : some);
    yield* reader.take();
  }
  reader.end();
  yield* reader.take();
}

/** Reads the tracks of a text: a byte-order mark and CRLF are taken as in a file. Codes and errors as {@link readTracks}. */
export function readTracksFromText(text: string, options: ReadTracksOptions): Track[] {
  return [...readTracksSync(linesOfText(text, options.source), options)];
}

/** Characters that are cut into lines at once: a long text never stands as lines as a whole. */
const PIECE = 1 << 16;

function* linesOfText(text: string, source: string): Generator<readonly string[]> {
  const splitter = lineSplitter(source);
  for (let at = 0; at < text.length; at += PIECE) yield splitter.push(text.slice(at, at + PIECE));
  yield splitter.end();
}
