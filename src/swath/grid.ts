import proj4, { type Converter } from 'proj4';
import { RADIANS } from '../earth.js';
import { LimitError, UsageError } from '../errors.js';

/**
 * A regular grid in a coordinate reference system.
 * Layout of every field on it: row 0 = north (largest y), index = row * nx + column, values at cell centres.
 * Bounds are [west, south, east, north] in units of the CRS; a geographic grid may run past 180°E (east > 180).
 */
export interface Grid {
  /** `EPSG:4326`, another EPSG code that proj4 knows, or a proj string */
  readonly crs: string;
  readonly geographic: boolean;
  readonly nx: number;
  readonly ny: number;
  /** cell size, in degrees or metres */
  readonly cell: number;
  readonly bounds: readonly [number, number, number, number];
}

/** Cells that one run may hold; a larger grid is refused before anything is allocated. */
export const MOST_CELLS = 400_000_000;

export interface Projection {
  /** CRS coordinates → [longitude, latitude] in degrees */
  readonly inverse: (x: number, y: number) => readonly [number, number];
  /** [longitude, latitude] in degrees → CRS coordinates */
  readonly forward: (lonDeg: number, latDeg: number) => readonly [number, number];
  readonly geographic: boolean;
}

const GEOGRAPHIC = new Set(['EPSG:4326', 'EPSG:4269', 'OGC:CRS84']);

/**
 * The projection of a CRS.
 * @throws UsageError `grid.crs` for a CRS that is not known
 */
export function projection(crs: string): Projection {
  const identity = {
    inverse: (x: number, y: number) => [x, y] as const,
    forward: (x: number, y: number) => [x, y] as const,
  };
  if (GEOGRAPHIC.has(crs.toUpperCase())) return { ...identity, geographic: true };
  let converter: Converter;
  let geographic: boolean;
  try {
    converter = proj4(proj4Definition(crs));
    geographic = /\+proj=(longlat|latlong)/.test(proj4Definition(crs));
  } catch (cause) {
    throw new UsageError(
      'grid.crs',
      `unknown coordinate reference system '${crs}'; give an EPSG code such as EPSG:4326, EPSG:3857 or EPSG:32617 (UTM), or a proj string`,
      { fields: { crs }, cause },
    );
  }
  if (geographic) return { ...identity, geographic: true };
  return {
    geographic: false,
    inverse: (x, y) => converter.inverse([x, y]) as [number, number],
    forward: (lon, lat) => converter.forward([lon, lat]) as [number, number],
  };
}

/** UTM zones by their EPSG number, polar stereographic and the codes proj4 knows by itself; proj strings as they are. */
function proj4Definition(crs: string): string {
  const utm = /^EPSG:32([67])(0[1-9]|[1-5]\d|60)$/i.exec(crs);
  if (utm) return `+proj=utm +zone=${Number(utm[2])}${utm[1] === '7' ? ' +south' : ''} +datum=WGS84 +units=m +no_defs`;
  const known: Record<string, string> = {
    'EPSG:3995': '+proj=stere +lat_0=90 +lat_ts=71 +lon_0=0 +datum=WGS84 +units=m +no_defs',
    'EPSG:3031': '+proj=stere +lat_0=-90 +lat_ts=-71 +lon_0=0 +datum=WGS84 +units=m +no_defs',
    'EPSG:6933': '+proj=cea +lat_ts=30 +lon_0=0 +x_0=0 +y_0=0 +datum=WGS84 +units=m +no_defs',
  };
  const upper = crs.toUpperCase();
  if (known[upper]) return known[upper];
  if (!crs.startsWith('+')) return upper;
  // some projections of proj4 answer NaN when the false easting and northing are left out
  return crs + (crs.includes('+x_0=') ? '' : ' +x_0=0') + (crs.includes('+y_0=') ? '' : ' +y_0=0');
}

/**
 * A grid that covers `bounds`, its edges moved outward to whole cells.
 * @throws UsageError `grid.bounds`, `grid.cell`; LimitError `grid.cells`
 */
