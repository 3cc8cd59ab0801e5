import { describe, expect, it } from 'vitest';
import { LimitError } from '../../src/errors.js';
import { MOST_NETCDF_CELLS, peakNetcdf, peakNetcdfFile } from '../../src/write/netcdf.js';
import { type NetcdfFile, netcdfBytes } from '../../src/write/netcdf-file.js';
import { peakBands } from '../../src/write/peak-bands.js';
import { type CfFile, cfFaults, readNetcdf } from './cf-check.js';
import { exampleProvenance, exampleSwath } from './example-swath.js';

const options = { provenance: exampleProvenance };
const SYSTEMS: readonly (readonly [string, Parameters<typeof exampleSwath>[0]])[] = [
  ['degrees, across the antimeridian', {}],
  ['degrees, many cells', { nx: 300, ny: 280, cell: 0.05 }],
  ['a single cell', { nx: 1, ny: 1 }],
  ['UTM', { crs: 'EPSG:32760', west: 300_000, north: 8_000_000 }],
  ['Mercator of the web', { crs: 'EPSG:3857', west: 1_000_000, north: 3_000_000 }],
  ['polar stereographic', { crs: 'EPSG:3995', west: 300_000, north: -800_000 }],
  [
    'a conic of the user',
    { crs: '+proj=lcc +lat_1=20 +lat_2=40 +lat_0=30 +lon_0=-80 +datum=WGS84', west: 0, north: 0 },
  ],
];
const variable = (file: CfFile, name: string) => file.variables.find((one) => one.name === name)!;

describe('peak.nc', () => {
  it.each(SYSTEMS)('in %s keeps the CF conventions', async (_, grid) => {
    expect(cfFaults(await readNetcdf(await peakNetcdf(exampleSwath(grid), options)))).toEqual([]);
  });

  it.each(SYSTEMS)('in %s holds the fields to the last bit', async (_, grid) => {
    const swath = exampleSwath(grid);
    const file = await readNetcdf(await peakNetcdf(swath, options));
    for (const band of peakBands(swath)) {
      const { values, shape } = variable(file, band.name);
      expect(shape).toEqual([1, swath.grid.ny, swath.grid.nx]);
      expect(Buffer.from((values as Float32Array).buffer).equals(Buffer.from(band.values.buffer)), band.name).toBe(
        true,
      );
    }
  });

  it('says where, when and how', async () => {
    const swath = exampleSwath();
    const file = await readNetcdf(await peakNetcdf(swath, options));
    const value = (name: string, attribute: string): unknown => variable(file, name).attributes[attribute]?.value;
    expect(value('peak_wind', 'standard_name')).toBe('wind_speed');
    expect(value('peak_wind', 'averaging_period_s')).toBe(60);
    expect(value('peak_gust', 'averaging_period_s')).toBe(3);
    expect(value('hours_34kt', 'threshold_mps')).toBeCloseTo(17.4911, 4);
    expect(value('peak_time', 'units')).toBe('seconds since 2031-02-05 06:00:00');
    expect([...Array.from(variable(file, 'time_bnds').values)]).toEqual([0, (4 * 24 + 12) * 3600]);
    const [lat, lon] = [variable(file, 'lat').values, variable(file, 'lon').values];
    expect(lat[0]).toBeCloseTo(-10.15, 9);
    expect(lon[0]).toBeCloseTo(170.15, 9);
    expect(lon[69]).toBeCloseTo(190.85, 9);
    const item = (name: string): unknown => file.attributes[name]?.value;
    expect(item('title')).toBe('Peak wind and gust of tropical cyclone Ærin & <b> (EX012031)');
    expect(JSON.parse(String(item('recipe')))).toEqual(exampleProvenance.recipe);
    expect(item('input_sha256')).toBe(`${'ab'.repeat(32)}  storm.csv`);
    expect(item('comment')).toContain('no warning service');
    expect(item('cautions')).toBe('made up');
  });

  it('is the same whenever it is written', async () => {
    const first = await peakNetcdf(exampleSwath(), options);
    // times in the file count seconds
    await new Promise((done) => setTimeout(done, 1100));
    const second = await peakNetcdf(exampleSwath(), options);
    expect(Buffer.from(first).equals(Buffer.from(second))).toBe(true);
    expect(Date.now()).toBeGreaterThan(1e12);
  });

  it('is refused when it would not fit, before anything is made', async () => {
    const swath = exampleSwath();
    const huge = { ...swath, grid: { ...swath.grid, nx: MOST_NETCDF_CELLS, ny: 2 } };
    await expect(async () => peakNetcdf(huge, options)).rejects.toThrow(LimitError);
  });
});

