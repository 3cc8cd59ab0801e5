import { bearingDeg, distanceM, type Place, RADIANS, wrapBearing } from '../earth.js';
import { decayOverLand, decays } from '../land/decay.js';
import type { Land } from '../land/land.js';
import { DECAY_SETS } from '../surface/inland-decay.js';
import { type CompletedTrack, completeTrack } from '../track/complete.js';
import { type Path, pathOf } from '../track/path.js';
import type { Track } from '../track/track.js';
import { knots } from '../units.js';
import {
  type FieldMethods,
  fieldMethods,
  motionSize,
  surfaceRatio,
  unstableRadiiM,
  type WindField,
  windField,
} from './field.js';
import { fieldWithRadii } from './radii-field.js';
import { fitRadii } from './radii-fit.js';
import { type Recipe, type RecipeValue, recipeNumber } from './recipe.js';

/** The wind at a place and time: 10 m, earth-relative, in the recipe's averaging period. */
export interface WindAt {
  readonly eastMps: number;
  readonly northMps: number;
  readonly speedMps: number;
  /** where it blows from, degrees clockwise from north; NaN in a calm */
  readonly fromDeg: number;
}

/** A storm and a recipe: wind at any place and time. The plain, exact model; every faster way is judged by it. */
export interface WindModel {
  readonly recipe: Recipe;
  readonly completed: CompletedTrack;
  readonly path: Path;
  readonly methods: FieldMethods;
  /** one radius for the whole storm, m; the last tenth is tapered */
  readonly outerRadiusM: number;
  readonly averagingS: number;
  readonly cautions: readonly string[];
  readonly fieldAt: (timeMs: number) => WindField;
  readonly windAt: (place: Place, timeMs: number) => WindAt;
}

/** The radius is chosen so that the wind outside is below this share of the lowest level. */
const EDGE_SHARE = 0.45;
/** Outer radius of a field that serves as a base: nothing of it is tapered where it is used, m. */
const UNTAPERED_M = 4_000_000;

function sizeOf(value: RecipeValue): string | number {
  return typeof value === 'number' ? value * 1000 : value;
}

/** Where the reduction is taken for the completion, when the radius of maximum wind may be unknown, m. */
const COMPLETION_RADIUS_M = 40_000;
const OUTER_RADIUS_BOUNDS_M = [200_000, 1_000_000] as const;

/**
 * The model of a track under a recipe.
 * @param lowestLevelMps the lowest wind that anybody asks for; it sets the model's radius
 * @param land where the storm decays (recipe `land.decay`); without it nothing decays
 * @throws InputError from the completion
 */