export function gridOver(options: {
  crs: string;
  bounds: readonly [number, number, number, number];
  cell: number;
}): Grid {
  const { crs, cell } = options;
  const [west, south, east, north] = options.bounds;
  const { geographic } = projection(crs);
  if (!(cell > 0) || !Number.isFinite(cell))
    throw new UsageError('grid.cell', `the cell size ${cell} is not a positive number`);
  if (![west, south, east, north].every(Number.isFinite) || !(east > west) || !(north > south)) {
    throw new UsageError(
      'grid.bounds',
      `bounds ${options.bounds.join(',')}: give west,south,east,north with west < east and south < north${geographic ? ' (across ±180° let east run past 180)' : ''}`,
    );
  }
  if (geographic && (south < -90 || north > 90 || east - west > 360 || west < -360 || east > 540)) {
    throw new UsageError(
      'grid.bounds',
      `bounds ${options.bounds.join(',')}: latitudes lie within ±90 and the span is at most 360 degrees`,
    );
  }
  const whole = (span: number) => Math.max(1, Math.ceil(span / cell - 1e-6));
  const nx = whole(east - west);
  const ny = whole(north - south);
  if (nx * ny > MOST_CELLS) {
    throw new LimitError(
      'grid.cells',
      `the grid would have ${nx} × ${ny} = ${(nx * ny).toExponential(2)} cells (about ${((nx * ny * 40) / 1e9).toFixed(0)} GB); take a larger --cell or smaller --bounds (at most ${MOST_CELLS} cells)`,
      { fields: { nx, ny } },
    );
  }
  let top = south + ny * cell;
  let bottom = south;
  if (geographic && top > 90) {
    // keep the cells inside the pole: move the raster down, never past the south pole
    top = 90;
    bottom = 90 - ny * cell;
  }
  return {
    crs: geographic && crs.toUpperCase() === 'EPSG:4326' ? 'EPSG:4326' : crs,
    geographic,
    nx,
    ny,
    cell,
    bounds: [west, bottom, west + nx * cell, top],
  };
}

/** CRS coordinates of the centre of a cell. */
export function cellCentre(grid: Grid, column: number, row: number): readonly [number, number] {
  return [grid.bounds[0] + (column + 0.5) * grid.cell, grid.bounds[3] - (row + 0.5) * grid.cell];
}

/**
 * Unit vectors of all cell centres on the sphere.
 * @returns x, y, z (each nx*ny, Float32) with x toward 0°E on the equator, z toward the north pole; NaN where the projection has no inverse
 */
export function cellVectors(grid: Grid): { x: Float32Array; y: Float32Array; z: Float32Array } {
  const n = grid.nx * grid.ny;
  const x = new Float32Array(n);
  const y = new Float32Array(n);
  const z = new Float32Array(n);
  if (grid.geographic) {
    const cosLon = new Float64Array(grid.nx);
    const sinLon = new Float64Array(grid.nx);
    for (let i = 0; i < grid.nx; i++) {
      const lon = (grid.bounds[0] + (i + 0.5) * grid.cell) * RADIANS;
      cosLon[i] = Math.cos(lon);
      sinLon[i] = Math.sin(lon);
    }
    for (let j = 0, k = 0; j < grid.ny; j++) {
      const lat = (grid.bounds[3] - (j + 0.5) * grid.cell) * RADIANS;
      const c = Math.cos(lat);
      const s = Math.sin(lat);
      for (let i = 0; i < grid.nx; i++, k++) {
        x[k] = c * cosLon[i]!;
        y[k] = c * sinLon[i]!;
        z[k] = s;
      }
    }
    return { x, y, z };
  }
  const { inverse } = projection(grid.crs);
  for (let j = 0, k = 0; j < grid.ny; j++) {
    for (let i = 0; i < grid.nx; i++, k++) {
      const [cx, cy] = cellCentre(grid, i, j);
      const [lon, lat] = inverse(cx, cy);
      const c = Math.cos(lat * RADIANS);
      x[k] = c * Math.cos(lon * RADIANS);
      y[k] = c * Math.sin(lon * RADIANS);
      z[k] = Math.sin(lat * RADIANS);
    }
  }
  return { x, y, z };
}
