import { createHash } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { PointRow } from '../../src/exposure/point-table.js';
import { readPoints } from '../../src/io/points.js';
import { inFolder } from '../cli/run.js';

async function read(text: string, options: { values?: string[]; strict?: boolean } = {}) {
  return inFolder(async (folder) => {
    const path = join(folder, 'p.csv');
    writeFileSync(path, text);
    const points: PointRow[] = [];
    return { points, ...(await readPoints(path, { ...options, onPoint: (point) => points.push(point) })) };
  });
}

describe('points of a file', () => {
  it('come with their lines, values and the checksum of the bytes', async () => {
    const text = 'id,name,lat,lon,sum,use,floors\n7,"A\nB",10,20,5,mill,2\n8,C,-10.5,-20.25,6,shop,3\n';
    const found = await read(text);
    expect(found.valueNames).toEqual(['sum', 'floors']);
    expect(found.unusedNames).toEqual(['use']);
    expect(found.points).toEqual([
      { name: 'A B', latDeg: 10, lonDeg: 20, values: [5, 2], line: 2 },
      { name: 'C', latDeg: -10.5, lonDeg: -20.25, values: [6, 3], line: 4 },
    ]);
    expect(found.record).toEqual({ name: 'p.csv', sha256: createHash('sha256').update(text).digest('hex') });
  });

  it('counts every skipped row and lists the first thousand', async () => {
    const rows = Array.from({ length: 2500 }, (_, i) => `R${i},95,0`);
    const found = await read(`name,lat,lon\n${rows.join('\n')}\nA,1,2\n`);
    expect([found.points.length, found.skippedCount, found.skipped.length]).toEqual([1, 2500, 1000]);
    expect(found.skipped[999]).toEqual({ line: 1001, reason: expect.stringMatching(/latitude 95/) });
  });

  it('takes what a spreadsheet was guarded from as it was', async () => {
    const { points } = await read("name,lat,lon\n'=1+1,1,2\n'@home,3,4\nO'Hara,5,6\n");
    expect(points.map(({ name }) => name)).toEqual(['=1+1', '@home', "O'Hara"]);
  });

  it('takes tabs, headings in any letters, comments above and rows that are blank', async () => {
    const { points } = await read('# places\n\nLATITUDE\tLongitude\tName\n1\t2\tA\n\n\t\t\n3\t181\tB\n');
    expect(points.map(({ name, latDeg, lonDeg }) => [name, latDeg, lonDeg])).toEqual([
      ['A', 1, 2],
      ['B', 3, 181],
    ]);
  });

  it('is refused at its line when strict', async () => {
    await expect(read('name,lat,lon\nA,1,2\nB,,\n', { strict: true })).rejects.toThrow(/p\.csv:3: .*--strict/);
  });

  it('of GeoJSON are told by their features', async () => {
    const feature = (properties: unknown, coordinates: unknown) => ({
      type: 'Feature',
      properties,
      geometry: { type: 'Point', coordinates },
    });
    const text = JSON.stringify({
      type: 'FeatureCollection',
      features: [
        feature({ name: 'A', sum: 5, note: 'x' }, [20, 10]),
        feature({ name: 'B' }, [20, 10]),
        feature({ name: 'C', sum: '6' }, [20, 10]),
        feature({ name: 'D', sum: 6 }, [20, 100]),
        { type: 'Feature', properties: {}, geometry: { type: 'LineString', coordinates: [] } },
        feature({ sum: 7 }, [20, 10, 3]),
      ],
    });
    const found = await read(text);
    expect([found.unit, found.valueNames, found.unusedNames]).toEqual(['feature', ['sum'], ['note']]);
    expect(found.points.map(({ name, values }) => [name, ...values])).toEqual([
      ['A', 5],
      ['feature 6', 7],
    ]);
    expect(found.skipped).toEqual([
      { line: 2, reason: 'sum is missing' },
      { line: 3, reason: 'sum is not a number of at least 0' },
      { line: 4, reason: expect.stringMatching(/latitude 100/) },
      { line: 5, reason: expect.stringMatching(/LineString, not a Point/) },
    ]);
    await expect(read(text, { strict: true })).rejects.toThrow(/p\.csv: feature 2: sum is missing/);
  });
});
