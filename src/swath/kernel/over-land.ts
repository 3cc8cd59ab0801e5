import { RADIANS } from '../../earth.js';
import { type SurfaceMap, sectorValue } from '../../land/surface-map.js';
import { SECTORS } from '../../land/upwind.js';
import type { SwathFields } from './fields.js';
import { type TileFields, tileRunner } from './tile.js';
import { type Placing, TILE_EDGE } from './tiling.js';
import type { Tracer } from './tracer.js';

/** Cells of a tile from which on the hours of one ratio are counted together. */
const TOGETHER = 48;
/** Edge of the blocks of cells that are followed together; no more cells than an engine has places for. */
const BLOCK_EDGE = 16;
/** What is left out of the winds that matter, for parabolas between rows. */
const SPARE_SHARE = 0.97;
/** Gusts below this need not be right, m/s: nothing is promised of them. */
const CALM_MPS = 7;
/** Gusts this near to the highest of their surface are not looked for, as a share. */
const NEAR = 1e-9;

/** A tile's place in the grid. */
export interface TilePlace {
  readonly column: number;
  readonly row: number;
  readonly nx: number;
  readonly ny: number;
}

/**
 * What the surface makes of a tile over open sea. A wind's ratio that is the same from all sides scales the peak, and the
 * hours are those above the threshold over the ratio; where ratios differ with the direction the cell is followed through
 * the storm's life with the direction of each moment, for the wind and for the gust.
 * @param options.offsetS from the track's first fix to the timeline's start, s
 * @param options.sea what was found of the last tile over open sea
 * @param options.slackMps gusts are looked for from this much below what a cell has, m/s
 */
export function overLand(
  tracer: Tracer,
  placing: Placing,
  surface: SurfaceMap,
  {
    thresholdsMps,
    offsetS,
    slackMps,
    sea,
  }: {
    readonly thresholdsMps: readonly number[];
    readonly offsetS: number;
    readonly slackMps: number;
    readonly sea: TileFields;
  },
): (tile: TilePlace, fields: SwathFields) => void {
  const { rowOf, gustRatio } = surface;
  const [windRange, gustRange] = [rangeOf(surface.windRatio), rangeOf(gustRatio)];
  const lowestMps = Math.min(...thresholdsMps);
  const ownLevels = [...thresholdsMps];
  const wanted = new Uint8Array(sea.windMps.length);
  const own = tileRunner(tracer, placing, ownLevels, { given: sea, wanted, windOnly: true });

  return (tile, fields) => {
    const gustMps = fields.gustMps!;
    const windCells: number[] = [];
    const gustCells: number[] = [];
    const scaled = new Map<number, number[]>();
    eachCell(tile, (k, at) => {
      const row = rowOf[k]!;
      const peak = sea.windMps[at]!;
      if (row === 0 || !(peak > 0)) return;
      const ratio = windRange.even[row]!;
      if (Number.isNaN(ratio)) {
        windCells.push(k);
        gustCells.push(k);
        gustMps[k] = 0;
        return;
      }
      fields.windMps[k] = peak * ratio;
      if (ratio !== 1 && thresholdsMps.length > 0) {
        const list = scaled.get(ratio);
        if (list) list.push(k);
        else scaled.set(ratio, [k]);
      }
      const from = sea.fromDeg[at]! * RADIANS;
      const even = gustRange.even[row]!;
      const here = Number.isNaN(even) ? sectorValue(gustRatio, row, -Math.sin(from), -Math.cos(from)) : even;
      gustMps[k] = peak * here;
      if (peak * gustRange.highest[row]! > CALM_MPS && here < gustRange.highest[row]! * (1 - NEAR)) gustCells.push(k);
    });
    for (const [ratio, cells] of scaled) {
      if (cells.length < TOGETHER) windCells.push(...cells);
      else countTogether(tile, ratio, cells, fields);
    }
    // the highest wind over the surface is no lower than that over open sea times its lowest ratio
    const lowestOf = (k: number): number => SPARE_SHARE * sea.windMps[placeIn(tile, k)]! * windRange.lowest[rowOf[k]!]!;
    trace(1, windCells, tile, {
      atLeastMps: lowestOf,
      leastMps: (k) => Math.min(lowestOf(k), lowestMps) / windRange.highest[rowOf[k]!]!,
      take: (i, k) => {
        const wind = tracer.windMps[i]!;
        fields.windMps[k] = wind;
        fields.peakTimeS[k] = wind > 0 ? offsetS + tracer.timeS(i) : Number.NaN;
        fields.windFromDeg[k] = wind > 0 ? tracer.fromDeg(i) : Number.NaN;
        if (fields.rivalTimeS) fields.rivalTimeS[k] = offsetS + tracer.rivalTimeS(i);
        for (let h = 0; h < thresholdsMps.length; h++)
          fields.hours[h]![k] = wind >= thresholdsMps[h]! ? tracer.hours[h]![i]! : 0;
      },
    });
    const atLeastMps = (k: number): number => Math.max(0, gustMps[k]! - slackMps);
    trace(2, gustCells, tile, {
      atLeastMps,
      leastMps: (k) => atLeastMps(k) / gustRange.highest[rowOf[k]!]!,
      take: (i, k) => {
        const gust = tracer.windMps[i]!;
        if (fields.gustTimeS && gust > 0) {
          fields.gustTimeS[k] = offsetS + tracer.timeS(i);
          fields.gustRivalTimeS![k] = offsetS + tracer.rivalTimeS(i);
        }
        gustMps[k] = Math.max(gustMps[k]!, gust);
      },
    });
  };

  /** Hours of cells with one ratio: those over open sea above the thresholds over it. */
  function countTogether(tile: TilePlace, ratio: number, cells: readonly number[], fields: SwathFields): void {
    for (let h = 0; h < thresholdsMps.length; h++) ownLevels[h] = thresholdsMps[h]! / ratio;
    tracer.setThresholds(ownLevels);
    wanted.fill(0);
    for (const k of cells) wanted[placeIn(tile, k)] = 1;
    own.run(tile);
    tracer.setThresholds(thresholdsMps);
    for (const k of cells) {
      const at = placeIn(tile, k);
      for (let h = 0; h < thresholdsMps.length; h++) fields.hours[h]![k] = own.fields.hours[h]![at]!;
    }
  }

  /** Follows cells over their surfaces, block by block, where the storm's wind over open sea comes to what matters of a block. */
  function trace(
    kind: 1 | 2,
    cells: readonly number[],
    { nx }: TilePlace,
    {
      leastMps,
      atLeastMps,
      take,
    }: {
      readonly leastMps: (cell: number) => number;
      /** what a cell has */
      readonly atLeastMps: (cell: number) => number;
      readonly take: (point: number, cell: number) => void;
    },
  ): void {
    const blocks = new Map<number, number[]>();
    for (const k of cells) {
      const block = Math.trunc(Math.trunc(k / nx) / BLOCK_EDGE) * nx + Math.trunc((k % nx) / BLOCK_EDGE);
      const list = blocks.get(block);
      if (list) list.push(k);
      else blocks.set(block, [k]);
    }
    for (const block of blocks.values()) {
      const least = block.reduce((lowest, k) => Math.min(lowest, leastMps(k)), Number.POSITIVE_INFINITY);
      if (!tracer.reaching(SPARE_SHARE * least)) tracer.reaching(0);
      const again = follow(block, atLeastMps);
      if (kind !== 1 || again.length === 0) continue;
      // a wind that is sharper than the moments show: once more, expecting nothing
      tracer.reaching(0);
      follow(again, () => 0);
    }

    /** Gives the cells in which nothing was found of what they have. */
    function follow(block: readonly number[], atLeast: (cell: number) => number): number[] {
      for (const [i, k] of block.entries()) {
        placing.place(tracer, i, k % nx, Math.trunc(k / nx));
        tracer.setSurface(i, rowOf[k]!);
        tracer.windMps[i] = atLeast(k);
      }
      tracer.traceLocal(block.length, kind);
      const less: number[] = [];
      for (const [i, k] of block.entries()) {
        if (tracer.windMps[i]! < atLeast(k)) less.push(k);
        take(i, k);
      }
      return less;
    }
  }
}

