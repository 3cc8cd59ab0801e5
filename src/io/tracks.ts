import { type ReadTracksOptions, readTracks } from '../track/read/read.js';
import type { Track } from '../track/track.js';
import { readLineBatches, sourceName } from './lines.js';

/**
 * The tracks of a file, or of standard input for `-`, storm after storm; see `readTracks` for formats and options.
 * @param options.onBytes sees the bytes as they are read: for a checksum of the input
 * @throws InputError `io.*`, `track.*`; UsageError, LimitError `track.*`
 */
export function readTrackFile(
  path: string,
  options: Omit<ReadTracksOptions, 'source'> & { readonly onBytes?: (bytes: Uint8Array) => void } = {},
): AsyncGenerator<Track, void, undefined> {
  const { onBytes, ...reading } = options;
  return readTracks(readLineBatches(path, onBytes ? { onBytes } : {}), { ...reading, source: sourceName(path) });
}
