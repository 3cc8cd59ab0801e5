import { LimitError } from '../errors.js';
import { cellCentre, type Grid, projection } from '../swath/grid.js';
import type { Swath } from '../swath/swath.js';
import { describeCrs } from './crs.js';
import { gridMapping } from './crs-cf.js';
import { type NetcdfAttribute, type NetcdfFile, type NetcdfVariable, netcdfBytes } from './netcdf-file.js';
import { type PeakBand, peakBands } from './peak-bands.js';
import { CAUTION, type Provenance } from './provenance.js';

/** Cells that a file may have: the HDF5 library holds a whole field and the whole file in its 32-bit memory. */
export const MOST_NETCDF_CELLS = 60_000_000;

/** What stands for no data. */
export const FILL = new Float32Array([Number.NaN]);

/**
 * `peak.nc`: netCDF-4 by the CF conventions, version 1.11 [EatonEtAl2023]. Fields as in `peak.tif`, row 0 = north; the
 * time of the peak as CF time; one step of time with the bounds of the period that was modelled.
 * @throws UsageError `write.crs` for a reference system without CF grid mapping; LimitError `write.netcdf-cells`
 */
export function peakNetcdf(swath: Swath, options: { provenance: Provenance }): Promise<Uint8Array> {
  return netcdfBytes(peakNetcdfFile(swath, options));
}

/** What {@link peakNetcdf} writes: dimensions, variables and attributes. */
export function peakNetcdfFile(swath: Swath, options: { provenance: Provenance }): NetcdfFile {
  const { grid } = swath;
  const cells = grid.nx * grid.ny;
  if (cells > MOST_NETCDF_CELLS) {
    throw new LimitError(
      'write.netcdf-cells',
      `a netCDF file of ${grid.nx} × ${grid.ny} cells is too large to be written here (at most ${MOST_NETCDF_CELLS} cells); write a GeoTIFF, or take a larger cell or smaller bounds`,
      { fields: { nx: grid.nx, ny: grid.ny } },
    );
  }
  const bands = peakBands(swath);
  const crs = describeCrs(grid.crs);
  const horizontal = horizontalCoordinates(grid);
  const [rows, columns] = grid.geographic ? ['lat', 'lon'] : ['y', 'x'];
  const since = `seconds since ${cfTime(swath.originMs)}`;
  return {
    dimensions: { time: 1, [rows!]: grid.ny, [columns!]: grid.nx, bnds: 2 },
    variables: [
      ...horizontal,
      { name: 'crs', dimensions: [], data: new Int32Array(1), attributes: gridMapping(crs) },
      ...timeAndHeight(swath, { since, period: options.provenance.period }),
      ...bands.map(
        (band): NetcdfVariable => ({
          name: band.name,
          dimensions: ['time', rows!, columns!],
          data: band.values,
          attributes: {
            ...fieldAttributes(band, { since, swath }),
            grid_mapping: 'crs',
            coordinates: grid.geographic ? 'height' : 'lat lon height',
            _FillValue: FILL,
          },
        }),
      ),
    ],
    attributes: globalAttributes(swath, options.provenance),
  };
}

/** `2024-01-05 06:00:00`, in UTC as CF takes it without a zone. */
function cfTime(timeMs: number): string {
  return new Date(timeMs).toISOString().slice(0, 19).replace('T', ' ');
}

function edges(start: number, { cell, count }: { cell: number; count: number }): Float64Array {
  const out = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    out[2 * i] = start + i * cell;
    out[2 * i + 1] = start + (i + 1) * cell;
  }
  return out;
}

/** Coordinates of the cells with their bounds; longitude and latitude too on a projected grid. */
export function horizontalCoordinates(grid: Grid): NetcdfVariable[] {
  const { nx, ny, cell, bounds } = grid;
  const x = Float64Array.from({ length: nx }, (_, i) => cellCentre(grid, i, 0)[0]);
  const y = Float64Array.from({ length: ny }, (_, j) => cellCentre(grid, 0, j)[1]);
  const xBounds = edges(bounds[0], { cell, count: nx });
  const yBounds = edges(bounds[3], { cell: -cell, count: ny });
  if (grid.geographic) {
    return [
      { name: 'lat', dimensions: ['lat'], data: y, attributes: { ...LATITUDE, axis: 'Y', bounds: 'lat_bnds' } },
      { name: 'lon', dimensions: ['lon'], data: x, attributes: { ...LONGITUDE, axis: 'X', bounds: 'lon_bnds' } },
      { name: 'lat_bnds', dimensions: ['lat', 'bnds'], data: yBounds, attributes: {} },
      { name: 'lon_bnds', dimensions: ['lon', 'bnds'], data: xBounds, attributes: {} },
    ];
  }
  const { inverse } = projection(grid.crs);
  const lat = new Float64Array(nx * ny);
  const lon = new Float64Array(nx * ny);
  for (let j = 0, k = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++, k++) [lon[k], lat[k]] = inverse(x[i]!, y[j]!) as [number, number];
  }
  const along = (axis: 'X' | 'Y', long_name: string) => ({
    standard_name: `projection_${axis.toLowerCase()}_coordinate`,
    long_name,
    units: 'm',
    axis,
    bounds: `${axis.toLowerCase()}_bnds`,
  });
  return [
    { name: 'y', dimensions: ['y'], data: y, attributes: along('Y', 'northing of the cell centre') },
    { name: 'x', dimensions: ['x'], data: x, attributes: along('X', 'easting of the cell centre') },
    { name: 'y_bnds', dimensions: ['y', 'bnds'], data: yBounds, attributes: {} },
    { name: 'x_bnds', dimensions: ['x', 'bnds'], data: xBounds, attributes: {} },
    { name: 'lat', dimensions: ['y', 'x'], data: lat, attributes: LATITUDE },
    { name: 'lon', dimensions: ['y', 'x'], data: lon, attributes: LONGITUDE },
  ];
}

