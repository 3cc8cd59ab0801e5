import type { PolygonCoordinates } from './area.js';

/** [west, south, east, north] in degrees; west > east where the box runs across ±180° [RFC7946]. */
export type BoundingBox = [west: number, south: number, east: number, north: number];

type Rings = readonly (readonly (readonly number[])[])[];

/**
 * The smallest box round polygons that are cut at ±180°: on the circle of longitudes it leaves out the widest gap. A box
 * that holds all longitudes runs from −180 to 180. Null where there is no polygon.
 */
export function boundingBox(polygons: readonly (PolygonCoordinates | Rings)[]): BoundingBox | null {
  let south = Number.POSITIVE_INFINITY;
  let north = Number.NEGATIVE_INFINITY;
  const spans: [number, number][] = [];
  for (const polygon of polygons) {
    let west = Number.POSITIVE_INFINITY;
    let east = Number.NEGATIVE_INFINITY;
    // holes lie inside the shell
    for (const position of polygon[0] ?? []) {
      const lon = position[0]!;
      const lat = position[1]!;
      if (lon < west) west = lon;
      if (lon > east) east = lon;
      if (lat < south) south = lat;
      if (lat > north) north = lat;
    }
    if (west <= east) spans.push([west, east]);
  }
  if (spans.length === 0) return null;
  spans.sort((a, b) => a[0] - b[0]);
  // the gap across ±180° first: on equal terms the box keeps west < east
  let reach = spans[0]![1];
  for (const span of spans) reach = Math.max(reach, span[1]);
  let widest = spans[0]![0] + 360 - reach;
  let box: BoundingBox = [spans[0]![0], south, reach, north];
  let east = spans[0]![1];
  for (const [from, to] of spans) {
    if (from - east > widest) {
      widest = from - east;
      box = [from, south, east, north];
    }
    east = Math.max(east, to);
  }
  return box;
}
