import { describe, expect, it } from 'vitest';
import { csvCell, csvLine } from '../../src/write/csv-cell.js';

describe('a CSV cell', () => {
  // identity: RFC 4180 section 2, rules 5–7
  it.each([
    ['plain', 'plain'],
    ['a,b', '"a,b"'],
    ['say "hi"', '"say ""hi"""'],
    ['two\nlines', '"two\nlines"'],
    [' padded ', '" padded "'],
    ['', ''],
  ])('quotes %j only where it must', (text, cell) => expect(csvCell(text)).toBe(cell));

  it.each([
    ['=1+1', "'=1+1"],
    ['+SUM(A1)', "'+SUM(A1)"],
    ['-2+3', "'-2+3"],
    ['@cmd', "'@cmd"],
    ['=HYPERLINK("x","y")', '"\'=HYPERLINK(""x"",""y"")"'],
    ['\t=1', '"\'\t=1"'],
    ['＝1', "'＝1"],
    ['a;=1', '"a;=1"'],
  ])('does not let %j run as a formula', (text, cell) => expect(csvCell(text)).toBe(cell));

  it.each(['-12.5', '+3', '-.5', '1e-3', '-1E+5'])('leaves the number %s alone', (text) =>
    expect(csvCell(text)).toBe(text),
  );

  it('writes numbers in full and leaves a cell empty where there is none', () => {
    expect(csvLine([-1.25, 1e-7, Number.NaN, Number.POSITIVE_INFINITY, null, 0])).toBe('-1.25,1e-7,,,,0\n');
  });
});
