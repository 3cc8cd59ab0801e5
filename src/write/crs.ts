import { UsageError } from '../errors.js';

/** Reference ellipsoid: semi-major axis, m, and inverse flattening (0 for a sphere). */
export interface Ellipsoid {
  readonly name: string;
  readonly semiMajorM: number;
  readonly inverseFlattening: number;
}

/** Geodetic datum; `epsg` is the code of the geographic CRS on it, null where it has none. */
export interface Datum {
  readonly name: string;
  readonly geographicName: string;
  readonly epsg: number | null;
  readonly ellipsoid: Ellipsoid;
}

/** Map projections that GeoTIFF keys, WKT and CF grid mappings can all describe. */
export type ProjectionMethod =
  | 'transverse-mercator'
  | 'mercator'
  | 'pseudo-mercator'
  | 'lambert-conformal-1'
  | 'lambert-conformal-2'
  | 'lambert-azimuthal'
  | 'albers'
  | 'azimuthal-equidistant'
  | 'polar-stereographic'
  | 'oblique-stereographic'
  | 'cylindrical-equal-area'
  | 'sinusoidal';

/** A map projection by its parameters: degrees, metres; those that a method does not use keep their neutral value. */
export interface MapProjection {
  readonly method: ProjectionMethod;
  /** latitude of origin; the pole of a polar stereographic (±90) */
  readonly originLatDeg: number;
  readonly originLonDeg: number;
  /** standard parallels; the latitude of true scale where there is one */
  readonly parallel1Deg: number | null;
  readonly parallel2Deg: number | null;
  readonly scale: number;
  readonly falseEastingM: number;
  readonly falseNorthingM: number;
}

/** A coordinate reference system, taken apart so that each file format can describe it in its own way. */
export interface CrsDescription {
  readonly name: string;
  /** EPSG code, null for a system of the user's own */
  readonly epsg: number | null;
  readonly datum: Datum;
  /** null for longitude and latitude */
  readonly projection: MapProjection | null;
}

/** Ellipsoids by the name that proj strings use; values of the EPSG register, from memory. */
const ELLIPSOIDS: Readonly<Record<string, Ellipsoid>> = {
  WGS84: { name: 'WGS 84', semiMajorM: 6378137, inverseFlattening: 298.257223563 },
  GRS80: { name: 'GRS 1980', semiMajorM: 6378137, inverseFlattening: 298.257222101 },
  intl: { name: 'International 1924', semiMajorM: 6378388, inverseFlattening: 297 },
  bessel: { name: 'Bessel 1841', semiMajorM: 6377397.155, inverseFlattening: 299.1528128 },
  clrk66: { name: 'Clarke 1866', semiMajorM: 6378206.4, inverseFlattening: 294.978698213898 },
  krass: { name: 'Krassowsky 1940', semiMajorM: 6378245, inverseFlattening: 298.3 },
  sphere: { name: 'Sphere', semiMajorM: 6370997, inverseFlattening: 0 },
};

const WGS84: Datum = {
  name: 'World Geodetic System 1984',
  geographicName: 'WGS 84',
  epsg: 4326,
  ellipsoid: ELLIPSOIDS['WGS84']!,
};
const NAD83: Datum = {
  name: 'North American Datum 1983',
  geographicName: 'NAD83',
  epsg: 4269,
  ellipsoid: ELLIPSOIDS['GRS80']!,
};

const SUPPORTED =
  'EPSG:4326, 4269, 3857, 3031, 3995, 5041, 5042, 6933, 32601–32660, 32701–32760, or a proj string in metres with +proj= longlat, utm, tmerc, merc, lcc, laea, aea, aeqd, stere, cea or sinu, on +datum=WGS84 or NAD83, +ellps=, +R= or +a= +b=';

/** The proj strings behind EPSG codes that a grid may have [IogpEpsg2019]. */
const EPSG_PROJECTED: Readonly<Record<number, readonly [name: string, proj: string]>> = {
  3031: ['WGS 84 / Antarctic Polar Stereographic', '+proj=stere +lat_0=-90 +lat_ts=-71 +lon_0=0 +datum=WGS84'],
  3995: ['WGS 84 / Arctic Polar Stereographic', '+proj=stere +lat_0=90 +lat_ts=71 +lon_0=0 +datum=WGS84'],
  5041: ['WGS 84 / UPS North (E,N)', '+proj=stere +lat_0=90 +lon_0=0 +k=0.994 +x_0=2000000 +y_0=2000000 +datum=WGS84'],
  5042: ['WGS 84 / UPS South (E,N)', '+proj=stere +lat_0=-90 +lon_0=0 +k=0.994 +x_0=2000000 +y_0=2000000 +datum=WGS84'],
  6933: ['WGS 84 / NSIDC EASE-Grid 2.0 Global', '+proj=cea +lat_ts=30 +lon_0=0 +datum=WGS84'],
};

