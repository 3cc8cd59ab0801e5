import { HECTOPASCAL_PA, HOUR_MS, KNOT_MPS, MINUTE_MS, NAUTICAL_MILE_M } from '../../units.js';
import type { Quadrants, WindRadii } from '../track.js';
import {
  checkedLatitude,
  checkedLongitude,
  checkedPressure,
  checkedRadius,
  checkedRadiusOfMaxWind,
  checkedTime,
  checkedWind,
  cleanText,
  numberOf,
  refusal,
  type Spot,
  shown,
} from './checks.js';
import { parseTime } from './time.js';

/** One line of a deck: the state of one time with at most one threshold's radii. */
export interface DeckLine {
  readonly basin: string;
  readonly number: string;
  readonly technique: string;
  readonly initialMs: number;
  readonly timeMs: number;
  readonly latDeg: number;
  readonly lonDeg: number;
  readonly maxWindMps: number | null;
  readonly centralPressurePa: number | null;
  readonly outerIsobarPa: number | null;
  readonly outerIsobarRadiusM: number | null;
  readonly radiusOfMaxWindM: number | null;
  readonly radii: WindRadii | null;
  readonly status: string | null;
  readonly name: string;
  readonly line: number;
}

/** Quadrant that the first of the four radii stands for; the others follow clockwise. */
const FIRST_QUADRANT: Readonly<Record<string, number>> = { NEQ: 0, SEQ: 1, SWQ: 2, NWQ: 3 };

/** @returns null for a line without a centre (`0N, 0W`), which is no position but a blank */
export function readDeckLine(text: string, spot: Spot): DeckLine | null {
  const cells = text.split(',').map((cell) => cell.trim());
  if (cells.length < 9) {
    throw refusal(
      spot,
      'track.cells',
      `the line has ${cells.length} fields, a deck's at least 9; it is cut off or no ATCF deck: get the file anew`,
      cells.length,
    );
  }
  // an old deck may run the missing wind into the longitude: `1684E-999`
  const glued = /^(\d+[EWew])\s*(-\d+)$/.exec(cells[7]!);
  if (glued) cells.splice(7, 1, glued[1]!, glued[2]!);

  const technique = cleanText(cells[4]!).toUpperCase();
  const initial = cells[2]!;
  let initialMs = checkedTime(/^\d{10}$/.test(initial) ? parseTime(initial) : Number.NaN, initial, spot);
  // in a best track the fourth field holds minutes, in a forecast the number of the technique
  if (technique === 'BEST' && cells[3] !== '') {
    const minutes = numberOf(cells[3]!, spot, 'minutes');
    const written = `${initial} + ${minutes} min`;
    initialMs = checkedTime(minutes >= 0 && minutes < 60 ? initialMs + minutes * MINUTE_MS : Number.NaN, written, spot);
  }
  const periodH = blankOr(cells[5], (cell) => numberOf(cell, spot, 'forecast period')) ?? 0;
  const latDeg = tenths(cells[6]!, 'NS', spot);
  const lonDeg = tenths(cells[7]!, 'EW', spot);
  if (latDeg === 0 && lonDeg === 0) {
    spot.cautions.add('no centre', spot.line, `the ${technique} line has no centre (0N, 0W): left out`);
    return null;
  }
  const value = (index: number, name: string): number | null =>
    blankOr(cells[index], (cell) => numberOf(cell, spot, name));
  const wind = value(8, 'wind');
  if (wind === 0) spot.cautions.add('wind 0', spot.line, 'wind 0 stands for a missing one');
  const maxWindMps = wind === null || wind === 0 ? null : checkedWind(wind, KNOT_MPS, spot);
  const pressure = (index: number, name: string): number | null => {
    const hpa = value(index, name);
    // 0 stands for a missing outer isobar in every deck, and for a missing pressure in every forecast
    if (hpa === null || hpa === -999 || (hpa === 0 && (index === 17 || technique !== 'BEST'))) return null;
    return checkedPressure(hpa, HECTOPASCAL_PA, { spot, name, archive: true });
  };
  const rrp = value(18, 'radius of the outer isobar');
  const rmw = value(19, 'radius of maximum wind');
  return {
    basin: cleanText(cells[0]!).toUpperCase(),
    number: cleanText(cells[1]!).padStart(2, '0'),
    technique,
    initialMs,
    timeMs: initialMs + periodH * HOUR_MS,
    latDeg: checkedLatitude(latDeg, spot),
    lonDeg: checkedLongitude(lonDeg, spot),
    maxWindMps,
    centralPressurePa: pressure(9, 'pressure'),
    outerIsobarPa: pressure(17, 'outer isobar'),
    outerIsobarRadiusM:
      rrp === null || rrp === 0
        ? null
        : checkedRadius(rrp, NAUTICAL_MILE_M, { spot, name: 'radius of the outer isobar' }),
    radiusOfMaxWindM: rmw === null || rmw === 0 ? null : checkedRadiusOfMaxWind(rmw, NAUTICAL_MILE_M, spot),
    radii: readRadii(cells, maxWindMps, spot),
    status: cleanText(cells[10] ?? '') || null,
    name: cleanText(cells[27] ?? ''),
    line: spot.line,
  };
}

