import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parquetWriteBuffer } from 'hyparquet-writer';
import { EventRun, indexEvents, type Manifest } from '../../src/io/event-run.js';
import { makeRecipe, recipeDocument } from '../../src/model/recipe.js';

export interface HandMadeRow {
  readonly cell: number;
  readonly event: number;
  readonly wind: number;
}

/** A run of events E0, E1 … with given rates whose footprints are given rows, cut into shards; gusts are 1.25 of winds. */
export async function handMadeRun(
  folder: string,
  {
    rates,
    rows,
    grid = { crs: 'EPSG:4326', bounds: [0, 0, 2, 1], cell: 0.5 },
    shards = 1,
    setAside = [],
  }: {
    rates: readonly number[];
    rows: readonly HandMadeRow[];
    grid?: { crs: string; bounds: readonly number[]; cell: number };
    shards?: number;
    setAside?: Manifest['setAside'];
  },
): Promise<{ run: EventRun; manifests: Manifest[] }> {
  const input = join(folder, 'set.csv');
  const lines = rates.map((rate, i) => `E${i},2031-08-01T00:00Z,0,0,20,${rate}\n`);
  writeFileSync(input, `event,time,lat_deg,lon_deg,vmax_mps,rate\n${lines.join('')}`);
  const { heading, events, sha256 } = await indexEvents(input);
  const plan = {
    input,
    inputsSha256: sha256,
    recipe: recipeDocument(makeRecipe()),
    recipeSha256: 'x',
    grid,
    leastMps: 17.5,
    badEvents: 'stop',
    shards,
    years: null,
  } as const;
  await EventRun.create(join(folder, 'run'), plan, { heading, events });
  const run = await EventRun.open(join(folder, 'run'));
  const manifests: Manifest[] = [];
  for (let shard = 0; shard < shards; shard++) {
    const [first, end] = [0, 1].map((k) => Math.floor((rates.length * (shard + k)) / shards)) as [number, number];
    const own = rows
      .filter(({ event }) => event >= first && event < end)
      .toSorted((a, b) => a.cell - b.cell || a.event - b.event);
    const bytes = parquetWriteBuffer({
      columnData: [
        { name: 'cell', data: Int32Array.from(own, (row) => row.cell), type: 'INT32' },
        { name: 'event', data: Int32Array.from(own, (row) => row.event), type: 'INT32' },
        { name: 'wind', data: Float32Array.from(own, (row) => row.wind), type: 'FLOAT' },
        { name: 'gust', data: Float32Array.from(own, (row) => 1.25 * row.wind), type: 'FLOAT' },
      ],
    });
    manifests.push(
      await run.commit(
        { shard, first, end, rows: own.length, setAside: shard === 0 ? setAside : [], seconds: 0 },
        new Uint8Array(bytes),
      ),
    );
  }
  return { run, manifests };
}
