import { describe, expect, it } from 'vitest';
import { failureOf, fixtureText, readText } from './read-text.js';

const HEAD = 'storm,time,lat_deg,lon_deg,vmax_kt,pressure_hpa,rmax_km,holland_b,averaging_s,kind\n';
const row = (over: Record<string, string> = {}): string => {
  const cells: Record<string, string> = {
    storm: 'A',
    time: '2031-09-03T06:00Z',
    lat: '15',
    lon: '-60',
    vmax: '50',
    pressure: '990',
    rmax: '40',
    b: '1.2',
    averaging: '60',
    kind: 'drawn',
    ...over,
  };
  return `${Object.values(cells).join(',')}\n`;
};
const second = (over: Record<string, string>): string => HEAD + row({ time: '2031-09-03T00:00Z' }) + row(over);
const irma = (from: string, to: string): string => fixtureText('hurdat2_AL112017_IRMA.txt').replace(from, to);
const cody = fixtureText('ibtracs_v04r01_2022_SP_CODY.csv');
const yasa = fixtureText('bdeck_bsh052021_YASA.dat');

/** What, its text, the code, the line (null: the file as a whole), and what the message says. */
const CASES: readonly (readonly [what: string, text: string, code: string, line: number | null, says: string])[] = [
  ['an empty file', '', 'track.empty', null, 'is empty; give a file'],
  ['blank lines alone', '\n\n  \n', 'track.empty', null, 'is empty'],
  ['a heading without rows', HEAD, 'track.none', null, 'holds no storm (a heading without rows?)'],
  ['prose', 'Dear reader\n', 'track.format', 1, "'Dear reader' begins no track format; give HURDAT2"],
  ['a NUL character', 'storm,time\n\0\0\n', 'track.binary', 1, 'is not text'],
  [
    'a line of 10 MB',
    `${HEAD}${'x'.repeat(1e7)}\n`,
    'track.line-length',
    2,
    'the line is longer than 1048576 characters',
  ],
  [
    'numbers without headings',
    '2031090300,15,-60,50\n',
    'track.no-heading',
    1,
    'holds no headings; begin with a line as',
  ],
  [
    'headings of its own',
    'Date,Latitude,Longitude\n',
    'track.heading',
    1,
    'map yours with columns: time=Date,lat_deg=Latitude,lon_deg=Longitude',
  ],
  [
    'a heading twice',
    'storm,time,lat_deg,lon_deg,lat_deg\n',
    'track.heading-twice',
    1,
    "'lat_deg' stands twice (columns 3 and 5)",
  ],
  [
    'one radius under two headings',
    'time,lat_deg,lon_deg,r34_ne_nmi,r34_ne_km\n',
    'track.heading-twice',
    1,
    'r34_ne_nmi and r34_ne_km hold the same radius',
  ],
  [
    'a latitude of 95',
    second({ lat: '95' }),
    'track.latitude',
    3,
    'latitude 95 is beyond the poles; write degrees from -90 to 90',
  ],
  ['no latitude', second({ lat: '' }), 'track.latitude', 3, 'the latitude is missing'],
  ['a longitude of 400', second({ lon: '400' }), 'track.longitude', 3, 'longitude 400 goes more than once around'],
  ['a sign and a letter', second({ lat: '-15S' }), 'track.latitude', 3, 'a sign and a letter'],
  ['NaN for a latitude', second({ lat: 'NaN' }), 'track.number', 3, "latitude 'NaN' is not a number"],
  ['NaN for a wind', second({ vmax: 'NaN' }), 'track.number', 3, "vmax_kt 'NaN' is not a number"],
  ['infinity for a pressure', second({ pressure: 'Infinity' }), 'track.number', 3, "pressure_hpa 'Infinity'"],
  ['a hexadecimal number', second({ vmax: '0x32' }), 'track.number', 3, "vmax_kt '0x32'"],
  [
    'a word for a number',
    second({ vmax: 'strong' }),
    'track.number',
    3,
    'leave the cell empty where the value is not known',
  ],
  ['a negative wind', second({ vmax: '-5' }), 'track.wind', 3, 'wind -5 is negative'],
  ['a wind of 900 kt', second({ vmax: '900' }), 'track.wind', 3, 'stronger than any storm'],
  [
    'a pressure in pascals',
    second({ pressure: '99000' }),
    'track.pressure',
    3,
    'pressure 99000 is outside 800–1100 hPa; check the value and the unit',
  ],
  ['a negative radius', second({ rmax: '-4' }), 'track.radius', 3, 'radius of maximum wind -4 is negative'],
  ['a radius of 9000 km', second({ rmax: '9000' }), 'track.radius', 3, 'larger than any storm'],
  ["a Holland's B of 0", second({ b: '0' }), 'track.holland-b', 3, "Holland's B 0 is not between 0 and 10"],
  ['an averaging period of 0', second({ averaging: '0' }), 'track.averaging', 3, 'averaging period 0 s'],
  [
    'an unknown kind',
    HEAD + row({ kind: 'forcast' }),
    'track.kind',
    2,
    '(did you mean forecast?); write one of best, forecast',
  ],
  [
    'a time that goes back',
    second({ time: '2031-09-02T18:00Z' }),
    'track.time-order',
    3,
    '2031-09-02T18:00Z is not after line 2 (2031-09-03T00:00Z); sort',
  ],
  [
    'the 30th of February',
    second({ time: '2031-02-30T00:00Z' }),
    'track.time',
    3,
    "'2031-02-30T00:00Z' is no date and time of the calendar",
  ],
  ['the 29th of February of no leap year', second({ time: '2100-02-29T00:00Z' }), 'track.time', 3, 'no date and time'],
  ['an hour of 24', second({ time: '2031-09-03T24:00Z' }), 'track.time', 3, 'write it as 2031-09-03T06:00Z'],
  ['a day without a time', second({ time: '2031-09-04' }), 'track.time', 3, "'2031-09-04' is no date and time"],
  ['no time', second({ time: '' }), 'track.time', 3, 'no date and time'],
  ['no storm', second({ storm: '' }), 'track.storm-id', 3, 'names no storm'],
  [
    'a storm in two places',
    HEAD + row() + row({ storm: 'B' }) + row({ time: '2031-09-04T06:00Z' }),
    'track.storm-split',
    4,
    "storm 'A' began earlier",
  ],
  [
    'a cell too few',
    `${HEAD}A,2031-09-03T00:00Z,15\n`,
    'track.cells',
    2,
    'the row has 3 cells, the heading 10; the row is cut off',
  ],
  ['a cell too many', `${HEAD}${row().trim()},7\n`, 'track.cells', 2, 'put a cell that holds a comma in quotes'],
  [
    'a quote that is never closed',
    `${HEAD}"A,2031-09-03T00:00Z,15\n${row()}`,
    'track.quote',
    2,
    'never closed; add the missing quote',
  ],
  ['a quote that swallows the file', `${HEAD}"A,15\n${row().repeat(200)}`, 'track.quote', 2, 'never closed'],
  [
    'decimal commas',
    'time;lat_deg;lon_deg\n2031-09-03T00:00Z;15,5;-60\n',
    'track.decimal-comma',
    2,
    "latitude '15,5' has a decimal comma; write 15.5",
  ],
  [
    'a HURDAT2 file that is cut off between rows',
    `${irma('', '').split('\n').slice(0, 40).join('\n')}\n`,
    'track.row-count',
    1,
    'declares 66 rows but 39 follow',
  ],
  ['a HURDAT2 file that is cut off in a row', irma('', '').slice(0, 3000), 'track.cells', 25, 'instead of 20 or 21'],
  ['a HURDAT2 header without a count', 'AL112017, IRMA, many,\n', 'track.header', 1, 'is no storm header'],
  ['a HURDAT2 row with a latitude of 95', irma('16.2N', '95.0N'), 'track.latitude', 3, 'latitude 95'],
  [
    'a HURDAT2 latitude without a letter',
    irma('16.2N', '16.2 '),
    'track.latitude',
    3,
    "latitude '16.2' does not end in N or S",
  ],
  [
    'a HURDAT2 wind of -5',
    irma('TS, 16.2N,  28.3W,  35', 'TS, 16.2N,  28.3W,  -5'),
    'track.wind',
    3,
    'wind -5 is negative',
  ],
  [
    'a HURDAT2 row of month 13',
    irma('20170830, 0600', '20171330, 0600'),
    'track.time',
    3,
    "'20171330 0600' is no date",
  ],
  [
    'an IBTrACS row that is cut off',
    cody.slice(0, 12_000),
    'track.cells',
    null,
    'the heading 174; the file is cut off',
  ],
  [
    'a deck line of 8 fields',
    'SH, 05, 2020121106,   , BEST,   0, 129S, 1684E\n',
    'track.cells',
    1,
    'the line has 8 fields',
  ],
  [
    'a deck latitude in degrees',
    yasa.replace('129S', '12.9S'),
    'track.latitude',
    1,
    "latitude '12.9S' is not in tenths",
  ],
  ['a deck latitude of 95', yasa.replace('129S', '950S'), 'track.latitude', 1, 'latitude -95'],
  [
    'a deck time that goes back',
    yasa.replace('2020121112', '2020121006'),
    'track.time-order',
    2,
    '2020-12-10T06:00Z is not after line 1',
  ],
  ['a deck of day 32', yasa.replace('2020121112', '2020123212'), 'track.time', 2, "'2020123212' is no date"],
  [
    'a deck without a centre',
    'SH, 05, 2020121106,   , BEST,   0, 0N, 0W, 30\n',
    'track.none',
    1,
    'no line with a centre',
  ],
];

