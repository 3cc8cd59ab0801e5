import { HECTOPASCAL_PA, KNOT_MPS, NAUTICAL_MILE_M } from '../../units.js';
import { bareFix, type Fix, type Quadrants, type ReadOptions, type Track, type WindRadii } from '../track.js';
import { buildTracks, nameOrNull } from './builder.js';
import { collectCautions } from './cautions.js';
import { splitCells } from './cells.js';
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
  shown,
  spotIn,
} from './checks.js';
import { type Agency, agenciesOf, periodOfSource } from './ibtracs-agencies.js';
import type { TrackParser } from './parser.js';
import { parseTime } from './time.js';

/** Unit that the second line gives for a column, by the end of the column's name. */
const UNITS: readonly (readonly [RegExp, string])[] = [
  [/_WIND$/, 'kts'],
  [/_(PRES|POCI)$/, 'mb'],
  [/_(R34|R50|R64)_(NE|SE|SW|NW)$/, 'nmile'],
  [/_(RMW|ROCI)$/, 'nmile'],
];

/**
 * Reads IBTrACS version 4, the CSV edition [KnappEtAl2010], by the names of its columns (163 or 174 of them).
 *
 * Each agency has columns of its own. A row is read from the first agency in `agencies` between whose first and last
 * wind or pressure in this storm the row's time lies: within that span its gaps stay gaps, so that two agencies never
 * alternate. Winds keep the agency's averaging period. A row that no agency covers keeps its centre alone. The centre is
 * the agency's, or the merged one (LAT, LON) where it gives none. Spur tracks are left out unless `spurs` asks for them.
 * @throws InputError `track.*`; UsageError `track.agency`
 */
