import { LimitError } from '../errors.js';
import type { Grid } from '../swath/grid.js';
import { describeCrs } from './crs.js';
import { gridMapping } from './crs-cf.js';
import { FILL, HEIGHT, horizontalCoordinates, MOST_NETCDF_CELLS } from './netcdf.js';
import { type NetcdfAttribute, type NetcdfFile, type NetcdfVariable, netcdfBytes } from './netcdf-file.js';
import { CAUTION } from './provenance.js';

/** Return-period maps: for each period a field of wind and one of gust, row 0 = north, index = row * nx + column. */
export interface ReturnMaps {
  readonly grid: Grid;
  /** rising */
  readonly years: readonly number[];
  readonly windMps: readonly Float32Array[];
  readonly gustMps: readonly Float32Array[];
  readonly averagingS: number;
  readonly gustDurationS: number;
  /** further attributes of the whole file: where the maps come from */
  readonly attributes: Readonly<Record<string, NetcdfAttribute>>;
}

/**
 * Return-period maps as netCDF-4 by the CF conventions, version 1.11 [EatonEtAl2023]: wind and gust on (return_period, y, x).
 * @throws UsageError `write.crs`; LimitError `write.netcdf-cells`
 */
export function returnNetcdf(maps: ReturnMaps): Promise<Uint8Array> {
  return netcdfBytes(returnNetcdfFile(maps));
}

/** What {@link returnNetcdf} writes: dimensions, variables and attributes. */
export function returnNetcdfFile(maps: ReturnMaps): NetcdfFile {
  const { grid, years } = maps;
  const cells = grid.nx * grid.ny;
  if (cells * years.length > MOST_NETCDF_CELLS)
    throw new LimitError(
      'write.netcdf-cells',
      `a netCDF file of ${years.length} maps of ${grid.nx} × ${grid.ny} cells is too large to be written here (at most ${MOST_NETCDF_CELLS} values); take the GeoTIFFs, or a larger cell or smaller bounds`,
      { fields: { nx: grid.nx, ny: grid.ny } },
    );
  const [rows, columns] = grid.geographic ? ['lat', 'lon'] : ['y', 'x'];
  const field = (
    name: string,
    values: readonly Float32Array[],
    attributes: Record<string, NetcdfAttribute>,
  ): NetcdfVariable => {
    const data = new Float32Array(cells * years.length);
    for (const [i, one] of values.entries()) data.set(one, i * cells);
    return {
      name,
      dimensions: ['return_period', rows!, columns!],
      data,
      attributes: {
        ...attributes,
        units: 'm s-1',
        cell_methods: 'area: point',
        comment: '0 where events are rarer than the return period',
        grid_mapping: 'crs',
        coordinates: grid.geographic ? 'height' : 'lat lon height',
        _FillValue: FILL,
      },
    };
  };
  return {
    dimensions: { return_period: years.length, [rows!]: grid.ny, [columns!]: grid.nx, bnds: 2 },
    variables: [
      {
        name: 'return_period',
        dimensions: ['return_period'],
        data: Float64Array.from(years),
        attributes: {
          long_name: 'mean time between exceedances: one over their annual rate',
          units: 'year',
        },
      },
      ...horizontalCoordinates(grid),
      { name: 'crs', dimensions: [], data: new Int32Array(1), attributes: gridMapping(describeCrs(grid.crs)) },
      HEIGHT,
      field('return_wind', maps.windMps, {
        standard_name: 'wind_speed',
        long_name: 'sustained wind that is exceeded once in the return period on average',
        averaging_period_s: maps.averagingS,
      }),
      field('return_gust', maps.gustMps, {
        standard_name: 'wind_speed_of_gust',
        long_name: 'gust that is exceeded once in the return period on average',
        averaging_period_s: maps.gustDurationS,
      }),
    ],
    attributes: {
      Conventions: 'CF-1.11',
      title: 'Return-period winds of an event set of tropical cyclones',
      comment: CAUTION,
      ...maps.attributes,
    },
  };
}