describe('input that cannot be right', () => {
  it.each(CASES)('%s is refused', (_what, text, code, line, says) => {
    const error = failureOf(() => readText(text));
    expect(error).toMatchObject({ name: 'InputError', code });
    expect(error.message).toContain(says);
    expect(error.fields['source']).toBe('storm.csv');
    if (line === null) expect(error.message).toMatch(/^storm\.csv:/);
    else {
      expect(error.fields['line']).toBe(line);
      expect(error.message.startsWith(`storm.csv:${line}: `)).toBe(true);
    }
    expect(error.message.length).toBeLessThan(400);
  });

  it('is refused in no time and few words, however long the line', () => {
    const started = performance.now();
    for (const line of [
      `SH, 05, 2020121106,   ,${' '.repeat(1e6)}`,
      `storm,time,${'lat_dge,'.repeat(1e5)}x`,
      `AL112017${' '.repeat(1e6)}`,
      `2031-09-03${' '.repeat(1e6)},1`,
      `time,lat_deg,lon_deg\n2031-09-03T00:00Z${' '.repeat(9e5)}x,15,-60`,
      `time,lat_deg,lon_deg\n2031090300,${'9'.repeat(9e5)},-60`,
    ]) {
      expect(failureOf(() => readText(line)).message.length).toBeLessThan(600);
    }
    expect(performance.now() - started).toBeLessThan(5000);
  });

  it('is a wealth of cases', () => expect(CASES.length).toBeGreaterThanOrEqual(40));

  it('is known by its format where that is given', () => {
    const text = cody.replace('ISO_TIME', 'TIME');
    expect(failureOf(() => readText(text, { format: 'ibtracs' }))).toMatchObject({
      code: 'track.heading',
      message: 'storm.csv:1: the heading lacks ISO_TIME; give the CSV edition of IBTrACS version 4 as published',
    });
  });

  it('is told from a wrong option', () => {
    expect(failureOf(() => readText(HEAD + row(), { averagingS: 0 }))).toMatchObject({
      name: 'UsageError',
      code: 'track.averaging',
    });
  });
});
