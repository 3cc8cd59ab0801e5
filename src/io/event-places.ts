import type { PlaceEvent } from '../events/place-curve.js';
import { chunksOf, fillTable, footprintFiles, withDuckDb } from './event-query.js';
import type { EventRun, Manifest } from './event-run.js';

/** Rows of footprints that are held at once, at most. */
const ROWS_AT_ONCE = 1_000_000;

/**
 * What every event did at some cells, in the order of `cells`; nothing where no event came. In blocks of cells, so that
 * memory does not grow with their number.
 */
export async function* eventsAtCells(
  run: EventRun,
  options: {
    readonly manifests: readonly Manifest[];
    readonly cells: readonly number[];
    readonly of: 'wind' | 'gust';
    readonly rates: ArrayLike<number>;
  },
): AsyncGenerator<readonly PlaceEvent[]> {
  const { cells, rates } = options;
  const block = Math.max(1, Math.floor(ROWS_AT_ONCE / Math.max(1, run.events.length)));
  for (let first = 0; first < cells.length; first += block) {
    const some = cells.slice(first, first + block);
    const found = await blockOf(run, { ...options, cells: [...new Set(some)] });
    for (const cell of some)
      yield (found.get(cell) ?? []).map(({ event, value }) => ({ event, value, rate: rates[event]! }));
  }
}

async function blockOf(
  run: EventRun,
  { manifests, cells, of }: { manifests: readonly Manifest[]; cells: readonly number[]; of: 'wind' | 'gust' },
): Promise<Map<number, { event: number; value: number }[]>> {
  const found = new Map<number, { event: number; value: number }[]>();
  const files = footprintFiles(run, manifests);
  if (files.length === 0) return found;
  await withDuckDb(async (connection) => {
    const { listValue } = await import('@duckdb/node-api');
    await fillTable(connection, 'asked', { cell: Int32Array.from(cells) });
    const rows = chunksOf(
      connection,
      `select cell, event, ${of === 'gust' ? 'gust' : 'wind'} from read_parquet($1) join asked using (cell)
       where cell between $2::integer and $3::integer order by cell, event`,
      [listValue(files), cells.reduce((a, b) => Math.min(a, b)), cells.reduce((a, b) => Math.max(a, b))],
    );
    for await (const [cellColumn, eventColumn, valueColumn] of rows) {
      for (const [i, cell] of cellColumn!.entries()) {
        const events = found.get(Number(cell)) ?? [];
        if (events.length === 0) found.set(Number(cell), events);
        events.push({ event: Number(eventColumn![i]), value: Number(valueColumn![i]) });
      }
    }
  });
  return found;
}
