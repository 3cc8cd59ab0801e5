import { describe, expect, it } from 'vitest';
import { cubicCurve, powerCurve } from '../../src/exposure/curve.js';
import { curveFromTable } from '../../src/exposure/curve-table.js';

describe('the cubic curve', () => {
  // independent arithmetic of the formula F = v³/(1 + v³), v = (V − V_t)/(V_h − V_t); the formula from memory [Emanuel2011]; 150 kt is 77.17 m/s
  const table: readonly [half: number, wind: number, ratio: number][] = [
    [74.7, 0, 0],
    [74.7, 25.7, 0],
    [74.7, 33, 0.0033],
    [74.7, 40, 0.02425],
    [74.7, 50, 0.10871],
    [74.7, 60, 0.2554],
    [74.7, 74.7, 0.5],
    [74.7, 80, 0.57642],
    [150 * (1852 / 3600), 50, 0.09523],
    [150 * (1852 / 3600), 74.7, 0.46323],
  ];
  for (const [halfMps, wind, ratio] of table) {
    it(`of 25.7 and ${halfMps} m/s is ${ratio} at ${wind} m/s`, () => {
      expect(cubicCurve({ thresholdMps: 25.7, halfMps }).ratio(wind)).toBeCloseTo(ratio, 5);
    });
  }

  it('is of the 1-min sustained wind, never falls and stays below 1', () => {
    const curve = cubicCurve({ thresholdMps: 25.7, halfMps: 74.7 });
    expect(curve).toMatchObject({ of: 'wind', averagingS: 60 });
    for (let v = 0; v < 300; v++) {
      expect(curve.ratio(v + 1)).toBeGreaterThanOrEqual(curve.ratio(v));
      expect(curve.ratio(v)).toBeLessThan(1);
    }
  });

  it('has no built-in speeds and refuses those that cannot be', () => {
    for (const [thresholdMps, halfMps] of [
      [-1, 50],
      [50, 50],
      [60, 50],
      [Number.NaN, 50],
      [20, Number.NaN],
    ] as const)
      expect(() => cubicCurve({ thresholdMps, halfMps })).toThrow(
        /threshold of at least 0 and a half-loss speed above it/,
      );
  });
});

describe('the power curve', () => {
  const curve = powerCurve({ thresholdMps: 20, totalMps: 60, exponent: 2, of: 'gust', averagingS: 3 });
  it('is the power of the share of the way from threshold to total loss', () => {
    // identity: (v − 20)²/40²
    expect([0, 20, 30, 40, 60, 90].map(curve.ratio)).toEqual([0, 0, 0.0625, 0.25, 1, 1]);
  });
  it('refuses speeds and exponents that cannot be', () => {
    for (const bad of [{ exponent: 0 }, { exponent: Number.NaN }, { totalMps: 20 }, { thresholdMps: -1 }])
      expect(() =>
        powerCurve({ thresholdMps: 20, totalMps: 60, exponent: 2, of: 'wind', averagingS: 60, ...bad }),
      ).toThrow(/power curve needs/);
  });
});

