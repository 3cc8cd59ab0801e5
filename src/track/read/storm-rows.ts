import { nearest } from '../../nearest.js';
import type { ReadOptions, Track, TrackKind } from '../track.js';
import { buildTracks, nameOrNull, type Storm } from './builder.js';
import { cleanText, refusal, type Spot, shown } from './checks.js';
import { type RowPlan, readFix, textIn } from './row.js';

/** Turns the rows of a table into storms: rows of one storm follow each other. */
export interface StormRows {
  /** `spot.line` says where the row stands */
  add(cells: readonly string[]): void;
  end(): void;
  /** storms given out so far */
  readonly storms: number;
}

const KINDS: readonly TrackKind[] = ['best', 'forecast', 'drawn', 'synthetic'];

/** Name of a storm in a file that has no column for it: the file's own, without folder and ending. */
function stemOf(source: string): string {
  const stem = cleanText(source.replace(/^.*[/\\]/, '').replace(/\.[^.]*$/, ''));
  return stem === '' || stem === '-' || source === 'standard input' ? 'storm' : stem;
}

/** @throws InputError `track.storm-split` when rows of a storm stand apart, and what {@link readFix} throws */
export function gatherStorms(
  plan: RowPlan,
  spot: Spot,
  options: ReadOptions & { readonly format: string; readonly emit: (track: Track) => void },
): StormRows {
  const { columns } = plan;
  const builder = buildTracks(spot, { sortTimes: options.sortTimes ?? false });
  const column = columns.storm !== -1 ? columns.storm : columns.name;
  const done = new Set<string>();
  let current: string | null = null;
  let storm: Storm | null = null;
  let sayAveraging = false;
  let count = 0;

  const begin = (cells: readonly string[]): Storm => {
    const id = column === -1 ? stemOf(options.source) : textIn(cells, column);
    if (id === null) throw refusal(spot, 'track.storm-id', 'the row names no storm; write the storm in every row');
    if (done.has(id)) {
      throw refusal(
        spot,
        'track.storm-split',
        `storm '${shown(id)}' began earlier and was ended by another one; put its rows together`,
        id,
      );
    }
    done.add(id);
    const name = textIn(cells, columns.name);
    return {
      id,
      name: name === null ? null : nameOrNull(name),
      basin: textIn(cells, columns.basin)?.toUpperCase() ?? null,
      kind: readKind(textIn(cells, columns.kind), spot),
      format: options.format,
    };
  };

  const finish = (): void => {
    if (storm === null) return;
    if (sayAveraging) {
      spot.cautions.add('averaging', 0, `the averaging period of the wind is not given: taken as ${plan.averagingS} s`);
    }
    const track = builder.finish(storm);
    storm = null;
    sayAveraging = false;
    count++;
    if (track) options.emit(track);
  };

  return {
    get storms() {
      return count;
    },
    add(cells) {
      const key = column === -1 ? '' : cells[column]!;
      if (key !== current || storm === null) {
        const id = column === -1 ? null : textIn(cells, column);
        if (storm === null || id !== storm.id) {
          finish();
          storm = begin(cells);
        }
        current = key;
      }
      const fix = readFix(cells, plan, spot);
      if (options.averagingS === undefined && (fix.maxWindMps !== null || fix.windRadii.length > 0)) {
        sayAveraging ||= columns.averaging_s === -1 || cells[columns.averaging_s]!.trim() === '';
      }
      builder.add(fix);
    },
    end() {
      finish();
    },
  };
}

function readKind(text: string | null, spot: Spot): TrackKind {
  if (text === null) return 'drawn';
  const kind = KINDS.find((candidate) => candidate === text.toLowerCase());
  if (kind) return kind;
  const guess = nearest(text, KINDS);
  throw refusal(
    spot,
    'track.kind',
    `'${shown(text)}' is no kind of track${guess ? ` (did you mean ${guess}?)` : ''}; write one of ${KINDS.join(', ')}`,
    text,
  );
}
