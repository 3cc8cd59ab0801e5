import { EARTH_RADIUS_M } from '../earth.js';
import type { Land } from '../land/land.js';
import { cellSizeM, type LandGrid } from '../land/land-grid.js';
import { type SurfaceMap, type SurfaceOptions, surfaceMap } from '../land/surface-map.js';
import { recipeNumber } from '../model/recipe.js';
import type { WindModel } from '../model/wind.js';
import { gustFactorOf } from './exact.js';
import { type Grid, projection } from './grid.js';

/** A grid as the land sees it. */
export function landGrid(grid: Grid): LandGrid {
  const { inverse, forward, geographic } = projection(grid.crs);
  return { nx: grid.nx, ny: grid.ny, cell: grid.cell, bounds: grid.bounds, geographic, inverse, forward };
}

/** Size of a grid's cell on the ground, m: what chooses between the near and the far coast. */
export function gridCellM(grid: Grid): number {
  return cellSizeM(landGrid(grid), EARTH_RADIUS_M);
}

/**
 * The surface of a grid under a model's recipe (entries `land.*` and `gust.*`).
 * @param roughness a roughness raster, put on any grid that it is asked for
 */
export function surfaceOf(
  model: WindModel,
  grid: Grid,
  { land, roughness }: { land: Land; roughness?: NonNullable<SurfaceOptions['roughness']> },
): SurfaceMap {
  const { recipe } = model;
  return surfaceMap(landGrid(grid), land, {
    landZ0M: recipeNumber(recipe, 'land.z0_m'),
    coastM: recipeNumber(recipe, 'land.coast_km') * 1000,
    fetchM: recipeNumber(recipe, 'land.fetch_km') * 1000,
    blendingHeightM: recipeNumber(recipe, 'land.blending_m'),
    gustFactor: ({ exposure, z0M }) => gustFactorOf(model, exposure, z0M),
    ...(roughness ? { roughness } : {}),
  });
}
