import type { CrsDescription, MapProjection, ProjectionMethod } from './crs.js';

/** The three GeoTIFF tags that carry a coordinate reference system [OgcGeotiff2019]. */
export interface GeoKeys {
  /** GeoKeyDirectoryTag 34735 */
  readonly directory: readonly number[];
  /** GeoDoubleParamsTag 34736 */
  readonly doubles: readonly number[];
  /** GeoAsciiParamsTag 34737 */
  readonly ascii: string;
}

const USER_DEFINED = 32767;
const DEGREE = 9102;
const METRE = 9001;
const GREENWICH = 8901;

/** Coordinate transformation codes of the GeoTIFF 1.1 standard; pseudo-Mercator goes by its EPSG code alone. */
const TRANSFORMATION: Readonly<Record<Exclude<ProjectionMethod, 'pseudo-mercator'>, number>> = {
  'transverse-mercator': 1,
  mercator: 7,
  'lambert-conformal-2': 8,
  'lambert-conformal-1': 9,
  'lambert-azimuthal': 10,
  albers: 11,
  'azimuthal-equidistant': 12,
  'oblique-stereographic': 14,
  'polar-stereographic': 15,
  sinusoidal: 24,
  'cylindrical-equal-area': 28,
};

const KEY = {
  model: 1024,
  raster: 1025,
  citation: 1026,
  geographic: 2048,
  geographicCitation: 2049,
  datum: 2050,
  primeMeridian: 2051,
  angularUnit: 2054,
  ellipsoid: 2056,
  semiMajor: 2057,
  semiMinor: 2058,
  inverseFlattening: 2059,
  projected: 3072,
  projectedCitation: 3073,
  projection: 3074,
  transformation: 3075,
  linearUnit: 3076,
  parallel1: 3078,
  parallel2: 3079,
  originLon: 3080,
  originLat: 3081,
  falseEasting: 3082,
  falseNorthing: 3083,
  falseOriginLon: 3084,
  falseOriginLat: 3085,
  falseOriginEasting: 3086,
  falseOriginNorthing: 3087,
  centreLon: 3088,
  centreLat: 3089,
  scale: 3092,
  poleLon: 3095,
} as const;

/**
 * A coordinate reference system as GeoTIFF keys, cells as areas (PixelIsArea): by EPSG code where there is one, else
 * by datum, method and parameters [OgcGeotiff2019].
 */
export function geoKeys(crs: CrsDescription): GeoKeys {
  const entries: [key: number, value: number | string | { double: number }][] = [];
  const projection = crs.projection;
  entries.push([KEY.model, projection ? 1 : 2], [KEY.raster, 1], [KEY.citation, crs.name]);
  if (!projection || crs.epsg === null) geographicKeys(crs, entries);
  if (projection) {
    entries.push([KEY.projected, crs.epsg ?? USER_DEFINED]);
    if (crs.epsg === null) {
      const method = projection.method as keyof typeof TRANSFORMATION;
      entries.push(
        [KEY.projectedCitation, crs.name],
        [KEY.projection, USER_DEFINED],
        [KEY.transformation, TRANSFORMATION[method]],
      );
    }
    entries.push([KEY.linearUnit, METRE]);
    if (crs.epsg === null) for (const [key, double] of projectionKeys(projection)) entries.push([key, { double }]);
  }
  return encode(entries);
}

function geographicKeys(crs: CrsDescription, entries: [number, number | string | { double: number }][]): void {
  const { datum } = crs;
  entries.push([KEY.geographic, datum.epsg ?? USER_DEFINED], [KEY.geographicCitation, datum.geographicName]);
  if (datum.epsg === null) entries.push([KEY.datum, USER_DEFINED], [KEY.primeMeridian, GREENWICH]);
  entries.push([KEY.angularUnit, DEGREE]);
  if (datum.epsg !== null) return;
  const { semiMajorM, inverseFlattening } = datum.ellipsoid;
  entries.push([KEY.ellipsoid, USER_DEFINED], [KEY.semiMajor, { double: semiMajorM }]);
  if (inverseFlattening === 0) entries.push([KEY.semiMinor, { double: semiMajorM }]);
  else entries.push([KEY.inverseFlattening, { double: inverseFlattening }]);
}

function projectionKeys(p: MapProjection): (readonly [key: number, value: number])[] {
  const shift = [
    [KEY.falseEasting, p.falseEastingM],
    [KEY.falseNorthing, p.falseNorthingM],
  ] as const;
  const origin = [
    [KEY.originLon, p.originLonDeg],
    [KEY.originLat, p.originLatDeg],
  ] as const;
  const centre = [
    [KEY.centreLon, p.originLonDeg],
    [KEY.centreLat, p.originLatDeg],
  ] as const;
  switch (p.method) {
    case 'pseudo-mercator':
      return [];
    case 'transverse-mercator':
    case 'lambert-conformal-1':
      return [...origin, [KEY.scale, p.scale], ...shift];
    case 'mercator':
      if (p.parallel1Deg !== null) return [[KEY.parallel1, p.parallel1Deg], ...origin, ...shift];
      return [...origin, [KEY.scale, p.scale], ...shift];
    case 'lambert-conformal-2':
      return [
        [KEY.parallel1, p.parallel1Deg ?? 0],
        [KEY.parallel2, p.parallel2Deg ?? 0],
        [KEY.falseOriginLon, p.originLonDeg],
        [KEY.falseOriginLat, p.originLatDeg],
        [KEY.falseOriginEasting, p.falseEastingM],
        [KEY.falseOriginNorthing, p.falseNorthingM],
      ];
    case 'albers':
      return [[KEY.parallel1, p.parallel1Deg ?? 0], [KEY.parallel2, p.parallel2Deg ?? 0], ...origin, ...shift];
    case 'lambert-azimuthal':
    case 'azimuthal-equidistant':
      return [...centre, ...shift];
    case 'oblique-stereographic':
      return [...centre, [KEY.scale, p.scale], ...shift];
    case 'polar-stereographic':
      // the latitude of true scale stands as the origin's latitude; at the pole itself the scale factor counts
      return [
        [KEY.poleLon, p.originLonDeg],
        [KEY.originLat, p.parallel1Deg ?? p.originLatDeg],
        [KEY.scale, p.scale],
        ...shift,
      ];
    case 'cylindrical-equal-area':
      return [[KEY.parallel1, p.parallel1Deg ?? 0], [KEY.originLon, p.originLonDeg], ...shift];
    case 'sinusoidal':
      return [[KEY.centreLon, p.originLonDeg], ...shift];
  }
}

function encode(entries: (readonly [number, number | string | { double: number }])[]): GeoKeys {
  const sorted = [...entries].sort((a, b) => a[0] - b[0]);
  const directory = [1, 1, 1, sorted.length];
  const doubles: number[] = [];
  let ascii = '';
  for (const [key, value] of sorted) {
    if (typeof value === 'number') directory.push(key, 0, 1, value);
    else if (typeof value === 'string') {
      const text = `${value.replace(/[^\x20-\x7B}~]/g, '?')}|`;
      directory.push(key, 34737, text.length, ascii.length);
      ascii += text;
    } else {
      directory.push(key, 34736, 1, doubles.length);
      doubles.push(value.double);
    }
  }
  return { directory, doubles, ascii };
}
