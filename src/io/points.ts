import { createHash } from 'node:crypto';
import { basename } from 'node:path';
import { pointsOfGeojson } from '../exposure/point-geojson.js';
import { type PointRow, pointTable, type SkippedRow } from '../exposure/point-table.js';
import type { InputRecord } from './input.js';
import { readLineBatches, sourceName } from './lines.js';

export interface PointFile {
  readonly valueNames: readonly string[];
  readonly skipped: readonly SkippedRow[];
  readonly record: InputRecord;
}

/** Most skipped rows that are kept with their reasons; the others are counted. */
const LISTED = 1000;

/**
 * Reads named points, row by row: a CSV table (streamed) or GeoJSON (held as a whole), told by the first character.
 * @throws InputError from the readers
 */
export async function readPoints(
  path: string,
  options: { values?: readonly string[]; strict?: boolean; onPoint: (point: PointRow) => void },
): Promise<PointFile & { readonly skippedCount: number }> {
  const source = sourceName(path);
  const hash = createHash('sha256');
  const skipped: SkippedRow[] = [];
  let skippedCount = 0;
  const onSkip = (row: SkippedRow): void => {
    skippedCount++;
    if (skipped.length < LISTED) skipped.push(row);
  };
  const table = pointTable({
    source,
    onPoint: options.onPoint,
    onSkip,
    ...(options.values ? { values: options.values } : {}),
    ...(options.strict ? { strict: true } : {}),
  });
  const json: string[] = [];
  let isJson: boolean | null = null;
  let line = 0;
  for await (const batch of readLineBatches(path, { onBytes: (bytes) => hash.update(bytes) })) {
    for (const text of batch) {
      line++;
      if (isJson === null && text.trim() !== '') isJson = text.trimStart().startsWith('{');
      if (isJson) json.push(text);
      else table.line(text, line);
    }
  }
  const record = (): InputRecord => ({ name: path === '-' ? source : basename(path), sha256: hash.digest('hex') });
  if (!isJson) {
    table.end();
    return { valueNames: table.valueNames(), skipped, skippedCount, record: record() };
  }
  const found = pointsOfGeojson(json.join('\n'), {
    source,
    ...(options.values ? { values: options.values } : {}),
    ...(options.strict ? { strict: true } : {}),
  });
  for (const point of found.points) options.onPoint(point);
  for (const row of found.skipped) onSkip(row);
  return { valueNames: found.valueNames, skipped, skippedCount, record: record() };
}
