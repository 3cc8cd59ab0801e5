import { RADIANS } from '../earth.js';
import { InputError } from '../errors.js';
import { type Grid, projection } from '../swath/grid.js';

/** A zone: polygons with a name and perhaps values (people, insured sum), spread evenly over its area. */
export interface Zone {
  readonly name: string;
  /** MultiPolygon coordinates, longitude and latitude in degrees, each ring closed */
  readonly polygons: readonly (readonly (readonly (readonly [number, number])[])[])[];
  readonly values: Readonly<Record<string, number>>;
}

/** Share of a zone at or above each level. */
export interface ZoneShare {
  readonly zone: Zone;
  readonly areaM2: number;
  /** share of the area that the grid covers, 0 … 1 */
  readonly covered: number;
  /** for each level the share of the area, 0 … 1 */
  readonly shares: readonly number[];
}

/** Sample rows and columns across the extent of a zone. */
const SAMPLES = 400;

type Ring = readonly (readonly [number, number])[];

/** A ring's longitudes made continuous, so that a zone across ±180° is whole. */
function unwrapped(ring: Ring, near: number): [number, number][] {
  let last = near;
  return ring.map(([lon, lat]) => {
    last = lon + 360 * Math.round((last - lon) / 360);
    return [last, lat];
  });
}

/** The zone's rings, all near one longitude. */
function ringsOf(zone: Zone): [number, number][][] {
  const near = zone.polygons[0]?.[0]?.[0]?.[0] ?? 0;
  return zone.polygons.flatMap((polygon) => polygon.map((ring) => unwrapped(ring, near)));
}

/** Where a scan line at a latitude enters and leaves the rings: sorted longitudes (even-odd rule). */
function crossings(rings: readonly (readonly [number, number])[][], latDeg: number): number[] {
  const found: number[] = [];
  for (const ring of rings) {
    for (let i = 1; i < ring.length; i++) {
      const [x0, y0] = ring[i - 1]!;
      const [x1, y1] = ring[i]!;
      if (y0 > latDeg !== y1 > latDeg) found.push(x0 + ((x1 - x0) * (latDeg - y0)) / (y1 - y0));
    }
  }
  return found.sort((a, b) => a - b);
}

/** Whether a place lies in a zone (even-odd rule; edges are straight in longitude and latitude). */
export function inZone(zone: Zone, lonDeg: number, latDeg: number): boolean {
  const rings = ringsOf(zone);
  const centre = rings[0]?.[0]?.[0] ?? 0;
  const lon = lonDeg + 360 * Math.round((centre - lonDeg) / 360);
  return crossings(rings, latDeg).filter((x) => x <= lon).length % 2 === 1;
}

/** A test of many places against one zone: its rings are made continuous once. */
export function zoneTest(zone: Zone): (lonDeg: number, latDeg: number) => boolean {
  const rings = ringsOf(zone);
  const lats = rings.flatMap((ring) => ring.map(([, lat]) => lat));
  const lons = rings.flatMap((ring) => ring.map(([lon]) => lon));
  const [south, north] = [minimum(lats), maximum(lats)];
  const [west, east] = [minimum(lons), maximum(lons)];
  const middle = 0.5 * (west + east);
  return (lonDeg, latDeg) => {
    if (latDeg < south || latDeg > north) return false;
    const lon = lonDeg + 360 * Math.round((middle - lonDeg) / 360);
    if (lon < west || lon > east) return false;
    let inside = false;
    for (const ring of rings) {
      for (let i = 1; i < ring.length; i++) {
        const [x0, y0] = ring[i - 1]!;
        const [x1, y1] = ring[i]!;
        if (y0 > latDeg !== y1 > latDeg && lon >= x0 + ((x1 - x0) * (latDeg - y0)) / (y1 - y0)) inside = !inside;
      }
    }
    return inside;
  };
}

const minimum = (values: readonly number[]): number =>
  values.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
const maximum = (values: readonly number[]): number =>
  values.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);

/**
 * The share of a zone's area in which a field is at or above each level. The zone is sampled on about 400 × 400 points
 * (spherical area weights), the field is interpolated between cell centres; beyond the grid the field counts as 0.
 * @throws InputError `zone.empty` for a zone without area
 */
export function zoneShare(
  zone: Zone,
  field: { grid: Grid; values: Float32Array },
  levels: readonly number[],
  radiusM: number,
): ZoneShare {
  const rings = ringsOf(zone);
  const lats = rings.flatMap((ring) => ring.map(([, lat]) => lat));
  const lons = rings.flatMap((ring) => ring.map(([lon]) => lon));
  const [south, north, west, east] = [minimum(lats), maximum(lats), minimum(lons), maximum(lons)];
  const at = sampler(field);
  const dLat = (north - south) / SAMPLES;
  let area = 0;
  let covered = 0;
  const above = levels.map(() => 0);
  for (let row = 0; row < SAMPLES; row++) {
    const lat = south + (row + 0.5) * dLat;
    const weight = Math.cos(lat * RADIANS);
    const cuts = crossings(rings, lat);
    for (let k = 0; k + 1 < cuts.length; k += 2) {
      const span = cuts[k + 1]! - cuts[k]!;
      const count = Math.max(1, Math.ceil((span / (east - west)) * SAMPLES));
      const share = (weight * span) / count;
      for (let i = 0; i < count; i++) {
        const value = at(cuts[k]! + ((i + 0.5) * span) / count, lat);
        area += share;
        if (Number.isNaN(value)) continue;
        covered += share;
        for (let level = 0; level < levels.length; level++) if (value >= levels[level]!) above[level]! += share;
      }
    }
  }
  if (!(area > 0)) throw new InputError('zone.empty', `zone '${zone.name}' has no area; check its coordinates`);
  return {
    zone,
    areaM2: area * dLat * RADIANS ** 2 * radiusM ** 2,
    covered: covered / area,
    shares: above.map((sum) => sum / area),
  };
}

/** Bilinear interpolation of a field between cell centres; NaN beyond the grid. */
export function sampler({
  grid,
  values,
}: {
  grid: Grid;
  values: Float32Array;
}): (lonDeg: number, latDeg: number) => number {
  const { forward } = projection(grid.crs);
  const [west, , east, north] = grid.bounds;
  const middle = 0.5 * (west + east);
  return (lonDeg, latDeg) => {
    const [x, y] = grid.geographic
      ? [lonDeg + 360 * Math.round((middle - lonDeg) / 360), latDeg]
      : forward(lonDeg, latDeg);
    const column = (x - west) / grid.cell - 0.5;
    const row = (north - y) / grid.cell - 0.5;
    if (!(column >= -0.5 && column <= grid.nx - 0.5 && row >= -0.5 && row <= grid.ny - 0.5)) return Number.NaN;
    const c = Math.min(grid.nx - 1, Math.max(0, column));
    const r = Math.min(grid.ny - 1, Math.max(0, row));
    const c0 = Math.min(Math.floor(c), Math.max(0, grid.nx - 2));
    const r0 = Math.min(Math.floor(r), Math.max(0, grid.ny - 2));
    const c1 = Math.min(c0 + 1, grid.nx - 1);
    const r1 = Math.min(r0 + 1, grid.ny - 1);
    const tx = c - c0;
    const ty = r - r0;
    const v = (j: number, i: number): number => values[j * grid.nx + i]!;
    return (1 - ty) * ((1 - tx) * v(r0, c0) + tx * v(r0, c1)) + ty * ((1 - tx) * v(r1, c0) + tx * v(r1, c1));
  };
}
