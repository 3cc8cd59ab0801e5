import { wrapLongitude } from '../earth.js';
import { InputError, UsageError } from '../errors.js';
import type { InputRecord } from '../io/input.js';
import { coastScaleFor } from '../land/coast.js';
import type { Land } from '../land/land.js';
import { boxOf, type LonLatBox } from '../land/land-grid.js';
import type { SurfaceMap, SurfaceOptions } from '../land/surface-map.js';
import type { Recipe } from '../model/recipe.js';
import type { WindModel } from '../model/wind.js';
import { landShape } from '../picture/land-shape.js';
import type { Grid } from '../swath/grid.js';
import { landGrid, surfaceOf } from '../swath/surface.js';
import type { SwathResult } from './swath-result.js';

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
  /** whether it is the user's own */
  readonly own: boolean;
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
  const own = record !== null;
  if (options.roughness === undefined) return { land, own, inputs };
  const { readRoughness } = await import('../io/roughness-file.js');
  const { roughnessOn } = await import('../land/roughness-raster.js');
  const { raster, records } = await readRoughness(
    options.roughness,
    options.roughnessClasses === undefined ? {} : { classes: options.roughnessClasses },
  );
  return {
    land,
    own,
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

/** So near must land lie to what it is given for, degrees. */
const NEAR_DEG = 1;

/**
 * Refuses land of the user's own that lies elsewhere.
 * @param grid of a swath, beside the track
 * @throws InputError `land.elsewhere`
 */
export function refuseElsewhere(known: KnownLand | null, model: WindModel, grid?: Grid): void {
  if (!known?.own) return;
  const boxes = [trackBox(model), ...(grid ? [boxOf(landGrid(grid))] : [])];
  const meets = ([west, south, east, north]: readonly [number, number, number, number], box: LonLatBox): boolean =>
    south <= box.north + NEAR_DEG &&
    north >= box.south - NEAR_DEG &&
    [-360, 0, 360].some((turn) => west + turn <= box.east + NEAR_DEG && east + turn >= box.west - NEAR_DEG);
  if (known.land.ringBounds.some((bounds) => boxes.some((box) => meets(bounds, box)))) return;
  const { west, south, east, north } = boxes[0]!;
  const sides = known.land.ringBounds.reduce(
    (a, b) => [Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[2], b[2]), Math.max(a[3], b[3])] as const,
  );
  const span = (a: number, b: number): string => `${a.toFixed(1)} to ${b.toFixed(1)}`;
  throw new InputError(
    'land.elsewhere',
    `${known.land.name}: its polygons (longitudes ${span(sides[0], sides[2])}, latitudes ${span(sides[1], sides[3])}) lie nowhere near the track (longitudes ${span(west, east)}, latitudes ${span(south, north)})${grid ? ' or the grid' : ''}; give the land of this place, with longitude before latitude, or leave out --land`,
  );
}

function trackBox(model: WindModel): LonLatBox {
  const { fixes } = model.completed;
  let lon = fixes[0]!.lonDeg;
  let box: LonLatBox = { west: lon, east: lon, south: 90, north: -90 };
  for (const { lonDeg, latDeg } of fixes) {
    lon += wrapLongitude(lonDeg - lon);
    box = {
      west: Math.min(box.west, lon),
      east: Math.max(box.east, lon),
      south: Math.min(box.south, latDeg),
      north: Math.max(box.north, latDeg),
    };
  }
  return box;
}

/** The land of a run as its map tells of it. */
export function landOnMap(known: KnownLand | null, recipe: Recipe): SwathResult['land'] {
  if (!known) return null;
  const { land, own } = known;
  return {
    name: land.name,
    text: `land ${land.name}, surface ${recipe['land.surface']}, decay ${recipe['land.decay']}`,
    shape: own ? landShape(land) : null,
  };
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
      : recipe['land.decay'] === 'off'
        ? 'land.decay is off, land does not weaken the storm'
        : 'the storm meets no land that weakens it';
  return [`land: ${known.land.name}; ${surface}; ${decay}`];
}
