import { InputError } from '../errors.js';
import { type LandPolygons, orientedRing } from './coast.js';

/**
 * Land from a GeoJSON document (RFC 7946: Polygon, MultiPolygon, Feature, FeatureCollection or GeometryCollection;
 * longitude and latitude in degrees on WGS 84). Overlapping polygons unite; a border that two polygons share is no coast.
 * Longitudes may run past 180 (to 540) instead of being cut there.
 * @param document the parsed JSON
 * @param source the file's name, for messages
 * @throws InputError `land.geojson`, `land.coordinates`, `land.crs`, `land.ring`, `land.empty`
 */
export function landFromGeoJson(document: unknown, { source }: { source: string }): LandPolygons {
  refuseOtherCrs(document, source);
  const rings: Float64Array[] = [];
  let polygons = 0;
  for (const { geometry, at } of geometriesOf(document, { source, at: '' })) {
    const members = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates;
    if (!Array.isArray(members))
      throw new InputError('land.geojson', `${source}${at}: the ${geometry.type} has no coordinates`);
    for (const member of members) {
      if (!Array.isArray(member))
        throw new InputError(
          'land.geojson',
          `${source}${at}: the coordinates of a ${geometry.type} are arrays of rings`,
        );
      polygons++;
      member.forEach((positions: unknown, i: number) => {
        const ring = orientedRing(checkedRing(positions, { source, at: `${at}, ring ${i + 1}` }), { hole: i > 0 });
        if (ring) rings.push(ring);
      });
    }
  }
  if (rings.length === 0) {
    throw new InputError(
      'land.empty',
      polygons === 0
        ? `${source}: no polygon in it; give land as GeoJSON polygons`
        : `${source}: its rings enclose no area: their places are all in a line, or the ring crosses itself and its parts cancel; give rings of at least three different places that do not cross themselves`,
    );
  }
  return { name: source, rings, detailM: null };
}

interface FoundGeometry {
  readonly geometry: { readonly type: 'Polygon' | 'MultiPolygon'; readonly coordinates: unknown };
  readonly at: string;
}

function* geometriesOf(value: unknown, { source, at }: { source: string; at: string }): Generator<FoundGeometry> {
  const wrong = (what: string): never => {
    throw new InputError('land.geojson', `${source}${at}: ${what}; land is GeoJSON with polygons (RFC 7946)`);
  };
  if (typeof value !== 'object' || value === null) return wrong('this is no GeoJSON object');
  const { type } = value as { type?: unknown };
  const list = (key: 'features' | 'geometries'): readonly unknown[] => {
    const items = (value as Record<string, unknown>)[key];
    return Array.isArray(items) ? items : wrong(`the ${String(type)} has no array '${key}'`);
  };
  switch (type) {
    case 'FeatureCollection':
      for (const [i, item] of list('features').entries())
        yield* geometriesOf(item, { source, at: `, feature ${i + 1}` });
      return;
    case 'Feature': {
      const { geometry } = value as { geometry?: unknown };
      if (geometry !== null) yield* geometriesOf(geometry, { source, at });
      return;
    }
    case 'GeometryCollection':
      for (const item of list('geometries')) yield* geometriesOf(item, { source, at });
      return;
    case 'Polygon':
    case 'MultiPolygon':
      yield { geometry: value as FoundGeometry['geometry'], at };
      return;
    default:
      wrong(
        typeof type === 'string'
          ? `a ${type} is no land`
          : `this has no 'type'${type === undefined ? '' : ' that is text'}`,
      );
  }
}

/** Positions of one ring as lon, lat, lon, lat, …, checked. */
function checkedRing(positions: unknown, { source, at }: { source: string; at: string }): number[] {
  if (!Array.isArray(positions) || positions.length < 4)
    throw new InputError(
      'land.ring',
      `${source}${at}: a ring has at least four positions, the last equal to the first`,
    );
  const flat: number[] = [];
  for (const [i, position] of positions.entries()) {
    const lon = Array.isArray(position) ? (position[0] as unknown) : undefined;
    const lat = Array.isArray(position) ? (position[1] as unknown) : undefined;
    if (typeof lon !== 'number' || typeof lat !== 'number' || !Number.isFinite(lon) || !Number.isFinite(lat)) {
      throw new InputError(
        'land.coordinates',
        `${source}${at}, position ${i + 1}: ${JSON.stringify(position)?.slice(0, 60)} is not [longitude, latitude]`,
      );
    }
    if (Math.abs(lat) > 90 || lon < -360 || lon > 540) {
      throw new InputError(
        'land.coordinates',
        `${source}${at}, position ${i + 1}: [${lon}, ${lat}] is no longitude and latitude in degrees; the file seems to be in a projection. Convert it to WGS 84, e.g. ogr2ogr -t_srs EPSG:4326 -lco RFC7946=YES land.geojson ${source}`,
        { fields: { lon, lat } },
      );
    }
    if (i > 0 && Math.abs(lon - flat[flat.length - 2]!) > 180) {
      throw new InputError(
        'land.ring',
        `${source}${at}: the edge from ${flat[flat.length - 2]} to ${lon} spans more than 180° of longitude; cut the polygon at ±180°, let its longitudes run on past 180, or put positions between`,
      );
    }
    flat.push(lon, lat);
  }
  if (flat[0] !== flat[flat.length - 2] || flat[1] !== flat[flat.length - 1])
    throw new InputError(
      'land.ring',
      `${source}${at}: the ring is open; repeat its first position [${flat[0]}, ${flat[1]}] at the end`,
    );
  return flat;
}

/** GeoJSON is WGS 84; older files may name another system, and their numbers would be misread. */
function refuseOtherCrs(document: unknown, source: string): void {
  const crs = (document as { crs?: { properties?: { name?: unknown } } } | null)?.crs?.properties?.name;
  if (typeof crs !== 'string' || /CRS84|EPSG:+4326$|EPSG::4326$/i.test(crs)) return;
  throw new InputError(
    'land.crs',
    `${source}: its coordinates are in ${crs}; convert it to WGS 84, e.g. ogr2ogr -t_srs EPSG:4326 -lco RFC7946=YES land.geojson ${source}`,
    { fields: { crs } },
  );
}
