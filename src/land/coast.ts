import { feature } from 'topojson-client';
import { InputError } from '../errors.js';

/**
 * Land as closed rings in longitude and latitude, degrees.
 * Each ring is lon, lat, lon, lat, … with the first vertex repeated at the end; land lies on its left (outer rings run
 * anticlockwise, holes clockwise), so overlapping polygons unite. Longitudes run on past 180 where a ring crosses ±180°,
 * and a ring around a pole is closed along the pole. Edges are straight in longitude and latitude.
 */
export interface LandPolygons {
  readonly name: string;
  readonly rings: readonly Float64Array[];
  /** detail of the coast, m: caution where a cell is smaller; null where nobody has said it */
  readonly detailM: number | null;
}

/** Scales of the Natural Earth land polygons: near and far. */
export type CoastScale = '10m' | '50m';

/** The smallest thing that a map of scale 1:N shows is 0.2 mm wide on paper (common practice of cartographers). */
const LEAST_MARK_M = 2e-4;
const DENOMINATOR: Readonly<Record<CoastScale, number>> = { '10m': 1e7, '50m': 5e7 };

/** The coast that suits a cell: 1:10 million, or 1:50 million for cells of 10 km (its detail) and more. */
export function coastScaleFor(cellM: number): CoastScale {
  return cellM >= DENOMINATOR['50m'] * LEAST_MARK_M ? '50m' : '10m';
}

/** What `topojson-client` needs of a topology; the documents of world-atlas have one object, `land`. */
type Topology = Parameters<typeof feature>[0];

/**
 * Land of a Natural Earth topology (`land-10m.json` or `land-50m.json` of the package world-atlas)   [NaturalEarth2018].
 * Lakes other than the Caspian Sea count as land.
 * @throws InputError `land.topology` when the document holds no land
 */
export function landFromTopology(document: unknown, scale: CoastScale): LandPolygons {
  const name = `Natural Earth 1:${DENOMINATOR[scale] / 1e6} million`;
  const object = (document as { objects?: { land?: unknown } } | null)?.objects?.land;
  if (!object)
    throw new InputError(
      'land.topology',
      `${name}: the document has no object 'land'; reinstall the package world-atlas`,
    );
  const found = feature(document as Topology, object as Parameters<typeof feature>[1]) as unknown as {
    features?: readonly { geometry: Polygons }[];
    geometry?: Polygons;
  };
  const rings: Float64Array[] = [];
  for (const { geometry } of found.features ?? [{ geometry: found.geometry! }]) {
    const polygons = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates;
    for (const polygon of polygons) {
      polygon.forEach((positions, i) => {
        const ring = orientedRing(unwrapped(positions), { hole: i > 0 });
        if (ring && !isMarkerAtOrigin(ring)) rings.push(ring);
      });
    }
  }
  return { name, rings, detailM: DENOMINATOR[scale] * LEAST_MARK_M };
}

/** Natural Earth draws a metre of land at 0° N 0° E, where there is none, so that faulty data show up. */
function isMarkerAtOrigin(ring: Float64Array): boolean {
  return ring.every((degrees) => Math.abs(degrees) < 0.02);
}

type Position = readonly number[];
type Polygons =
  | { readonly type: 'Polygon'; readonly coordinates: readonly (readonly Position[])[] }
  | { readonly type: 'MultiPolygon'; readonly coordinates: readonly (readonly (readonly Position[])[])[] };

/** A ring whose longitudes go on past ±180; a ring around a pole is closed along the pole. */
function unwrapped(positions: readonly Position[]): number[] {
  const out: number[] = [];
  let lon = positions[0]![0]!;
  for (const position of positions) {
    lon += wrapDifference(position[0]! - lon);
    out.push(lon, position[1]!);
  }
  const turn = out[out.length - 2]! - out[0]!;
  if (Math.abs(turn) > 180) {
    const pole = out[1]! < 0 ? -90 : 90;
    out.push(out[out.length - 2]!, pole, out[0]!, pole, out[0]!, out[1]!);
  }
  return out;
}

function wrapDifference(degrees: number): number {
  return degrees - 360 * Math.round(degrees / 360);
}

/**
 * A ring in the layout of {@link LandPolygons}: closed, turned so that land is on its left, its westernmost vertex in
 * −180 ≤ λ < 180. Null for a ring without area.
 */
export function orientedRing(flat: readonly number[], { hole }: { hole: boolean }): Float64Array | null {
  const n = flat.length / 2;
  let west = Number.POSITIVE_INFINITY;
  for (let i = 0; i < n; i++) west = Math.min(west, flat[2 * i]!);
  const shift = -360 * Math.floor((west + 180) / 360);
  const closed = flat[0] === flat[2 * n - 2] && flat[1] === flat[2 * n - 1];
  const ring = new Float64Array(2 * (closed ? n : n + 1));
  for (let i = 0; i < ring.length / 2; i++) {
    ring[2 * i] = flat[2 * (i % n)]! + shift;
    ring[2 * i + 1] = flat[2 * (i % n) + 1]!;
  }
  const area = signedArea(ring);
  if (area === 0 || !Number.isFinite(area)) return null;
  if (area > 0 === hole) reverseRing(ring);
  return ring;
}

/** Twice the area of a closed ring in square degrees; positive when it runs anticlockwise. */
export function signedArea(ring: Float64Array): number {
  let sum = 0;
  for (let i = 0; i + 3 < ring.length; i += 2) {
    sum += (ring[i]! - ring[0]!) * (ring[i + 3]! - ring[1]!) - (ring[i + 2]! - ring[0]!) * (ring[i + 1]! - ring[1]!);
  }
  return sum;
}

function reverseRing(ring: Float64Array): void {
  for (let i = 0, j = ring.length - 2; i < j; i += 2, j -= 2) {
    const [lon, lat] = [ring[i]!, ring[i + 1]!];
    ring[i] = ring[j]!;
    ring[i + 1] = ring[j + 1]!;
    ring[j] = lon;
    ring[j + 1] = lat;
  }
}
