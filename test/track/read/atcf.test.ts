import { describe, expect, it } from 'vitest';
import { knots, NAUTICAL_MILE_M } from '../../../src/units.js';
import { failureOf, fixAt, fixtureText, radiiNmi, readFixture, readOne, readText } from './read-text.js';

const YASA = 'bdeck_bsh052021_YASA.dat';

interface Line {
  basin?: string;
  time?: string;
  minutes?: string;
  technique?: string;
  tau?: string;
  at?: string;
  wind?: string;
  rest?: string;
}
const deckLine = (over: Line = {}): string =>
  [
    over.basin ?? 'SH, 05',
    ` ${over.time ?? '2020121606'}`,
    `   ${over.minutes ?? ''}`,
    ` ${over.technique ?? 'BEST'}`,
    ` ${over.tau ?? '  0'}`,
    ` ${over.at ?? '150S, 1750E'}`,
    ` ${over.wind ?? '135'}`,
  ].join(',') +
  (over.rest ??
    ',  919, ST,  34, NEQ,  140,  120,  115,  125, 1002,  205,  15,   0,  20,   P,   0,    ,   0,   0,       YASA, D, ');

describe('an ATCF b-deck', () => {
  // published: Joint Typhoon Warning Center, best track of sh052021
  it('merges the lines of one time, and brings the southern season to the following year', () => {
    const [yasa] = readFixture(YASA);
    expect(yasa).toMatchObject({
      id: 'SH052021',
      name: 'YASA',
      basin: 'SP',
      kind: 'best',
      format: 'b-deck',
      cautions: [],
    });
    expect(yasa!.fixes).toHaveLength(41);
    const fix = fixAt(yasa!, '2020-12-16T06:00Z');
    expect(fix).toMatchObject({
      latDeg: -15,
      lonDeg: 175,
      maxWindMps: knots(135),
      averagingS: 60,
      centralPressurePa: 91_900,
      outerIsobarPa: 100_200,
      outerIsobarRadiusM: 205 * NAUTICAL_MILE_M,
      radiusOfMaxWindM: 15 * NAUTICAL_MILE_M,
      status: 'ST',
    });
    expect(radiiNmi(fix)).toEqual({ 34: [140, 120, 115, 125], 50: [75, 65, 60, 65], 64: [40, 40, 30, 35] });
    // a line with RAD 0 has no radii, and 30 fields are as good as 38
    expect(yasa!.fixes[0]!.windRadii).toEqual([]);
  });

  it('follows the storm across the antimeridian', () => {
    const [yasa] = readFixture(YASA);
    expect(fixAt(yasa!, '2020-12-17T12:00Z').lonDeg).toBe(179.7);
    expect(fixAt(yasa!, '2020-12-17T18:00Z').lonDeg).toBe(-179.4);
  });

  it('reads a northern storm', () => {
    const [surigae] = readFixture('bdeck_bwp022021_SURIGAE.dat');
    expect(surigae).toMatchObject({ id: 'WP022021', name: 'SURIGAE', basin: 'WP' });
    expect(fixAt(surigae!, '2021-04-17T12:00Z')).toMatchObject({
      latDeg: 12,
      lonDeg: 129.2,
      centralPressurePa: 88_200,
    });
  });

  it('has 9 fields at least', () => {
    const track = readOne('SH, 05, 2020121606,   , BEST,   0, 150S, 1750E, 135');
    expect(track.fixes[0]).toMatchObject({
      maxWindMps: knots(135),
      centralPressurePa: null,
      windRadii: [],
      status: null,
    });
  });

  it('may run -999 into the longitude', () => {
    expect(readOne('SH, 05, 2020121606,   , BEST,   0, 150S, 1750E-999, 1004, DB').fixes[0]).toMatchObject({
      lonDeg: 175,
      maxWindMps: null,
      centralPressurePa: 100_400,
      status: 'DB',
    });
    expect(readOne('SH, 05, 2020121606,   , BEST,   0, 150S, 1750E,-999, 1004, DB').fixes[0]!.maxWindMps).toBeNull();
  });

  it.each(['0', '-3', '-10067'])('takes a pressure of %s for a missing one and says so', (pressure) => {
    const track = readOne(deckLine({ rest: `, ${pressure}, TY` }));
    expect(track.fixes[0]!.centralPressurePa).toBeNull();
    expect(track.cautions).toEqual([`line 1: pressure ${pressure} cannot be right: taken as missing`]);
  });

  it.each([35, 100])('keeps radii of %d kt as such', (threshold) => {
    const track = readOne(deckLine({ rest: `, 919, ST, ${threshold}, NEQ, 140, 120, 115, 125` }));
    expect(radiiNmi(track.fixes[0]!)).toEqual({ [threshold]: [140, 120, 115, 125] });
    expect(track.cautions).toEqual([
      `line 1: the radii are of ${threshold} kt, not of 34, 50 or 64; they are kept as such`,
    ]);
  });

  it('takes AAA for a full circle, and the quadrant codes for where the four begin', () => {
    const radii = (code: string, given: string) =>
      radiiNmi(readOne(deckLine({ rest: `, 919, ST, 34, ${code}, ${given}` })).fixes[0]!);
    expect(radii('AAA', '140, 0, 0, 0')).toEqual({ 34: [140, 140, 140, 140] });
    expect(radii('NEQ', '1, 2, 3, 4')).toEqual({ 34: [1, 2, 3, 4] });
    expect(radii('SWQ', '3, 4, 1, 2')).toEqual({ 34: [1, 2, 3, 4] });
    expect(radii('XXX', '1, 2, 3, 4')).toEqual({});
  });

  it('keeps 0 as no such wind, but not where the storm has that wind in no quadrant', () => {
    const read = (wind: string) => readOne(deckLine({ wind, rest: ', 990, TS, 50, NEQ, 0, 0, 0, 0' })).fixes[0]!;
    expect(radiiNmi(read('45'))).toEqual({ 50: [0, 0, 0, 0] });
    expect(radiiNmi(read('55'))).toEqual({});
  });

  it('adds the minutes of a best track off the hour', () => {
    const track = readOne(deckLine({ time: '2021082916', minutes: '55', basin: 'AL, 09' }));
    expect(track).toMatchObject({ id: 'AL092021', basin: 'NA' });
    expect(track.fixes[0]!.timeMs).toBe(Date.UTC(2021, 7, 29, 16, 55));
  });

  it('merges what is there twice and says so', () => {
    const text = fixtureText(YASA);
    const doubled = text.replaceAll(/^(.*\n)/gm, '$1$1');
    const [once] = readText(text);
    const [twice] = readText(doubled);
    expect(twice!.fixes.map(({ line: _, ...fix }) => fix)).toEqual(once!.fixes.map(({ line: _, ...fix }) => fix));
    expect(twice!.cautions).toEqual(['line 2: repeats an earlier line (2020-12-11T06:00Z) (and 81 more such)']);
  });

  it('lets the later line count where two of one time differ', () => {
    const track = readOne(`${deckLine()}\n${deckLine({ wind: '140' })}\n`);
    expect(track.fixes).toHaveLength(1);
    expect(track.fixes[0]!.maxWindMps).toBe(knots(140));
    expect(track.cautions[0]).toBe(
      'line 2: differs from line 1 of the same time (2020-12-16T06:00Z): the later line counts',
    );
  });

  it('tells storms of one number in two seasons apart', () => {
    const text = [deckLine(), deckLine({ time: '2021122006' }), deckLine({ time: '2021122012' })].join('\n');
    expect(readText(text).map(({ id, fixes }) => [id, fixes.length])).toEqual([
      ['SH052021', 1],
      ['SH052022', 2],
    ]);
  });

  it('keeps a northern storm whole across the turn of the year', () => {
    const rows = ['2005123018', '2005123118', '2006010100', '2006010106'].map((time) =>
      deckLine({ basin: 'AL, 30', time, at: '250N, 380W' }),
    );
    expect(readText(rows.join('\n')).map(({ id, fixes }) => [id, fixes.length])).toEqual([['AL302005', 4]]);
  });
});

