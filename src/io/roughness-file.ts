import { basename } from 'node:path';
import { InputError } from '../errors.js';
import type { RoughnessRaster } from '../land/roughness-raster.js';
import { projection } from '../swath/grid.js';
import { type InputRecord, readInputBytes, readInputText, sha256Hex } from './input.js';

/** Roughness lengths that a raster may hold, m: the log law at 10 m takes no more. */
const LENGTHS_M = [1e-6, 9] as const;

/**
 * A raster of roughness: a GeoTIFF of z₀ in metres, or of land-cover classes with a table that maps them.
 * Values at or below zero, no-data values and classes that the table maps to nothing are not known.
 * @param classes CSV with the headings `class` and `z0_m`
 * @throws InputError `io.missing`, `io.read`, `roughness.*`
 */
export async function readRoughness(
  path: string,
  { classes }: { classes?: string } = {},
): Promise<{ raster: RoughnessRaster; records: readonly InputRecord[] }> {
  const bytes = await readInputBytes(path);
  const name = basename(path);
  const table = classes === undefined ? null : await readClasses(classes);
  const { fromArrayBuffer } = await import('geotiff');
  const wrong = (code: string, why: string, cause?: unknown): never => {
    throw new InputError(`roughness.${code}`, `${name}: ${why}`, { cause });
  };
  const opened = await openImage().catch((cause: unknown) =>
    wrong('raster', 'this is no GeoTIFF that can be read; give a GeoTIFF of z₀ in metres or of classes', cause),
  );
  const { image, values } = opened;
  const keys = image.getGeoKeys() as { ProjectedCSTypeGeoKey?: number; GeographicTypeGeoKey?: number } | null;
  const code = keys?.ProjectedCSTypeGeoKey ?? keys?.GeographicTypeGeoKey;
  if (!keys || code === undefined || code === 32767)
    wrong(
      'crs',
      'it does not say its coordinate reference system by an EPSG code; write one, for instance with gdal_translate -a_srs',
    );
  const { forward, geographic } = planeOf(code!);
  const bounds = boundsOf();
  const noData = image.getGDALNoData();
  const lnZ0 = new Float32Array(values.length).fill(Number.NaN);
  let known = 0;
  for (let k = 0; k < values.length; k++) {
    const value = Number(values[k]);
    if (value === noData || Number.isNaN(value)) continue;
    const z0 = table ? (table.lengths.get(value) ?? Number.NaN) : value;
    if (!(z0 > 0)) continue;
    if (z0 < LENGTHS_M[0] || z0 > LENGTHS_M[1])
      wrong(
        'length',
        `a roughness length of ${z0} m in row ${Math.trunc(k / image.getWidth()) + 1}, column ${(k % image.getWidth()) + 1}; lengths lie between ${LENGTHS_M[0]} and ${LENGTHS_M[1]} m${table ? '' : '; for land-cover classes give a table with --roughness-classes'}`,
      );
    lnZ0[k] = Math.log(z0);
    known++;
  }
  if (known === 0)
    wrong('empty', table ? 'none of its classes is in the table' : 'it holds no roughness length above zero');
  return {
    raster: { nx: image.getWidth(), ny: image.getHeight(), bounds, lnZ0, forward, geographic },
    records: [{ name, sha256: sha256Hex(bytes) }, ...(table ? [table.record] : [])],
  };

  async function openImage() {
    const tiff = await fromArrayBuffer(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer,
    );
    const first = await tiff.getImage();
    const [band] = (await first.readRasters({ samples: [0] })) as unknown as ArrayLike<number>[];
    return { image: first, values: band! };
  }

  function planeOf(epsg: number): Pick<RoughnessRaster, 'forward' | 'geographic'> {
    try {
      return projection(`EPSG:${epsg}`);
    } catch (cause) {
      return wrong(
        'crs',
        `its coordinate reference system EPSG:${epsg} is not known here; reproject it to EPSG:4326`,
        cause,
      );
    }
  }

  function boundsOf(): [number, number, number, number] {
    const box = image.getBoundingBox() as [number, number, number, number];
    if (box.some((edge) => !Number.isFinite(edge)) || box[0] === box[2])
      wrong(
        'place',
        'it does not say where it lies; write its georeference, for instance with gdal_translate -a_ullr W N E S',
      );
    if (geographic && (box[1] < -90.5 || box[3] > 90.5))
      wrong(
        'place',
        `its latitudes run from ${box[1]} to ${box[3]}; its coordinates are not degrees as it says; write the reference system that they are in, for instance with gdal_translate -a_srs EPSG:32617`,
      );
    return box;
  }
}

async function readClasses(path: string): Promise<{ lengths: ReadonlyMap<number, number>; record: InputRecord }> {
  const text = await readInputText(path);
  const name = basename(path);
  const [heading, ...lines] = text.split(/\r?\n/);
  const columns = (heading ?? '').split(',').map((word) => word.trim());
  const [classAt, lengthAt] = [columns.indexOf('class'), columns.indexOf('z0_m')];
  if (classAt < 0 || lengthAt < 0)
    throw new InputError('roughness.classes', `${name}: the table of classes has the headings class,z0_m`);
  const lengths = new Map<number, number>();
  for (const [i, line] of lines.entries()) {
    if (line.trim() === '') continue;
    const cells = line.split(',').map((cell) => cell.trim());
    const [code, z0] = [Number(cells[classAt]), Number(cells[lengthAt])];
    if (!Number.isInteger(code) || !(z0 >= LENGTHS_M[0] && z0 <= LENGTHS_M[1]))
      throw new InputError(
        'roughness.classes',
        `${name}, line ${i + 2}: '${line.trim()}'; give a whole number and a length of ${LENGTHS_M[0]}–${LENGTHS_M[1]} m, such as 12,0.1`,
      );
    lengths.set(code, z0);
  }
  if (lengths.size === 0) throw new InputError('roughness.classes', `${name}: no class in it`);
  return { lengths, record: { name, sha256: sha256Hex(text) } };
}
