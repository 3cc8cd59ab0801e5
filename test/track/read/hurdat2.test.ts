import { describe, expect, it } from 'vitest';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';
import { fixAt, fixtureText, radiiNmi, readFixture, readOne, readText } from './read-text.js';

const HEADER = 'AL092021,                IDA,      1,\n';
const row = (
  over: { time?: string; at?: string; wind?: string; pressure?: string; radii?: string; rmw?: string } = {},
) =>
  `20210829, ${over.time ?? '1655'}, L, HU, ${over.at ?? '29.1N,  90.2W'}, ${over.wind ?? '130'}, ${over.pressure ?? ' 931'}, ${
    over.radii ?? ' 130,  110,   80,  110,   70,   60,   40,   60,   45,   35,   20,   30'
  }${over.rmw ?? ',   10'}\n`;

describe('a HURDAT2 row', () => {
  // published: NHC, HURDAT2, AL092021 at 1655 UTC on 29 August 2021 (radii of 50 and 64 kt from memory)
  it('gives time off the hour, landfall, centre, wind, pressure, radii and radius of maximum wind', () => {
    const track = readOne(HEADER + row());
    expect(track).toMatchObject({
      id: 'AL092021',
      name: 'IDA',
      basin: 'NA',
      kind: 'best',
      format: 'hurdat2',
      cautions: [],
    });
    const [fix] = track.fixes;
    expect(fix).toMatchObject({
      timeMs: Date.UTC(2021, 7, 29, 16, 55),
      latDeg: 29.1,
      lonDeg: -90.2,
      maxWindMps: knots(130),
      averagingS: 60,
      centralPressurePa: 93_100,
      radiusOfMaxWindM: 10 * NAUTICAL_MILE_M,
      status: 'HU',
      record: 'L',
      line: 2,
    });
    expect(radiiNmi(fix!)).toEqual({ 34: [130, 110, 80, 110], 50: [70, 60, 40, 60], 64: [45, 35, 20, 30] });
  });

  // published: NHC, HURDAT2, AL011851, rows from memory: the older edition has 20 values and ends each row with a comma
  it('may be of the older edition, with everything but the wind missing', () => {
    const old = (time: string, at: string): string => `${time}, HU, ${at},  80, -999,${' -999,'.repeat(12)}\n`;
    const track = readOne(
      `AL011851,            UNNAMED,      2,\n${old('18510625, 0000,  ', '28.0N,  94.8W')}${old('18510625, 0600,  ', '28.0N,  95.4W')}`,
    );
    expect(track).toMatchObject({ id: 'AL011851', name: null, cautions: [] });
    expect(track.fixes[0]).toMatchObject({
      timeMs: Date.UTC(1851, 5, 25),
      maxWindMps: knots(80),
      centralPressurePa: null,
      radiusOfMaxWindM: null,
      windRadii: [],
      record: null,
    });
  });

  it('keeps a radius of 0 (no such wind in the quadrant) apart from a missing one', () => {
    const track = readOne(HEADER + row({ radii: '130, 0, -999, 110, 0, 0, 0, 0, -999, -999, -999, -999' }));
    expect(radiiNmi(track.fixes[0]!)).toEqual({ 34: [130, 0, null, 110], 50: [0, 0, 0, 0] });
  });

  it('takes a wind of -99 for a missing one and says so', () => {
    const track = readOne(HEADER + row({ wind: '-99', radii: Array(12).fill('-999').join(', ') }));
    expect(track.fixes[0]!.maxWindMps).toBeNull();
    expect(track.cautions).toEqual(['line 2: wind -99 stands for a missing one']);
  });

  it('may have a radius of maximum wind of 400 nmi', () => {
    expect(readOne(HEADER + row({ rmw: ',  400' })).fixes[0]!.radiusOfMaxWindM).toBe(400 * NAUTICAL_MILE_M);
  });
});

describe('HURDAT2 files as published', () => {
  it.each([
    ['hurdat2_AL112017_IRMA.txt', 'AL112017', 'IRMA', 66],
    ['hurdat2_CP032015_KILO.txt', 'CP032015', 'KILO', 91],
    ['hurdat2_EP202015_PATRICIA.txt', 'EP202015', 'PATRICIA', 19],
  ])('%s: as many rows as declared', (file, id, name, count) => {
    const [track, ...others] = readFixture(file);
    expect(others).toEqual([]);
    expect(track).toMatchObject({ id, name });
    expect(track!.fixes).toHaveLength(count);
  });

  // published: NHC, HURDAT2; each row is in the file as it stands here
  it('several storms, with their oddities', () => {
    const tracks = readFixture('hurdat2_odd_rows.txt');
    expect(tracks.map(({ id, name, basin, fixes }) => [id, name, basin, fixes.length])).toEqual([
      ['AL062004', 'FRANCES', 'NA', 75],
      ['AL312005', 'ZETA', 'NA', 36],
      ['CP012006', 'IOKE', 'CP', 83],
      ['CP012010', 'OMEKA', 'CP', 28],
    ]);
    const [frances, zeta, ioke, omeka] = tracks;
    // 20040902, 0730, W, HU …: off the hour, a record of its own, no radii
    expect(fixAt(frances!, '2004-09-02T07:30Z')).toMatchObject({ record: 'W', status: 'HU', windRadii: [] });
    // 20040905, 0430, L, … 30: the radius of maximum wind
    expect(fixAt(frances!, '2004-09-05T04:30Z')).toMatchObject({ record: 'L', radiusOfMaxWindM: 30 * NAUTICAL_MILE_M });
    // the storm of 2005 runs on into 2006
    expect(fixAt(zeta!, '2006-01-06T18:00Z')).toMatchObject({ status: 'LO', lonDeg: -50.2 });
    // 20060821: 30 nmi with 50 kt in the south-west, 15 nmi with 34 kt
    expect(radiiNmi(fixAt(ioke!, '2006-08-21T00:00Z'))).toMatchObject({ 34: [60, 40, 15, 55], 50: [30, 20, 20, 30] });
    expect(ioke!.cautions).toEqual([
      'line 131: the 50-kt radius reaches beyond the 34-kt one in the SW quadrant; both are kept',
    ]);
    // 179.8W is followed by 179.3E
    expect(fixAt(ioke!, '2006-08-27T06:00Z').lonDeg).toBe(-179.8);
    expect(fixAt(ioke!, '2006-08-27T12:00Z').lonDeg).toBe(179.3);
    // 179.0E is followed by 180.0W, which is the western edge of the range
    expect(fixAt(omeka!, '2010-12-16T18:00Z').lonDeg).toBe(179);
    expect(fixAt(omeka!, '2010-12-17T00:00Z').lonDeg).toBe(-180);
  });

  it('reads the same with a byte-order mark, CRLF and blank lines', () => {
    const text = fixtureText('hurdat2_EP202015_PATRICIA.txt');
    const disturbed = `\uFEFF\r\n${text.replaceAll('\n', '\r\n')}\r\n`;
    const [plain] = readText(text);
    const [other] = readText(disturbed);
    expect(other!.fixes.map(({ line, ...fix }) => ({ ...fix, line: line - 1 }))).toEqual(plain!.fixes);
  });
});