describe('an ATCF a-deck', () => {
  const forecast = (technique: string, time: string, tau: number, wind = 100): string =>
    deckLine({
      basin: 'AL, 09',
      technique,
      time,
      tau: String(tau),
      at: `${200 + tau}N, ${700 + tau}W`,
      wind: String(wind),
      minutes: '03',
      rest: '',
    });
  const deck = [
    forecast('AAAA', '2031090300', 0),
    forecast('AAAA', '2031090300', 12),
    forecast('BBBB', '2031090300', 0),
    forecast('AAAA', '2031090306', 0, 90),
    forecast('AAAA', '2031090306', 12, 95),
    forecast('AAAA', '2031090306', 24, 0),
    forecast('BBBB', '2031090306', 0),
  ].join('\n');

  it('lists its techniques when none is chosen', () => {
    expect(failureOf(() => readText(deck))).toMatchObject({
      name: 'UsageError',
      code: 'track.technique',
      message: 'storm.csv: has forecasts of 2 techniques; choose one with technique: AAAA, BBBB',
    });
    expect(failureOf(() => readText(deck, { technique: 'AAAB' })).message).toContain(
      "no technique 'AAAB' (did you mean AAAA?)",
    );
  });

  it('takes the newest forecast of the technique: initial time + forecast period', () => {
    const track = readOne(deck, { technique: 'aaaa' });
    expect(track).toMatchObject({ id: 'AL092031', kind: 'forecast', format: 'a-deck' });
    expect(track.fixes.map(({ timeMs, maxWindMps }) => [new Date(timeMs).toISOString(), maxWindMps])).toEqual([
      ['2031-09-03T06:00:00.000Z', knots(90)],
      ['2031-09-03T18:00:00.000Z', knots(95)],
      ['2031-09-04T06:00:00.000Z', null],
    ]);
    expect(track.cautions).toContain('the newest of 2 forecasts is taken, from 2031-09-03T06:00Z');
  });

  it('takes the forecast that is asked for', () => {
    expect(readOne(deck, { technique: 'AAAA', initialTime: '2031090300' }).fixes).toHaveLength(2);
    expect(failureOf(() => readText(deck, { technique: 'AAAA', initialTime: '2031090312' }))).toMatchObject({
      name: 'UsageError',
      code: 'track.initial-time',
    });
  });

  it('needs no choice where there is one technique', () => {
    expect(readOne(`${forecast('AAAA', '2031090300', 0)}\n${forecast('AAAA', '2031090300', 6)}`).fixes).toHaveLength(2);
  });

  it('leaves out lines without a centre', () => {
    const empty = deckLine({
      basin: 'AL, 09',
      technique: 'AAAA',
      time: '2031090300',
      tau: '24',
      at: '0N, 0W',
      rest: '',
    });
    const track = readOne(`${forecast('AAAA', '2031090300', 0)}\n${empty}`);
    expect(track.fixes).toHaveLength(1);
    expect(track.cautions).toContain('line 2: the AAAA line has no centre (0N, 0W): left out');
  });
});
