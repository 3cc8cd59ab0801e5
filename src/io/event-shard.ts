import { parquetWriteBuffer } from 'hyparquet-writer';
import { GalewakeError, InputError } from '../errors.js';
import { shardRange, trackText } from '../events/event-index.js';
import { type EventRow, eventRows } from '../events/event-row.js';
import { cellAreasM2 } from '../isotach/area.js';
import type { Land } from '../land/land.js';
import { makeRecipe, type Recipe } from '../model/recipe.js';
import { windModel } from '../model/wind.js';
import { gustFactorOf } from '../swath/exact.js';
import type { Grid } from '../swath/grid.js';
import { createSwathWorkspace } from '../swath/workspace.js';
import { readTracksFromText } from '../track/read/read.js';
import { eventLine } from '../write/event-table.js';
import { type EventRun, type Manifest, readRange } from './event-run.js';

/** Rows of a group of the Parquet file, which is the least that a reader takes. */
const ROWS_OF_A_GROUP = 20_000;

/** Winds of a shard's events at the cells that they reach, by cell and then event. */
interface ShardRows {
  readonly cells: Int32Array;
  readonly events: Int32Array;
  readonly windMps: Float32Array;
  readonly gustMps: Float32Array;
}

/**
 * Does a shard: the footprints of its events as Parquet (cell int32, event int32, wind and gust float32, ordered by cell
 * and event), then its manifest. A shard that is done is left as it is.
 * @throws InputError `events.event` for a bad event where the plan does not set it aside
 */
export async function runShard(run: EventRun, shard: number): Promise<{ manifest: Manifest; done: boolean }> {
  const known = await run.manifest(shard, { checksum: false });
  if (known) return { manifest: known, done: false };
  const startedAt = performance.now();
  const { plan, heading, events } = run;
  const [first, end] = shardRange(events.length, plan.shards, shard);
  const recipe = makeRecipe(plan.recipe);
  const workspace = createSwathWorkspace(run.grid);
  const { table } = plan;
  const rowOf = table
    ? eventRows(workspace.grid, {
        cellAreaM2: cellAreaOf(workspace.grid),
        levelsMps: table.levelsMps,
        places: table.places,
        isLand: table.landfalls ? (await landOf(table)).isLand : null,
      })
    : null;
  const lines: string[] = [];
  const parts: { event: number; cells: Int32Array; windMps: Float32Array; gust: number }[] = [];
  const setAside: { event: string; row: number; why: string }[] = [];
  const from = first < end ? events[first]!.start : 0;
  const bytes = first < end ? await readRange(plan.input, from, events[end - 1]!.end) : Buffer.alloc(0);
  for (let event = first; event < end; event++) {
    const { id, start, end: stop, row, rate } = events[event]!;
    let one: EventRow | null = null;
    try {
      const text = trackText(heading, bytes.subarray(start - from, stop - from).toString('utf8'));
      const { model, footprint, gust } = footprintOf(text, id, { recipe, workspace, leastMps: plan.leastMps });
      parts.push({ event, ...footprint, gust });
      one = rowOf?.(model, footprint) ?? null;
    } catch (error) {
      if (!(error instanceof GalewakeError)) throw error;
      if (plan.badEvents === 'stop')
        throw new InputError('events.event', `event '${id}' (from row ${row}): ${error.message}`, { cause: error });
      setAside.push({ event: id, row, why: error.message });
    }
    if (table) lines.push(eventLine({ id, number: event, rate }, one, table));
  }
  const rows = ordered(parts);
  const data = new Uint8Array(
    parquetWriteBuffer({
      // small groups: a block of cells reads little more than its own rows
      rowGroupSize: ROWS_OF_A_GROUP,
      columnData: [
        { name: 'cell', data: rows.cells, type: 'INT32' },
        { name: 'event', data: rows.events, type: 'INT32' },
        { name: 'wind', data: rows.windMps, type: 'FLOAT' },
        { name: 'gust', data: rows.gustMps, type: 'FLOAT' },
      ],
    }),
  );
  const seconds = Number(((performance.now() - startedAt) / 1000).toFixed(3));
  const manifest = await run.commit(
    { shard, first, end, rows: rows.cells.length, setAside, seconds },
    data,
    table ? lines.join('') : undefined,
  );
  return { manifest, done: true };
}

function cellAreaOf(grid: Grid): (cell: number) => number {
  const { per, areasM2 } = cellAreasM2(grid);
  return (cell) => areasM2[per === 'row' ? Math.trunc(cell / grid.nx) : cell]!;
}

/** The land of the plan's landfalls. */
async function landOf(table: NonNullable<EventRun['plan']['table']>): Promise<Land> {
  const { readLand, worldLand } = await import('./land-file.js');
  if (table.landSha256 === undefined) return worldLand('10m');
  const { land, record } = await readLand(table.land!);
  if (record.sha256 !== table.landSha256)
    throw new InputError(
      'events.land',
      `${record.name}: the land has changed since the plan was made; make a new plan with galewake events plan`,
    );
  return land;
}

function footprintOf(
  text: string,
  id: string,
  {
    recipe,
    workspace,
    leastMps,
  }: { recipe: Recipe; workspace: ReturnType<typeof createSwathWorkspace>; leastMps: number },
) {
  const tracks = readTracksFromText(text, { source: `event ${id}` });
  // invented and synthetic tracks know no land
  const model = windModel({ ...tracks[0]!, kind: 'drawn' }, recipe, { lowestLevelMps: leastMps });
  return { model, footprint: workspace.footprint(model, { leastMps }), gust: gustFactorOf(model, 'at-sea') };
}

/** All rows by cell, then event. */
function ordered(
  parts: readonly { event: number; cells: Int32Array; windMps: Float32Array; gust: number }[],
): ShardRows {
  const count = parts.reduce((sum, { cells }) => sum + cells.length, 0);
  const keys = new Float64Array(count);
  const events = new Int32Array(count);
  const winds = new Float32Array(count);
  const gusts = new Float32Array(count);
  let n = 0;
  for (const { event, cells, windMps, gust } of parts) {
    for (let i = 0; i < cells.length; i++, n++) {
      // events come in their order, so that the place of a row within its cell keeps it
      keys[n] = cells[i]! * count + n;
      events[n] = event;
      winds[n] = windMps[i]!;
      gusts[n] = windMps[i]! * gust;
    }
  }
  keys.sort();
  const rows = {
    cells: new Int32Array(count),
    events: new Int32Array(count),
    windMps: new Float32Array(count),
    gustMps: new Float32Array(count),
  };
  for (let i = 0; i < count; i++) {
    const cell = Math.floor(keys[i]! / count);
    const from = keys[i]! - cell * count;
    rows.cells[i] = cell;
    rows.events[i] = events[from]!;
    rows.windMps[i] = winds[from]!;
    rows.gustMps[i] = gusts[from]!;
  }
  return rows;
}
