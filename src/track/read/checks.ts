import { InputError } from '../../errors.js';
import { KNOT_MPS, toKnots } from '../../units.js';
import type { Quadrants, WindRadii } from '../track.js';
import type { Cautions } from './cautions.js';

/** Where in the source a value stands; the reader moves `line` on. */
export interface Spot {
  readonly source: string;
  line: number;
  readonly record: 'line' | 'feature';
  readonly cautions: Cautions;
}

export function spotIn(source: string, cautions: Cautions, record: 'line' | 'feature' = 'line'): Spot {
  return { source, line: 0, record, cautions };
}

/** Text from a file as a message may show it: short, on one line, no control characters. */
export function shown(text: string): string {
  const plain = text.replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]+/g, ' ').trim();
  return plain.length > 60 ? `${plain.slice(0, 57)}…` : plain;
}

/** A list as a message may show it: the first twenty. */
export function shownList(items: readonly string[]): string {
  const some = items.slice(0, 20).map(shown).join(', ');
  return items.length > 20 ? `${some} and ${items.length - 20} more` : some;
}

/** An error about the current row: `storm.csv:14: …`. */
export function refusal(spot: Spot, code: string, problem: string, value: string | number = ''): InputError {
  const place = spot.record === 'line' ? `${spot.source}:${spot.line}` : `${spot.source}: feature ${spot.line}`;
  return new InputError(code, `${place}: ${problem}`, {
    fields: { source: spot.source, line: spot.line, value: typeof value === 'string' ? shown(value) : value },
  });
}

/** Text as it is kept in a track: trimmed, control characters (line ends, terminal escapes) turned into a space. */
export function cleanText(text: string): string {
  return text.replace(/[\u0000-\u001f\u007f-\u009f]+/g, ' ').trim();
}

/**
 * A plain decimal number.
 * @throws InputError `track.number`, `track.decimal-comma`
 */
export function numberOf(text: string, spot: Spot, name: string): number {
  const value = Number(text);
  if (Number.isFinite(value) && text.trim() !== '' && !/[xob]/i.test(text)) return value + 0;
  const written = text.trim();
  if (/^[+-]?\d+,\d+$/.test(written)) {
    throw refusal(
      spot,
      'track.decimal-comma',
      `${name} '${shown(written)}' has a decimal comma; write ${written.replace(',', '.')} (in a spreadsheet: export with the decimal point)`,
      written,
    );
  }
  throw refusal(
    spot,
    'track.number',
    `${name} '${shown(written)}' is not a number; write a number with a decimal point, or leave the cell empty where the value is not known`,
    written,
  );
}

/** @throws InputError `track.latitude` beyond the poles */
export function checkedLatitude(latDeg: number, spot: Spot): number {
  if (latDeg >= -90 && latDeg <= 90) return latDeg + 0;
  throw refusal(spot, 'track.latitude', `latitude ${latDeg} is beyond the poles; write degrees from -90 to 90`, latDeg);
}

/**
 * Longitude in −180 ≤ λ < 180; a longitude that is so already keeps its last digit.
 * @throws InputError `track.longitude` beyond ±360
 */
export function checkedLongitude(lonDeg: number, spot: Spot): number {
  if (lonDeg >= -180 && lonDeg < 180) return lonDeg + 0;
  if (lonDeg >= -360 && lonDeg <= 360) {
    // a nanodegree is a tenth of a millimetre: it takes off what the subtraction adds to 180.1 − 360
    return Math.round((lonDeg + (lonDeg < 0 ? 360 : -360)) * 1e9) / 1e9 + 0;
  }
  throw refusal(
    spot,
    'track.longitude',
    `longitude ${lonDeg} goes more than once around the Earth; write degrees from -180 to 360`,
    lonDeg,
  );
}

/** @throws InputError `track.time` for what is no date or no time */
export function checkedTime(timeMs: number, text: string, spot: Spot): number {
  if (!Number.isNaN(timeMs)) return timeMs;
  throw refusal(
    spot,
    'track.time',
    `'${shown(text)}' is no date and time of the calendar; write it as 2031-09-03T06:00Z`,
    text,
  );
}

const isMissingMark = (value: number): boolean => value === -99 || value === -999 || value === -9999;

/** Strongest believable sustained wind, m/s (common practice: a typing mistake or a wrong unit beyond it). */
const STRONGEST_WIND_MPS = 150;
/** Lowest and highest believable central or ambient pressure, Pa (common practice). */
const LOWEST_PRESSURE_PA = 80_000;
const HIGHEST_PRESSURE_PA = 110_000;
const LARGEST_RADIUS_M = 3_000_000;
const LARGEST_RMW_M = 2_000_000;

/**
 * A maximum sustained wind. −99, −999 and −9999 stand for a missing one.
 * @param unit of `value`, as a factor to m/s
 * @throws InputError `track.wind` when negative or beyond 150 m/s
 */
