import type { DuckDBConnection, DuckDBValue } from '@duckdb/node-api';
import { LimitError } from '../errors.js';
import type { EventRun, Manifest } from './event-run.js';

/** Nothing is fetched from anywhere; two threads and no cache of files, so that memory grows neither with machine nor set. */
const SETTINGS = {
  autoinstall_known_extensions: 'false',
  autoload_known_extensions: 'false',
  threads: '2',
  enable_external_file_cache: 'false',
};

/**
 * Work with DuckDB in memory; it is loaded here and nowhere else. Paths and ids are bound to statements as values, never
 * part of their text.
 */
export async function withDuckDb<T>(work: (connection: DuckDBConnection) => Promise<T>): Promise<T> {
  const { DuckDBInstance } = await import('@duckdb/node-api');
  const instance = await DuckDBInstance.create(':memory:', SETTINGS);
  try {
    const connection = await instance.connect();
    try {
      return await work(connection);
    } finally {
      connection.closeSync();
    }
  } finally {
    instance.closeSync();
  }
}

/** Files of the shards that hold rows, as patterns that match themselves alone: run[1] would else read the files of run1. */
export function footprintFiles(run: EventRun, manifests: readonly Manifest[]): string[] {
  return manifests.filter(({ rows }) => rows > 0).map((manifest) => run.dataPath(manifest).replace(/[[*?]/g, '[$&]'));
}

/**
 * The annual rates of a run's events, in their order.
 * @throws LimitError `events.rates` where they have none
 */
export function ratesOf(run: EventRun): Float64Array {
  const rates = Float64Array.from(run.events, ({ rate }) => rate);
  if (rates.some(Number.isNaN))
    throw new LimitError(
      'events.rates',
      'the events have no rates: give them in the column `rate`, or the years that the set stands for with --years',
    );
  return rates;
}

/** Rows of a query, some thousand at a time, column by column: they are never held together. */
export async function* chunksOf(
  connection: DuckDBConnection,
  statement: string,
  values: DuckDBValue[],
): AsyncGenerator<readonly (readonly DuckDBValue[])[]> {
  const result = await connection.stream(statement, values);
  for (;;) {
    const chunk = await result.fetchChunk();
    if (!chunk || chunk.rowCount === 0) return;
    yield Array.from({ length: chunk.columnCount }, (_, i) => chunk.getColumnValues(i));
  }
}

/** A table of numbers by columns of the same length; names are those of this program, never of a file. */
export async function fillTable(
  connection: DuckDBConnection,
  name: 'asked' | 'rates' | 'assets',
  columns: Readonly<Record<string, Int32Array | Float64Array>>,
): Promise<void> {
  const kinds = Object.entries(columns).map(
    ([column, data]) => `${column} ${data instanceof Int32Array ? 'integer' : 'double'}`,
  );
  await connection.run(`create or replace table ${name} (${kinds.join(', ')})`);
  const appender = await connection.createAppender(name);
  const data = Object.values(columns);
  for (let i = 0; i < (data[0]?.length ?? 0); i++) {
    for (const column of data) {
      if (column instanceof Int32Array) appender.appendInteger(column[i]!);
      else appender.appendDouble(column[i]!);
    }
    appender.endRow();
  }
  appender.closeSync();
}
