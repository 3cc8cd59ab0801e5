import { EARTH_RADIUS_M, RADIANS } from '../earth.js';
import type { Land } from './land.js';
import { cellSizeM, type LandGrid, type LonLatBox } from './land-grid.js';
import { landFraction } from './mask.js';

/** Sectors of direction: sector s holds winds from about 45° × s. */
export const SECTORS = 8;

/** What lies upwind of a place. */
export interface Upwind {
  /**
   * Mean of a field along the way upwind, `reachM` long, for a wind from 45° × sector.
   * @param field values on the raster of this object
   */
  readonly mean: (field: Float32Array, at: UpwindQuestion) => number;
  /** share of land, on the raster */
  readonly land: Float32Array;
  readonly raster: LandGrid;
}

export interface UpwindQuestion {
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly sector: number;
  readonly reachM: number;
}

/** Finest and most cells of the raster on which the ways upwind are followed. */
const FINEST_DEG = 0.0025;
const MOST_CELLS = 4_000_000;
/** Places along a way at which the field is looked up. */
const STOPS = 12;

/** East and north of the direction that a wind of a sector comes from. */
const TOWARD_WIND = Array.from(
  { length: SECTORS },
  (_, s) => [Math.sin(s * 45 * RADIANS), Math.cos(s * 45 * RADIANS)] as const,
);

/** A raster of land in longitude and latitude around a grid, `marginM` wider than its box, with half its cell size. */
export function upwindOf(grid: LandGrid, land: Land, { box, marginM }: { box: LonLatBox; marginM: number }): Upwind {
  const raster = rasterAround(box, {
    marginM,
    cellDeg: Math.max(FINEST_DEG, cellSizeM(grid, EARTH_RADIUS_M) / EARTH_RADIUS_M / RADIANS / 2),
  });
  const { nx, ny, cell, bounds } = raster;

  function mean(field: Float32Array, { lonDeg, latDeg, sector, reachM }: UpwindQuestion): number {
    const [east, north] = TOWARD_WIND[sector]!;
    const step = reachM / STOPS / (EARTH_RADIUS_M * RADIANS);
    const perColumn = (step * east) / Math.max(0.01, Math.cos(latDeg * RADIANS)) / cell;
    const perRow = (-step * north) / cell;
    let column = (lonDeg + 360 * Math.ceil((bounds[0] - lonDeg) / 360) - bounds[0]) / cell + 0.5 * perColumn;
    let row = (bounds[3] - latDeg) / cell + 0.5 * perRow;
    let sum = 0;
    for (let i = 0; i < STOPS; i++, column += perColumn, row += perRow) {
      const c = Math.min(nx - 1, Math.max(0, Math.floor(column)));
      const r = Math.min(ny - 1, Math.max(0, Math.floor(row)));
      sum += field[r * nx + c]!;
    }
    return sum / STOPS;
  }
  return { mean, land: landFraction(raster, land), raster };
}

function rasterAround(box: LonLatBox, { marginM, cellDeg }: { marginM: number; cellDeg: number }): LandGrid {
  const { west, east, south, north } = boxAround(box, marginM);
  const cell = Math.max(cellDeg, Math.sqrt(((east - west) * (north - south)) / MOST_CELLS));
  const nx = Math.max(1, Math.ceil((east - west) / cell));
  const ny = Math.max(1, Math.ceil((north - south) / cell));
  const same = (x: number, y: number) => [x, y] as const;
  const bounds = [west, north - ny * cell, west + nx * cell, north] as const;
  return { nx, ny, cell, bounds, geographic: true, inverse: same, forward: same };
}

/** A box made wider by a distance on every side. */
export function boxAround(box: LonLatBox, marginM: number): LonLatBox {
  const dLat = marginM / (EARTH_RADIUS_M * RADIANS);
  const highest = Math.min(89, Math.max(Math.abs(box.south), Math.abs(box.north)) + dLat);
  const dLon = dLat / Math.cos(highest * RADIANS);
  const all = box.east - box.west + 2 * dLon >= 360;
  return {
    west: all ? -180 : box.west - dLon,
    east: all ? 180 : box.east + dLon,
    south: Math.max(-90, box.south - dLat),
    north: Math.min(90, box.north + dLat),
  };
}
