import { describe, expect, it } from 'vitest';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';
import { failureOf, fixAt, fixtureText, radiiNmi, readFixture, readText } from './read-text.js';

const ACTIVE = 'ibtracs_v04r00_ACTIVE_list_original.csv';
const CODY = 'ibtracs_v04r01_2022_SP_CODY.csv';

/** The file with one column set by a function of the row (1-based line). */
function edited(name: string, column: string, set: (value: string, line: number) => string): string {
  const lines = fixtureText(name).trimEnd().split('\n');
  const index = lines[0]!.split(',').indexOf(column);
  return lines
    .map((line, i) => {
      const cells = line.split(',');
      if (i > 0) cells[index] = set(cells[index]!, i + 1);
      return cells.join(',');
    })
    .join('\n');
}

describe('IBTrACS with 163 columns and a line of units', () => {
  const tracks = readFixture(ACTIVE);

  it('gives each storm', () => {
    expect(tracks.map(({ id, name, basin, kind, fixes }) => [id, name, basin, kind, fixes.length])).toEqual([
      ['2024138S09053', 'IALY', 'SI', 'best', 49],
      ['2024146N11126', 'EWINIAR', 'WP', 'best', 27],
      ['2024147N19089', 'REMAL', 'NI', 'best', 19],
    ]);
  });

  // published: NCEI, IBTrACS v04r00, ACTIVE list: the first rows of IALY
  it('reads the United States columns first: 1-minute winds; NR (not reported) is no status', () => {
    expect(tracks[0]!.fixes[0]).toMatchObject({
      timeMs: Date.UTC(2024, 4, 16, 12),
      latDeg: -9.1,
      lonDeg: 52.5,
      maxWindMps: knots(35),
      averagingS: 60,
      centralPressurePa: 100_100,
      outerIsobarPa: 100_800,
      outerIsobarRadiusM: 170 * NAUTICAL_MILE_M,
      radiusOfMaxWindM: 45 * NAUTICAL_MILE_M,
      windRadii: [],
      status: null,
      line: 3,
    });
  });

  it('keeps interpolated rows (IFLAG begins with P), every three hours', () => {
    expect(fixAt(tracks[0]!, '2024-05-16T15:00Z')).toMatchObject({ latDeg: -9.31509, maxWindMps: knots(40) });
    expect(radiiNmi(fixAt(tracks[0]!, '2024-05-21T15:00Z'))).toEqual({ 34: [40, 57, 67, 60] });
  });

  it('gives no wind from an agency that gives none: a blank is not 0', () => {
    const [ialy] = readFixture(ACTIVE, { agencies: ['WMO'] });
    expect(
      ialy!.fixes.every(({ maxWindMps, centralPressurePa }) => maxWindMps === null && centralPressurePa === null),
    ).toBe(true);
    expect(ialy!.cautions).toEqual([
      'line 3: no agency asked gives wind or pressure: only the centre is read (and 48 more such)',
    ]);
  });

  it('keeps the basin NA as text, also where the basin changes within the storm', () => {
    const text = edited(ACTIVE, 'BASIN', (basin, line) => (line === 2 ? basin : line < 20 ? 'NA' : 'EP'));
    expect(readText(text).map(({ basin }) => basin)).toEqual(['NA', 'EP', 'EP']);
  });

  it('refuses another unit than the published one', () => {
    const text = edited(ACTIVE, 'USA_WIND', (value, line) => (line === 2 ? 'm/s' : value));
    expect(failureOf(() => readText(text))).toMatchObject({ code: 'track.units', fields: { line: 2, value: 'm/s' } });
  });

  it('leaves spur tracks out unless they are asked for', () => {
    const text = edited(ACTIVE, 'TRACK_TYPE', (type, line) => (line > 40 && line < 52 ? 'spur-other' : type));
    expect(readText(text).map(({ id, fixes }) => [id, fixes.length])[0]).toEqual(['2024138S09053', 38]);
    expect(
      readText(text, { spurs: true })
        .map(({ id, fixes }) => [id, fixes.length])
        .slice(0, 2),
    ).toEqual([
      ['2024138S09053', 38],
      ['2024138S09053-spur', 11],
    ]);
    const spursOnly = edited(ACTIVE, 'TRACK_TYPE', (type, line) => (line > 2 ? 'PROVISIONAL_spur' : type));
    expect(failureOf(() => readText(spursOnly))).toMatchObject({ code: 'track.none' });
  });
});

