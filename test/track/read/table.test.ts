import { describe, expect, it } from 'vitest';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';
import { bare, failureOf, fixtureText, radiiNmi, readFixture, readOne, readText } from './read-text.js';

const TWO = 'storm,time,lat_deg,lon_deg\nA,2031-09-03T00:00Z,15,-60\nA,2031-09-03T06:00Z,15.5,-61\n';

describe('a table of tracks', () => {
  it('has documented headings with units, in any order', () => {
    const track = readOne(
      [
        'status,lat_deg,lon_deg,time,storm,name,basin,kind,vmax_kt,averaging_s,pressure_hpa,ambient_hpa,outer_isobar_hpa,outer_isobar_radius_nmi,rmax_nmi,holland_b,r34_ne_nmi,r34_se_nmi,r34_sw_nmi,r34_nw_nmi,record',
        'HU,-12.5,170.25,2031-02-03T06:00Z,X-1,Elowen,sp,synthetic,80,600,960.5,1008,1006,180,20,1.4,120,0,,90,L',
      ].join('\n'),
    );
    expect(track).toMatchObject({
      id: 'X-1',
      name: 'Elowen',
      basin: 'SP',
      kind: 'synthetic',
      format: 'csv',
      cautions: [],
    });
    expect(track.fixes[0]).toMatchObject({
      timeMs: Date.UTC(2031, 1, 3, 6),
      latDeg: -12.5,
      lonDeg: 170.25,
      maxWindMps: knots(80),
      averagingS: 600,
      centralPressurePa: 96_050,
      ambientPressurePa: 100_800,
      outerIsobarPa: 100_600,
      outerIsobarRadiusM: 180 * NAUTICAL_MILE_M,
      radiusOfMaxWindM: 20 * NAUTICAL_MILE_M,
      hollandB: 1.4,
      status: 'HU',
      record: 'L',
      line: 2,
    });
    expect(radiiNmi(track.fixes[0]!)).toEqual({ 34: [120, 0, null, 90] });
  });

  it('reads the demo storms', () => {
    expect(readFixture('demo-quillon.csv')[0]).toMatchObject({ id: 'QN-01', name: 'Quillon', kind: 'drawn' });
    expect(readFixture('demo-tarrabel.csv')[0]!.fixes[0]).toMatchObject({ averagingS: 600, radiusOfMaxWindM: 55_000 });
  });

  it('may have tabs or semicolons, quotes, a byte-order mark, CRLF, blank lines, comments and empty rows', () => {
    const expected = bare(readOne(TWO));
    const alike = [
      TWO.replaceAll(',', '\t'),
      TWO.replaceAll(',', ';'),
      TWO.replaceAll(/[^,\n]+/g, '"$&"'),
      TWO.replaceAll(',', ' , '),
      `\uFEFF${TWO.replaceAll('\n', '\r\n')}`,
      TWO.replaceAll('\n', '\r'),
      `# drawn by hand\n\n${TWO.replaceAll('\n', '\n\n')},,,\n`,
      TWO.replaceAll('\n', ',,\n'),
      TWO.trimEnd(),
    ];
    for (const text of alike) expect(bare(readOne(text))).toEqual(expected);
  });

  it('keeps delimiters, quotes and line ends in quoted cells, and the line numbers after them', () => {
    const text =
      'storm,name,time,lat_deg,lon_deg\nA,"Anna, ""the\nsecond""",2031-09-03T00:00Z,15,-60\nB,b,2031-09-03T00:00Z,15,-60\n';
    const [a, b] = readText(text);
    expect(a!.name).toBe('Anna, "the second"');
    expect([a!.fixes[0]!.line, b!.fixes[0]!.line]).toEqual([2, 4]);
  });

  it('takes control characters out of names, so that a terminal cannot be told what to do', () => {
    const text = 'storm,time,lat_deg,lon_deg\n\u001b[31mA\u0007,2031-09-03T00:00Z,15,-60\n';
    expect(readOne(text).id).toBe('[31mA');
  });

  it('knows times with zone, seconds or as digits alone, and longitudes to 360', () => {
    const at = (time: string) => readOne(`time,lat_deg,lon_deg\n${time},15,300\n`).fixes[0]!;
    const sixUtc = Date.UTC(2031, 8, 3, 6);
    for (const time of [
      '2031-09-03T06:00Z',
      '2031-09-03 06:00',
      '2031-09-03T06:00:00.000Z',
      '2031-09-03T16:00+10:00',
      '2031-09-03T00:30-0530',
      '2031090306',
      '203109030600',
      '20310903T0600Z',
    ]) {
      expect(at(time).timeMs, time).toBe(sixUtc);
    }
    expect(at('2032-02-29T23:59:58.5Z').timeMs).toBe(Date.UTC(2032, 1, 29, 23, 59, 58, 500));
    expect(at('2031090306').lonDeg).toBe(-60);
  });

  it('takes letters for signs', () => {
    expect(readOne('time,lat_deg,lon_deg\n2031090306,15.5S,60.5 w\n').fixes[0]).toMatchObject({
      latDeg: -15.5,
      lonDeg: -60.5,
    });
  });

  it('maps the headings of somebody else, the unit by the choice of key', () => {
    const theirs = 'Cyclone;Date;Latitude;Longitude;Wind [kn]\nA;2031-09-03 00:00;15;-60;50\n';
    const columns = { storm: 'cyclone', time: 'Date', lat_deg: 'Latitude', lon_deg: 'Longitude', vmax_kt: 'Wind [kn]' };
    expect(readOne(theirs, { columns })).toMatchObject({ id: 'A', fixes: [{ latDeg: 15, maxWindMps: knots(50) }] });
  });

  it('is one storm, called as the file, when it has no column for storms', () => {
    const text = TWO.replace('storm', 'label');
    expect(readOne(text, { source: '/tmp/my-storm.v2.csv' } as object).id).toBe('my-storm.v2');
  });

  it('says when the averaging period is not given, unless it is told', () => {
    const text = 'storm,time,lat_deg,lon_deg,vmax_kt\nA,2031-09-03T00:00Z,15,-60,50\nB,2031-09-03T00:00Z,15,-60,50\n';
    const caution = 'the averaging period of the wind is not given: taken as 60 s';
    expect(readText(text).map(({ cautions }) => cautions)).toEqual([[caution], [caution]]);
    const told = readText(text, { averagingS: 600 });
    expect(told.map(({ cautions, fixes }) => [cautions, fixes[0]!.averagingS])).toEqual([
      [[], 600],
      [[], 600],
    ]);
  });

  it('takes the marks of missing values and pressures of 0 or less for missing, and says so', () => {
    const text =
      'time,lat_deg,lon_deg,averaging_s,vmax_kt,pressure_hpa,rmax_km,r34_ne_km\n2031-09-03T00:00Z,15,-60,60,-99,0,0,-999\n2031-09-03T06:00Z,15,-60,60,,-3,,\n';
    const track = readOne(text);
    expect(track.fixes[0]).toMatchObject({
      maxWindMps: null,
      centralPressurePa: null,
      radiusOfMaxWindM: null,
      windRadii: [],
    });
    expect(track.cautions).toEqual([
      'line 2: wind -99 stands for a missing one',
      'line 2: pressure 0 cannot be right: taken as missing',
      'line 2: radius of maximum wind 0 cannot be right: taken as missing',
      'line 3: pressure -3 cannot be right: taken as missing',
    ]);
  });

  it('keeps what is merely odd and says so', () => {
    const text =
      'time,lat_deg,lon_deg,averaging_s,vmax_kt,pressure_hpa,ambient_hpa,r34_ne_nmi,r50_ne_nmi,r64_ne_nmi\n2031-09-03T00:00Z,15,-60,60,55,1010,1005,30,40,20\n';
    const track = readOne(text);
    expect(radiiNmi(track.fixes[0]!)).toMatchObject({ 34: [30, null, null, null], 50: [40, null, null, null] });
    expect(track.cautions).toEqual([
      'line 2: the 50-kt radius reaches beyond the 34-kt one in the NE quadrant; both are kept',
      'line 2: a 64-kt radius is given though the wind is 55 kt; it is kept',
      'line 2: the central pressure is not below the ambient one; both are kept',
    ]);
  });

  it('merges repeated rows; of two that differ the later one counts', () => {
    const row = (lat: number): string => `A,2031-09-03T06:00Z,${lat},-61\n`;
    expect(readOne(`${TWO}${row(15.5)}`)).toMatchObject({
      fixes: [{}, { latDeg: 15.5 }],
      cautions: ['line 4: repeats line 3 (2031-09-03T06:00Z)'],
    });
    const track = readOne(`${TWO}${row(16)}`);
    expect(track.fixes.map(({ latDeg }) => latDeg)).toEqual([15, 16]);
    expect(track.cautions).toEqual([
      'line 4: gives 2031-09-03T06:00Z again and differs from line 3: the later row counts',
    ]);
  });

  it('sorts rows by time when it is allowed to', () => {
    const lines = [
      'time,lat_deg,lon_deg',
      '2031-09-03T12:00Z,16,-62',
      '2031-09-03T00:00Z,15,-60',
      '2031-09-03T12:00Z,17,-62',
    ];
    const track = readOne(lines.join('\n'), { sortTimes: true });
    expect(track.fixes.map(({ latDeg }) => latDeg)).toEqual([15, 17]);
    expect(track.cautions).toEqual([
      'rows were not in the order of time: sorted',
      'line 4: gives 2031-09-03T12:00Z again and differs from line 2: the later row counts',
    ]);
  });

  it('may hold storms of one fix', () => {
    const text = 'storm,time,lat_deg,lon_deg\nA,2031-09-03T00:00Z,15,-60\nB,2031-09-03T00:00Z,15,-60\n';
    expect(readText(text).map(({ id, fixes }) => [id, fixes.length])).toEqual([
      ['A', 1],
      ['B', 1],
    ]);
  });

  it('points at a heading that was probably mistyped, and reads the SI one of two', () => {
    const text =
      'storm,time,lat_deg,lon_deg,presure_hpa,vmax_kt,vmax_mps,averaging_s\nA,2031-09-03T00:00Z,15,-60,980,100,40,60\n';
    const track = readOne(text);
    expect(track.fixes[0]).toMatchObject({ centralPressurePa: null, maxWindMps: 40 });
    expect(track.cautions).toEqual([
      "the heading 'presure_hpa' is none of the documented ones and is not read; was pressure_hpa meant?",
      'the table has both vmax_mps and vmax_kt: vmax_mps is read',
    ]);
  });

  it('answers a wrong mapping with the probable key or heading', () => {
    expect(failureOf(() => readText(TWO, { columns: { vmax_ktt: 'Wind' } }))).toMatchObject({
      name: 'UsageError',
      code: 'track.columns',
      message: expect.stringContaining("'vmax_ktt' is no key of a track table (did you mean vmax_kt?)"),
    });
    expect(failureOf(() => readText(TWO, { columns: { lat_deg: 'lat_dge' } }))).toMatchObject({
      name: 'UsageError',
      message: expect.stringContaining("has no heading 'lat_dge' for lat_deg (did you mean lat_deg?)"),
    });
  });

  it('reads numbers as the language itself does', () => {
    for (const text of [
      '15',
      '-15.25',
      '.5',
      '5.',
      '0.1',
      '12.345678901234567',
      '1e1',
      '+3',
      '-0',
      '89.99999999999999',
      '0.30000000000000004',
    ]) {
      const { latDeg } = readOne(`time,lat_deg,lon_deg\n2031090306,${text},0\n`).fixes[0]!;
      expect(latDeg, text).toBe(Number(text) + 0);
    }
  });

  it('gives each storm as soon as the next one begins', () => {
    expect(readText(fixtureText('demo-quillon.csv')).length).toBe(1);
  });
});
