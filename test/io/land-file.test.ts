import { mkdtemp, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { writeArrayBuffer } from 'geotiff';
import { beforeAll, describe, expect, it } from 'vitest';
import { readLand, worldLand } from '../../src/io/land-file.js';
import { readRoughness } from '../../src/io/roughness-file.js';
import { roughnessOn } from '../../src/land/roughness-raster.js';
import { gridOver } from '../../src/swath/grid.js';
import { landGrid } from '../../src/swath/surface.js';

let folder = '';
const file = async (name: string, content: string | Uint8Array): Promise<string> => {
  const path = join(folder, name);
  await writeFile(path, content);
  return path;
};
const tiff = (values: readonly number[], extra: Record<string, unknown> = {}): Uint8Array =>
  new Uint8Array(
    writeArrayBuffer(Float32Array.from(values), {
      height: 2,
      width: values.length / 2,
      GeographicTypeGeoKey: 4326,
      GTModelTypeGeoKey: 2,
      ModelPixelScale: [1, 1, 0],
      ModelTiepoint: [0, 0, 0, 10, 22, 0],
      BitsPerSample: [32],
      SampleFormat: [3],
      ...extra,
    }) as ArrayBuffer,
  );

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'galewake-land-'));
});

describe('land files', () => {
  it('are read, and recorded with their checksum', async () => {
    const ring = [
      [0, 0],
      [1, 0],
      [1, 1],
      [0, 0],
    ];
    const { land, record } = await readLand(
      await file('isle.geojson', JSON.stringify({ type: 'Polygon', coordinates: [ring] })),
    );
    expect(land.isLand({ lonDeg: 0.8, latDeg: 0.3 })).toBe(true);
    expect(record).toEqual({ name: 'isle.geojson', sha256: expect.stringMatching(/^[0-9a-f]{64}$/) });
  });

  it.each([
    ['no.geojson', null, /no\.geojson: there is no such file/],
    ['broken.geojson', '{"type": "Poly', /broken\.geojson: this is no JSON .*GeoJSON with polygons/],
    ['points.geojson', '{"type":"Point","coordinates":[1,2]}', /points\.geojson.*polygon/],
    [
      'metres.geojson',
      '{"type":"Polygon","coordinates":[[[500000,4000000],[510000,4000000],[510000,4010000],[500000,4000000]]]}',
      /metres\.geojson.*(degrees|WGS 84)/,
    ],
    [
      'crs.geojson',
      '{"type":"FeatureCollection","crs":{"type":"name","properties":{"name":"urn:ogc:def:crs:EPSG::32617"}},"features":[]}',
      /crs\.geojson.*32617/,
    ],
    [
      'crossed.geojson',
      '{"type":"Polygon","coordinates":[[[-45,28],[-44,29],[-44,28],[-45,29],[-45,28]]]}',
      /crossed\.geojson: its rings enclose no area.*crosses itself/,
    ],
    ['empty.geojson', '{"type":"FeatureCollection","features":[]}', /empty\.geojson: no polygon in it/],
  ])('%s is refused with its name and the remedy', async (name, content, message) => {
    const path = content === null ? join(folder, name) : await file(name, content);
    await expect(readLand(path)).rejects.toThrow(message);
  });

  it('of the world are kept once they are read', () => {
    expect(worldLand('50m')).toBe(worldLand('50m'));
  });
});

describe('roughness files', () => {
  it('give the mean logarithm on any grid, and what is known', async () => {
    const { raster } = await readRoughness(await file('z0.tif', tiff([0.1, 1, -1, 0.1])));
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [10, 20, 12, 22], cell: 2 });
    const { lnZ0, known } = roughnessOn(landGrid(grid), raster);
    // identity: three of four pixels; ln z₀ is averaged
    expect(known[0]).toBeCloseTo(0.75, 6);
    expect(lnZ0[0]).toBeCloseTo((2 * Math.log(0.1) + Math.log(1)) / 3, 6);
    const elsewhere = roughnessOn(landGrid(gridOver({ crs: 'EPSG:4326', bounds: [-50, 0, -48, 2], cell: 2 })), raster);
    expect(elsewhere.known[0]).toBe(0);
  });

  it('may hold classes that a table maps', async () => {
    const classes = await file('classes.csv', 'class,z0_m\n7,0.5\n9,0.0002\n');
    const { raster, records } = await readRoughness(await file('cover.tif', tiff([7, 9, 7, 3])), { classes });
    expect([...raster.lnZ0]).toEqual([
      expect.closeTo(Math.log(0.5), 5),
      expect.closeTo(Math.log(0.0002), 5),
      expect.closeTo(Math.log(0.5), 5),
      Number.NaN,
    ]);
    expect(records.map(({ name }) => name)).toEqual(['cover.tif', 'classes.csv']);
  });

  it('are refused with their names and the remedy', async () => {
    await expect(readRoughness(join(folder, 'none.tif'))).rejects.toThrow(/none\.tif: there is no such file/);
    await expect(readRoughness(await file('text.tif', 'not a raster'))).rejects.toThrow(
      /text\.tif: this is no GeoTIFF/,
    );
    await expect(readRoughness(await file('classes.tif', tiff([41, 42, 41, 42])))).rejects.toThrow(
      /classes\.tif: a roughness length of 41 m in row 1, column 1.*--roughness-classes/,
    );
    await expect(
      readRoughness(await file('nowhere.tif', tiff([1, 1, 1, 1], { GeographicTypeGeoKey: 32767 }))),
    ).rejects.toThrow(/nowhere\.tif: it does not say its coordinate reference system.*gdal_translate/);
    await expect(
      readRoughness(await file('odd.tif', tiff([1, 1, 1, 1], { GeographicTypeGeoKey: 4999 }))),
    ).rejects.toThrow(/odd\.tif: its coordinate reference system EPSG:4999 is not known here; reproject/);
    await expect(
      readRoughness(await file('metres.tif', tiff([1, 1, 1, 1], { ModelTiepoint: [0, 0, 0, 500_000, 3_000_000, 0] }))),
    ).rejects.toThrow(/metres\.tif: its latitudes run from .* not degrees as it says; write the reference system/);
    await expect(readRoughness(await file('sea.tif', tiff([0, 0, 0, 0])))).rejects.toThrow(
      /sea\.tif: it holds no roughness/,
    );
    await expect(
      readRoughness(await file('cover2.tif', tiff([1, 1, 1, 1])), { classes: await file('odd.csv', 'a,b\n1,2\n') }),
    ).rejects.toThrow(/odd\.csv: the table of classes has the headings class,z0_m/);
    await expect(
      readRoughness(await file('cover3.tif', tiff([1, 1, 1, 1])), {
        classes: await file('high.csv', 'class,z0_m\n1,12\n'),
      }),
    ).rejects.toThrow(/high\.csv, line 2: '1,12'/);
  });
});
