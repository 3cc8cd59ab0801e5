import { distanceM, type Place } from '../earth.js';
import { staysOver } from '../land/decay.js';
import type { WindModel } from '../model/wind.js';
import { cellCentre, type Grid, projection } from '../swath/grid.js';
import type { Footprint } from '../swath/workspace.js';
import { nearestMs } from '../track/path.js';
import { MINUTE_MS } from '../units.js';

/** A place whose closest approach is asked for. */
export interface NamedPlace extends Place {
  readonly name: string;
}

/** The closest approach of a storm's centre to a place. */
export interface Approach {
  /** on the mean sphere */
  readonly distanceM: number;
  readonly timeMs: number;
}

/** The first crossing of a storm's centre from sea to land. */
export interface Landfall extends Place {
  readonly timeMs: number;
  /** maximum wind of the storm at that time, m/s */
  readonly maxWindMps: number;
}

/** What an event was, in one row. */
export interface EventRow {
  /** highest wind on the grid and the centre of its cell; null where no cell reaches the least wind that is kept */
  readonly peak: ({ readonly windMps: number } & Place) | null;
  /** lowest central pressure of its fixes, Pa */
  readonly lowestPressurePa: number;
  /** number and area (m²) of the cells at or above each level */
  readonly levels: readonly { readonly cells: number; readonly areaM2: number }[];
  /** of each place */
  readonly approaches: readonly Approach[];
  /** null where there is none, or nobody asked */
  readonly landfall: Landfall | null;
}

/** How often the centre is looked at for its closest approach. */
const SCAN_MS = 10 * MINUTE_MS;

/** Makes the rows of events on a grid. */
export function eventRows(
  grid: Grid,
  {
    cellAreaM2,
    levelsMps,
    places,
    isLand,
  }: {
    readonly cellAreaM2: (cell: number) => number;
    readonly levelsMps: readonly number[];
    readonly places: readonly NamedPlace[];
    readonly isLand: ((place: Place) => boolean) | null;
  },
): (model: WindModel, footprint: Footprint) => EventRow {
  const { inverse } = projection(grid.crs);
  return (model, { cells, windMps }) => {
    const levels = levelsMps.map(() => ({ cells: 0, areaM2: 0 }));
    let best = -1;
    for (let i = 0; i < cells.length; i++) {
      const cell = cells[i]!;
      const wind = windMps[i]!;
      // of equal winds the first cell of the grid
      if (best < 0 || wind > windMps[best]! || (wind === windMps[best]! && cell < cells[best]!)) best = i;
      const areaM2 = cellAreaM2(cell);
      for (const [l, level] of levelsMps.entries()) {
        if (wind < level) continue;
        levels[l]!.cells++;
        levels[l]!.areaM2 += areaM2;
      }
    }
    let peak: EventRow['peak'] = null;
    if (best >= 0) {
      const cell = cells[best]!;
      const [lonDeg, latDeg] = inverse(...cellCentre(grid, cell % grid.nx, Math.trunc(cell / grid.nx)));
      peak = { windMps: windMps[best]!, lonDeg, latDeg };
    }
    return {
      peak,
      levels,
      lowestPressurePa: model.completed.fixes.reduce(
        (lowest, { centralPressurePa }) => Math.min(lowest, centralPressurePa.value),
        Number.POSITIVE_INFINITY,
      ),
      approaches: places.map((place) => closestApproach(model, place)),
      landfall: isLand ? firstLandfall(model, isLand) : null,
    };
  };
}

/** When and how near the centre comes to a place: looked at every ten minutes, then narrowed to a second. */
export function closestApproach({ path }: WindModel, place: Place): Approach {
  const at = (timeMs: number): number => distanceM(path.at(timeMs), place);
  let [timeMs, least] = [path.startMs, at(path.startMs)];
  for (let time = path.startMs + SCAN_MS; time < path.endMs + SCAN_MS; time += SCAN_MS) {
    const own = at(Math.min(time, path.endMs));
    if (own < least) [timeMs, least] = [Math.min(time, path.endMs), own];
  }
  const refined = nearestMs(path, place, {
    fromMs: Math.max(path.startMs, timeMs - SCAN_MS),
    toMs: Math.min(path.endMs, timeMs + SCAN_MS),
  });
  const time = 1000 * Math.round(refined / 1000);
  const narrowed = at(time);
  return narrowed < least ? { distanceM: narrowed, timeMs: time } : { distanceM: least, timeMs };
}

/** The first time that the centre comes from sea to land, as the decay over land sees it. */
export function firstLandfall({ path }: WindModel, isLand: (place: Place) => boolean): Landfall | null {
  const stay = staysOver(path, isLand).find(({ fromStart }) => !fromStart);
  if (!stay) return null;
  const timeMs = 1000 * Math.ceil(stay.inMs / 1000);
  const { latDeg, lonDeg, maxWindMps } = path.at(timeMs);
  return { timeMs, latDeg, lonDeg, maxWindMps };
}