describe('IBTrACS with 174 columns', () => {
  const [rita, cody] = readFixture(CODY);

  // published: NCEI, IBTrACS v04r01: the file has no line of units, and a storm of one row before the other
  it('reads the second line as a row when it is one', () => {
    expect(rita).toMatchObject({ id: '2019326S08163', name: 'RITA' });
    expect(rita!.fixes).toHaveLength(1);
    expect(cody!.fixes).toHaveLength(97);
  });

  it("takes the agency's longitude where it has one (-180.0), and brings LON beyond 180 back", () => {
    expect(fixAt(cody!, '2022-01-15T00:00Z').lonDeg).toBe(-180);
    // LON 181.4, no agency
    expect(fixAt(cody!, '2022-01-15T15:00Z')).toMatchObject({ latDeg: -30.5, lonDeg: -178.6, maxWindMps: null });
    const [, plain] = readText(edited(CODY, 'USA_LON', () => ' '));
    expect(fixAt(plain!, '2022-01-15T00:00Z').lonDeg).toBe(-179.9);
  });

  it('says which rows no agency covers', () => {
    expect(cody!.cautions).toContainEqual(expect.stringMatching(/^line 68: no agency asked .* \(and 31 more such\)$/));
  });

  it('follows the choice of agency with the averaging period', () => {
    const [, nadi] = readFixture(CODY, { agencies: ['nadi'] });
    expect(fixAt(nadi!, '2022-01-12T12:00Z')).toMatchObject({
      latDeg: -24.6,
      lonDeg: 175,
      maxWindMps: knots(60),
      averagingS: 600,
    });
    const [, wmo] = readFixture(CODY, { agencies: ['WMO'] });
    expect(fixAt(wmo!, '2022-01-12T18:00Z')).toMatchObject({ latDeg: -24.9, maxWindMps: knots(50), averagingS: 600 });
    const [, usa] = readFixture(CODY, { agencies: ['USA'] });
    expect(fixAt(usa!, '2022-01-12T18:00Z')).toMatchObject({ maxWindMps: knots(45), averagingS: 60 });
  });

  it.each([
    ['CMA', 120],
    ['NEWDELHI', 180],
    ['TOKYO', 600],
  ])('%s has means over %d s', (agency, averagingS) => {
    const text = edited(CODY, `${agency}_WIND`, (value, line) => (line === 20 ? '55' : value));
    const [, track] = readText(text, { agencies: [agency] });
    expect(track!.fixes.find(({ line }) => line === 20)).toMatchObject({ maxWindMps: knots(55), averagingS });
  });

  it('reads the next agency outside the span of the first, never within it', () => {
    const text = edited(CODY, 'USA_WIND', (value, line) => (line >= 30 && line <= 33 ? ' ' : value));
    const later = edited(CODY, 'WELLINGTON_WIND', (value, line) => (line === 80 ? '50' : value));
    const [, gap] = readText(text);
    expect(gap!.fixes.find(({ line }) => line === 31)).toMatchObject({ maxWindMps: null, averagingS: 60 });
    const [, tail] = readText(later);
    expect(tail!.fixes.find(({ line }) => line === 80)).toMatchObject({ maxWindMps: knots(50), averagingS: 600 });
    expect(tail!.cautions).toContain(
      'line 68: outside the span of USA: values are of WELLINGTON, 600-s mean winds (and 12 more such)',
    );
  });

  it('takes the averaging period of the responsible agency for WMO winds', () => {
    const text = edited(CODY, 'WMO_AGENCY', (value) => (value.trim() === '' ? value : 'hurdat_epa'));
    const [, wmo] = readText(text, { agencies: ['WMO'] });
    expect(fixAt(wmo!, '2022-01-12T18:00Z').averagingS).toBe(60);
  });

  it('answers an unknown agency with the probable one', () => {
    expect(failureOf(() => readFixture(CODY, { agencies: ['tokio'] }))).toMatchObject({
      name: 'UsageError',
      code: 'track.agency',
      message: expect.stringContaining("no agency 'tokio' (did you mean TOKYO?)"),
    });
  });
});
