import { createHash } from 'node:crypto';
import { basename } from 'node:path';
import type { InputRecord } from '../io/input.js';
import { readTrackFile } from '../io/tracks.js';
import { pickTrackFrom } from '../track/pick.js';
import type { Track } from '../track/track.js';
import { readOptionsOf, type TrackOptions } from './choices.js';

/** The storms of a file as they come, and the file's checksum once they have all come. */
export function stormsOf(
  file: string,
  options: TrackOptions,
): { storms: AsyncGenerator<Track, void, undefined>; record: () => InputRecord } {
  const hash = createHash('sha256');
  const storms = readTrackFile(file, { ...readOptionsOf(options), onBytes: (bytes) => hash.update(bytes) });
  return {
    storms,
    record: () => ({ name: file === '-' ? 'standard input' : basename(file), sha256: hash.digest('hex') }),
  };
}

/** One storm of a file. */
export async function readStorm(
  file: string,
  options: TrackOptions,
): Promise<{ track: Track; inputs: readonly InputRecord[] }> {
  const { storms, record } = stormsOf(file, options);
  const track = await pickTrackFrom(storms, options.storm);
  return { track, inputs: [record()] };
}
