import { UsageError } from '../../errors.js';
import type { Fix, Quadrants, ReadOptions, WindRadii } from '../track.js';
import {
  checkedLatitude,
  checkedLongitude,
  checkedPressure,
  checkedRadius,
  checkedRadiusOfMaxWind,
  checkedTime,
  checkedWind,
  cleanText,
  lookAtRadii,
  numberOf,
  refusal,
  type Spot,
  shown,
} from './checks.js';
import { columnsOf, type PlainKey, QUANTITY_KEYS, type QuantityName, radiusKeyOf } from './columns.js';
import { parseTime } from './time.js';

/** A column with its unit; `index` −1 = the table has none. */
interface UnitColumn {
  readonly index: number;
  readonly unit: number;
  readonly name: string;
}

interface RadiiColumns {
  readonly thresholdMps: number;
  readonly quadrants: readonly UnitColumn[];
}

/** How the rows of one table are read: worked out once from its headings. */
export interface RowPlan {
  readonly columns: Readonly<Record<PlainKey, number>>;
  readonly quantities: Readonly<Record<QuantityName, UnitColumn>>;
  readonly radii: readonly RadiiColumns[];
  readonly averagingS: number;
}

const NO_COLUMN: UnitColumn = { index: -1, unit: 1, name: '' };
const NO_RADII: readonly WindRadii[] = Object.freeze([]);
const PERIOD_LIMIT_S = 3600;

/** @throws UsageError `track.averaging`, and as {@link columnsOf} */
export function planRows(headings: readonly string[], options: ReadOptions, spot: Spot): RowPlan {
  const found = columnsOf(headings, { columns: options.columns, spot });
  const at = (key: PlainKey): number => found.get(key) ?? -1;
  const quantity = (name: QuantityName): UnitColumn => {
    const [key, other] = QUANTITY_KEYS[name].filter((candidate) => found.has(candidate.key));
    if (!key) return NO_COLUMN;
    if (other) spot.cautions.add(other.key, 0, `the table has both ${key.key} and ${other.key}: ${key.key} is read`);
    return { index: found.get(key.key)!, unit: key.unit, name: key.key };
  };
  const averagingS = options.averagingS ?? 60;
  if (!isPeriod(averagingS)) {
    throw new UsageError('track.averaging', `averagingS: ${averagingS} s ${NO_PERIOD}`, { fields: { averagingS } });
  }

  const radii = new Map<number, UnitColumn[]>();
  for (const [key, index] of found) {
    const radius = radiusKeyOf(key);
    if (!radius) continue;
    const quadrants = radii.get(radius.thresholdMps) ?? [NO_COLUMN, NO_COLUMN, NO_COLUMN, NO_COLUMN];
    if (quadrants[radius.quadrant] !== NO_COLUMN) {
      const twice = `${quadrants[radius.quadrant]!.name} and ${key}`;
      throw refusal(spot, 'track.heading-twice', `${twice} hold the same radius; remove one`, key);
    }
    quadrants[radius.quadrant] = { index, unit: radius.unit, name: key };
    radii.set(radius.thresholdMps, quadrants);
  }

  return {
    columns: {
      storm: at('storm'),
      name: at('name'),
      basin: at('basin'),
      kind: at('kind'),
      time: at('time'),
      lat_deg: at('lat_deg'),
      lon_deg: at('lon_deg'),
      averaging_s: at('averaging_s'),
      holland_b: at('holland_b'),
      status: at('status'),
      record: at('record'),
    },
    quantities: {
      maxWindMps: quantity('maxWindMps'),
      centralPressurePa: quantity('centralPressurePa'),
      ambientPressurePa: quantity('ambientPressurePa'),
      outerIsobarPa: quantity('outerIsobarPa'),
      outerIsobarRadiusM: quantity('outerIsobarRadiusM'),
      radiusOfMaxWindM: quantity('radiusOfMaxWindM'),
    },
    radii: [...radii]
      .map(([thresholdMps, quadrants]) => ({ thresholdMps, quadrants }))
      .sort((a, b) => a.thresholdMps - b.thresholdMps),
    averagingS,
  };
}

/** One row of the table as a fix. */
export function readFix(cells: readonly string[], plan: RowPlan, spot: Spot): Fix {
  const { columns, quantities } = plan;
  const timeText = cells[columns.time]!.trim();
  const pressure = (column: UnitColumn, name: string): number | null => {
    const value = numberIn(cells, column.index, spot, column.name);
    return value === null ? null : checkedPressure(value, column.unit, { spot, name });
  };
  const wind = numberIn(cells, quantities.maxWindMps.index, spot, quantities.maxWindMps.name);
  const maxWindMps = wind === null ? null : checkedWind(wind, quantities.maxWindMps.unit, spot);
  const rmax = numberIn(cells, quantities.radiusOfMaxWindM.index, spot, quantities.radiusOfMaxWindM.name);
  const windRadii = plan.radii.length === 0 ? NO_RADII : readRadii(cells, plan, spot);
  if (windRadii.length > 0) lookAtRadii(windRadii, maxWindMps, spot);
  const centralPressurePa = pressure(quantities.centralPressurePa, 'pressure');
  const ambientPressurePa = pressure(quantities.ambientPressurePa, 'ambient pressure');
  if (centralPressurePa !== null && ambientPressurePa !== null && centralPressurePa >= ambientPressurePa) {
    spot.cautions.add('ambient', spot.line, 'the central pressure is not below the ambient one; both are kept');
  }
  return {
    timeMs: checkedTime(parseTime(timeText), timeText, spot),
    latDeg: checkedLatitude(angleIn(cells, columns.lat_deg, spot, 'NS'), spot),
    lonDeg: checkedLongitude(angleIn(cells, columns.lon_deg, spot, 'EW'), spot),
    maxWindMps,
    averagingS: readPeriod(cells, plan, spot),
    centralPressurePa,
    ambientPressurePa,
    outerIsobarPa: pressure(quantities.outerIsobarPa, 'outer isobar'),
    outerIsobarRadiusM: radiusIn(cells, quantities.outerIsobarRadiusM, spot),
    radiusOfMaxWindM: rmax === null ? null : checkedRadiusOfMaxWind(rmax, quantities.radiusOfMaxWindM.unit, spot),
    hollandB: readHollandB(cells, plan, spot),
    windRadii,
    status: textIn(cells, columns.status),
    record: textIn(cells, columns.record),
    line: spot.line,
  };
}

