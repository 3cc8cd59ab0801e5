import { LimitError, UsageError } from '../errors.js';
import type { Grid } from '../swath/grid.js';
import { cutAtAntimeridian } from './antimeridian.js';
import { type PolygonCoordinates, type Position, polygonsAreaM2 } from './area.js';
import { geographicLattice, indexLattice, UNITS_PER_DEGREE } from './lattice.js';
import { traceContours } from './marching-squares.js';
import { type Field, MOST_LEVELS } from './node-classes.js';
import { assemblePolygons, type FlatPolygons } from './polygons.js';
import { type RingMap, ringMap, type SphereRing } from './ring-on-sphere.js';

/** The area where a field reaches a level. */
export interface Isotach {
  readonly thresholdMps: number;
  /** upper bound of a band (not included); null for the area at or above the threshold */
  readonly upperMps: number | null;
  /** coordinates of a MultiPolygon in longitude and latitude [RFC7946]; empty where the field stays below */
  readonly polygons: readonly PolygonCoordinates[];
  /** on the mean sphere, of exactly these polygons */
  readonly areaM2: number;
}

/**
 * Isotachs of a field: for each level the area at or above it, or with `bands` the disjoint areas from each level to the
 * next, as polygons in longitude and latitude.
 *
 * Values lie at cell centres and vary linearly between neighbours; beyond the outermost centres they stay the same up to
 * the outer edge of the grid, where the areas are closed. NaN is below every level.
 *
 * Polygons follow RFC 7946 [RFC7946]: shells anticlockwise, holes clockwise, at most six decimals, cut at ±180°, a pole
 * inside is reached at ±90°; no ring touches itself or another of the same level, and higher levels lie inside lower ones.
 *
 * @param field row 0 = north, index = row * nx + column
 * @returns by rising level, one for every level asked for
 * @throws UsageError `isotach.levels`, `isotach.field`; LimitError `isotach.levels`, `isotach.cell`
 */
export function isotachs(
  field: Field,
  grid: Grid,
  options: { readonly levelsMps: readonly number[]; readonly bands?: boolean },
): Isotach[] {
  if (field.length !== grid.nx * grid.ny) {
    throw new UsageError(
      'isotach.field',
      `the field has ${field.length} values, the grid ${grid.nx} × ${grid.ny} cells`,
    );
  }
  const levels = checkedLevels(options.levelsMps);
  const polygons: PolygonCoordinates[][] = levels.map(() => []);
  const upperOf = (level: number): number | null => (options.bands && level + 1 < levels.length ? level + 1 : null);
  if (grid.geographic) {
    const lattice = geographicLattice(grid, levels.length);
    const contours = traceContours(field, lattice, levels);
    const across = lattice.x[0]! < -180 * UNITS_PER_DEGREE || lattice.x.at(-1)! > 180 * UNITS_PER_DEGREE;
    for (let level = 0; level < levels.length; level++) {
      const flat = assemblePolygons(contours, level, upperOf(level));
      polygons[level] = across ? cutPolygons(flat) : degrees(flat);
    }
  } else {
    const map = ringMap(grid);
    const contours = traceContours(map.withinProjection(field), indexLattice(grid, map.margin), levels);
    for (let level = 0; level < levels.length; level++) {
      polygons[level] = mapped(assemblePolygons(contours, level, upperOf(level)), map);
    }
  }
  return levels.map((thresholdMps, level) => ({
    thresholdMps,
    upperMps: upperOf(level) === null ? null : levels[level + 1]!,
    polygons: polygons[level]!,
    areaM2: polygonsAreaM2(polygons[level]!),
  }));
}

function append<T>(to: T[], from: readonly T[]): void {
  for (const item of from) to.push(item);
}

/** Rising, without repetition. */
function checkedLevels(levelsMps: readonly number[]): number[] {
  const levels = [...new Set(levelsMps)].sort((a, b) => a - b);
  if (levels.length === 0) throw new UsageError('isotach.levels', 'no level to draw isotachs for; give at least one');
  for (const level of levels) {
    if (!Number.isFinite(level)) throw new UsageError('isotach.levels', `the level ${level} is not a finite number`);
  }
  if (levels.length > MOST_LEVELS) {
    throw new LimitError('isotach.levels', `${levels.length} levels; give at most ${MOST_LEVELS}`);
  }
  return levels;
}

/** Polygons whose units are millionths of a degree. */
function degrees(flat: FlatPolygons): PolygonCoordinates[] {
  const { x, y, rings, polygons } = flat;
  const out: PolygonCoordinates[] = [];
  for (let p = 1; p < polygons.length; p++) {
    const polygon: PolygonCoordinates = [];
    for (let r = polygons[p - 1]!; r < polygons[p]!; r++) {
      const from = rings[r]!;
      const to = rings[r + 1]!;
      const ring = new Array<Position>(to - from + 1);
      for (let i = from; i < to; i++) ring[i - from] = [x[i]! / UNITS_PER_DEGREE, y[i]! / UNITS_PER_DEGREE];
      ring[to - from] = [x[from]! / UNITS_PER_DEGREE, y[from]! / UNITS_PER_DEGREE];
      polygon.push(ring);
    }
    out.push(polygon);
  }
  return out;
}

/** Polygons in millionths of a degree that may run past ±180°. */
function cutPolygons(flat: FlatPolygons): PolygonCoordinates[] {
  const { x, y, rings, polygons } = flat;
  const out: PolygonCoordinates[] = [];
  for (let p = 1; p < polygons.length; p++) {
    const sphere: SphereRing[] = [];
    for (let r = polygons[p - 1]!; r < polygons[p]!; r++) {
      sphere.push({
        lon: Array.from(x.subarray(rings[r]!, rings[r + 1]!)),
        lat: Array.from(y.subarray(rings[r]!, rings[r + 1]!)),
      });
    }
    append(out, cutAtAntimeridian(sphere));
  }
  return out;
}

/** Polygons on a projected lattice. */
function mapped(flat: FlatPolygons, { map }: RingMap): PolygonCoordinates[] {
  const { x, y, rings, polygons } = flat;
  const out: PolygonCoordinates[] = [];
  for (let p = 1; p < polygons.length; p++) {
    const sphere: (SphereRing | null)[] = [];
    for (let r = polygons[p - 1]!; r < polygons[p]!; r++) sphere.push(map(x, y, rings[r]!, rings[r + 1]!));
    if (sphere[0]) append(out, cutAtAntimeridian(sphere.filter((ring) => ring !== null)));
  }
  return out;
}
