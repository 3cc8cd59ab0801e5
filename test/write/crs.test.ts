import proj4 from 'proj4';
import { describe, expect, it } from 'vitest';
import { UsageError } from '../../src/errors.js';
import { projection } from '../../src/swath/grid.js';
import { describeCrs } from '../../src/write/crs.js';
import { gridMapping } from '../../src/write/crs-cf.js';
import { geoKeys } from '../../src/write/crs-geokeys.js';
import { crsWkt } from '../../src/write/crs-wkt.js';

/** systems that every format describes, each with a place in its domain */
const SYSTEMS: readonly (readonly [crs: string, lonDeg: number, latDeg: number])[] = [
  ['EPSG:3857', 150, -20],
  ['EPSG:32617', -79, 25],
  ['EPSG:32760', 178, -17],
  ['EPSG:3995', 30, 72],
  ['EPSG:3031', -100, -66],
  ['EPSG:5041', 30, 82],
  ['EPSG:5042', -100, -84],
  ['EPSG:6933', 120, 15],
  ['+proj=utm +zone=17 +datum=NAD83', -79, 25],
  ['+proj=tmerc +lat_0=10 +lon_0=-75 +k=0.9999 +x_0=1000 +y_0=2000 +datum=WGS84', -73, 14],
  ['+proj=merc +lon_0=150 +lat_ts=20 +datum=WGS84', 155, 24],
  ['+proj=merc +lon_0=150 +k=0.9 +datum=WGS84', 155, 24],
  ['+proj=lcc +lat_1=20 +lat_2=40 +lat_0=30 +lon_0=-80 +x_0=100 +y_0=500 +datum=WGS84', -75, 28],
  ['+proj=lcc +lat_1=25 +lat_0=25 +lon_0=-95 +datum=WGS84', -90, 28],
  ['+proj=laea +lat_0=-18 +lon_0=175 +x_0=5 +datum=WGS84', 179, -14],
  ['+proj=aea +lat_1=29.5 +lat_2=45.5 +lat_0=23 +lon_0=-96 +datum=NAD83', -90, 30],
  ['+proj=aeqd +lat_0=25 +lon_0=-75 +R=6371008.8', -72, 29],
  ['+proj=stere +lat_0=90 +lat_ts=60 +lon_0=-45 +R=6371200', -50, 65],
  ['+proj=stere +lat_0=-90 +k=0.98 +lon_0=10 +datum=WGS84', 20, -70],
  ['+proj=stere +lat_0=25 +lon_0=-75 +k=0.99 +R=6371200', -72, 29],
  ['+proj=cea +lat_ts=15 +lon_0=-60 +datum=WGS84', -55, 20],
  ['+proj=sinu +lon_0=-60 +R=6371000', -55, 20],
];
/** proj4 does not know the method names of these in well-known text, or takes them for another */
const NOT_READ = /6933|=cea|=aeqd|=merc .*lat_ts|=stere .*lat_0=25/;

describe('a coordinate reference system', () => {
  it.each([
    ['EPSG:4326', 4326, 'WGS 84'],
    ['epsg:4326', 4326, 'WGS 84'],
    ['OGC:CRS84', 4326, 'WGS 84'],
    ['EPSG:4269', 4269, 'NAD83'],
    ['EPSG:3857', 3857, 'WGS 84 / Pseudo-Mercator'],
    ['EPSG:900913', 3857, 'WGS 84 / Pseudo-Mercator'],
    ['EPSG:32701', 32701, 'WGS 84 / UTM zone 1S'],
    ['EPSG:6933', 6933, 'WGS 84 / NSIDC EASE-Grid 2.0 Global'],
    ['+proj=utm +zone=17 +datum=WGS84', 32617, 'WGS 84 / UTM zone 17N'],
    ['+proj=longlat +datum=WGS84 +no_defs', 4326, 'WGS 84'],
  ])('%s is EPSG:%i', (crs, epsg, name) => expect(describeCrs(crs)).toMatchObject({ epsg, name }));

  it.each(SYSTEMS)('%s has keys, a grid mapping and well-known text', (crs) => {
    const described = describeCrs(crs);
    const { directory, doubles, ascii } = geoKeys(described);
    const keys = new Map<number, number[]>();
    for (let i = 4; i < directory.length; i += 4) keys.set(directory[i]!, directory.slice(i + 1, i + 4));
    // identity: the directory counts its entries, they rise, and they point into the other tags
    expect(directory.slice(0, 4)).toEqual([1, 1, 1, keys.size]);
    expect([...keys.keys()]).toEqual([...keys.keys()].sort((a, b) => a - b));
    for (const [tag, count, value] of keys.values() as Iterable<[number, number, number]>) {
      if (tag === 34736) expect(value + count).toBeLessThanOrEqual(doubles.length);
      if (tag === 34737) expect(ascii[value + count - 1]).toBe('|');
    }
    expect(keys.get(3072)?.[2]).toBe(described.epsg ?? 32767);
    expect(gridMapping(described)['grid_mapping_name']).toMatch(/^[a-z_]+$/);
    const wkt = crsWkt(described);
    const depth = [...wkt].reduce((sum, c) => sum + (c === '[' ? 1 : c === ']' ? -1 : 0), 0);
    expect(depth).toBe(0);
  });

  // independent: proj4 reads the well-known text and projects as from the proj string
  it.each(SYSTEMS.filter(([crs]) => !NOT_READ.test(crs)))('%s means the same as well-known text', (crs, lon, lat) => {
    const [x, y] = projection(crs).forward(lon, lat);
    const [wx, wy] = proj4('EPSG:4326', crsWkt(describeCrs(crs)), [lon, lat]) as [number, number];
    expect(Math.abs(wx - x)).toBeLessThan(1e-3);
    expect(Math.abs(wy - y)).toBeLessThan(1e-3);
  });

  it.each([
    ['EPSG:2154', 'not known'],
    ['nonsense', 'not known'],
    ['+proj=omerc +lat_0=4 +alpha=3', '+alpha'],
    ['+proj=robin', "'robin'"],
    ['+lat_0=4', 'names no projection'],
    ['+proj=merc +units=us-ft', 'metre'],
    ['+proj=tmerc +towgs84=1,2,3', 'datum'],
    ['+proj=tmerc +pm=paris', 'Greenwich'],
    ['+proj=tmerc +datum=potsdam', 'potsdam'],
    ['+proj=tmerc +ellps=none', 'none'],
    ['+proj=tmerc +R=-5', 'positive'],
    ['+proj=tmerc +lon_0=east', 'not a number'],
    ['+proj=utm +zone=61', '60'],
    ['+proj=merc +lat_0=10', 'equator'],
    ['+proj=stere +lat_0=90 +lat_ts=60 +k=0.9', 'not both'],
    ['+proj=lcc +lat_1=30 +lat_0=20', 'lat_1'],
  ])('%s is refused, with what works', (crs, why) => {
    expect(() => describeCrs(crs)).toThrow(UsageError);
    expect(() => describeCrs(crs)).toThrow(why);
    expect(() => describeCrs(crs)).toThrow('EPSG:4326');
  });

  it('without a CF attribute for its scale factor is refused there only', () => {
    const crs = describeCrs('+proj=lcc +lat_1=25 +lat_0=25 +lon_0=-95 +k_0=0.99 +ellps=clrk66');
    expect(() => gridMapping(crs)).toThrow(UsageError);
    expect(geoKeys(crs).directory.length).toBeGreaterThan(20);
  });
});
