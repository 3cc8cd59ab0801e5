import type { CrsDescription, Datum, MapProjection } from './crs.js';

const DEGREE = 'ANGLEUNIT["degree",0.0174532925199433]';
const METRE = 'LENGTHUNIT["metre",1]';

const quoted = (text: string): string => `"${text.replaceAll('"', '""')}"`;
const identifier = (epsg: number | null): string => (epsg === null ? '' : `,ID["EPSG",${epsg}]`);

/** A coordinate reference system as well-known text, second edition [OgcWkt2019]; methods and parameters by EPSG code. */
export function crsWkt(crs: CrsDescription): string {
  const { datum, projection } = crs;
  if (!projection) {
    return `GEOGCRS[${quoted(crs.name)},${datumWkt(datum)},CS[ellipsoidal,2],AXIS["geodetic latitude (Lat)",north,ORDER[1],${DEGREE}],AXIS["geodetic longitude (Lon)",east,ORDER[2],${DEGREE}]${identifier(crs.epsg)}]`;
  }
  const base = `BASEGEOGCRS[${quoted(datum.geographicName)},${datumWkt(datum)}${identifier(datum.epsg)}]`;
  const { method, parameters } = conversion(projection);
  return `PROJCRS[${quoted(crs.name)},${base},CONVERSION[${quoted(crs.name)},${method},${parameters.join(',')}],CS[Cartesian,2],${axes(projection)}${identifier(crs.epsg)}]`;
}

function datumWkt(datum: Datum): string {
  const { name, semiMajorM, inverseFlattening } = datum.ellipsoid;
  return `DATUM[${quoted(datum.name)},ELLIPSOID[${quoted(name)},${semiMajorM},${inverseFlattening},${METRE}]],PRIMEM["Greenwich",0,${DEGREE}]`;
}

/** Near a pole east and north have no one direction: the axes run along meridians. */
function axes(p: MapProjection): string {
  if (p.method !== 'polar-stereographic')
    return `AXIS["easting (E)",east,ORDER[1],${METRE}],AXIS["northing (N)",north,ORDER[2],${METRE}]`;
  const north = p.originLatDeg > 0;
  const direction = north ? 'south' : 'north';
  const along = (meridianDeg: number): string => {
    const wrapped = ((((meridianDeg + 180) % 360) + 360) % 360) - 180;
    return `${direction},MERIDIAN[${wrapped === -180 ? 180 : wrapped},${DEGREE}]`;
  };
  return `AXIS["easting (E)",${along(p.originLonDeg + 90)},ORDER[1],${METRE}],AXIS["northing (N)",${along(p.originLonDeg + (north ? 180 : 0))},ORDER[2],${METRE}]`;
}

function conversion(p: MapProjection): { method: string; parameters: string[] } {
  const angle = (name: string, code: number, value: number): string =>
    `PARAMETER["${name}",${value},${DEGREE},ID["EPSG",${code}]]`;
  const length = (name: string, code: number, value: number): string =>
    `PARAMETER["${name}",${value},${METRE},ID["EPSG",${code}]]`;
  const latitude = angle('Latitude of natural origin', 8801, p.originLatDeg);
  const longitude = angle('Longitude of natural origin', 8802, p.originLonDeg);
  const scale = `PARAMETER["Scale factor at natural origin",${p.scale},SCALEUNIT["unity",1],ID["EPSG",8805]]`;
  const shift = [length('False easting', 8806, p.falseEastingM), length('False northing', 8807, p.falseNorthingM)];
  const parallel1 = angle('Latitude of 1st standard parallel', 8823, p.parallel1Deg ?? 0);
  const method = (name: string, code?: number): string =>
    code === undefined ? `METHOD["${name}"]` : `METHOD["${name}",ID["EPSG",${code}]]`;
  switch (p.method) {
    case 'transverse-mercator':
      return { method: method('Transverse Mercator', 9807), parameters: [latitude, longitude, scale, ...shift] };
    case 'mercator':
      if (p.parallel1Deg !== null)
        return { method: method('Mercator (variant B)', 9805), parameters: [parallel1, longitude, ...shift] };
      return { method: method('Mercator (variant A)', 9804), parameters: [latitude, longitude, scale, ...shift] };
    case 'pseudo-mercator':
      return {
        method: method('Popular Visualisation Pseudo Mercator', 1024),
        parameters: [latitude, longitude, ...shift],
      };
    case 'lambert-conformal-1':
      return {
        method: method('Lambert Conic Conformal (1SP)', 9801),
        parameters: [latitude, longitude, scale, ...shift],
      };
    case 'lambert-conformal-2':
      return { method: method('Lambert Conic Conformal (2SP)', 9802), parameters: falseOrigin(p, { angle, length }) };
    case 'albers':
      return { method: method('Albers Equal Area', 9822), parameters: falseOrigin(p, { angle, length }) };
    case 'lambert-azimuthal':
      return { method: method('Lambert Azimuthal Equal Area', 9820), parameters: [latitude, longitude, ...shift] };
    case 'azimuthal-equidistant':
      return { method: method('Modified Azimuthal Equidistant', 9832), parameters: [latitude, longitude, ...shift] };
    case 'oblique-stereographic':
      return { method: method('Stereographic'), parameters: [latitude, longitude, scale, ...shift] };
    case 'polar-stereographic': {
      if (p.parallel1Deg === null)
        return {
          method: method('Polar Stereographic (variant A)', 9810),
          parameters: [latitude, longitude, scale, ...shift],
        };
      const parameters = [
        angle('Latitude of standard parallel', 8832, p.parallel1Deg),
        angle('Longitude of origin', 8833, p.originLonDeg),
        ...shift,
      ];
      return { method: method('Polar Stereographic (variant B)', 9829), parameters };
    }
    case 'cylindrical-equal-area':
      return { method: method('Lambert Cylindrical Equal Area', 9835), parameters: [parallel1, longitude, ...shift] };
    case 'sinusoidal':
      return { method: method('Sinusoidal'), parameters: [longitude, ...shift] };
  }
}

type Parameter = (name: string, code: number, value: number) => string;

function falseOrigin(p: MapProjection, { angle, length }: { angle: Parameter; length: Parameter }): string[] {
  return [
    angle('Latitude of false origin', 8821, p.originLatDeg),
    angle('Longitude of false origin', 8822, p.originLonDeg),
    angle('Latitude of 1st standard parallel', 8823, p.parallel1Deg ?? 0),
    angle('Latitude of 2nd standard parallel', 8824, p.parallel2Deg ?? 0),
    length('Easting at false origin', 8826, p.falseEastingM),
    length('Northing at false origin', 8827, p.falseNorthingM),
  ];
}
