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
  const parquet = parquetOf(run, columns);
  await writeDurablyInPieces(
    run.folder,
    async (write) => {
      await write(csvLine(columns.map(({ name }) => name)));
      for (const path of tables as string[])
        for await (const piece of createReadStream(path, 'utf8')) {
          parquet.take(piece as string);
          await write(piece as string);
        }
    },
    () => 'events.csv',
  );
  await writeDurably(join(run.folder, 'events.parquet'), parquet.bytes());
  return ['events.csv', 'events.parquet'];
}

/** The joined table as Parquet, from pieces of its lines: columns of one kind each, ids as the set has them. */
function parquetOf(run: EventRun, columns: readonly EventColumn[]) {
  const data = columns.map((): (string | number | null)[] => new Array(run.events.length).fill(null));
  let event = 0;
  let rest = '';
  return {
    take(piece: string): void {
      const lines = (rest + piece).split('\n');
      rest = lines.pop()!;
      for (const line of lines) {
        // ids, which alone could be quoted or guarded, are known
        const cells = line.split(',').slice(1 - columns.length);
        for (const [c, cell] of cells.entries())
          if (cell !== '') data[c + 1]![event] = columns[c + 1]!.kind === 'text' ? cell : Number(cell);
        data[0]![event] = run.events[event]!.id;
        event++;
      }
    },
    bytes: (): Uint8Array =>
      new Uint8Array(
        parquetWriteBuffer({
          columnData: columns.map(({ name, kind }, c) => ({
            name,
            data: data[c]!,
            type: kind === 'text' ? 'STRING' : kind === 'integer' ? 'INT32' : 'DOUBLE',
            nullable: c > 1,
          })),
        }),
      ),
  };
}
