import type { Fix, Track, TrackKind, WindRadii } from '../track.js';
import { refusal, type Spot } from './checks.js';
import { formatTime } from './time.js';

/** Names that agencies write where a storm has none. */
const NO_NAME = new Set(['', 'UNNAMED', 'NOT_NAMED', 'NOT NAMED', 'NONAME', 'NAMELESS', 'INVEST']);

export const nameOrNull = (name: string): string | null => (NO_NAME.has(name.toUpperCase()) ? null : name);

/** Who the storm is, as the reader knows it. */
export interface Storm {
  readonly id: string;
  readonly name: string | null;
  readonly basin: string | null;
  readonly kind: TrackKind;
  readonly format: string;
}

/** Gathers one storm's fixes after the other, and sees to it that times rise. */
export interface TrackBuilder {
  add(fix: Fix): void;
  readonly size: number;
  /** the storm's track; the builder is empty afterwards. Null when it has no fix. */
  finish(storm: Storm): Track | null;
}

function sameRadii(a: readonly WindRadii[], b: readonly WindRadii[]): boolean {
  return (
    a.length === b.length &&
    a.every((one, i) => {
      const other = b[i]!;
      return one.thresholdMps === other.thresholdMps && one.radiiM.every((radiusM, q) => radiusM === other.radiiM[q]);
    })
  );
}

/** Whether two rows say the same, wherever they stand. */
export function sameFix(a: Fix, b: Fix): boolean {
  return (Object.keys(a) as (keyof Fix)[]).every(
    (key) => key === 'line' || (key === 'windRadii' ? sameRadii(a.windRadii, b.windRadii) : a[key] === b[key]),
  );
}

export function buildTracks(spot: Spot, options: { readonly sortTimes: boolean }): TrackBuilder {
  let fixes: Fix[] = [];
  let outOfOrder = false;

  /** Two rows of one time: the later one counts. */
  const settle = (kept: Fix, later: Fix): void => {
    const time = formatTime(later.timeMs);
    if (sameFix(kept, later))
      spot.cautions.add('repeated row', later.line, `repeats ${spot.record} ${kept.line} (${time})`);
    else {
      const odd = `gives ${time} again and differs from ${spot.record} ${kept.line}: the later row counts`;
      spot.cautions.add('repeated time', later.line, odd);
    }
  };

  return {
    get size() {
      return fixes.length;
    },
    add(fix) {
      const last = fixes[fixes.length - 1];
      if (last === undefined || fix.timeMs > last.timeMs) fixes.push(fix);
      else if (fix.timeMs === last.timeMs) {
        settle(last, fix);
        fixes[fixes.length - 1] = fix;
      } else if (options.sortTimes) {
        outOfOrder = true;
        fixes.push(fix);
      } else {
        throw refusal(
          spot,
          'track.time-order',
          `${formatTime(fix.timeMs)} is not after ${spot.record} ${last.line} (${formatTime(last.timeMs)}); sort the storm's rows by time, or give each storm an id of its own`,
          formatTime(fix.timeMs),
        );
      }
    },
    finish(storm) {
      if (fixes.length === 0) return null;
      let rising = fixes;
      if (outOfOrder) {
        spot.cautions.add('sorted', 0, 'rows were not in the order of time: sorted');
        // a stable sort: of two rows of one time the later one in the file counts
        const sorted = fixes.toSorted((a, b) => a.timeMs - b.timeMs);
        rising = [];
        for (const fix of sorted) {
          const last = rising[rising.length - 1];
          if (last?.timeMs === fix.timeMs) {
            settle(last, fix);
            rising.pop();
          }
          rising.push(fix);
        }
      }
      fixes = [];
      outOfOrder = false;
      const { id, name, basin, kind, format } = storm;
      return { id, name, basin, kind, format, fixes: rising, cautions: spot.cautions.take() };
    },
  };
}