/**
 * Takes a coordinate reference system apart.
 * @param crs an EPSG code or a proj string, as a grid has it
 * @throws UsageError `write.crs` when no file format could describe it; the message lists what works
 */
export function describeCrs(crs: string): CrsDescription {
  const text = crs.trim();
  const upper = text.toUpperCase();
  if (upper === 'EPSG:4326' || upper === 'OGC:CRS84')
    return { name: 'WGS 84', epsg: 4326, datum: WGS84, projection: null };
  if (upper === 'EPSG:4269') return { name: 'NAD83', epsg: 4269, datum: NAD83, projection: null };
  if (['EPSG:3857', 'EPSG:3785', 'EPSG:900913', 'EPSG:102113', 'GOOGLE'].includes(upper)) return pseudoMercator();
  const code = Number(/^EPSG:(\d{4,6})$/.exec(upper)?.[1] ?? Number.NaN);
  const zone = /^EPSG:32([67])(0[1-9]|[1-5]\d|60)$/.exec(upper);
  if (zone) return utm(Number(zone[2]), zone[1] === '7' ? 'south' : 'north');
  const known = EPSG_PROJECTED[code];
  if (known) return { ...fromProj(known[1], text), name: known[0], epsg: code };
  if (text.startsWith('+')) return fromProj(text, text);
  throw refusal(text, 'its definition is not known here');
}

function refusal(crs: string, why: string): UsageError {
  return new UsageError(
    'write.crs',
    `the coordinate reference system '${crs}' cannot be described in a file: ${why}; what works: ${SUPPORTED}`,
    { fields: { crs } },
  );
}

const NEUTRAL = {
  originLatDeg: 0,
  originLonDeg: 0,
  parallel1Deg: null,
  parallel2Deg: null,
  scale: 1,
  falseEastingM: 0,
  falseNorthingM: 0,
};

function pseudoMercator(): CrsDescription {
  return {
    name: 'WGS 84 / Pseudo-Mercator',
    epsg: 3857,
    datum: WGS84,
    projection: { ...NEUTRAL, method: 'pseudo-mercator' },
  };
}

function utm(zone: number, side: 'north' | 'south'): CrsDescription {
  const north = side === 'north';
  return {
    name: `WGS 84 / UTM zone ${zone}${north ? 'N' : 'S'}`,
    epsg: (north ? 32600 : 32700) + zone,
    datum: WGS84,
    projection: {
      ...NEUTRAL,
      method: 'transverse-mercator',
      originLonDeg: 6 * zone - 183,
      scale: 0.9996,
      falseEastingM: 500_000,
      falseNorthingM: north ? 0 : 10_000_000,
    },
  };
}

const PARAMETERS = new Set(
  'proj datum ellps R a b rf lat_0 lon_0 lat_1 lat_2 lat_ts k k_0 x_0 y_0 zone south units towgs84 pm no_defs type title wktext'.split(
    ' ',
  ),
);

