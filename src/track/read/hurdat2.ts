import { HECTOPASCAL_PA, KNOT_MPS, NAUTICAL_MILE_M } from '../../units.js';
import type { Fix, Quadrants, ReadOptions, Track, WindRadii } from '../track.js';
import { buildTracks, nameOrNull, type Storm } from './builder.js';
import { collectCautions } from './cautions.js';
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
  spotIn,
} from './checks.js';
import type { TrackParser } from './parser.js';
import { utcMs } from './time.js';

const HEADER = /^\s*[A-Za-z]{2}\d{6}\s*,/;
/** First column of each threshold's four radii. */
const RADII: readonly (readonly [thresholdKt: number, column: number])[] = [
  [34, 8],
  [50, 12],
  [64, 16],
];
const BASINS: Readonly<Record<string, string>> = { AL: 'NA', EP: 'EP', CP: 'CP', WP: 'WP', IO: 'NI', SL: 'SA' };

/** Whether a line begins a storm of HURDAT2: `AL112017,               IRMA,     66,`. */
export const isHurdat2Header = (line: string): boolean => HEADER.test(line);

/**
 * Reads HURDAT2, the best-track format of the United States' National Hurricane Center [LandseaFranklin2013]: the older
 * edition (20 values a row) and the newer one with the radius of maximum wind as 21st. Winds are 1-minute means.
 * −99 (wind) and −999 stand for a missing value; a radius of 0 means that the quadrant has no such wind.
 */
export function hurdat2Parser(options: ReadOptions, emit: (track: Track) => void): TrackParser {
  const spot = spotIn(options.source, collectCautions());
  const builder = buildTracks(spot, { sortTimes: options.sortTimes ?? false });
  let storm: Storm | null = null;
  let declared = 0;
  let headerLine = 0;
  let rows = 0;

  const finish = (): void => {
    if (storm === null) return;
    if (rows !== declared) {
      spot.line = headerLine;
      throw refusal(
        spot,
        'track.row-count',
        `${storm.id} declares ${declared} rows but ${rows} follow; the file is cut off or was edited: get it anew, or correct the count`,
        declared,
      );
    }
    const track = builder.finish(storm);
    storm = null;
    if (track) emit(track);
  };

  return {
    line(text, line) {
      spot.line = line;
      if (HEADER.test(text)) {
        finish();
        spot.line = line;
        const cells = text.split(',').map(cleanText);
        declared = Number(cells[2] || Number.NaN);
        if (!Number.isInteger(declared) || declared < 0) {
          const found = shown(text);
          throw refusal(
            spot,
            'track.header',
            `'${found}' is no storm header; write the id, the name and the number of rows: AL112017, IRMA, 66,`,
            found,
          );
        }
        const id = cells[0]!.toUpperCase();
        storm = {
          id,
          name: nameOrNull(cells[1]!),
          basin: BASINS[id.slice(0, 2)] ?? null,
          kind: 'best',
          format: 'hurdat2',
        };
        headerLine = line;
        rows = 0;
        return;
      }
      if (text.trim() === '') return;
      if (storm === null) {
        throw refusal(
          spot,
          'track.header',
          `'${shown(text)}' stands before any storm header; begin with a line as AL112017, IRMA, 66,`,
          text,
        );
      }
      rows++;
      builder.add(readRow(text, spot));
    },
    end() {
      finish();
    },
  };
}

function readRow(text: string, spot: Spot): Fix {
  const cells = text.split(',');
  let count = cells.length;
  while (count > 20 && cells[count - 1]!.trim() === '') count--;
  if (count !== 20 && count !== 21) {
    throw refusal(
      spot,
      'track.cells',
      `the row has ${count} values instead of 20 or 21; it is cut off or no HURDAT2: get the file anew`,
      count,
    );
  }
  const wind = numberOf(cells[6]!, spot, 'wind');
  const pressure = numberOf(cells[7]!, spot, 'pressure');
  const maxWindMps = checkedWind(wind, KNOT_MPS, spot);
  const windRadii = readRadii(cells, spot);
  const rmw = count === 21 ? numberOf(cells[20]!, spot, 'radius of maximum wind') : -999;
  lookAtRadii(windRadii, maxWindMps, spot);
  return {
    timeMs: readTime(cells[0]!.trim(), cells[1]!.trim(), spot),
    latDeg: checkedLatitude(readAngle(cells[4]!, 'NS', spot), spot),
    lonDeg: checkedLongitude(readAngle(cells[5]!, 'EW', spot), spot),
    maxWindMps,
    averagingS: 60,
    centralPressurePa:
      pressure === -999 ? null : checkedPressure(pressure, HECTOPASCAL_PA, { spot, name: 'pressure', archive: true }),
    ambientPressurePa: null,
    outerIsobarPa: null,
    outerIsobarRadiusM: null,
    radiusOfMaxWindM: checkedRadiusOfMaxWind(rmw, NAUTICAL_MILE_M, spot),
    hollandB: null,
    windRadii,
    status: cleanText(cells[3]!) || null,
    record: cleanText(cells[2]!) || null,
    line: spot.line,
  };
}

function readRadii(cells: readonly string[], spot: Spot): WindRadii[] {
  const windRadii: WindRadii[] = [];
  for (const [thresholdKt, column] of RADII) {
    const name = `${thresholdKt}-kt radius`;
    const read = (q: number): number | null =>
      checkedRadius(numberOf(cells[column + q]!, spot, name), NAUTICAL_MILE_M, { spot, name });
    const radiiM: Quadrants<number | null> = [read(0), read(1), read(2), read(3)];
    if (radiiM.some((radiusM) => radiusM !== null)) windRadii.push({ thresholdMps: thresholdKt * KNOT_MPS, radiiM });
  }
  return windRadii;
}

function readTime(date: string, time: string, spot: Spot): number {
  const written = `${date} ${time}`;
  const match = /^(\d{4})(\d\d)(\d\d) (\d\d)(\d\d)$/.exec(written);
  const [year, month, day, hour, minute] = match ? match.slice(1).map(Number) : [];
  return checkedTime(match ? utcMs(year!, month!, day!, hour!, minute!) : Number.NaN, written, spot);
}

/** `16.1N`, `179.9E`: degrees, positive to the north and east. */
function readAngle(text: string, letters: 'NS' | 'EW', spot: Spot): number {
  const written = text.trim();
  const letter = written.slice(-1).toUpperCase();
  const axis = letters === 'NS' ? 'latitude' : 'longitude';
  if (letter === '' || !letters.includes(letter)) {
    const example = letters === 'NS' ? '16.1N' : '26.9W';
    throw refusal(
      spot,
      `track.${axis}`,
      `${axis} '${shown(written)}' does not end in ${letters[0]} or ${letters[1]}; write it as ${example}`,
      written,
    );
  }
  const degrees = numberOf(written.slice(0, -1), spot, axis);
  return letter === letters[1] ? -degrees : degrees;
}