function readRadii(cells: readonly string[], plan: RowPlan, spot: Spot): readonly WindRadii[] {
  const windRadii: WindRadii[] = [];
  for (const { thresholdMps, quadrants } of plan.radii) {
    const read = (q: number): number | null => radiusIn(cells, quadrants[q]!, spot);
    const radiiM: Quadrants<number | null> = [read(0), read(1), read(2), read(3)];
    if (radiiM.some((radiusM) => radiusM !== null)) windRadii.push({ thresholdMps, radiiM });
  }
  return windRadii.length === 0 ? NO_RADII : windRadii;
}

function radiusIn(cells: readonly string[], column: UnitColumn, spot: Spot): number | null {
  const value = numberIn(cells, column.index, spot, column.name);
  return value === null ? null : checkedRadius(value, column.unit, { spot, name: column.name });
}

function readPeriod(cells: readonly string[], plan: RowPlan, spot: Spot): number {
  const value = numberIn(cells, plan.columns.averaging_s, spot, 'averaging_s');
  if (value === null) return plan.averagingS;
  if (isPeriod(value)) return value;
  throw refusal(spot, 'track.averaging', `averaging period ${value} s ${NO_PERIOD}`, value);
}

const isPeriod = (averagingS: number): boolean => averagingS >= 1 && averagingS <= PERIOD_LIMIT_S;
const NO_PERIOD = 'is not between 1 s and an hour; 60 is the 1-minute mean, 600 the 10-minute one';

function readHollandB(cells: readonly string[], plan: RowPlan, spot: Spot): number | null {
  const value = numberIn(cells, plan.columns.holland_b, spot, 'holland_b');
  if (value === null || (value > 0 && value <= 10)) return value;
  throw refusal(
    spot,
    'track.holland-b',
    `Holland's B ${value} is not between 0 and 10; leave it empty where it is not known`,
    value,
  );
}

/** The text of a cell, null where there is none. */
export function textIn(cells: readonly string[], index: number): string | null {
  const text = cells[index];
  return text === undefined || text === '' ? null : cleanText(text) || null;
}

const POWERS = Array.from({ length: 16 }, (_, i) => 10 ** i);

/**
 * The number in a cell, null where it is blank. Short plain decimals are read digit by digit: an integer below 2⁵³
 * divided by an exact power of ten is rounded once, as the standard conversion rounds.
 */
function numberIn(cells: readonly string[], index: number, spot: Spot, name: string): number | null {
  const text = cells[index];
  if (text === undefined || text === '') return null;
  const length = text.length;
  const negative = text.charCodeAt(0) === 45;
  let at = negative ? 1 : 0;
  if (length - at <= 15) {
    let digits = 0;
    let point = -1;
    for (; at < length; at++) {
      const code = text.charCodeAt(at) - 48;
      if (code >= 0 && code <= 9) digits = digits * 10 + code;
      else if (code === -2 && point === -1) point = at;
      else break;
    }
    const decimals = point === -1 ? 0 : length - 1 - point;
    if (at === length && length - (negative ? 1 : 0) - (point === -1 ? 0 : 1) > 0) {
      const value = decimals === 0 ? digits : digits / POWERS[decimals]!;
      return negative && value !== 0 ? -value : value;
    }
  }
  return text.trim() === '' ? null : numberOf(text, spot, name);
}

/** A latitude or longitude: signed degrees, or degrees with a letter (`16.1N`). */
function angleIn(cells: readonly string[], index: number, spot: Spot, letters: 'NS' | 'EW'): number {
  const name = letters === 'NS' ? 'latitude' : 'longitude';
  const given = cells[index] ?? '';
  const last = given.charCodeAt(given.length - 1);
  // it ends in a digit, so that it has no letter: the usual case
  if (last >= 48 && last <= 57) return numberIn(cells, index, spot, name)!;
  const text = given.trim();
  if (text === '') throw refusal(spot, `track.${name}`, `the ${name} is missing; every row needs a time and a centre`);
  const letter = text.slice(-1).toUpperCase();
  if (!letters.includes(letter) || /^[a-z]/i.test(text)) return numberIn(cells, index, spot, name)!;
  const degrees = numberOf(text.slice(0, -1), spot, name);
  if (degrees >= 0) return letter === letters[1] ? -degrees : degrees;
  throw refusal(spot, `track.${name}`, `${name} '${shown(text)}' has a sign and a letter; write one of them`, text);
}
