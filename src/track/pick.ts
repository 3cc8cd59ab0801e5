import { UsageError } from '../errors.js';
import { didYouMean } from '../nearest.js';
import { shown } from './read/checks.js';
import { formatTime } from './read/time.js';
import type { Track } from './track.js';

/** Most storms that a message lists. */
const LISTED = 20;

interface Brief {
  readonly id: string;
  readonly name: string | null;
  readonly firstMs: number;
}

const described = ({ id, name, firstMs }: Brief): string =>
  `${shown(id)}${name === null ? '' : ` ${shown(name)}`} (${formatTime(firstMs).slice(0, 10)})`;

function listed(briefs: readonly Brief[]): string {
  const some = briefs.slice(0, LISTED).map(described).join(', ');
  return briefs.length > LISTED ? `${some} and ${briefs.length - LISTED} more` : some;
}

/** Looks for one storm while storms pass by: holds no more of the others than id, name and first day. */
function stormPicker(wanted: string | undefined): { offer(track: Track): void; pick(): Track } {
  const asked = wanted?.trim().toLowerCase();
  const briefs: Brief[] = [];
  const byId: Track[] = [];
  const byName: Track[] = [];
  let only: Track | undefined;
  return {
    offer(track) {
      briefs.push({ id: track.id, name: track.name, firstMs: track.fixes[0]!.timeMs });
      if (briefs.length === 1) only = track;
      if (asked === undefined) return;
      if (track.id.toLowerCase() === asked) byId.push(track);
      else if (track.name?.toLowerCase() === asked) byName.push(track);
    },
    pick() {
      if (asked === undefined) {
        if (briefs.length === 1 && only) return only;
        throw new UsageError(
          'track.storm-choice',
          briefs.length === 0
            ? 'there is no storm to choose from'
            : `there are ${briefs.length} storms: name one by its id or name: ${listed(briefs)}`,
          { fields: { storms: briefs.length } },
        );
      }
      const exact = byId.find(({ id }) => id === wanted?.trim());
      const found = exact ? [exact] : byId.length > 0 ? byId : byName;
      if (found.length === 1) return found[0]!;
      if (found.length > 1) {
        const briefsFound = found.map(({ id, name, fixes }) => ({ id, name, firstMs: fixes[0]!.timeMs }));
        throw new UsageError(
          'track.storm-choice',
          `${found.length} storms are called '${shown(wanted!)}': name one by its id: ${listed(briefsFound)}`,
          { fields: { storm: shown(wanted!), storms: found.length } },
        );
      }
      const names = briefs.flatMap(({ id, name }) => (name === null ? [id] : [id, name]));
      throw new UsageError(
        'track.unknown-storm',
        `there is no storm '${shown(wanted!)}'${didYouMean(wanted!.trim(), names)}; there ${briefs.length === 1 ? 'is' : 'are'} ${listed(briefs)}`,
        { fields: { storm: shown(wanted!) } },
      );
    },
  };
}

/**
 * One storm of several, by id or name, upper and lower case alike; the id counts first. Without a name the only one.
 * @throws UsageError `track.storm-choice` when several fit (the message lists them), `track.unknown-storm`
 */
export function pickTrack(tracks: Iterable<Track>, wanted?: string): Track {
  const picker = stormPicker(wanted);
  for (const track of tracks) picker.offer(track);
  return picker.pick();
}

/** As {@link pickTrack}, from a stream of storms that is never held as a whole. */
export async function pickTrackFrom(tracks: AsyncIterable<Track>, wanted?: string): Promise<Track> {
  const picker = stormPicker(wanted);
  for await (const track of tracks) picker.offer(track);
  return picker.pick();
}
