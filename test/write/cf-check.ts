import { type Attribute, type Dataset, FS, File as Hdf5File, ready } from 'h5wasm';

/** Standard names in use with their canonical units [CF standard name table; from memory], and the units that are equal to them. */
const STANDARD_NAMES: Readonly<Record<string, readonly string[]>> = {
  latitude: ['degrees_north'],
  longitude: ['degrees_east'],
  projection_x_coordinate: ['m'],
  projection_y_coordinate: ['m'],
  height: ['m'],
  time: ['s'],
  wind_speed: ['m s-1'],
  wind_speed_of_gust: ['m s-1'],
  wind_from_direction: ['degree'],
};
const UNITS = /^(degrees_north|degrees_east|degree|m|m s-1|s|h|1|year|seconds since \d{4}-\d\d-\d\d \d\d:\d\d:\d\d)$/;
const NAME = /^[A-Za-z][A-Za-z0-9_]*$/;
const METHOD = '(?:point|sum|maximum|mean|minimum)';

/** What CF appendix F demands of each grid mapping that the writer knows. */
const GRID_MAPPINGS: Readonly<Record<string, readonly (string | readonly string[])[]>> = {
  latitude_longitude: [],
  transverse_mercator: [
    'scale_factor_at_central_meridian',
    'longitude_of_central_meridian',
    'latitude_of_projection_origin',
    'false_easting',
    'false_northing',
  ],
  mercator: [
    'longitude_of_projection_origin',
    ['standard_parallel', 'scale_factor_at_projection_origin'],
    'false_easting',
    'false_northing',
  ],
  lambert_conformal_conic: [
    'standard_parallel',
    'longitude_of_central_meridian',
    'latitude_of_projection_origin',
    'false_easting',
    'false_northing',
  ],
  lambert_azimuthal_equal_area: [
    'longitude_of_projection_origin',
    'latitude_of_projection_origin',
    'false_easting',
    'false_northing',
  ],
  polar_stereographic: [
    'straight_vertical_longitude_from_pole',
    'latitude_of_projection_origin',
    ['standard_parallel', 'scale_factor_at_projection_origin'],
    'false_easting',
    'false_northing',
  ],
};

export interface CfVariable {
  readonly name: string;
  readonly dimensions: readonly string[];
  readonly shape: readonly number[];
  readonly type: string;
  readonly attributes: Readonly<Record<string, { readonly value: unknown; readonly type: string }>>;
  readonly values: ArrayLike<number>;
}

export interface CfFile {
  readonly attributes: Readonly<Record<string, { readonly value: unknown; readonly type: string }>>;
  readonly dimensions: Readonly<Record<string, number>>;
  readonly variables: readonly CfVariable[];
}

const HIDDEN = new Set([
  'CLASS',
  'NAME',
  'DIMENSION_LIST',
  'REFERENCE_LIST',
  '_Netcdf4Dimid',
  '_NCProperties',
  '_Netcdf4Coordinates',
]);
let files = 0;

