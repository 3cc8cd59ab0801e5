import { UsageError } from '../errors.js';
import type { CrsDescription, MapProjection } from './crs.js';
import { crsWkt } from './crs-wkt.js';

/** Attributes of a grid-mapping variable: text, one number or a list of numbers. */
export type GridMapping = Readonly<Record<string, string | number | readonly number[]>>;

/**
 * A coordinate reference system as the attributes of a CF grid mapping, with `crs_wkt` beside [EatonEtAl2023, appendix F].
 * @throws UsageError `write.crs` for what the convention has no attribute for
 */
export function gridMapping(crs: CrsDescription): GridMapping {
  const { datum, projection } = crs;
  const { semiMajorM, inverseFlattening, name } = datum.ellipsoid;
  const figure =
    inverseFlattening === 0
      ? { earth_radius: semiMajorM }
      : { semi_major_axis: semiMajorM, inverse_flattening: inverseFlattening };
  const common = {
    ...figure,
    longitude_of_prime_meridian: 0,
    prime_meridian_name: 'Greenwich',
    reference_ellipsoid_name: name,
    horizontal_datum_name: datum.name,
    geographic_crs_name: datum.geographicName,
  };
  if (!projection) return { grid_mapping_name: 'latitude_longitude', ...common, crs_wkt: crsWkt(crs) };
  return {
    ...projectionAttributes(projection),
    false_easting: projection.falseEastingM,
    false_northing: projection.falseNorthingM,
    ...common,
    projected_crs_name: crs.name,
    crs_wkt: crsWkt(crs),
  };
}

function projectionAttributes(p: MapProjection): GridMapping {
  const centre = { longitude_of_projection_origin: p.originLonDeg, latitude_of_projection_origin: p.originLatDeg };
  const meridian = { longitude_of_central_meridian: p.originLonDeg, latitude_of_projection_origin: p.originLatDeg };
  switch (p.method) {
    case 'transverse-mercator':
      return { grid_mapping_name: 'transverse_mercator', scale_factor_at_central_meridian: p.scale, ...meridian };
    case 'mercator':
    case 'pseudo-mercator': {
      const true_at =
        p.parallel1Deg === null
          ? { scale_factor_at_projection_origin: p.scale }
          : { standard_parallel: p.parallel1Deg };
      return { grid_mapping_name: 'mercator', longitude_of_projection_origin: p.originLonDeg, ...true_at };
    }
    case 'lambert-conformal-1':
      if (p.scale !== 1)
        throw new UsageError(
          'write.crs',
          'CF has no attribute for the scale factor of a conformal conic projection; give two standard parallels (+lat_1, +lat_2)',
        );
      return { grid_mapping_name: 'lambert_conformal_conic', standard_parallel: p.originLatDeg, ...meridian };
    case 'lambert-conformal-2':
      return {
        grid_mapping_name: 'lambert_conformal_conic',
        standard_parallel: [p.parallel1Deg ?? 0, p.parallel2Deg ?? 0],
        ...meridian,
      };
    case 'albers':
      return {
        grid_mapping_name: 'albers_conical_equal_area',
        standard_parallel: [p.parallel1Deg ?? 0, p.parallel2Deg ?? 0],
        ...meridian,
      };
    case 'lambert-azimuthal':
      return { grid_mapping_name: 'lambert_azimuthal_equal_area', ...centre };
    case 'azimuthal-equidistant':
      return { grid_mapping_name: 'azimuthal_equidistant', ...centre };
    case 'oblique-stereographic':
      return { grid_mapping_name: 'stereographic', ...centre, scale_factor_at_projection_origin: p.scale };
    case 'polar-stereographic': {
      const true_at =
        p.parallel1Deg === null
          ? { scale_factor_at_projection_origin: p.scale }
          : { standard_parallel: p.parallel1Deg };
      return {
        grid_mapping_name: 'polar_stereographic',
        straight_vertical_longitude_from_pole: p.originLonDeg,
        latitude_of_projection_origin: p.originLatDeg,
        ...true_at,
      };
    }
    case 'cylindrical-equal-area':
      return {
        grid_mapping_name: 'lambert_cylindrical_equal_area',
        longitude_of_central_meridian: p.originLonDeg,
        standard_parallel: p.parallel1Deg ?? 0,
      };
    case 'sinusoidal':
      return { grid_mapping_name: 'sinusoidal', longitude_of_projection_origin: p.originLonDeg };
  }
}
