import type { EventRow, NamedPlace } from '../events/event-row.js';
import { formatTime } from '../track/read/time.js';
import { toKnots } from '../units.js';
import { csvLine } from './csv-cell.js';

/** One column of the event table: its name, and whether it holds text. */
export interface EventColumn {
  readonly name: string;
  readonly kind: 'text' | 'integer' | 'number';
}

const column = (name: string, kind: EventColumn['kind'] = 'number'): EventColumn => ({ name, kind });

/** Columns of the event table. Places are numbered as the plan lists them. */
export function eventColumns(options: {
  readonly levelsMps: readonly number[];
  readonly places: readonly NamedPlace[];
  readonly landfalls: boolean;
}): EventColumn[] {
  return [
    column('event', 'text'),
    column('number', 'integer'),
    column('rate'),
    column('peak_wind_mps'),
    column('peak_lat_deg'),
    column('peak_lon_deg'),
    column('lowest_pressure_hpa'),
    ...options.levelsMps.flatMap((level) => {
      const kt = Number(toKnots(level).toFixed(1));
      return [column(`cells_${kt}kt`, 'integer'), column(`area_${kt}kt_km2`)];
    }),
    ...options.places.flatMap((_, i) => [column(`closest_${i + 1}_km`), column(`closest_${i + 1}_time`, 'text')]),
    ...(options.landfalls
      ? [
          column('landfall_time', 'text'),
          column('landfall_lat_deg'),
          column('landfall_lon_deg'),
          column('landfall_wind_mps'),
        ]
      : []),
  ];
}

/** A row of the event table as a line of CSV, in the order of {@link eventColumns}; an empty cell where there is no value. */
export function eventLine(
  { id, number, rate }: { readonly id: string; readonly number: number; readonly rate: number },
  row: EventRow | null,
  { levelsMps, places, landfalls }: Parameters<typeof eventColumns>[0],
): string {
  const rounded = (value: number, digits: number): number => Number(value.toFixed(digits));
  const start = [id, number, Number.isNaN(rate) ? null : rate];
  if (!row)
    return csvLine([
      ...start,
      ...Array.from({ length: eventColumns({ levelsMps, places, landfalls }).length - 3 }, () => null),
    ]);
  const { peak, landfall } = row;
  return csvLine([
    ...start,
    ...(peak ? [rounded(peak.windMps, 3), rounded(peak.latDeg, 5), rounded(peak.lonDeg, 5)] : [null, null, null]),
    rounded(row.lowestPressurePa / 100, 2),
    ...row.levels.flatMap(({ cells, areaM2 }) => [cells, rounded(areaM2 / 1e6, 1)]),
    ...row.approaches.flatMap(({ distanceM, timeMs }) => [rounded(distanceM / 1000, 2), formatTime(timeMs)]),
    ...(landfalls
      ? landfall
        ? [
            formatTime(landfall.timeMs),
            rounded(landfall.latDeg, 4),
            rounded(landfall.lonDeg, 4),
            rounded(landfall.maxWindMps, 2),
          ]
        : [null, null, null, null]
      : []),
  ]);
}