function blankOr<T>(cell: string | undefined, read: (cell: string) => T): T | null {
  return cell === undefined || cell === '' ? null : read(cell);
}

/** `129S`, `1684E`: tenths of a degree with a letter. */
function tenths(cell: string, letters: 'NS' | 'EW', spot: Spot): number {
  const match = /^(\d+)([NSEW])$/i.exec(cell);
  const letter = match?.[2]?.toUpperCase();
  if (match && letter && letters.includes(letter))
    return (Number(match[1]) / 10) * (letter === letters[1] ? -1 : 1) + 0;
  const axis = letters === 'NS' ? 'latitude' : 'longitude';
  const example = letters === 'NS' ? '129S' : '1684E';
  throw refusal(
    spot,
    `track.${axis}`,
    `${axis} '${shown(cell)}' is not in tenths of a degree with ${letters[0]} or ${letters[1]}, as ${example}`,
    cell,
  );
}

function readRadii(cells: readonly string[], maxWindMps: number | null, spot: Spot): WindRadii | null {
  const thresholdKt = blankOr(cells[11], (cell) => numberOf(cell, spot, 'wind of the radii')) ?? 0;
  if (thresholdKt <= 0) return null;
  const thresholdMps = thresholdKt * KNOT_MPS;
  const name = `${thresholdKt}-kt radius`;
  const given = [13, 14, 15, 16].map((index) =>
    blankOr(cells[index], (cell) => checkedRadius(numberOf(cell, spot, name), NAUTICAL_MILE_M, { spot, name })),
  );
  if (thresholdKt !== 34 && thresholdKt !== 50 && thresholdKt !== 64) {
    spot.cautions.add(
      `threshold ${thresholdKt}`,
      spot.line,
      `the radii are of ${thresholdKt} kt, not of 34, 50 or 64; they are kept as such`,
    );
  }
  const known = given.some((radiusM) => radiusM !== null);
  if (!known) return null;
  if (
    given.every((radiusM) => radiusM === null || radiusM === 0) &&
    maxWindMps !== null &&
    maxWindMps >= thresholdMps
  ) {
    spot.cautions.add(
      'radii 0',
      spot.line,
      `all radii of ${thresholdKt} kt are 0 though the storm has that wind: taken as not given`,
    );
    return null;
  }
  const code = (cells[12] ?? '').toUpperCase();
  if (code === 'AAA') {
    const radiusM = given[0]!;
    return radiusM === null ? null : { thresholdMps, radiiM: [radiusM, radiusM, radiusM, radiusM] };
  }
  const first = code === '' ? 0 : FIRST_QUADRANT[code];
  if (first === undefined) {
    spot.cautions.add(
      `code ${code}`,
      spot.line,
      `the wind code '${shown(code)}' is neither AAA nor a quadrant: its radii are left out`,
    );
    return null;
  }
  if (code === '')
    spot.cautions.add('no code', spot.line, 'radii without a wind code: taken as quadrants from the north-east');
  const at = (quadrant: number): number | null => given[(quadrant - first + 4) % 4]!;
  const radiiM: Quadrants<number | null> = [at(0), at(1), at(2), at(3)];
  return { thresholdMps, radiiM };
}