export function ibtracsParser(options: ReadOptions, emit: (track: Track) => void): TrackParser {
  const spot = spotIn(options.source, collectCautions());
  const builder = buildTracks(spot, { sortTimes: options.sortTimes ?? false });
  let columns: ReadonlyMap<string, number> = new Map();
  let headings: readonly string[] = [];
  let agencies: readonly Agency[] = [];
  let storm: { id: string; rows: { cells: readonly string[]; line: number }[] } | null = null;
  const done = new Set<string>();
  let spursLeftOut = 0;

  const cell = (cells: readonly string[], name: string): string => cells[columns.get(name) ?? -1]?.trim() ?? '';
  const value = (cells: readonly string[], name: string): number | null => {
    const text = cell(cells, name);
    return text === '' ? null : numberOf(text, spot, name);
  };

  const begin = (text: string): void => {
    headings = splitCells(text, ',')?.map((heading) => heading.trim()) ?? [];
    columns = new Map(headings.map((heading, index) => [heading, index]));
    const missing = ['SID', 'ISO_TIME', 'LAT', 'LON'].filter((name) => !columns.has(name));
    if (missing.length > 0) {
      throw refusal(
        spot,
        'track.heading',
        `the heading lacks ${missing.join(', ')}; give the CSV edition of IBTrACS version 4 as published`,
      );
    }
    agencies = agenciesOf(columns, options);
  };

  const checkUnits = (cells: readonly string[]): void => {
    headings.forEach((heading, index) => {
      const unit = cells[index]?.trim() ?? '';
      const expected = UNITS.find(([ending]) => ending.test(heading))?.[1];
      if (expected && unit !== '' && unit !== expected) {
        throw refusal(
          spot,
          'track.units',
          `${heading} is in '${shown(unit)}' instead of ${expected}; give the file as published`,
          unit,
        );
      }
    });
  };

  const readRadii = (cells: readonly string[], agency: Agency): WindRadii[] => {
    const windRadii: WindRadii[] = [];
    for (const thresholdKt of [34, 50, 64]) {
      const read = (quadrant: string): number | null => {
        const name = `${agency.prefix}_R${thresholdKt}_${quadrant}`;
        const radius = value(cells, name);
        return radius === null ? null : checkedRadius(radius, NAUTICAL_MILE_M, { spot, name });
      };
      const radiiM: Quadrants<number | null> = [read('NE'), read('SE'), read('SW'), read('NW')];
      if (radiiM.some((radiusM) => radiusM !== null)) windRadii.push({ thresholdMps: thresholdKt * KNOT_MPS, radiiM });
    }
    return windRadii;
  };

  const readFix = (
    row: { cells: readonly string[]; line: number },
    agency: Agency | undefined,
    averagingS: number,
  ): Fix => {
    const { cells, line } = row;
    spot.line = line;
    const timeText = cell(cells, 'ISO_TIME');
    const ownCentre =
      agency && value(cells, `${agency.prefix}_LAT`) !== null && value(cells, `${agency.prefix}_LON`) !== null;
    const centre = (axis: 'LAT' | 'LON'): number => {
      const degrees = value(cells, ownCentre ? `${agency.prefix}_${axis}` : axis);
      if (degrees !== null) return degrees;
      throw refusal(
        spot,
        axis === 'LAT' ? 'track.latitude' : 'track.longitude',
        `${axis} is blank; every row needs a centre: remove the row`,
      );
    };
    const nature = cell(cells, 'NATURE');
    const bare = bareFix({
      timeMs: checkedTime(parseTime(timeText), timeText, spot),
      latDeg: checkedLatitude(centre('LAT'), spot),
      lonDeg: checkedLongitude(centre('LON'), spot),
      line,
    });
    const natureCode = nature === '' || nature === 'NR' ? null : cleanText(nature);
    if (!agency) return { ...bare, averagingS, status: natureCode };

    const of = (what: string): number | null => value(cells, `${agency.prefix}_${what}`);
    const pressure = (what: string): number | null => {
      const hpa = of(what);
      return hpa === null
        ? null
        : checkedPressure(hpa, HECTOPASCAL_PA, { spot, name: `${agency.prefix}_${what}`, archive: true });
    };
    const wind = of('WIND');
    const maxWindMps = wind === null ? null : checkedWind(wind, KNOT_MPS, spot);
    const windRadii = readRadii(cells, agency);
    lookAtRadii(windRadii, maxWindMps, spot);
    const roci = of('ROCI');
    const rmw = of('RMW');
    return {
      ...bare,
      maxWindMps,
      averagingS,
      centralPressurePa: pressure('PRES'),
      outerIsobarPa: pressure('POCI'),
      outerIsobarRadiusM:
        roci === null ? null : checkedRadius(roci, NAUTICAL_MILE_M, { spot, name: `${agency.prefix}_ROCI` }),
      radiusOfMaxWindM: rmw === null ? null : checkedRadiusOfMaxWind(rmw, NAUTICAL_MILE_M, spot),
      windRadii,
      status: cleanText(cell(cells, `${agency.prefix}_STATUS`)) || natureCode,
      record: cleanText(cell(cells, `${agency.prefix}_RECORD`)) || null,
    };
  };

  const finish = (): void => {
    if (storm === null) return;
    const { id, rows } = storm;
    storm = null;
    const spans = agencies.map((agency) => {
      const speaks = ({ cells }: { cells: readonly string[] }): boolean =>
        cell(cells, `${agency.prefix}_WIND`) !== '' || cell(cells, `${agency.prefix}_PRES`) !== '';
      return { agency, first: rows.findIndex(speaks), last: rows.findLastIndex(speaks) };
    });
    const main = spans.find(({ first }) => first !== -1);
    let averagingS = main?.agency.averagingS ?? 600;
    let responsible = '';
    rows.forEach((row, i) => {
      const agency = spans.find(({ first, last }) => first !== -1 && i >= first && i <= last)?.agency;
      if (agency) averagingS = agency.averagingS;
      spot.line = row.line;
      if (agency?.prefix === 'WMO') {
        // the responsible agency changes with the basin; a row that does not name it keeps to the one before
        const source = cell(row.cells, 'WMO_AGENCY');
        if (source !== '') responsible = source;
        averagingS = periodOfSource(responsible) ?? 600;
        if (periodOfSource(responsible) === undefined) {
          const odd = `the averaging period of WMO agency '${shown(responsible)}' is not known: taken as 600 s`;
          spot.cautions.add(`wmo ${responsible}`, row.line, odd);
        }
      }
      if (agency && main && agency !== main.agency) {
        const odd = `outside the span of ${main.agency.prefix}: values are of ${agency.prefix}, ${averagingS}-s mean winds`;
        spot.cautions.add(`agency ${agency.prefix}`, row.line, odd);
      }
      if (!agency)
        spot.cautions.add('no agency', row.line, 'no agency asked gives wind or pressure: only the centre is read');
      builder.add(readFix(row, agency, averagingS));
    });
    const first = rows[0]!.cells;
    const name = nameOrNull(cleanText(cell(first, 'NAME')));
    const track = builder.finish({ id, name, basin: cell(first, 'BASIN') || null, kind: 'best', format: 'ibtracs' });
    if (track) emit(track);
  };

  return {
    line(text, line) {
      if (text.trim() === '') return;
      spot.line = line;
      if (headings.length === 0) {
        begin(text);
        return;
      }
      const cells = splitCells(text, ',');
      if (cells === null) throw refusal(spot, 'track.quote', 'a quoted cell is never closed; get the file anew');
      if (cells.length !== headings.length) {
        throw refusal(
          spot,
          'track.cells',
          `the row has ${cells.length} cells, the heading ${headings.length}; the file is cut off or was edited: get it anew`,
          cells.length,
        );
      }
      const sid = cleanText(cell(cells, 'SID'));
      if (sid === '') {
        // the line of units has neither storm nor time; not every edition of the file has it
        if (cell(cells, 'ISO_TIME') === '') checkUnits(cells);
        else throw refusal(spot, 'track.storm-id', 'the row names no storm (SID is blank); get the file anew');
        return;
      }
      const spur = /spur/i.test(cell(cells, 'TRACK_TYPE'));
      if (spur && !options.spurs) {
        spursLeftOut++;
        return;
      }
      const id = spur ? `${sid}-spur` : sid;
      if (storm?.id !== id) {
        finish();
        spot.line = line;
        if (done.has(id)) {
          throw refusal(
            spot,
            'track.storm-split',
            `storm ${shown(id)} began earlier and was ended by another one; put its rows together`,
            id,
          );
        }
        done.add(id);
        storm = { id, rows: [] };
      }
      storm.rows.push({ cells, line });
    },
    end() {
      finish();
      if (done.size === 0 && spursLeftOut > 0) {
        throw refusal(
          spot,
          'track.none',
          `has spur tracks only (${spursLeftOut} rows); ask for spur tracks to read them`,
          spursLeftOut,
        );
      }
    },
  };
}
