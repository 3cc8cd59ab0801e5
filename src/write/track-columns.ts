import { QUADRANT_KEYS, QUANTITY_KEYS, type QuantityName, radiusKeyOf, type UnitKey } from '../track/read/columns.js';
import { formatTime } from '../track/read/time.js';
import type { Fix, Track } from '../track/track.js';
import { NAUTICAL_MILE_M, toKnots } from '../units.js';

/** One column of the documented table of tracks: its heading, and its value for a fix. */
export interface TrackColumn {
  readonly key: string;
  /** null = an empty cell */
  value(fix: Fix, track: Track): string | number | null;
}

/**
 * The number that a reader turns back into exactly `value` when it multiplies it by `unit`: with 15 digits if that is
 * enough, with all of them otherwise. Null when no number of this unit does.
 */
function exactly(value: number, unit: number): number | null {
  if (unit === 1) return value;
  const quotient = value / unit;
  const short = Number(quotient.toPrecision(15));
  if (short * unit === value) return short;
  return quotient * unit === value ? quotient : null;
}

/** The unit in which all values can be written without loss, with the fewest characters. */
function shortestUnit(values: readonly number[], units: readonly UnitKey[]): UnitKey {
  let best: { unit: UnitKey; length: number } | undefined;
  for (const unit of units) {
    let length = 0;
    for (const value of values) {
      const written = exactly(value, unit.unit);
      length += written === null ? Number.POSITIVE_INFINITY : String(written).length;
      if (length >= (best?.length ?? Number.POSITIVE_INFINITY)) break;
    }
    if (length < (best?.length ?? Number.POSITIVE_INFINITY)) best = { unit, length };
  }
  // the lists hold the SI unit itself, in which every value is exact
  return best!.unit;
}

/** The quantities that any of the fixes has, each in the unit that writes it without loss and shortest. */
export function quantityColumns(fixes: readonly Fix[]): TrackColumn[] {
  const columns: TrackColumn[] = [];
  for (const name of Object.keys(QUANTITY_KEYS) as QuantityName[]) {
    const values = fixes.map((fix) => fix[name]).filter((value) => value !== null);
    if (values.length === 0) continue;
    const { key, unit } = shortestUnit(values, QUANTITY_KEYS[name]);
    columns.push({ key, value: (fix) => (fix[name] === null ? null : exactly(fix[name], unit)) });
  }
  return columns;
}

/** `r34` for 34 kt, `r17.5mps` for a threshold that is no number of knots. */
function radiusStem(thresholdMps: number): string {
  const kt = Number(toKnots(thresholdMps).toFixed(6));
  const inKnots = `r${kt}`;
  return radiusKeyOf(`${inKnots}_ne_m`)?.thresholdMps === thresholdMps ? inKnots : `r${thresholdMps}mps`;
}

/** Four columns for each threshold that any of the fixes has radii of. */
export function radiiColumns(fixes: readonly Fix[]): TrackColumn[] {
  const thresholds = [...new Set(fixes.flatMap(({ windRadii }) => windRadii.map(({ thresholdMps }) => thresholdMps)))];
  return thresholds
    .sort((a, b) => a - b)
    .flatMap((thresholdMps) => {
      const radiiOf = (fix: Fix) => fix.windRadii.find((radii) => radii.thresholdMps === thresholdMps)?.radiiM;
      const values = fixes.flatMap((fix) => radiiOf(fix) ?? []).filter((radiusM) => radiusM !== null);
      const { key, unit } = shortestUnit(values, [
        { key: 'nmi', unit: NAUTICAL_MILE_M },
        { key: 'km', unit: 1000 },
        { key: 'm', unit: 1 },
      ]);
      return QUADRANT_KEYS.map((quadrant, q) => ({
        key: `${radiusStem(thresholdMps)}_${quadrant}_${key}`,
        value: (fix: Fix) => {
          const radiusM = radiiOf(fix)?.[q] ?? null;
          return radiusM === null ? null : exactly(radiusM, unit);
        },
      }));
    });
}

/**
 * The columns of the documented table for these tracks: always storm, kind, time, centre and averaging period; the others
 * where any fix has a value.
 */
export function trackColumns(tracks: readonly Track[]): TrackColumn[] {
  const fixes = tracks.flatMap((track) => track.fixes);
  const optional = (column: TrackColumn): TrackColumn[] =>
    tracks.some((track) => track.fixes.some((fix) => column.value(fix, track) !== null)) ? [column] : [];
  return [
    { key: 'storm', value: (_, track) => track.id },
    ...optional({ key: 'name', value: (_, track) => track.name }),
    ...optional({ key: 'basin', value: (_, track) => track.basin }),
    { key: 'kind', value: (_, track) => track.kind },
    { key: 'time', value: (fix) => formatTime(fix.timeMs) },
    { key: 'lat_deg', value: (fix) => fix.latDeg },
    { key: 'lon_deg', value: (fix) => fix.lonDeg },
    ...optional({ key: 'status', value: (fix) => fix.status }),
    ...optional({ key: 'record', value: (fix) => fix.record }),
    { key: 'averaging_s', value: (fix) => fix.averagingS },
    ...quantityColumns(fixes),
    ...optional({ key: 'holland_b', value: (fix) => fix.hollandB }),
    ...radiiColumns(fixes),
  ];
}