export function checkedWind(value: number, unit: number, spot: Spot): number | null {
  const windMps = value * unit;
  if (windMps >= 0 && windMps <= STRONGEST_WIND_MPS) return windMps + 0;
  if (isMissingMark(value)) {
    spot.cautions.add(`wind ${value}`, spot.line, `wind ${value} stands for a missing one`);
    return null;
  }
  throw refusal(
    spot,
    'track.wind',
    windMps < 0
      ? `wind ${value} is negative; write a speed of 0 or more, or leave it empty where it is not known`
      : `wind ${value} (${windMps.toFixed(0)} m/s) is stronger than any storm's; check the value and the unit of its heading`,
    value,
  );
}

/**
 * A pressure. Zero and below stand for a missing one. Any other outside 800–1100 hPa is refused in a file that the user
 * wrote, and taken as missing in an agency's archive, which the user cannot mend.
 * @param unit of `value`, as a factor to Pa
 * @throws InputError `track.pressure`
 */
export function checkedPressure(
  value: number,
  unit: number,
  at: { spot: Spot; name: string; archive?: boolean },
): number | null {
  const pressurePa = value * unit;
  if (pressurePa >= LOWEST_PRESSURE_PA && pressurePa <= HIGHEST_PRESSURE_PA) return pressurePa;
  const { spot, name } = at;
  if (at.archive || value <= 0) {
    spot.cautions.add(`${name} ${value}`, spot.line, `${name} ${value} cannot be right: taken as missing`);
    return null;
  }
  throw refusal(
    spot,
    'track.pressure',
    `${name} ${value} is outside 800–1100 hPa; check the value and the unit of its heading, or leave it empty`,
    value,
  );
}

/**
 * A distance from the centre. −99, −999 and −9999 stand for a missing one.
 * @param unit of `value`, as a factor to m
 * @throws InputError `track.radius` when negative or beyond 3000 km
 */
export function checkedRadius(value: number, unit: number, at: { spot: Spot; name: string }): number | null {
  const radiusM = value * unit;
  if (radiusM >= 0 && radiusM <= LARGEST_RADIUS_M) return radiusM + 0;
  const { spot, name } = at;
  if (isMissingMark(value)) return null;
  throw refusal(
    spot,
    'track.radius',
    radiusM < 0
      ? `${name} ${value} is negative; write a distance of 0 or more, or leave it empty where it is not known`
      : `${name} ${value} (${(radiusM / 1000).toFixed(0)} km) is larger than any storm; check the value and the unit of its heading`,
    value,
  );
}

/**
 * A radius of maximum wind: zero stands for a missing one.
 * @throws InputError `track.radius` when negative or beyond 2000 km
 */
export function checkedRadiusOfMaxWind(value: number, unit: number, spot: Spot): number | null {
  if (value === 0) {
    spot.cautions.add('rmax 0', spot.line, 'radius of maximum wind 0 cannot be right: taken as missing');
    return null;
  }
  const radiusM = checkedRadius(value, unit, { spot, name: 'radius of maximum wind' });
  if (radiusM !== null && radiusM > LARGEST_RMW_M) {
    throw refusal(
      spot,
      'track.radius',
      `radius of maximum wind ${value} is larger than any storm; check the value and its unit`,
      value,
    );
  }
  return radiusM;
}

const QUADRANTS: Quadrants<string> = ['NE', 'SE', 'SW', 'NW'];

/** Says what is odd in the radii of a row: a stronger wind that reaches farther, a wind that the storm does not have. */
export function lookAtRadii(windRadii: readonly WindRadii[], maxWindMps: number | null, spot: Spot): void {
  for (let i = 0; i < windRadii.length; i++) {
    const { thresholdMps, radiiM } = windRadii[i]!;
    const weaker = i > 0 ? windRadii[i - 1] : undefined;
    for (let q = 0; q < 4; q++) {
      const radiusM = radiiM[q];
      const outerM = weaker?.radiiM[q];
      if (weaker && radiusM != null && outerM != null && radiusM > outerM) {
        const names = `${knotsText(thresholdMps)}-kt radius reaches beyond the ${knotsText(weaker.thresholdMps)}-kt one`;
        spot.cautions.add('radii order', spot.line, `the ${names} in the ${QUADRANTS[q]} quadrant; both are kept`);
      }
      // half a knot: a wind of 33.6 kt is written as 34
      if (radiusM != null && radiusM > 0 && maxWindMps !== null && maxWindMps < thresholdMps - KNOT_MPS / 2) {
        const wind = `${knotsText(thresholdMps)}-kt radius is given though the wind is ${knotsText(maxWindMps)} kt`;
        spot.cautions.add('radii without wind', spot.line, `a ${wind}; it is kept`);
      }
    }
  }
}

const knotsText = (speedMps: number): string => String(Number(toKnots(speedMps).toFixed(1)));
