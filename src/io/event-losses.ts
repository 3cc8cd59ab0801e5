import type { AssetColumns } from '../exposure/asset-columns.js';
import type { DamageCurve } from '../exposure/curve.js';
import { written } from '../exposure/exposure.js';
import { chunksOf, fillTable, footprintFiles, withDuckDb } from './event-query.js';
import type { EventRun, Manifest } from './event-run.js';

/** A portfolio in the cells of a run's grid. */
export interface CellPortfolio {
  /** cells that hold assets, rising */
  readonly cells: Int32Array;
  /** assets in each */
  readonly counts: Int32Array;
  /** sums of values in each, by column */
  readonly values: readonly Float64Array[];
}

/** Adds assets up by cell; `cellOf` is −1 for one that lies in none, which is left out. */
export function cellPortfolio(
  assets: AssetColumns,
  { cellOf, columns }: { cellOf: (asset: number) => number; columns: readonly number[] },
): CellPortfolio {
  const at = Int32Array.from({ length: assets.count }, (_, i) => cellOf(i));
  const cells = Int32Array.from(new Set(at.filter((cell) => cell >= 0))).sort();
  const slots = new Map<number, number>();
  for (const [slot, cell] of cells.entries()) slots.set(cell, slot);
  const counts = new Int32Array(cells.length);
  const values = columns.map(() => new Float64Array(cells.length));
  for (let i = 0; i < assets.count; i++) {
    const slot = slots.get(at[i]!);
    if (slot === undefined) continue;
    counts[slot]!++;
    for (const [c, column] of columns.entries()) values[c]![slot]! += assets.values[column]![i]!;
  }
  return { cells, counts, values };
}

/** Losses of every event of a run. */
export interface PortfolioLosses {
  /** by column of values, in the order of the events */
  readonly losses: readonly Float64Array[];
  /** decimals of each column's losses */
  readonly decimals: readonly number[];
  /** assets that an event reached */
  readonly assets: Float64Array;
  /** pairs of a cell and an event whose wind is above what the curve is given for */
  readonly aboveCurve: number;
}

/** Decimals of a loss, and the largest whole number that is exact. */
const LOSS_DECIMALS = 2;
const EXACT = 2 ** 52;

/**
 * Losses of each event: in every cell the values times the damage ratio of the cell's wind. A loss of a cell and event is
 * rounded to cents (or coarser, where the portfolio is so large that sums of cents were not exact), so that a sum is the same
 * in any order of rows.
 */
export async function portfolioLosses(
  run: EventRun,
  {
    manifests,
    portfolio,
    curve,
    windOf,
  }: {
    manifests: readonly Manifest[];
    portfolio: CellPortfolio;
    curve: DamageCurve;
    windOf: (windMps: number, gustMps: number) => number;
  },
): Promise<PortfolioLosses> {
  const { cells, counts, values } = portfolio;
  const events = run.events.length;
  const decimals = values.map((column) => {
    const total = column.reduce((sum, value) => sum + Math.abs(value), 0);
    return Math.min(LOSS_DECIMALS, Math.floor(Math.log10(EXACT / Math.max(1, total))));
  });
  const scales = decimals.map((count) => 10 ** count);
  // in units of the last decimal: whole numbers
  const units = values.map(() => new Float64Array(events));
  const assets = new Float64Array(events);
  let aboveCurve = 0;
  const files = footprintFiles(run, manifests);
  if (files.length > 0 && cells.length > 0)
    await withDuckDb(async (connection) => {
      const { listValue } = await import('@duckdb/node-api');
      await fillTable(connection, 'assets', { cell: cells, slot: Int32Array.from(cells.keys()) });
      const rows = chunksOf(
        connection,
        `select slot, event, wind, gust from read_parquet($1) join assets using (cell)
         where cell between $2::integer and $3::integer`,
        [listValue(files), cells[0]!, cells[cells.length - 1]!],
      );
      for await (const [slotColumn, eventColumn, windColumn, gustColumn] of rows) {
        for (let k = 0; k < slotColumn!.length; k++) {
          const [slot, event] = [Number(slotColumn![k]), Number(eventColumn![k])];
          assets[event]! += counts[slot]!;
          const felt = windOf(written(Number(windColumn![k]), 3), written(Number(gustColumn![k]), 3));
          if (felt > curve.knownToMps) aboveCurve++;
          const ratio = written(curve.ratio(felt), 6);
          if (ratio === 0) continue;
          for (let c = 0; c < units.length; c++)
            units[c]![event]! += Math.round(values[c]![slot]! * ratio * scales[c]!);
        }
      }
    });
  return {
    losses: units.map((column, c) => column.map((whole) => whole / scales[c]!)),
    decimals: decimals.map((count) => Math.max(0, count)),
    assets,
    aboveCurve,
  };
}
