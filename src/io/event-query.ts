import type { DuckDBConnection } from '@duckdb/node-api';
import { LimitError } from '../errors.js';
import type { EventRun, Manifest } from './event-run.js';

/** Nothing is fetched from anywhere; two threads, so that memory does not grow with the machine. */
const SETTINGS = { autoinstall_known_extensions: 'false', autoload_known_extensions: 'false', threads: '2' };

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
