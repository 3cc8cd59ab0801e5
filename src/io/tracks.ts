import { type ReadTracksOptions, readTracks } from '../track/read/read.js';
import type { Track } from '../track/track.js';
import { readLineBatches, sourceName } from './lines.js';

/**
 * The tracks of a file, or of standard input for `-`, storm after storm; see `readTracks` for formats and options.
 * @throws InputError `io.*`, `track.*`; UsageError, LimitError `track.*`
 */
export function readTrackFile(
  path: string,
  options: Omit<ReadTracksOptions, 'source'> = {},
): AsyncGenerator<Track, void, undefined> {
  return readTracks(readLineBatches(path), { ...options, source: sourceName(path) });
}