describe('a curve of a table', () => {
  const read = (text: string, more: { of?: 'wind' | 'gust'; averagingS?: number } = {}) =>
    curveFromTable(text, { source: 'c.csv', ...more });

  it('is straight between its rows, 0 below the first, held above the last', () => {
    const curve = read('wind_mps_1min,ratio\n20,0\n40,0.1\n60,0.5\n', { of: 'wind' });
    const ratios = [0, 0, 0.05, 0.1, 0.3, 0.5, 0.5];
    for (const [i, wind] of [0, 20, 30, 40, 50, 60, 90].entries())
      expect(curve.ratio(wind)).toBeCloseTo(ratios[i]!, 12);
    expect(curve).toMatchObject({ of: 'wind', averagingS: 60, knownFromMps: 0, knownToMps: 60 });
  });

  it('knows the unit from the heading, gust and period from heading or options', () => {
    // identity: one knot is 1852/3600 m/s, one statute mile 1609.344 m
    for (const [heading, unit] of [
      ['gust_mps_3s', 1],
      ['gust_kt_3s', 1852 / 3600],
      ['gust_kmh_3s', 1 / 3.6],
      ['gust_mph_3s', 1609.344 / 3600],
    ] as const) {
      const curve = read(`${heading},ratio\n50,0\n100,1\n`);
      expect(curve).toMatchObject({ of: 'gust', averagingS: 3 });
      expect(curve.ratio(75 * unit)).toBeCloseTo(0.5, 12);
    }
    expect(read('wind_kt;ratio\n50,5;0\n100;0,5\n', { of: 'wind', averagingS: 600 }).knownToMps).toBeCloseTo(51.444, 3);
    expect(read('wind_kt_10min,damage_ratio\n50,0\n100,1\n', { of: 'gust' })).toMatchObject({
      of: 'gust',
      averagingS: 600,
    });
  });

  it('knows where it is not to be trusted', () => {
    expect(read('gust_mps_3s,ratio\n30,0.2\n60,0.9\n')).toMatchObject({ knownFromMps: 30, knownToMps: 60 });
    // all is lost already: nothing lies beyond
    expect(read('gust_mps_3s,ratio\n30,0\n60,1\n').knownToMps).toBe(Number.POSITIVE_INFINITY);
  });

  const bad: readonly [string, string, RegExp, { of?: 'wind' | 'gust'; averagingS?: number }?][] = [
    ['an empty file', '\n', /c\.csv: is empty/],
    ['no unit in the heading', 'wind,ratio\n1,0\n', /c\.csv:1: .*needs one of wind_mps/],
    ['no ratio', 'wind_kt,loss\n1,0\n', /one ratio/],
    ['two winds', 'wind_kt,wind_mps,ratio\n1,1,0\n', /needs one of/],
    ['neither gust nor mean', 'wind_kt_1min,ratio\n1,0\n2,1\n', /--curve-of gust/],
    ['no averaging period', 'gust_kt,ratio\n1,0\n2,1\n', /--curve-averaging/],
    [
      'a heading against an option',
      'gust_kt_3s,ratio\n1,0\n2,1\n',
      /says 3, --curve-averaging says 60/,
      { averagingS: 60 },
    ],
    ['a gust that is called a mean', 'gust_kt_3s,ratio\n1,0\n2,1\n', /says gust, --curve-of says wind/, { of: 'wind' }],
    ['a curve that goes down', 'gust_mps_3s,ratio\n20,0\n30,0.5\n40,0.4\n', /c\.csv:4: .*falls from 0\.5 to 0\.4/],
    ['a ratio above 1', 'gust_mps_3s,ratio\n20,0\n30,50\n', /c\.csv:3: .*50 is not between 0 and 1; a percentage/],
    ['a percentage', 'gust_mps_3s,ratio\n20,0\n30,50%\n', /'50%' is not a number; write a share/],
    ['a negative ratio', 'gust_mps_3s,ratio\n20,-0.1\n30,0.5\n', /-0\.1 is not between 0 and 1/],
    ['winds out of order', 'gust_mps_3s,ratio\n30,0\n20,0.5\n', /c\.csv:3: .*not above the row before/],
    ['a wind twice', 'gust_mps_3s,ratio\n30,0\n30,0.5\n', /not above the row before/],
    ['a negative wind', 'gust_mps_3s,ratio\n-5,0\n30,0.5\n', /not at least 0/],
    ['text for a wind', 'gust_mps_3s,ratio\nstrong,0\n30,0.5\n', /'strong' is not a number/],
    ['one row', 'gust_mps_3s,ratio\n30,0.5\n', /at least two rows/],
    [
      'a decimal comma between commas',
      'gust_mps_3s,ratio\n30,0\n40,0,5\n',
      /3 cells, the heading 2 \(a decimal comma\?\)/,
    ],
    ['an open quote', 'gust_mps_3s,ratio\n"30,0\n', /never closed/],
  ];
  for (const [what, text, says, more] of bad) it(`refuses ${what}`, () => expect(() => read(text, more)).toThrow(says));
});
