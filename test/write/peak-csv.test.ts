import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cellCentre, projection } from '../../src/swath/grid.js';
import type { Swath } from '../../src/swath/swath.js';
import { DecimalText } from '../../src/write/decimal-text.js';
import { peakBands, thresholdName } from '../../src/write/peak-bands.js';
import { peakCsv } from '../../src/write/peak-csv.js';
import { exampleSwath } from './example-swath.js';

function tableOf(swath: Swath): { heading: string[]; rows: string[][]; pieces: number } {
  const pieces = [...peakCsv(swath)];
  const text = Buffer.concat(pieces).toString();
  expect(text.endsWith('\n')).toBe(true);
  const [heading, ...rows] = text
    .slice(0, -1)
    .split('\n')
    .map((line) => line.split(','));
  return { heading: heading!, rows, pieces: pieces.length };
}

describe('peak.csv', () => {
  it('has units in its headings', () => {
    expect(tableOf(exampleSwath()).heading).toEqual([
      'lon_deg',
      'lat_deg',
      'peak_wind_mps',
      'peak_gust_mps',
      'wind_from_deg',
      'peak_time_s',
      'hours_34kt',
      'hours_50kt',
      'hours_64kt',
    ]);
    expect(tableOf(exampleSwath({ crs: 'EPSG:32760', west: 3e5, north: 8e6 })).heading.slice(0, 4)).toEqual([
      'lon_deg',
      'lat_deg',
      'x_m',
      'y_m',
    ]);
  });

  it.each(['EPSG:4326', 'EPSG:32760'])('agrees with the fields cell by cell on %s', (crs) => {
    const swath = exampleSwath(crs === 'EPSG:4326' ? {} : { crs, west: 300_000, north: 8_000_000 });
    const { grid } = swath;
    const { rows } = tableOf(swath);
    const bands = peakBands(swath);
    const blowing = [...swath.windMps.keys()].filter((k) => swath.windMps[k]! > 0);
    expect(rows).toHaveLength(blowing.length);
    const wrong: string[] = [];
    rows.forEach((row, i) => {
      const k = blowing[i]!;
      const [x, y] = cellCentre(grid, k % grid.nx, Math.floor(k / grid.nx));
      const [lon, lat] = projection(grid.crs).inverse(x, y);
      const off = ((Number(row[0]) - lon + 540) % 360) - 180;
      if (Math.abs(off) > 6e-8 || Math.abs(Number(row[1]) - lat) > 6e-8) wrong.push(`place of ${k}`);
      if (!(Number(row[0]) >= -180 && Number(row[0]) < 180)) wrong.push(`longitude of ${k}`);
      const cells = row.slice(grid.geographic ? 2 : 4);
      bands.forEach((band, b) => {
        if (!(Math.abs(Number(cells[b]) - band.values[k]!) <= 0.5000001 * 10 ** -band.decimals))
          wrong.push(`${band.name} of ${k}`);
      });
    });
    expect(wrong).toEqual([]);
  });

  it('comes in pieces of bounded size', () => {
    const { pieces, rows } = tableOf(exampleSwath({ nx: 200, ny: 200, cell: 0.1 }));
    expect(rows.length).toBeGreaterThan(20_000);
    expect(pieces).toBeGreaterThan(4);
    for (const piece of peakCsv(exampleSwath({ nx: 200, ny: 200, cell: 0.1 })))
      expect(piece.length).toBeLessThan(300_000);
  });

  it('of a calm grid is its heading alone', () => {
    const swath = exampleSwath();
    expect(tableOf({ ...swath, windMps: new Float32Array(swath.windMps.length) }).rows).toEqual([]);
  });
});

describe('numbers as digits', () => {
  const written = (value: number, decimals: number): string => {
    const text = new DecimalText(64);
    text.number(value, decimals);
    return Buffer.from(text.bytes()).toString().slice(0, -1);
  };

  it.each([
    [0, 3, '0'],
    [-0, 3, '0'],
    [-0.0004, 3, '0'],
    [0.0005, 3, '0.001'],
    [-0.5, 1, '-0.5'],
    [12, 3, '12'],
    [100, 0, '100'],
    [12.34, 3, '12.34'],
    [0.007, 3, '0.007'],
    [-179.9999999, 7, '-179.9999999'],
    [Number.NaN, 3, ''],
    [Number.POSITIVE_INFINITY, 3, ''],
  ])('%d with %i decimals', (value, decimals, text) => expect(written(value, decimals)).toBe(text));

  // independent: JavaScript's own conversion; a half may round to either side
  it('are those of the nearest decimal', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -4e7, max: 4e7, noNaN: true }),
        fc.integer({ min: 0, max: 7 }),
        (value, decimals) => {
          const text = written(value, decimals);
          expect(text).toMatch(/^-?\d+(\.\d*[1-9])?$/);
          expect(Math.abs(Number(text) - value)).toBeLessThanOrEqual(
            0.5 * 10 ** -decimals * (1 + 1e-6) + Math.abs(value) * 2e-16,
          );
        },
      ),
      { numRuns: 2000 },
    );
  });
});

describe('the name of a threshold', () => {
  it.each([
    [(34 * 1852) / 3600, '34kt'],
    [17.5, '17.5mps'],
    [20, '20mps'],
  ])('%d m/s', (threshold, name) => expect(thresholdName(threshold)).toBe(name));
});