/** Visits the cells of a tile: index in the grid, index in the tile's fields. */
export function eachCell({ column, row, nx, ny }: TilePlace, visit: (cell: number, at: number) => void): void {
  const width = Math.min(TILE_EDGE, nx - column * TILE_EDGE);
  const height = Math.min(TILE_EDGE, ny - row * TILE_EDGE);
  for (let j = 0; j < height; j++) {
    const k = (row * TILE_EDGE + j) * nx + column * TILE_EDGE;
    const at = j * (TILE_EDGE + 1);
    for (let i = 0; i < width; i++) visit(k + i, at + i);
  }
}

function placeIn({ column, row, nx }: TilePlace, k: number): number {
  return (Math.trunc(k / nx) - row * TILE_EDGE) * (TILE_EDGE + 1) + (k % nx) - column * TILE_EDGE;
}

/** Of each row the lowest and the highest ratio, and the one that is the same from all sides; NaN where it is not. */
function rangeOf(table: Float64Array): {
  readonly lowest: Float64Array;
  readonly highest: Float64Array;
  readonly even: Float64Array;
} {
  const rows = table.length / SECTORS;
  const [lowest, highest, even] = [new Float64Array(rows), new Float64Array(rows), new Float64Array(rows)];
  for (let row = 0, i = 0; row < rows; row++) {
    let [low, high] = [Number.POSITIVE_INFINITY, 0];
    for (const end = i + SECTORS; i < end; i++) {
      low = Math.min(low, table[i]!);
      high = Math.max(high, table[i]!);
    }
    lowest[row] = low;
    highest[row] = high;
    even[row] = low === high ? low : Number.NaN;
  }
  return { lowest, highest, even };
}