export function windModel(
  track: Track,
  recipe: Recipe,
  { lowestLevelMps = knots(34), land }: { lowestLevelMps?: number; land?: Pick<Land, 'isLand'> } = {},
): WindModel {
  const methods = fieldMethods(recipe);
  const interpolation = recipe['path.interpolation'] as 'monotone-cubic' | 'linear';
  const filled = completeTrack(track, {
    averagingS: recipeNumber(recipe, 'wind.averaging_s'),
    pressure: recipe['completion.pressure'] as string,
    rmax: recipe['completion.rmax'] as string,
    size: sizeOf(recipe['completion.size']!),
    radii: recipe['vortex.radii'] as 'fit' | 'ignore',
    ambientHpa: recipe['completion.ambient_hpa'] as number | 'basin',
    b: recipe['completion.b'] as number | string,
    seaTemperatureC: recipeNumber(recipe, 'completion.sea_temperature_c'),
    maxGapH: recipeNumber(recipe, 'completion.max_gap_h'),
    interpolation,
    surfaceFactor: (maxWindMps) => surfaceRatio(methods, { maxWindMps, radiusOfMaxWindM: COMPLETION_RADIUS_M }),
    airDensityKgM3: methods.airDensityKgM3,
    motionMps: methods.keepMaximum ? motionSize(methods) : () => 0,
  });
  const cautions = [...filled.cautions];
  const { completed, marine } = decayed();
  // where the cells know their roughness, the storm's own step from sea to land is theirs
  const path = pathOf(recipe['land.surface'] === 'on' ? marine : completed, { interpolation });
  const baseFieldAt = (timeMs: number, outerRadiusM = UNTAPERED_M): WindField =>
    windField(path.at(timeMs), methods, { outerRadiusM });
  const radii = recipe['vortex.radii'] === 'fit' ? fitRadii(completed, path, { baseFieldAt, interpolation }) : null;
  cautions.push(...(radii?.cautions ?? []));
  const fieldWithin = (timeMs: number, outerRadiusM: number): WindField =>
    radii ? fieldWithRadii(baseFieldAt(timeMs), radii.at(timeMs), { outerRadiusM }) : baseFieldAt(timeMs, outerRadiusM);
  const outerRadiusM = outerRadius();
  if (methods.layer) cautionOfStability();
  const fieldAt = (timeMs: number): WindField => fieldWithin(timeMs, outerRadiusM);
  return {
    recipe,
    completed,
    path,
    methods,
    outerRadiusM,
    averagingS: completed.averagingS,
    cautions,
    fieldAt,
    windAt: (place, timeMs) => windOf(fieldAt(timeMs), place),
  };

  function decayed(): { completed: CompletedTrack; marine: CompletedTrack } {
    const unchanged = { completed: filled, marine: filled };
    const setting = recipe['land.decay'] as 'auto' | 'on' | 'off';
    if (!decays(setting, track.kind)) return unchanged;
    if (!land) {
      if (setting === 'on') cautions.push(`storm ${track.id}: land.decay is on, but no land was given: nothing decays`);
      return unchanged;
    }
    const set = DECAY_SETS.find(({ id }) => id === recipe['land.decay_set'])!;
    const result = decayOverLand(filled, { isLand: land.isLand, set, interpolation });
    cautions.push(...result.notes);
    if (track.kind === 'best' && result.notes.length > 0)
      cautions.push(
        `storm ${track.id}: a best track already holds what land did to the storm; with land.decay=on it decays twice`,
      );
    return result;
  }

  function cautionOfStability(): void {
    const unstable = path.knotsMs.flatMap((timeMs) => unstableRadiiM(fieldWithin(timeMs, outerRadiusM), methods));
    if (unstable.length === 0) return;
    const [least, most] = [Math.min(...unstable) / 1000, Math.max(...unstable) / 1000];
    cautions.push(
      `storm ${track.id}: the vortex is inertially unstable at some radii from ${least.toFixed(0)} to ${most.toFixed(0)} km; there the boundary layer has no solution, and the constant reduction and the inflow of the recipe take its place`,
    );
  }

  function outerRadius(): number {
    const chosen = recipe['vortex.radius_km'];
    if (typeof chosen === 'number') return chosen * 1000;
    const [least, most] = OUTER_RADIUS_BOUNDS_M;
    const edge = EDGE_SHARE * lowestLevelMps;
    let radius = least;
    let reaches = false;
    for (const timeMs of path.knotsMs) {
      const field = fieldWithin(timeMs, 2 * most);
      while (radius < most && field.strongestOnCircle(radius) > edge) radius *= 1.05;
      reaches ||= radius >= most && field.strongestOnCircle(most) > lowestLevelMps;
    }
    if (reaches)
      cautions.push(
        `the wind still exceeds the lowest level ${most / 1000} km from the centre, where the model ends; the outer profile or the motion share is too flat for this storm`,
      );
    return Math.min(radius, most) / 0.9;
  }
}

/** The wind of a field at a place: the vector at the centre, turned as the great circle turns on the way. */
export function windOf(field: WindField, place: Place): WindAt {
  const radiusM = distanceM(field.state, place);
  if (radiusM >= field.outerRadiusM) return { eastMps: 0, northMps: 0, speedMps: 0, fromDeg: Number.NaN };
  const outward = bearingDeg(field.state, place) * RADIANS;
  const arrival = radiusM === 0 ? outward : (bearingDeg(place, field.state) + 180) * RADIANS;
  direction[0] = Math.sin(outward);
  direction[1] = Math.cos(outward);
  field.onCircle(wind, radiusM, direction);
  const turn = arrival - outward;
  const c = Math.cos(turn);
  const s = Math.sin(turn);
  // bearings grow clockwise: turning a vector by `turn` clockwise
  const eastMps = c * wind[0]! + s * wind[1]!;
  const northMps = c * wind[1]! - s * wind[0]!;
  const speedMps = Math.hypot(eastMps, northMps);
  return {
    eastMps,
    northMps,
    speedMps,
    fromDeg: speedMps === 0 ? Number.NaN : wrapBearing(Math.atan2(-eastMps, -northMps) / RADIANS),
  };
}

const direction = new Float64Array(2);
const wind = new Float64Array(2);
