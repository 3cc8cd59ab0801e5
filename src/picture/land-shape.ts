import type { MultiPolygon, Position } from 'geojson';
import { type LandPolygons, signedArea } from '../land/coast.js';
import { type Land, landOf } from '../land/land.js';

/** Edges are cut so that a great circle between two positions stays near the straight line in longitude and latitude, degrees. */
const LONGEST_EDGE_DEG = 1;

/**
 * Land as a sphere's pictures want it: outer rings run clockwise there, and each hole stands with the ring around it
 * (longitude and latitude in degrees).
 */
export function landShape({ rings }: Pick<LandPolygons, 'rings'>): MultiPolygon {
  const shells: { land: Land; coordinates: Position[][] }[] = [];
  const holes: Float64Array[] = [];
  for (const ring of rings) {
    if (signedArea(ring) > 0) {
      const land = landOf({ name: '', rings: [ring], detailM: null });
      shells.push({ land, coordinates: [positionsOf(ring)] });
    } else holes.push(ring);
  }
  for (const hole of holes) {
    const place = { lonDeg: hole[0]!, latDeg: hole[1]! };
    shells.find(({ land }) => land.isLand(place))?.coordinates.push(positionsOf(hole));
  }
  return { type: 'MultiPolygon', coordinates: shells.map(({ coordinates }) => coordinates) };
}

/** Positions of a ring, turned round, with others between those that are far apart. */
function positionsOf(ring: Float64Array): Position[] {
  const positions: Position[] = [];
  for (let i = ring.length - 2; i >= 2; i -= 2) {
    const [lon, lat, toLon, toLat] = [ring[i]!, ring[i + 1]!, ring[i - 2]!, ring[i - 1]!];
    const parts = Math.max(1, Math.ceil(Math.max(Math.abs(toLon - lon), Math.abs(toLat - lat)) / LONGEST_EDGE_DEG));
    for (let k = 0; k < parts; k++)
      positions.push([lon + ((toLon - lon) * k) / parts, lat + ((toLat - lat) * k) / parts]);
  }
  positions.push([ring[0]!, ring[1]!]);
  return positions;
}
