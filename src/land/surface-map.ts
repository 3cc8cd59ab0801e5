import type { Exposure } from '../surface/averaging.js';
import { blendingRatio, SEA_Z0_M } from '../surface/roughness.js';
import { shoreDistance } from './distance.js';
import type { Land } from './land.js';
import { boxOf, cellLonLat, type LandGrid } from './land-grid.js';
import { landFraction } from './mask.js';
import { boxAround, SECTORS, upwindOf } from './upwind.js';

/**
 * What the surface makes of the wind over open sea, cell by cell and by the direction that the wind comes from.
 * Cells with the same surface share a row of the tables; row 0 is the open sea, where nothing changes.
 * Tables: index = row * 8 + sector, sector s = wind from 45° × s. Between two sectors the tables are linear in the
 * tangent of the angle from the nearest of north, east, south and west (see {@link sectorShare}), so that a slowly turning
 * wind meets no jump.
 */
export interface SurfaceMap {
  readonly sectors: typeof SECTORS;
  /** nx*ny */
  readonly rowOf: Uint32Array;
  /** local mean wind over the mean wind over open sea */
  readonly windRatio: Float64Array;
  /** gust over the mean wind over open sea */
  readonly gustRatio: Float64Array;
  /** exposure of a sector, as an index of {@link EXPOSURE_CODES} */
  readonly exposure: Uint8Array;
  /** share of land, nx*ny */
  readonly landFraction: Float32Array;
  /** roughness length of the cell, m, nx*ny */
  readonly roughnessM: Float32Array;
  readonly cautions: readonly string[];
}

/** Exposures in the order of their codes: smooth to rough. */
export const EXPOSURE_CODES: readonly Exposure[] = ['at-sea', 'off-sea', 'off-land', 'in-land'];
const [AT_SEA, OFF_SEA, OFF_LAND, IN_LAND] = [0, 1, 2, 3];

/** Beyond this distance from the coast the wind is at sea, m   [HarperKepertGinger2010]. */
export const AT_SEA_BEYOND_M = 20_000;
/** How far upwind a place looks for what the wind comes over: in distances to the coast, and at least, m (own choice). */
const LOOK_DISTANCES = 4;
const LEAST_LOOK_M = 4_000;

/** Roughness lengths of a raster put on a grid. */
export interface RoughnessField {
  /** mean ln z₀ of the known part of each cell, z₀ in m */
  readonly lnZ0: Float32Array;
  /** share of each cell that is known, 0 … 1 */
  readonly known: Float32Array;
}

export interface SurfaceOptions {
  /** roughness length of land, m */
  readonly landZ0M: number;
  /** depth inland of the coastal classes, m */
  readonly coastM: number;
  /** length of the upwind mean of ln z₀, m; 0 takes the cell's own */
  readonly fetchM: number;
  readonly blendingHeightM: number;
  /** gust over the local mean wind */
  readonly gustFactor: (input: { exposure: Exposure; z0M: number }) => number;
  /** a roughness raster on any grid */
  readonly roughness?: (grid: LandGrid) => RoughnessField;
}

/**
 * The surface of a grid. Mean winds: through the blending height from the sea's roughness to the mean ln z₀ of the cell
 * (of its fetch). Exposure classes: at sea beyond 20 km from the coast; in land deeper than `coastM`; between them off the
 * land where more than half of the way upwind is land (four times as far as the coast is, at least 4 km), else off the sea.
 */
export function surfaceMap(grid: LandGrid, land: Land, options: SurfaceOptions): SurfaceMap {
  const n = grid.nx * grid.ny;
  const box = boxOf(grid);
  const fraction = landFraction(grid, land);
  const shore = shoreDistance(land, { box: boxAround(box, 1.2 * AT_SEA_BEYOND_M) });
  const distanceM = shore.onGrid(grid, { withinM: Math.max(AT_SEA_BEYOND_M, options.coastM), fraction });
  const lnZ0 = lnRoughness(fraction, options, options.roughness?.(grid));
  const upwind = once(() => upwindOf(grid, land, { box, marginM: LOOK_DISTANCES * AT_SEA_BEYOND_M + options.fetchM }));
  const lnZ0Upwind = once(() => lnRoughness(upwind().land, options, options.roughness?.(upwind().raster)));
  const tables = tablesOf(options);
  const rowOf = new Uint32Array(n);
  const exposures = new Uint8Array(SECTORS);
  const logs = new Float64Array(SECTORS);

  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      const distance = distanceM[k]!;
      if (Number.isNaN(distance)) continue;
      const open = fraction[k] === 0 && distance < -AT_SEA_BEYOND_M;
      if (open) continue;
      const deep = distance > options.coastM;
      if (deep && options.fetchM === 0) {
        rowOf[k] = tables.deepRowFor(lnZ0[k]!);
        continue;
      }
      const [lonDeg, latDeg] = cellLonLat(grid, column, row);
      if (deep) exposures.fill(IN_LAND);
      else if (distance < -AT_SEA_BEYOND_M) exposures.fill(AT_SEA);
      else {
        const reachM = Math.max(LEAST_LOOK_M, LOOK_DISTANCES * Math.abs(distance));
        for (let sector = 0; sector < SECTORS; sector++) {
          const share = upwind().mean(upwind().land, { lonDeg, latDeg, sector, reachM });
          exposures[sector] = share > 0.5 ? OFF_LAND : OFF_SEA;
        }
      }
      for (let sector = 0; sector < SECTORS; sector++) {
        logs[sector] =
          options.fetchM > 0
            ? upwind().mean(lnZ0Upwind(), { lonDeg, latDeg, sector, reachM: options.fetchM })
            : lnZ0[k]!;
      }
      rowOf[k] = tables.rowFor(exposures, logs);
    }
  }
  return {
    sectors: SECTORS,
    rowOf,
    ...tables.finished(),
    landFraction: fraction,
    roughnessM: lnZ0.map(Math.exp),
    cautions: cautionsOf(grid, land, fraction),
  };
}

