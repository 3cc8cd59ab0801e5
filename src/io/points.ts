import { createHash } from 'node:crypto';
import { basename } from 'node:path';
import { pointFeatures } from '../exposure/point-geojson.js';
import { type PointRow, pointTable, type SkippedRow } from '../exposure/point-table.js';
import { lineSplitter } from '../track/read/lines.js';
import type { InputRecord } from './input.js';
import { readTextPieces, sourceName } from './lines.js';

export interface PointFile {
  readonly valueNames: readonly string[];
  /** columns or properties that are neither name, place nor value */
  readonly unusedNames: readonly string[];
  /** rows that were not taken; only the first of them are listed, all are counted */
  readonly skipped: readonly SkippedRow[];
  readonly skippedCount: number;
  /** what stands for `line`: a line of a table or the number of a feature */
  readonly unit: 'line' | 'feature';
  readonly record: InputRecord;
}

/** Most skipped rows that are kept with their reasons; the others are counted. */
const LISTED = 1000;

/**
 * Reads named points, row by row: a CSV table or GeoJSON, told by the first character. Neither is held as a whole.
 * @throws InputError from the readers
 */
export async function readPoints(
  path: string,
  options: { values?: readonly string[]; strict?: boolean; onPoint: (point: PointRow) => void },
): Promise<PointFile> {
  const source = sourceName(path);
  const hash = createHash('sha256');
  const skipped: SkippedRow[] = [];
  let skippedCount = 0;
  const reading = {
    source,
    onPoint: options.onPoint,
    onSkip: (row: SkippedRow): void => {
      skippedCount++;
      if (skipped.length < LISTED) skipped.push(row);
    },
    ...(options.values ? { values: options.values } : {}),
    ...(options.strict ? { strict: true } : {}),
  };
  const table = pointTable(reading);
  const features = pointFeatures(reading);
  const splitter = lineSplitter(source);
  let isJson: boolean | null = null;
  let line = 0;
  const take = (lines: readonly string[]): void => {
    for (const text of lines) table.line(text, ++line);
  };
  for await (const piece of readTextPieces(path, { onBytes: (bytes) => hash.update(bytes) })) {
    const text = isJson === null && piece.charCodeAt(0) === 0xfeff ? piece.slice(1) : piece;
    if (isJson === null && text.trim() !== '') isJson = /^\s*[{[]/.test(text);
    if (isJson) features.push(text);
    else take(splitter.push(text));
  }
  if (!isJson) take(splitter.end());
  const reader = isJson ? features : table;
  reader.end();
  return {
    valueNames: reader.valueNames(),
    unusedNames: reader.unusedNames(),
    skipped,
    skippedCount,
    unit: isJson ? 'feature' : 'line',
    record: { name: path === '-' ? source : basename(path), sha256: hash.digest('hex') },
  };
}
