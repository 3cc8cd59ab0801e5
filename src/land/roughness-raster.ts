import type { LandGrid } from './land-grid.js';
import type { RoughnessField } from './surface-map.js';

/** A raster of roughness lengths in its own plane. */
export interface RoughnessRaster {
  readonly nx: number;
  readonly ny: number;
  /** edges in the raster's units: west, south, east, north */
  readonly bounds: readonly [number, number, number, number];
  /** ln z₀, z₀ in m, row 0 = north; NaN where it is not known */
  readonly lnZ0: Float32Array;
  /** longitude and latitude, degrees → the raster's plane */
  readonly forward: (lonDeg: number, latDeg: number) => readonly [number, number];
  /** whether the plane is longitude and latitude, so that a place may lie 360° on */
  readonly geographic: boolean;
}

/** Places in a cell, along an edge, at which the raster is looked up; fewer where there are very many cells. */
const LOOKS = 4;
const FEW_LOOKS = 2;
const MANY_CELLS = 1_000_000;

/** The raster on a grid: in each cell the mean ln z₀ of the places that it knows, and their share. */
export function roughnessOn(grid: LandGrid, raster: RoughnessRaster): RoughnessField {
  const cells = grid.nx * grid.ny;
  const looks = cells > MANY_CELLS ? FEW_LOOKS : LOOKS;
  const lnZ0 = new Float32Array(cells);
  const known = new Float32Array(cells);
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      let sum = 0;
      let count = 0;
      for (let i = 0; i < looks * looks; i++) {
        const x = grid.bounds[0] + (column + ((i % looks) + 0.5) / looks) * grid.cell;
        const y = grid.bounds[3] - (row + (Math.trunc(i / looks) + 0.5) / looks) * grid.cell;
        const [lonDeg, latDeg] = grid.inverse(x, y);
        const value = valueAt(raster, lonDeg, latDeg);
        if (Number.isNaN(value)) continue;
        sum += value;
        count++;
      }
      if (count === 0) continue;
      lnZ0[k] = sum / count;
      known[k] = count / (looks * looks);
    }
  }
  return { lnZ0, known };
}

function valueAt(raster: RoughnessRaster, lonDeg: number, latDeg: number): number {
  if (!Number.isFinite(lonDeg) || !Number.isFinite(latDeg)) return Number.NaN;
  const { nx, ny, lnZ0, geographic } = raster;
  const [west, south, east, north] = raster.bounds;
  let [x, y] = raster.forward(lonDeg, latDeg);
  if (geographic) x -= 360 * Math.floor((x - west) / 360);
  const column = Math.floor(((x - west) / (east - west)) * nx);
  const row = Math.floor(((north - y) / (north - south)) * ny);
  if (!(column >= 0 && column < nx && row >= 0 && row < ny)) return Number.NaN;
  return lnZ0[row * nx + column]!;
}