function fromProj(proj: string, shown: string): CrsDescription {
  const given = new Map<string, string>();
  for (const part of proj.split(/\s+/).filter(Boolean)) {
    const match = /^\+([A-Za-z_0-9]+)(?:=(.*))?$/.exec(part);
    if (!match || !PARAMETERS.has(match[1]!)) throw refusal(shown, `'${part}' is not understood`);
    given.set(match[1]!, match[2] ?? '');
  }
  const number = (key: string, otherwise: number): number => {
    const value = given.has(key) ? Number(given.get(key) || Number.NaN) : otherwise;
    if (!Number.isFinite(value)) throw refusal(shown, `+${key}=${given.get(key)} is not a number`);
    return value;
  };
  const optional = (key: string): number | null => (given.has(key) ? number(key, 0) : null);
  if (!['m', 'degrees', undefined].includes(given.get('units')))
    throw refusal(shown, `its unit is not the metre (+units=${given.get('units')})`);
  if (/[1-9]/.test(given.get('towgs84') ?? '')) throw refusal(shown, 'it shifts the datum (+towgs84)');
  if (!['0', 'greenwich', undefined].includes(given.get('pm')))
    throw refusal(shown, 'its prime meridian is not Greenwich (+pm)');

  const datum = datumOf(given, { number, shown });
  const method = given.get('proj');
  if (method === 'longlat' || method === 'latlong')
    return { name: datum.geographicName, epsg: datum.epsg, datum, projection: null };
  if (method === 'utm') {
    const zone = number('zone', Number.NaN);
    if (!(zone >= 1 && zone <= 60)) throw refusal(shown, 'a UTM zone is a whole number from 1 to 60');
    const system = utm(zone, given.has('south') ? 'south' : 'north');
    if (datum.epsg === 4326) return system;
    return {
      ...system,
      name: `${datum.geographicName} / UTM zone ${zone}${given.has('south') ? 'S' : 'N'}`,
      epsg: null,
      datum,
    };
  }
  const lat0 = number('lat_0', 0);
  const common = {
    originLatDeg: lat0,
    originLonDeg: number('lon_0', 0),
    scale: given.has('k_0') ? number('k_0', 1) : number('k', 1),
    falseEastingM: number('x_0', 0),
    falseNorthingM: number('y_0', 0),
    parallel1Deg: null,
    parallel2Deg: null,
  };
  if (given.has('lat_ts') && common.scale !== 1) {
    throw refusal(shown, 'give the latitude of true scale (+lat_ts) or a scale factor (+k), not both');
  }
  const own = (projection: MapProjection): CrsDescription => ({
    name: `Projection of the user's own (${method})`,
    epsg: null,
    datum,
    projection,
  });
  switch (method) {
    case 'tmerc':
      return own({ ...common, method: 'transverse-mercator' });
    case 'merc':
      if (lat0 !== 0) throw refusal(shown, 'a Mercator projection has its origin on the equator (no +lat_0)');
      return own({ ...common, method: 'mercator', parallel1Deg: optional('lat_ts') });
    case 'lcc': {
      const parallel1 = number('lat_1', lat0);
      const parallel2 = number('lat_2', parallel1);
      if (parallel1 !== parallel2)
        return own({ ...common, method: 'lambert-conformal-2', parallel1Deg: parallel1, parallel2Deg: parallel2 });
      if (parallel1 !== lat0 && given.has('lat_0'))
        throw refusal(shown, 'a conformal conic with one parallel has it at its origin (+lat_1 = +lat_0)');
      return own({ ...common, originLatDeg: parallel1, method: 'lambert-conformal-1' });
    }
    case 'laea':
      return own({ ...common, method: 'lambert-azimuthal' });
    case 'aea': {
      const parallel1 = number('lat_1', 0);
      return own({ ...common, method: 'albers', parallel1Deg: parallel1, parallel2Deg: number('lat_2', parallel1) });
    }
    case 'aeqd':
      return own({ ...common, method: 'azimuthal-equidistant' });
    case 'stere': {
      if (Math.abs(lat0) !== 90) return own({ ...common, method: 'oblique-stereographic' });
      return own({ ...common, method: 'polar-stereographic', parallel1Deg: optional('lat_ts') });
    }
    case 'cea':
      return own({ ...common, method: 'cylindrical-equal-area', parallel1Deg: number('lat_ts', 0) });
    case 'sinu':
      return own({ ...common, method: 'sinusoidal' });
    default:
      throw refusal(
        shown,
        method
          ? `the projection '${method}' has no description that every format shares`
          : 'it names no projection (+proj=)',
      );
  }
}

function datumOf(
  given: ReadonlyMap<string, string>,
  context: { number: (key: string, otherwise: number) => number; shown: string },
): Datum {
  const named = given.get('datum');
  if (named === 'WGS84') return WGS84;
  if (named === 'NAD83') return NAD83;
  if (named !== undefined) throw refusal(context.shown, `the datum '${named}' is not known here`);
  const { number } = context;
  let ellipsoid: Ellipsoid | undefined;
  if (given.has('R')) {
    ellipsoid = { name: 'Sphere', semiMajorM: number('R', 0), inverseFlattening: 0 };
  } else if (given.has('a')) {
    const a = number('a', 0);
    const b = number('b', a);
    const inverse = given.has('rf') ? number('rf', 0) : a === b ? 0 : a / (a - b);
    ellipsoid = { name: inverse === 0 ? 'Sphere' : 'Ellipsoid', semiMajorM: a, inverseFlattening: inverse };
  } else {
    const name = given.get('ellps') ?? 'WGS84';
    ellipsoid = ELLIPSOIDS[name];
    if (!ellipsoid)
      throw refusal(
        context.shown,
        `the ellipsoid '${name}' is not known here (known: ${Object.keys(ELLIPSOIDS).join(', ')})`,
      );
    // a WGS 84 ellipsoid without a datum is taken as WGS 84 itself, as proj does
    if (name === 'WGS84') return WGS84;
  }
  if (!(ellipsoid.semiMajorM > 0)) throw refusal(context.shown, 'the radius is not positive');
  return {
    name: `Unknown datum based upon ${ellipsoid.name}`,
    geographicName: `Unknown (${ellipsoid.name})`,
    epsg: null,
    ellipsoid,
  };
}