describe('the check of the conventions', () => {
  const good = (): NetcdfFile => peakNetcdfFile(exampleSwath(), options);
  /** the file with the attributes of one variable (or of the file) changed; undefined takes one away */
  const changed = (name: string | null, attributes: Record<string, string | Float32Array | undefined>): NetcdfFile => {
    const file = good();
    const merge = (before: NetcdfFile['attributes']): NetcdfFile['attributes'] =>
      Object.fromEntries(
        Object.entries({ ...before, ...attributes }).flatMap(([key, value]) =>
          value === undefined ? [] : [[key, value]],
        ),
      );
    if (name === null) return { ...file, attributes: merge(file.attributes) };
    return {
      ...file,
      variables: file.variables.map((one) => (one.name === name ? { ...one, attributes: merge(one.attributes) } : one)),
    };
  };

  it.each([
    ['an older convention', null, { Conventions: 'CF-1.6' }, 'Conventions'],
    ['no history', null, { history: undefined }, 'history'],
    ['no units', 'peak_wind', { units: undefined }, 'no units'],
    ['unknown units', 'peak_wind', { units: 'knots!' }, 'not known'],
    ['units that do not fit', 'peak_wind', { units: 'm' }, 'do not fit'],
    ['an invented standard name', 'peak_wind', { standard_name: 'peak_wind_speed' }, 'standard_name'],
    ['no name at all', 'hours_34kt', { long_name: undefined }, 'neither'],
    ['a coordinate with a fill value', 'lat', { _FillValue: new Float32Array([0]) }, '_FillValue'],
    ['no bounds', 'lat', { bounds: 'nowhere' }, 'nowhere'],
    ['bounds of another coordinate', 'lat', { bounds: 'lon_bnds' }, 'lon_bnds'],
    ['no axis', 'lon', { axis: undefined }, 'axis'],
    ['no positive', 'height', { positive: undefined }, 'positive'],
    ['no calendar', 'peak_time', { calendar: undefined }, 'calendar'],
    ['a missing coordinate', 'peak_wind', { coordinates: 'height depth' }, 'depth'],
    ['no grid mapping', 'peak_wind', { grid_mapping: undefined }, 'grid_mapping'],
    ['an unknown grid mapping', 'crs', { grid_mapping_name: 'flat' }, 'flat'],
    ['a grid mapping without figure', 'crs', { inverse_flattening: undefined }, 'figure'],
    [
      'a grid mapping that lacks parameters',
      'crs',
      { grid_mapping_name: 'mercator' },
      'longitude_of_projection_origin',
    ],
    ['no well-known text', 'crs', { crs_wkt: undefined }, 'crs_wkt'],
    ['wrong cell methods', 'peak_wind', { cell_methods: 'greatest' }, 'cell_methods'],
    ['cell methods of no axis', 'peak_wind', { cell_methods: 'depth: maximum' }, 'depth'],
  ] as const)('finds %s', async (_, name, attributes, fault) => {
    const faults = cfFaults(await readNetcdf(await netcdfBytes(changed(name, attributes))));
    expect(faults.join('\n')).toContain(fault);
  });

  it('finds latitudes in disorder, values outside their bounds, and a field that lies on its side', async () => {
    const file = good();
    const disorder = file.variables.map((one) =>
      one.name === 'lat' ? { ...one, data: (one.data as Float64Array).map((_, i) => (i * 7) % 13) } : one,
    );
    const faults = cfFaults(await readNetcdf(await netcdfBytes({ ...file, variables: disorder })));
    expect(faults).toContain('lat: not monotonic');
    expect(faults).toContain('lat_bnds: does not contain lat');
    const turned = file.variables.map((one) =>
      one.name === 'peak_wind' ? { ...one, dimensions: ['lat', 'time', 'lon'] } : one,
    );
    expect(cfFaults(await readNetcdf(await netcdfBytes({ ...file, variables: turned }))).join('\n')).toContain(
      'order T, Z, Y, X',
    );
  });
});