const LATITUDE = { standard_name: 'latitude', long_name: 'latitude of the cell centre', units: 'degrees_north' };
const LONGITUDE = { standard_name: 'longitude', long_name: 'longitude of the cell centre', units: 'degrees_east' };

/** 10 m above the surface, where every wind of a file holds. */
export const HEIGHT: NetcdfVariable = {
  name: 'height',
  dimensions: [],
  data: new Float64Array([10]),
  attributes: {
    standard_name: 'height',
    long_name: 'height above the surface',
    units: 'm',
    positive: 'up',
    axis: 'Z',
  },
};

function timeAndHeight(
  swath: Swath,
  { since, period }: { since: string; period: Provenance['period'] },
): NetcdfVariable[] {
  const seconds = (timeMs: number): number => (timeMs - swath.originMs) / 1000;
  return [
    {
      name: 'time',
      dimensions: ['time'],
      data: new Float64Array([seconds(period.endMs)]),
      attributes: {
        standard_name: 'time',
        long_name: 'end of the modelled period',
        units: since,
        calendar: 'standard',
        axis: 'T',
        bounds: 'time_bnds',
      },
    },
    {
      name: 'time_bnds',
      dimensions: ['time', 'bnds'],
      data: new Float64Array([seconds(period.startMs), seconds(period.endMs)]),
      attributes: {},
    },
    HEIGHT,
  ];
}

function fieldAttributes(
  band: PeakBand,
  { since, swath }: { since: string; swath: Swath },
): Record<string, NetcdfAttribute> {
  const long_name = band.description;
  switch (band.kind) {
    case 'wind':
      return {
        standard_name: 'wind_speed',
        long_name,
        units: 'm s-1',
        cell_methods: `area: point time: maximum (of means over ${swath.averagingS} s)`,
        averaging_period_s: swath.averagingS,
      };
    case 'gust':
      return {
        standard_name: 'wind_speed_of_gust',
        long_name,
        units: 'm s-1',
        cell_methods: `area: point time: maximum (of means over ${swath.gustDurationS} s)`,
        averaging_period_s: swath.gustDurationS,
      };
    case 'wind-from':
      return {
        standard_name: 'wind_from_direction',
        long_name,
        units: 'degree',
        cell_methods: 'area: point time: point (at the time of the peak wind)',
      };
    case 'peak-time':
      return {
        standard_name: 'time',
        long_name: 'time of the peak wind',
        units: since,
        calendar: 'standard',
        cell_methods: 'area: point',
      };
    case 'surface':
      return { long_name, units: band.unit, cell_methods: 'area: point' };
    case 'hours':
      return {
        long_name,
        units: 'h',
        cell_methods: 'area: point time: sum (of the time at or above the threshold)',
        averaging_period_s: swath.averagingS,
        threshold_mps: band.thresholdMps ?? Number.NaN,
      };
  }
}

function globalAttributes(swath: Swath, provenance: Provenance): Record<string, NetcdfAttribute> {
  const { storm, stormName, version, recipe, inputs, period, references, createdMs } = provenance;
  const called = stormName === undefined || stormName === '' ? storm : `${stormName} (${storm})`;
  const written = createdMs === undefined ? '' : `${new Date(createdMs).toISOString()} `;
  return {
    Conventions: 'CF-1.11',
    title: `Peak wind and gust of tropical cyclone ${called}`,
    source: `Galewake ${version}, parametric wind model`,
    history: `${written}Galewake ${version}: swath of ${called}`,
    references: references?.length ? references.join('\n') : 'see the recipe',
    comment: CAUTION,
    storm,
    ...(stormName === undefined || stormName === '' ? {} : { storm_name: stormName }),
    recipe: JSON.stringify(recipe),
    input_sha256: inputs.map((input) => `${input.sha256}  ${input.name}`).join('\n'),
    time_coverage_start: new Date(period.startMs).toISOString(),
    time_coverage_end: new Date(period.endMs).toISOString(),
    ...(swath.cautions.length > 0 ? { cautions: swath.cautions.join('\n') } : {}),
  };
}
