import type { MultiPolygon, Polygon } from 'geojson';
import { wrapLongitude } from '../earth.js';
import { extentOf, type LonLat, type MapFrame } from './extent.js';
import type { Coast } from './map-input.js';

/** Scales of the Natural Earth coast. */
export type CoastDetail = '10m' | '50m';

/** Half of a map's span below which the finer coast is taken, degrees of arc. */
const FINE_BELOW_DEG = 11;

/** The coast that suits a map of some places: 1:10 million for a small one, 1:50 million otherwise. */
export function coastDetailFor(places: readonly LonLat[]): CoastDetail {
  return places.length > 0 && extentOf(places).radiusDeg < FINE_BELOW_DEG ? '10m' : '50m';
}

/** A polygon and the box around it, its longitudes from its first vertex on. */
interface Piece {
  readonly coordinates: Polygon['coordinates'];
  readonly west: number;
  readonly east: number;
  readonly south: number;
  readonly north: number;
}

const known = new WeakMap<object, Piece[]>();

/** The polygons of a coast that a map may show: a fine coast of the whole Earth is then drawn quickly. */
export function coastNear(coast: Coast, { seen }: MapFrame): MultiPolygon {
  let pieces = known.get(coast);
  if (!pieces) {
    pieces = polygonsOf(coast).map(pieceOf);
    known.set(coast, pieces);
  }
  const middle = (seen.west + seen.east) / 2 + seen.middleLon;
  const half = (seen.east - seen.west) / 2 + 1;
  const near = pieces.filter((piece) => {
    if (piece.north < seen.south - 1 || piece.south > seen.north + 1) return false;
    const width = (piece.east - piece.west) / 2;
    return half + width >= 180 || Math.abs(wrapLongitude(piece.west + width - middle)) <= half + width;
  });
  return { type: 'MultiPolygon', coordinates: near.map((piece) => piece.coordinates) };
}

function polygonsOf(shape: Coast): Polygon['coordinates'][] {
  switch (shape.type) {
    case 'FeatureCollection':
      return shape.features.flatMap((feature) => polygonsOf(feature));
    case 'Feature':
      return shape.geometry ? polygonsOf(shape.geometry) : [];
    case 'GeometryCollection':
      return shape.geometries.flatMap((geometry) => polygonsOf(geometry));
    case 'MultiPolygon':
      return shape.coordinates;
    case 'Polygon':
      return [shape.coordinates];
    default:
      return [];
  }
}

function pieceOf(coordinates: Polygon['coordinates']): Piece {
  const shell = coordinates[0] ?? [];
  const start = shell[0]?.[0] ?? 0;
  let lon = start;
  let [west, east, south, north] = [start, start, 90, -90];
  for (const position of shell) {
    lon += wrapLongitude(position[0]! - lon);
    west = Math.min(west, lon);
    east = Math.max(east, lon);
    south = Math.min(south, position[1]!);
    north = Math.max(north, position[1]!);
  }
  // a shell around a pole holds all latitudes up to it
  if (east - west > 350)
    return { coordinates, west: -180, east: 180, south: south < 0 ? -90 : south, north: north > 0 ? 90 : north };
  return { coordinates, west, east, south, north };
}
