import { EARTH_RADIUS_M, RADIANS } from '../earth.js';
import { type Grid, projection } from '../swath/grid.js';
import type { Field } from './node-classes.js';

/** Longitude and latitude in degrees. */
export type Position = [lonDeg: number, latDeg: number];
/** The shell, then the holes; every ring closed, its last position equal to the first. */
export type PolygonCoordinates = Position[][];

/**
 * Integral of sin φ along an edge that is straight in longitude and latitude, divided by its difference in longitude:
 * (cos φ₁ − cos φ₂)/(φ₂ − φ₁) = sin φₘ · sin(δ)/δ with φₘ the mean and δ half the difference; exact, no cancellation.
 */
function meanSine(lat1Deg: number, lat2Deg: number): number {
  const half = ((lat2Deg - lat1Deg) / 2) * RADIANS;
  const sinc = Math.abs(half) < 1e-3 ? 1 - (half * half) / 6 : Math.sin(half) / half;
  return Math.sin(((lat1Deg + lat2Deg) / 2) * RADIANS) * sinc;
}

/**
 * Area inside a closed ring on the mean sphere, m²; positive anticlockwise, negative clockwise.
 * A = −R² ∮ sin φ dλ, exact for edges that are straight lines in longitude and latitude, as RFC 7946 has them [RFC7946].
 */
export function ringAreaM2(ring: readonly (readonly number[])[]): number {
  let sum = 0;
  // against the sine of the first latitude, so that small rings lose no digits
  const base = ring.length > 0 ? Math.sin(ring[0]![1]! * RADIANS) : 0;
  for (let i = 1; i < ring.length; i++) {
    const [lon1, lat1] = ring[i - 1] as Position;
    const [lon2, lat2] = ring[i] as Position;
    sum -= (lon2 - lon1) * (meanSine(lat1, lat2) - base);
  }
  return sum * RADIANS * EARTH_RADIUS_M ** 2;
}

/** Area of polygons on the mean sphere, m²; see {@link ringAreaM2}. */
export function polygonsAreaM2(polygons: readonly PolygonCoordinates[]): number {
  let sum = 0;
  for (const polygon of polygons) for (const ring of polygon) sum += ringAreaM2(ring);
  return sum;
}

/** Areas of the cells of a grid, m². */
export interface CellAreas {
  /** one area for each row (geographic grids), or one for each cell (projected ones; 0 where the projection has no inverse) */
  readonly per: 'row' | 'cell';
  readonly areasM2: Float64Array;
}

/**
 * Area of every cell on the mean sphere: between parallels and meridians, R² Δλ (sin φ₂ − sin φ₁), for geographic
 * grids; between the great circles through its corners for projected ones.
 */
export function cellAreasM2(grid: Grid): CellAreas {
  const { nx, ny, cell, bounds } = grid;
  if (grid.geographic) {
    const sine = (latDeg: number) => Math.sin(Math.max(-90, Math.min(90, latDeg)) * RADIANS);
    const areasM2 = Float64Array.from({ length: ny }, (_, row) => {
      const north = bounds[3] - row * cell;
      return EARTH_RADIUS_M ** 2 * cell * RADIANS * (sine(north) - sine(north - cell));
    });
    return { per: 'row', areasM2 };
  }
  const { inverse } = projection(grid.crs);
  const corners = (row: number): Float64Array => {
    const at = new Float64Array(3 * (nx + 1));
    for (let column = 0; column <= nx; column++) {
      const [lon, lat] = inverse(bounds[0] + column * cell, bounds[3] - row * cell);
      at[3 * column] = Math.cos(lat * RADIANS) * Math.cos(lon * RADIANS);
      at[3 * column + 1] = Math.cos(lat * RADIANS) * Math.sin(lon * RADIANS);
      at[3 * column + 2] = Math.sin(lat * RADIANS);
    }
    return at;
  };
  const areasM2 = new Float64Array(nx * ny);
  let north = corners(0);
  for (let row = 0; row < ny; row++) {
    const south = corners(row + 1);
    for (let column = 0; column < nx; column++) {
      const i = 3 * column;
      const area = triangleArea(north, i, south, i, south, i + 3) + triangleArea(north, i, south, i + 3, north, i + 3);
      areasM2[row * nx + column] = Number.isFinite(area) ? area * EARTH_RADIUS_M ** 2 : 0;
    }
    north = south;
  }
  return { per: 'cell', areasM2 };
}

/**
 * Area of a spherical triangle of unit vectors, steradian: tan(E/2) = a·(b×c) / (1 + a·b + b·c + c·a)
 * [VanOosteromStrackee1983]. The triple product is taken of differences, which keeps its digits for small triangles.
 */
function triangleArea(a: Float64Array, i: number, b: Float64Array, j: number, c: Float64Array, k: number): number {
  const [ax, ay, az] = [a[i]!, a[i + 1]!, a[i + 2]!];
  const [bx, by, bz] = [b[j]!, b[j + 1]!, b[j + 2]!];
  const [cx, cy, cz] = [c[k]!, c[k + 1]!, c[k + 2]!];
  const [ux, uy, uz] = [bx - ax, by - ay, bz - az];
  const [vx, vy, vz] = [cx - ax, cy - ay, cz - az];
  const triple = ax * (uy * vz - uz * vy) + ay * (uz * vx - ux * vz) + az * (ux * vy - uy * vx);
  const cosines = 1 + ax * bx + ay * by + az * bz + bx * cx + by * cy + bz * cz + cx * ax + cy * ay + cz * az;
  return 2 * Math.atan2(Math.abs(triple), cosines);
}

/** Area of the cells at or above a threshold (and below `upperMps`), m²; NaN counts as below. */
export function cellsAtOrAboveM2(
  field: Field,
  grid: Grid,
  range: { thresholdMps: number; upperMps?: number | null },
): number {
  const { per, areasM2 } = cellAreasM2(grid);
  const upper = range.upperMps ?? Number.POSITIVE_INFINITY;
  let sum = 0;
  for (let row = 0, k = 0; row < grid.ny; row++) {
    for (let column = 0; column < grid.nx; column++, k++) {
      const value = field[k]!;
      if (value >= range.thresholdMps && (value < upper || upper === Number.POSITIVE_INFINITY)) {
        sum += areasM2[per === 'row' ? row : k]!;
      }
    }
  }
  return sum;
}
