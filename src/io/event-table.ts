import { createReadStream } from 'node:fs';
import { join } from 'node:path';
import { parquetWriteBuffer } from 'hyparquet-writer';
import { csvLine } from '../write/csv-cell.js';
import { type EventColumn, eventColumns } from '../write/event-table.js';
import { writeDurably, writeDurablyInPieces } from './durable.js';
import type { EventRun, Manifest } from './event-run.js';

/**
 * Joins the event tables of all shards to `events.csv` and `events.parquet` in the run's folder; nothing where a shard has
 * none, because an older version made it.
 * @returns the files' names
 */
export async function joinEventTables(run: EventRun, manifests: readonly Manifest[]): Promise<string[]> {
  const tables = manifests.map((manifest) => run.tablePath(manifest));
  if (tables.some((path) => path === null)) return [];
  const columns = eventColumns(run.plan.table!);
  await writeDurablyInPieces(
    run.folder,
    async (write) => {
      await write(csvLine(columns.map(({ name }) => name)));
      for (const path of tables as string[])
        for await (const chunk of createReadStream(path, 'utf8')) await write(chunk as string);
    },
    () => 'events.csv',
  );
  await writeDurably(join(run.folder, 'events.parquet'), await parquetOf(run, columns));
  return ['events.csv', 'events.parquet'];
}

/** The joined table as Parquet: columns of one kind each, ids as the set has them. */
async function parquetOf(run: EventRun, columns: readonly EventColumn[]): Promise<Uint8Array> {
  const count = run.events.length;
  const data = columns.map(({ kind }) =>
    kind === 'text' ? new Array<string | null>(count).fill(null) : new Array<number | null>(count).fill(null),
  );
  let at = -1;
  let rest = '';
  for await (const chunk of createReadStream(join(run.folder, 'events.csv'), 'utf8')) {
    const lines = (rest + (chunk as string)).split('\n');
    rest = lines.pop()!;
    for (const line of lines) {
      if (at++ < 0) continue;
      // ids, which alone could be quoted or guarded, are known
      const cells = line.split(',').slice(1 - columns.length);
      for (const [c, cell] of cells.entries()) {
        if (cell === '') continue;
        const { kind } = columns[c + 1]!;
        (data[c + 1] as unknown[])[at - 1] = kind === 'text' ? cell : Number(cell);
      }
      (data[0] as unknown[])[at - 1] = run.events[at - 1]!.id;
    }
  }
  return new Uint8Array(
    parquetWriteBuffer({
      columnData: columns.map(({ name, kind }, c) => ({
        name,
        data: data[c]!,
        type: kind === 'text' ? 'STRING' : kind === 'integer' ? 'INT32' : 'DOUBLE',
        nullable: c > 1,
      })),
    }),
  );
}