/** A netCDF-4 file as its dimensions, variables and attributes. */
export async function readNetcdf(bytes: Uint8Array): Promise<CfFile> {
  await ready;
  const path = `check-${++files}.nc`;
  FS!.writeFile(path, bytes);
  const file = new Hdf5File(path, 'r');
  try {
    const attributesOf = (attrs: Record<string, Attribute>): CfFile['attributes'] =>
      Object.fromEntries(
        Object.entries(attrs)
          .filter(([name]) => !HIDDEN.has(name))
          .map(([name, attribute]) => {
            const { value } = attribute;
            const single =
              ArrayBuffer.isView(value) && (value as Float64Array).length === 1 ? (value as Float64Array)[0] : value;
            return [name, { value: single, type: String(attribute.dtype) }];
          }),
      );
    const dimensions: Record<string, number> = {};
    const variables: CfVariable[] = [];
    for (const name of file.keys()) {
      const dataset = file.get(name) as Dataset;
      const scale = dataset.get_scale_name();
      if (scale !== null) dimensions[name] = dataset.shape![0]!;
      if (scale?.startsWith('This is a netCDF dimension but not a netCDF variable.')) continue;
      const shape = dataset.shape ?? [];
      const own =
        scale === null ? shape.map((_, i) => dataset.get_attached_scales(i)[0]?.replace(/^\//, '') ?? '?') : [name];
      variables.push({
        name,
        dimensions: own,
        shape,
        type: String(dataset.dtype),
        attributes: attributesOf(dataset.attrs),
        values: flat(dataset.value),
      });
    }
    return { attributes: attributesOf(file.attrs), dimensions, variables };
  } finally {
    file.close();
    FS!.unlink(path);
  }
}

const flat = (value: unknown): ArrayLike<number> =>
  ArrayBuffer.isView(value) ? (value as Float64Array) : [value as number];

/** Checks a file against the rules of CF-1.11, attribute by attribute; returns what is wrong. */
export function cfFaults(file: CfFile): string[] {
  const faults: string[] = [];
  const say = (condition: boolean, fault: string): void => {
    if (!condition) faults.push(fault);
  };
  const text = (owner: CfFile | CfVariable, name: string): string | undefined => {
    const value = owner.attributes[name]?.value;
    return typeof value === 'string' ? value : undefined;
  };
  const find = (name: string): CfVariable | undefined => file.variables.find((one) => one.name === name);

  // 2.6: description of the file
  say(text(file, 'Conventions') === 'CF-1.11', 'global: Conventions is not CF-1.11');
  for (const name of ['title', 'history', 'source', 'references', 'comment'])
    say((text(file, name) ?? '') !== '', `global: no ${name}`);

  const bounds = new Set(file.variables.flatMap((one) => text(one, 'bounds') ?? []));
  const mappings = new Set(file.variables.flatMap((one) => text(one, 'grid_mapping') ?? []));
  const auxiliary = new Set(file.variables.flatMap((one) => text(one, 'coordinates')?.split(' ') ?? []));

  for (const one of file.variables) {
    const { name } = one;
    const isBounds = bounds.has(name);
    const isMapping = mappings.has(name);
    const isCoordinate = one.dimensions[0] === name || auxiliary.has(name);
    // 2.3, 2.4: names; every dimension known and of the right size; order T, Z, Y, X
    say(NAME.test(name), `${name}: not a name`);
    one.dimensions.forEach((dimension, i) => {
      say(
        file.dimensions[dimension] === one.shape[i],
        `${name}: dimension ${dimension} is not declared with this size`,
      );
    });
    const order = one.dimensions
      .map((dimension) => 'TZYX'.indexOf(text(find(dimension) ?? one, 'axis') ?? '?'))
      .filter((at) => at >= 0);
    if (!isBounds)
      say(
        order.every((at, i) => i === 0 || at > order[i - 1]!),
        `${name}: dimensions are not in the order T, Z, Y, X`,
      );

    // 3.1–3.3: units, long_name, standard_name
    const units = text(one, 'units');
    const standard = text(one, 'standard_name');
    if (!isBounds && !isMapping) {
      say(units !== undefined, `${name}: no units`);
      say(
        standard !== undefined || text(one, 'long_name') !== undefined,
        `${name}: neither standard_name nor long_name`,
      );
    }
    if (units !== undefined) say(UNITS.test(units), `${name}: units '${units}' are not known`);
    if (standard !== undefined) {
      const canonical = STANDARD_NAMES[standard];
      say(canonical !== undefined, `${name}: standard_name '${standard}' is not known`);
      const plain = units?.startsWith('seconds since') ? 's' : units;
      if (canonical && plain !== undefined)
        say(canonical.includes(plain), `${name}: units '${units}' do not fit ${standard}`);
    }

    // 2.5.1: missing data only of the variable's type, and none in a coordinate
    const fill = one.attributes['_FillValue'];
    if (fill) {
      say(fill.type === one.type, `${name}: _FillValue is ${fill.type}, the variable ${one.type}`);
      say(one.dimensions[0] !== name, `${name}: a coordinate with _FillValue`);
    }
    if (isCoordinate || isBounds) {
      const values = Array.from(one.values);
      say(values.every(Number.isFinite), `${name}: missing values in a coordinate`);
      if (one.dimensions[0] === name) {
        const sign = Math.sign((values[1] ?? 1) - (values[0] ?? 0));
        say(
          values.every((value, i) => i === 0 || Math.sign(value - values[i - 1]!) === sign),
          `${name}: not monotonic`,
        );
      }
    }

    // 4: coordinates
    const axis = text(one, 'axis');
    if (axis !== undefined) say(/^[TZYX]$/.test(axis), `${name}: axis '${axis}'`);
    if (axis === 'Z') say(/^(up|down)$/.test(text(one, 'positive') ?? ''), `${name}: vertical, without positive`);
    if (units?.includes('since'))
      say(
        /^(standard|gregorian|proleptic_gregorian|utc)$/.test(text(one, 'calendar') ?? ''),
        `${name}: time without calendar`,
      );
    // an axis of neither space nor time has no letter
    if (one.dimensions[0] === name) say(axis !== undefined || units === 'year', `${name}: a coordinate without axis`);

    // 5: auxiliary coordinates and grid mapping
    for (const other of text(one, 'coordinates')?.split(' ') ?? []) {
      const coordinate = find(other);
      say(coordinate !== undefined, `${name}: coordinates names ${other}, which is not there`);
      say(
        coordinate?.dimensions.every((dimension) => one.dimensions.includes(dimension)) ?? true,
        `${name}: ${other} has other dimensions`,
      );
    }
    const mapping = text(one, 'grid_mapping');
    if (mapping !== undefined)
      say(find(mapping) !== undefined, `${name}: grid_mapping names ${mapping}, which is not there`);
    const horizontal = one.dimensions.length >= 2 && !isBounds && !auxiliary.has(name);
    if (horizontal) say(mapping !== undefined, `${name}: no grid_mapping`);
    if (isMapping) {
      const kind = text(one, 'grid_mapping_name') ?? '';
      const needs = GRID_MAPPINGS[kind];
      say(needs !== undefined, `${name}: grid_mapping_name '${kind}' is not known`);
      for (const need of needs ?? []) {
        const any = typeof need === 'string' ? [need] : need;
        say(
          any.some((attribute) => one.attributes[attribute] !== undefined),
          `${name}: no ${any.join(' or ')}`,
        );
      }
      const figure =
        one.attributes['earth_radius'] ?? one.attributes['inverse_flattening'] ?? one.attributes['semi_minor_axis'];
      say(figure !== undefined, `${name}: no figure of the Earth`);
      say(/^(GEOGCRS|PROJCRS)\[/.test(text(one, 'crs_wkt') ?? ''), `${name}: no crs_wkt`);
    }
    // true latitude and longitude stand beside projected coordinates
    if (horizontal && one.dimensions.includes('x')) {
      const standards = (text(one, 'coordinates') ?? '')
        .split(' ')
        .map((other) => text(find(other) ?? one, 'standard_name'));
      say(
        standards.includes('latitude') && standards.includes('longitude'),
        `${name}: projected, without latitude and longitude`,
      );
    }

    // 7.1: bounds
    const edge = text(one, 'bounds');
    if (edge !== undefined) {
      const box = find(edge);
      say(box !== undefined, `${name}: bounds names ${edge}, which is not there`);
      if (box) {
        say(
          box.dimensions[0] === one.dimensions[0] && box.shape.at(-1) === 2,
          `${edge}: not the dimensions of ${name} and 2`,
        );
        for (const shared of ['units', 'calendar', 'standard_name']) {
          const own = text(box, shared);
          say(own === undefined || own === text(one, shared), `${edge}: ${shared} differs from that of ${name}`);
        }
        const values = Array.from(one.values);
        const inside = values.every((value, i) => {
          const ends = [box.values[2 * i]!, box.values[2 * i + 1]!];
          return value >= Math.min(...ends) && value <= Math.max(...ends);
        });
        say(inside, `${edge}: does not contain ${name}`);
      }
    }

    // 7.3: cell methods
    const methods = text(one, 'cell_methods');
    if (methods !== undefined) {
      say(
        new RegExp(`^([a-z_]+: )+${METHOD}( \\([^()]+\\))?( ([a-z_]+: )+${METHOD}( \\([^()]+\\))?)*$`).test(methods),
        `${name}: cell_methods '${methods}'`,
      );
      const bare = methods.replace(/\([^()]*\)/g, '');
      for (const [, axisName] of bare.matchAll(/([a-z_]+):/g)) {
        say(
          axisName === 'area' || one.dimensions.includes(axisName!) || STANDARD_NAMES[axisName!] !== undefined,
          `${name}: cell_methods name ${axisName}`,
        );
      }
    } else if (horizontal) say(false, `${name}: no cell_methods`);
  }
  return faults;
}
