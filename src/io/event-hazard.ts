import { join } from 'node:path';
import { LimitError } from '../errors.js';
import { OPEN_SEA } from '../events/open-sea.js';
import { makeRecipe, recipeNumber } from '../model/recipe.js';
import { cogChunks } from '../write/geotiff.js';
import { CAUTION } from '../write/provenance.js';
import { returnNetcdf } from '../write/return-netcdf.js';
import { poolDeflate } from './deflate.js';
import { writeDurably } from './durable.js';
import { chunksOf, fillTable, footprintFiles, ratesOf, withDuckDb } from './event-query.js';
import type { EventRun, Manifest } from './event-run.js';
import { VERSION } from './version.js';

/** Return periods of the maps, years. */
export const RETURN_YEARS = [10, 25, 50, 100, 250, 500, 1000] as const;
/** Rows of footprints that are sorted at once, about: cells are worked on in blocks, so that memory does not grow with the set. */
const BLOCK_ROWS = 2_000_000;
/** Cells of a block at most. */
const BLOCK_CELLS = 65_536;
/** What a sum of equal rates may miss a rate by. */
const ROUNDING = 1e-9;
const MEANING = 'mean years between exceedances, 1/λ of a Poisson process; 0 where events are rarer';

/**
 * Return-period maps of a run: for each cell the highest wind whose rate of exceedance is at least 1/T, 0 where events are
 * rarer than that. As GeoTIFF, wind and gust apart, and both as netCDF.
 * @returns names of the files that were written, and what is to be said of them
 */
export async function returnPeriodMaps(
  run: EventRun,
  manifests: readonly Manifest[],
): Promise<{ files: string[]; cautions: string[] }> {
  const { plan, grid } = run;
  const maps = await mapsOf(run, { manifests, cells: grid.nx * grid.ny });
  const recipe = makeRecipe(plan.recipe);
  const [averagingS, gustDurationS] = [
    recipeNumber(recipe, 'wind.averaging_s'),
    recipeNumber(recipe, 'gust.duration_s'),
  ];
  const files: string[] = [];
  const write = async (name: string, content: Uint8Array): Promise<void> => {
    await writeDurably(join(run.folder, name), content);
    files.push(name);
  };
  const metadata = {
    plan: plan.planHash,
    events: String(plan.events),
    return_period: MEANING,
    surface: OPEN_SEA,
    caution: CAUTION,
  };
  for (const quantity of ['wind', 'gust'] as const) {
    const chunks = await cogChunks({
      grid,
      bands: RETURN_YEARS.map((years, i) => ({
        name: `${quantity}_${years}y`,
        unit: 'm/s',
        values: maps[quantity][i]!,
        overview: 'max' as const,
        description: `${quantity} that is exceeded once in ${years} years on average`,
        items: {
          return_period_years: String(years),
          averaging_period_s: String(quantity === 'wind' ? averagingS : gustDurationS),
        },
      })),
      metadata,
      deflate: poolDeflate,
    });
    await write(`return-${quantity}.tif`, Buffer.concat(chunks));
  }
  try {
    const netcdf = await returnNetcdf({
      grid,
      years: RETURN_YEARS,
      windMps: maps.wind,
      gustMps: maps.gust,
      averagingS,
      gustDurationS,
      attributes: {
        source: `Galewake ${VERSION}, parametric wind model`,
        history: `Galewake ${VERSION}: return-period maps of an event set`,
        references: 'see the recipe',
        surface: OPEN_SEA,
        return_period: MEANING,
        events: plan.events,
        plan: plan.planHash,
        recipe: JSON.stringify(plan.recipe),
        input_sha256: plan.inputsSha256,
      },
    });
    await write('return-periods.nc', netcdf);
  } catch (error) {
    if (!(error instanceof LimitError)) throw error;
    return { files, cautions: [`return-periods.nc is not written: ${error.message}`] };
  }
  return { files, cautions: [] };
}

/** The maps in memory, by period: 0 where events are rarer. */
async function mapsOf(
  run: EventRun,
  { manifests, cells }: { manifests: readonly Manifest[]; cells: number },
): Promise<{ wind: Float32Array[]; gust: Float32Array[] }> {
  const rates = ratesOf(run);
  const maps = {
    wind: RETURN_YEARS.map(() => new Float32Array(cells)),
    gust: RETURN_YEARS.map(() => new Float32Array(cells)),
  };
  const files = footprintFiles(run, manifests);
  const values = (field: string): string =>
    RETURN_YEARS.map((years) => `max(${field}) filter (where exceeding * ${years} >= ${1 - ROUNDING})`).join(', ');
  await withDuckDb(async (connection) => {
    const { listValue } = await import('@duckdb/node-api');
    await fillTable(connection, 'rates', { event: Int32Array.from(rates.keys()), rate: rates });
    const rows = manifests.reduce((sum, manifest) => sum + manifest.rows, 0);
    const block = Math.max(1, Math.min(BLOCK_CELLS, Math.ceil((cells * BLOCK_ROWS) / Math.max(1, rows))));
    for (let first = 0; files.length > 0 && first < cells; first += block) {
      const found = chunksOf(
        connection,
        `select cell, ${values('wind')}, ${values('gust')} from (
           select cell, wind, gust, sum(rate) over (partition by cell order by wind desc, event rows unbounded preceding) as exceeding
           from read_parquet($1) join rates using (event)
           where cell >= ${first} and cell < ${first + block}
         ) group by cell`,
        [listValue(files)],
      );
      for await (const [cellColumn, ...columns] of found) {
        for (const [k, at] of cellColumn!.entries()) {
          const cell = Number(at);
          for (let i = 0; i < RETURN_YEARS.length; i++) {
            maps.wind[i]![cell] = Number(columns[i]![k] ?? 0);
            maps.gust[i]![cell] = Number(columns[RETURN_YEARS.length + i]![k] ?? 0);
          }
        }
      }
    }
  });
  return maps;
}
