import { join } from 'node:path';
import { LimitError } from '../errors.js';
import { gridOver } from '../swath/grid.js';
import { cogChunks } from '../write/geotiff.js';
import { CAUTION } from '../write/provenance.js';
import { poolDeflate } from './deflate.js';
import { writeDurably } from './durable.js';
import type { EventRun, Manifest } from './event-run.js';

/** Return periods of the maps, years. */
export const RETURN_YEARS = [10, 25, 50, 100, 250, 500, 1000] as const;
/** Cells that are worked on at once. */
const BLOCK_CELLS = 65_536;
/** What a sum of equal rates may miss a rate by. */
const ROUNDING = 1e-9;

/**
 * Return-period maps of a run: for each cell the highest wind whose rate of exceedance is at least 1/T, 0 where events are
 * rarer than that. DuckDB is loaded here and nowhere else; paths are bound to its statements, never part of their text.
 * @returns names of the files that were written
 */
export async function returnPeriodMaps(run: EventRun, manifests: readonly Manifest[]): Promise<string[]> {
  const { plan, events } = run;
  if (events.some(({ rate }) => Number.isNaN(rate)))
    throw new LimitError(
      'events.rates',
      'the events have no rates: give them in the column `rate`, or the years that the set stands for with --years',
    );
  const bounds = plan.grid.bounds as unknown as readonly [number, number, number, number];
  const grid = gridOver({ crs: plan.grid.crs, cell: plan.grid.cell, bounds });
  const cells = grid.nx * grid.ny;
  const maps = {
    wind: RETURN_YEARS.map(() => new Float32Array(cells)),
    gust: RETURN_YEARS.map(() => new Float32Array(cells)),
  };
  const { DuckDBInstance, listValue } = await import('@duckdb/node-api');
  const instance = await DuckDBInstance.create(':memory:', {
    autoinstall_known_extensions: 'false',
    autoload_known_extensions: 'false',
    threads: '2',
  });
  const connection = await instance.connect();
  try {
    await connection.run('create table rates (event integer, rate double)');
    const appender = await connection.createAppender('rates');
    for (const [event, { rate }] of events.entries()) {
      appender.appendInteger(event);
      appender.appendDouble(rate);
      appender.endRow();
    }
    appender.closeSync();
    // a name such as run[1] would else be a pattern, and read the files of run1
    const files = manifests
      .filter(({ rows }) => rows > 0)
      .map((manifest) => run.dataPath(manifest).replace(/[[*?]/g, '[$&]'));
    const values = (field: string): string =>
      RETURN_YEARS.map((years) => `max(${field}) filter (where exceeding * ${years} >= ${1 - ROUNDING})`).join(', ');
    for (let first = 0; files.length > 0 && first < cells; first += BLOCK_CELLS) {
      const reader = await connection.runAndReadAll(
        `select cell, ${values('wind')}, ${values('gust')} from (
           select cell, wind, gust, sum(rate) over (partition by cell order by wind desc range unbounded preceding) as exceeding
           from read_parquet($1) join rates using (event)
           where cell >= ${first} and cell < ${first + BLOCK_CELLS}
         ) group by cell`,
        [listValue(files)],
      );
      for (const row of reader.getRows()) {
        const cell = Number(row[0]);
        for (let i = 0; i < RETURN_YEARS.length; i++) {
          maps.wind[i]![cell] = Number(row[1 + i] ?? 0);
          maps.gust[i]![cell] = Number(row[1 + RETURN_YEARS.length + i] ?? 0);
        }
      }
    }
  } finally {
    connection.closeSync();
    instance.closeSync();
  }
  const metadata = {
    plan: plan.planHash,
    events: String(plan.events),
    return_period: 'mean years between exceedances, 1/λ of a Poisson process; 0 where events are rarer',
    caution: CAUTION,
  };
  const names: string[] = [];
  for (const quantity of ['wind', 'gust'] as const) {
    const chunks = await cogChunks({
      grid,
      bands: RETURN_YEARS.map((years, i) => ({
        name: `${quantity}_${years}y`,
        unit: 'm/s',
        values: maps[quantity][i]!,
        overview: 'max' as const,
        description: `${quantity} that is exceeded once in ${years} years on average`,
        items: { return_period_years: String(years) },
      })),
      metadata,
      deflate: poolDeflate,
    });
    const name = `return-${quantity}.tif`;
    await writeDurably(join(run.folder, name), Buffer.concat(chunks));
    names.push(name);
  }
  return names;
}
