import { type GeoPath, type GeoProjection, geoPath } from 'd3-geo';

type Position = readonly number[];

/** The area at or above a level, or between two levels, as isotachs give it: shells anticlockwise [RFC7946]. */
export interface PictureIsotach {
  readonly thresholdMps: number;
  readonly upperMps?: number | null;
  /** coordinates of a MultiPolygon, longitude and latitude */
  readonly polygons: readonly (readonly (readonly Position[])[])[];
  readonly areaM2: number;
}

/** Path data of one isotach: its area, and its edge without the cuts at ±180° and the poles. */
export interface IsotachPath {
  readonly area: string;
  readonly edge: string;
}

/** Longest edge that is drawn as one arc of a great circle, degrees. */
const LONGEST_DEG = 1;

export function isotachPath(isotach: PictureIsotach, projection: GeoProjection): IsotachPath {
  const path: GeoPath = geoPath(projection).digits(1);
  const rings = isotach.polygons.map((polygon) => polygon.map((ring) => finer(ring)));
  // on a sphere the inside lies right of the ring: the other way round than in a plane
  const area = path({
    type: 'MultiPolygon',
    coordinates: rings.map((polygon) => polygon.map((ring) => [...ring].reverse())),
  });
  const edge = path({ type: 'MultiLineString', coordinates: rings.flat().flatMap(openParts) });
  return { area: area ?? '', edge: edge ?? '' };
}

/** The edges of polygons without the cuts at ±180° and the poles, as lines. */
export function openEdges(polygons: PictureIsotach['polygons']): [number, number][][] {
  return polygons.flatMap((polygon) => polygon.flatMap((ring) => openParts(finer(ring))));
}

/** A ring with long edges broken where they run straight in longitude and latitude. */
function finer(ring: readonly Position[]): [number, number][] {
  const out: [number, number][] = [];
  for (let i = 1; i < ring.length; i++) {
    const [a, b] = [ring[i - 1]!, ring[i]!];
    const [dx, dy] = [b[0]! - a[0]!, b[1]! - a[1]!];
    const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(dx), Math.abs(dy)) / LONGEST_DEG));
    for (let k = 0; k < pieces; k++) out.push([a[0]! + (dx * k) / pieces, a[1]! + (dy * k) / pieces]);
  }
  const last = ring[ring.length - 1];
  if (last) out.push([last[0]!, last[1]!]);
  return out;
}

/** The parts of a ring that are not on ±180° or at a pole. */
function openParts(ring: readonly [number, number][]): [number, number][][] {
  const parts: [number, number][][] = [];
  let part: [number, number][] = [];
  for (let i = 1; i < ring.length; i++) {
    const [a, b] = [ring[i - 1]!, ring[i]!];
    const cut = (Math.abs(a[0]) === 180 && a[0] === b[0]) || (Math.abs(a[1]) === 90 && a[1] === b[1]);
    if (cut) {
      if (part.length > 1) parts.push(part);
      part = [];
    } else {
      if (part.length === 0) part.push(a);
      part.push(b);
    }
  }
  if (part.length > 1) parts.push(part);
  return parts;
}
