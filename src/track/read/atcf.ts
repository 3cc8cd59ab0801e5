import { LimitError, UsageError } from '../../errors.js';
import { didYouMean } from '../../nearest.js';
import type { ReadOptions, Track } from '../track.js';
import { type DeckLine, readDeckLine } from './atcf-line.js';
import { mergeLines } from './atcf-merge.js';
import { buildTracks, nameOrNull } from './builder.js';
import { collectCautions } from './cautions.js';
import { refusal, shown, shownList, spotIn } from './checks.js';
import type { TrackParser } from './parser.js';
import { formatTime, parseTime } from './time.js';

/** A deck is held as a whole: lines of one time, of one technique and of one forecast need not follow each other. */
const MOST_LINES = 1_000_000;
/** A longer pause within one storm number is the next season's storm (common practice: no storm rests so long). */
const SEASON_GAP_MS = 60 * 86_400_000;

interface DeckStorm {
  readonly id: string;
  readonly basin: string;
  lastMs: number;
  readonly lines: DeckLine[];
}

/**
 * Reads decks of the Automated Tropical Cyclone Forecasting System [SampsonSchrader2000]: the best track (b-deck,
 * technique BEST) or one technique of the forecasts (a-deck). Up to three lines of one time, one a wind threshold, make
 * one fix. Winds are 1-minute means. Of an a-deck with several initial times the newest that the technique has is taken,
 * unless `initialTime` names one; a fix stands at initial time + forecast period.
 *
 * The season in the storm's id is the year of its first line; south of the equator it begins on 1 July before.
 * @throws InputError `track.*`; UsageError `track.technique`, `track.initial-time`; LimitError `track.too-large`
 */
export function atcfParser(
  options: ReadOptions & { readonly deck: 'a-deck' | 'b-deck' },
  emit: (track: Track) => void,
): TrackParser {
  const spot = spotIn(options.source, collectCautions());
  const storms: DeckStorm[] = [];
  const current = new Map<string, DeckStorm>();
  let count = 0;

  const emitStorm = (storm: DeckStorm, given: readonly DeckLine[]): void => {
    const builder = buildTracks(spot, { sortTimes: false });
    let lines = given;
    if (options.sortTimes && lines.some(({ timeMs }, i) => i > 0 && timeMs < lines[i - 1]!.timeMs)) {
      spot.cautions.add('sorted', 0, 'lines were not in the order of time: sorted');
      lines = given.toSorted((a, b) => a.timeMs - b.timeMs);
    }
    for (const fix of mergeLines(lines, spot)) {
      spot.line = fix.line;
      builder.add(fix);
    }
    const names = lines.map(({ name }) => nameOrNull(name)).filter((name) => name !== null);
    const track = builder.finish({
      id: storm.id,
      name: names.at(-1) ?? null,
      basin: storm.basin,
      kind: options.deck === 'b-deck' ? 'best' : 'forecast',
      format: options.deck,
    });
    if (track) emit(track);
  };

  const pickTechnique = (): string => {
    const techniques = [...new Set(storms.flatMap(({ lines }) => lines.map(({ technique }) => technique)))];
    const asked = (options.technique ?? (options.deck === 'b-deck' ? 'BEST' : undefined))?.trim().toUpperCase();
    if (asked !== undefined && techniques.includes(asked)) return asked;
    if (asked === undefined && techniques.length === 1) return techniques[0]!;
    const listed = shownList(techniques);
    throw new UsageError(
      'track.technique',
      asked === undefined
        ? `${options.source}: has forecasts of ${techniques.length} techniques; choose one with technique: ${listed}`
        : `${options.source}: has no technique '${shown(asked)}'${didYouMean(asked, techniques)}; it has ${listed}`,
      { fields: { source: options.source, techniques: listed } },
    );
  };

  const newestForecast = (storm: DeckStorm, lines: readonly DeckLine[]): readonly DeckLine[] => {
    const times = [...new Set(lines.map(({ initialMs }) => initialMs))].sort((a, b) => a - b);
    if (times.length === 0) return lines;
    let chosen = times.at(-1)!;
    if (options.initialTime !== undefined) {
      chosen = parseTime(options.initialTime.trim());
      if (!times.includes(chosen)) {
        const listed = times.slice(-20).map(formatTime).join(', ');
        throw new UsageError(
          'track.initial-time',
          `${options.source}: ${storm.id} has no forecast from '${shown(options.initialTime)}'; its newest are from ${listed}`,
          { fields: { source: options.source, storm: storm.id } },
        );
      }
    } else if (times.length > 1) {
      spot.cautions.add(
        'initial time',
        0,
        `the newest of ${times.length} forecasts is taken, from ${formatTime(chosen)}`,
      );
    }
    return lines.filter(({ initialMs }) => initialMs === chosen).toSorted((a, b) => a.timeMs - b.timeMs);
  };

  return {
    line(text, line) {
      if (text.trim() === '') return;
      spot.line = line;
      if (++count > MOST_LINES) {
        throw new LimitError(
          'track.too-large',
          `${options.source}: has more than ${MOST_LINES} lines, and a deck is held as a whole; give the decks of single storms`,
          {
            fields: { source: options.source, limit: MOST_LINES },
          },
        );
      }
      const read = readDeckLine(text, spot);
      if (read === null) return;
      const number = `${read.basin}${read.number}`;
      let storm = current.get(number);
      if (!storm || Math.abs(read.initialMs - storm.lastMs) > SEASON_GAP_MS) {
        const id = `${number}${seasonOf(read)}`;
        storm = storms.find((known) => known.id === id);
        if (!storm) {
          storm = { id, basin: basinOf(read), lastMs: read.initialMs, lines: [] };
          storms.push(storm);
        }
        current.set(number, storm);
      }
      storm.lastMs = read.initialMs;
      storm.lines.push(read);
    },
    end() {
      if (storms.length === 0)
        throw refusal(spot, 'track.none', 'has no line with a centre; give a deck with positions');
      const technique = pickTechnique();
      for (const storm of storms) {
        const lines = storm.lines.filter((line) => line.technique === technique);
        emitStorm(storm, options.deck === 'a-deck' ? newestForecast(storm, lines) : lines);
      }
    },
  };
}

const isSouthern = (basin: string): boolean => basin === 'SH' || basin === 'SI' || basin === 'SP';

function seasonOf(line: DeckLine): number {
  const time = new Date(line.initialMs);
  const next = isSouthern(line.basin) && time.getUTCMonth() >= 6 ? 1 : 0;
  return time.getUTCFullYear() + next;
}

/** Two-letter basin: the deck's `SH` is told apart at 135° E (common practice of the Joint Typhoon Warning Center). */
function basinOf(line: DeckLine): string {
  if (line.basin === 'SH')
    return line.lonDeg >= 20 && line.lonDeg < 135 ? 'SI' : line.lonDeg > -70 && line.lonDeg < 20 ? 'SA' : 'SP';
  const basins: Readonly<Record<string, string>> = { AL: 'NA', IO: 'NI', SL: 'SA', LS: 'SA' };
  return basins[line.basin] ?? line.basin;
}
