import { InputError, UsageError } from '../errors.js';
import type { InputRecord } from '../io/input.js';
import { coastScaleFor } from '../land/coast.js';
import type { Land } from '../land/land.js';
import type { SurfaceMap, SurfaceOptions } from '../land/surface-map.js';
import type { Recipe } from '../model/recipe.js';
import type { WindModel } from '../model/wind.js';
import type { Grid } from '../swath/grid.js';

export interface LandOptions {
  readonly land: string;
  readonly roughness?: string;
  readonly roughnessClasses?: string;
}

/** The word for the land that comes with the package. */
export const WORLD = 'natural-earth';

/** What a run knows of land. */
export interface KnownLand {
  readonly land: Land;
  readonly roughness?: NonNullable<SurfaceOptions['roughness']>;
  /** the raster's file */
  readonly roughnessName?: string;
  readonly inputs: readonly InputRecord[];
}

/**
 * The land of a run; null for open sea everywhere.
 * @param cellM size of a cell, m: chooses between the near and the far coast of the world
 */
export async function landOfRun(options: LandOptions, cellM: number): Promise<KnownLand | null> {
  if (options.land === 'none') {
    if (options.roughness !== undefined)
      throw new UsageError('land.roughness', `--roughness needs land: add --land ${WORLD}, or --land FILE`);
    return null;
  }
  if (options.roughnessClasses !== undefined && options.roughness === undefined)
    throw new UsageError('land.roughness', '--roughness-classes goes with --roughness FILE');
  const { readLand, worldLand } = await import('../io/land-file.js');
  const { land, record } =
    options.land === WORLD ? { land: worldLand(coastScaleFor(cellM)), record: null } : await readLand(options.land);
  const inputs = record ? [record] : [];
  if (options.roughness === undefined) return { land, inputs };
  const { readRoughness } = await import('../io/roughness-file.js');
  const { roughnessOn } = await import('../land/roughness-raster.js');
  const { raster, records } = await readRoughness(
    options.roughness,
    options.roughnessClasses === undefined ? {} : { classes: options.roughnessClasses },
  );
  return {
    land,
    roughness: (grid) => roughnessOn(grid, raster),
    roughnessName: records[0]!.name,
    inputs: [...inputs, ...records],
  };
}

/** The surface of a grid, with a caution where the land or the roughness lies elsewhere; null for open sea everywhere. */
export async function surfaceOfRun(
  model: WindModel,
  grid: Grid,
  known: KnownLand | null,
): Promise<{ surface: SurfaceMap; cautions: readonly string[] } | null> {
  if (!known || model.recipe['land.surface'] === 'off') return null;
  const { landGrid, surfaceOf } = await import('../swath/surface.js');
  const { land, roughness } = known;
  if (roughness && !roughness(landGrid(grid)).known.some((share) => share > 0))
    throw new InputError(
      'roughness.elsewhere',
      `${known.roughnessName}: the raster does not overlap the grid; check its coordinate reference system and its bounds, or the grid's --bounds`,
    );
  const surface = surfaceOf(model, grid, { land, ...(roughness ? { roughness } : {}) });
  const cautions = surface.landFraction.some((share) => share > 0) ? [] : [`no land of ${land.name} lies on the grid`];
  return { surface, cautions };
}

/** The recipe of a run whose places stand over open sea: only the storm itself knows the land. */
export function decayOnly(recipe: Recipe): Recipe {
  return { ...recipe, 'land.surface': 'off' };
}

/** What was done with land, for the summary. */
export function landNotes(known: KnownLand | null, model: WindModel): string[] {
  if (!known) return ['land: none given, the winds are those over open sea everywhere'];
  const { recipe } = model;
  const surface =
    recipe['land.surface'] === 'on'
      ? 'roughness and exposure act on wind and gust'
      : 'winds over open sea everywhere (land.surface=off)';
  const decays = model.completed.fixes.some(({ maxWindMps }) => maxWindMps.by?.includes('over or after land'));
  const decay = decays
    ? 'the storm decays over land'
    : model.completed.track.kind === 'best' && recipe['land.decay'] === 'auto'
      ? 'a best track already holds what land did to the storm, nothing was taken from it'
      : 'the storm meets no land that weakens it, or land.decay is off';
  return [`land: ${known.land.name}; ${surface}; ${decay}`];
}