/** Mean ln z₀ of each cell: what the raster knows; the rest is sea as far as the cell has any, then land. */
function lnRoughness(fraction: Float32Array, options: SurfaceOptions, field?: RoughnessField): Float32Array {
  const sea = Math.log(SEA_Z0_M);
  const land = Math.log(options.landZ0M);
  return fraction.map((share, k) => {
    if (share === 0) return sea;
    const known = field?.known[k] ?? 0;
    if (!field || known === 0) return sea + share * (land - sea);
    const rest = 1 - known;
    const restSea = Math.min(rest, 1 - share);
    return known * field.lnZ0[k]! + restSea * sea + (rest - restSea) * land;
  });
}

/** Collects rows of the tables; equal surfaces get one row. */
function tablesOf(options: SurfaceOptions) {
  const windRatio: number[] = [];
  const gustRatio: number[] = [];
  const exposure: number[] = [];
  const rows = new Map<string, number>();
  const seaLog = Math.fround(Math.log(SEA_Z0_M));

  function add(exposures: ArrayLike<number>, logs: ArrayLike<number>): number {
    for (let sector = 0; sector < SECTORS; sector++) {
      const atSea = logs[sector] === seaLog;
      const z0M = atSea ? SEA_Z0_M : Math.exp(logs[sector]!);
      const ratio = blendingRatio(z0M, { blendingHeightM: options.blendingHeightM });
      windRatio.push(ratio);
      gustRatio.push(ratio * options.gustFactor({ exposure: EXPOSURE_CODES[exposures[sector]!]!, z0M }));
      exposure.push(exposures[sector]!);
    }
    return windRatio.length / SECTORS - 1;
  }
  const sea = new Float64Array(SECTORS).fill(seaLog);
  add(new Uint8Array(SECTORS).fill(AT_SEA), sea);

  const deep = new Map<number, number>();
  const deepExposures = new Uint8Array(SECTORS).fill(IN_LAND);

  return {
    /** the row of a place deep in land, the same from all sides */
    deepRowFor(log: number): number {
      let row = deep.get(log);
      if (row === undefined) {
        row = add(deepExposures, new Float64Array(SECTORS).fill(log));
        deep.set(log, row);
      }
      return row;
    },
    rowFor(exposures: Uint8Array, logs: Float64Array): number {
      let pattern = 0;
      let same = true;
      for (let sector = 0; sector < SECTORS; sector++) {
        pattern = 4 * pattern + exposures[sector]!;
        same &&= logs[sector] === logs[0];
      }
      const key = same ? `${pattern} ${logs[0]}` : `${pattern} ${logs.join(' ')}`;
      let row = rows.get(key);
      if (row === undefined) {
        row = add(exposures, logs);
        rows.set(key, row);
      }
      return row;
    },
    finished: () => ({
      windRatio: Float64Array.from(windRatio),
      gustRatio: Float64Array.from(gustRatio),
      exposure: Uint8Array.from(exposure),
    }),
  };
}

function cautionsOf(grid: LandGrid, land: Land, fraction: Float32Array): readonly string[] {
  const cellM = grid.geographic ? grid.cell * 111_195 : grid.cell;
  if (land.detailM === null || cellM >= land.detailM || !fraction.some((share) => share > 0 && share < 1)) return [];
  return [
    `the coast (${land.name}) shows things of ${land.detailM / 1000} km and more, the cells are ${(cellM / 1000).toFixed(2)} km: near the shore land and sea may be in the wrong cells; give finer polygons with --land`,
  ];
}

function once<T>(make: () => T): () => T {
  let made: T | undefined;
  return () => (made ??= make());
}

/**
 * Where a wind stands between two sectors: the cardinal one (0, 2, 4, 6), the diagonal one beside it (1, 3, 5, 7), and
 * the share of the diagonal, min(|e|, |n|)/max(|e|, |n|): 0 on north, east, south and west, 1 on the diagonals.
 * @param eastMps, northMps where the wind blows to, in the frame at the cell
 */
export function sectorShare(eastMps: number, northMps: number): { cardinal: number; diagonal: number; share: number } {
  const [fromEast, fromNorth] = [-eastMps, -northMps];
  const [e, n] = [Math.abs(fromEast), Math.abs(fromNorth)];
  const diagonal = fromNorth >= 0 ? (fromEast >= 0 ? 1 : 7) : fromEast >= 0 ? 3 : 5;
  const cardinal = n >= e ? (fromNorth >= 0 ? 0 : 4) : fromEast >= 0 ? 2 : 6;
  const most = Math.max(e, n);
  return { cardinal, diagonal, share: most === 0 ? 0 : Math.min(e, n) / most };
}

/** A table's value for a row and a wind. */
export function sectorValue(table: Float64Array, row: number, eastMps: number, northMps: number): number {
  const { cardinal, diagonal, share } = sectorShare(eastMps, northMps);
  const at = table[row * SECTORS + cardinal]!;
  return at + share * (table[row * SECTORS + diagonal]! - at);
}

/**
 * Exposure of each cell for the wind from a direction, as codes of {@link EXPOSURE_CODES}; NaN where there is no wind.
 * @param windFromDeg nx*ny, degrees
 */
export function exposureField(map: SurfaceMap, windFromDeg: Float32Array): Float32Array {
  return windFromDeg.map((from, k) =>
    Number.isNaN(from) ? Number.NaN : map.exposure[map.rowOf[k]! * SECTORS + (Math.round(from / 45) % SECTORS)]!,
  );
}
