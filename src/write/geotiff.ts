import { UsageError } from '../errors.js';
import type { SurfaceMap } from '../land/surface-map.js';
import type { Grid } from '../swath/grid.js';
import type { Swath } from '../swath/swath.js';
import { describeCrs } from './crs.js';
import { geoKeys } from './crs-geokeys.js';
import { type Deflate, webDeflate } from './deflate.js';
import { predictedTile, TILE } from './float-predictor.js';
import { halved, type Level, type OverviewRule } from './overview.js';
import { peakBands, surfaceBands } from './peak-bands.js';
import { type Provenance, provenanceItems } from './provenance.js';
import { asciiField, headerBytes, type TiffField, tiffHeader } from './tiff-directory.js';
import { xmlAscii } from './xml.js';

/** One band of a raster: row 0 = north, index = row * nx + column, NaN = no data. */
export interface RasterBand {
  /** short name without spaces, as programs show it */
  readonly name: string;
  readonly unit: string;
  readonly values: Float32Array;
  readonly overview: OverviewRule;
  /** what the band means, in words */
  readonly description?: string;
  /** further items of the band, such as an averaging period */
  readonly items?: Readonly<Record<string, string>>;
}

export interface RasterInput {
  readonly grid: Grid;
  readonly bands: readonly RasterBand[];
  /** items of the whole file */
  readonly metadata?: Readonly<Record<string, string>>;
  readonly deflate?: Deflate;
  /** offsets of 8 bytes: by default only for a file above 4 GiB, which needs them */
  readonly bigTiff?: boolean;
}

/** Tiles that are in work at once: enough for the compressor's threads, few enough to bound the memory. */
const IN_WORK = 8;

/**
 * A Cloud Optimized GeoTIFF in pieces, to be written one after another [OgcCog2023, OgcGeotiff2019, Adobe1992]: every directory stands
 * first, then the tiles from the smallest overview to the full image; 32-bit floats, one plane a band, tiles of
 * 256 × 256, Deflate with the floating-point predictor, overviews by the rule of each band down to one tile, NaN as no
 * data, cells as areas.
 * @throws UsageError `write.crs` for a reference system that GeoTIFF keys cannot describe; `write.bands` for none, or
 * for one whose length is not that of the grid
 */
export async function cogChunks(input: RasterInput): Promise<Uint8Array[]> {
  const { grid, bands } = input;
  const deflate = input.deflate ?? webDeflate;
  const cells = grid.nx * grid.ny;
  const odd = bands.find((band) => band.values.length !== cells);
  if (bands.length === 0 || odd) {
    const why = odd
      ? `the band '${odd.name}' has ${odd.values.length} values, its grid ${cells}`
      : 'a raster needs a band';
    throw new UsageError('write.bands', why);
  }
  const keys = geoKeys(describeCrs(grid.crs));

  const rules = bands.map((band) => band.overview);
  const levels: { nx: number; ny: number; tiles: Uint8Array[] }[] = [];
  const pack = tilePacker(deflate);
  let level: Level = { nx: grid.nx, ny: grid.ny, bands: bands.map((band) => band.values) };
  for (;;) {
    levels.push({ nx: level.nx, ny: level.ny, tiles: await pack(level) });
    if (level.nx <= TILE && level.ny <= TILE) break;
    level = halved(level, rules);
  }

  const dataBytes = levels.reduce((sum, { tiles }) => sum + tiles.reduce((bytes, tile) => bytes + tile.length, 0), 0);
  const directories = (offsets: readonly (readonly number[])[], big: boolean): TiffField[][] =>
    levels.map((one, index) => [
      ...imageFields(one, { bands: bands.length, overview: index > 0 }),
      { tag: 324, type: big ? 'long8' : 'long', values: offsets[index]! },
      { tag: 325, type: 'long', values: one.tiles.map((tile) => tile.length) },
      ...(index === 0 ? geographicFields(grid, keys) : []),
      ...(index === 0 ? [asciiField(42112, metadataXml(bands, input.metadata ?? {}))] : []),
      asciiField(42113, 'nan'),
    ]);
  // the number of offsets is known and so is the size of the directories, before the offsets themselves
  const placeholders = levels.map(({ tiles }) => tiles.map(() => 0));
  const big = input.bigTiff ?? headerBytes(directories(placeholders, false), { big: false }) + dataBytes >= 2 ** 32;
  let at = headerBytes(directories(placeholders, big), { big });
  const offsets: number[][] = levels.map(() => []);
  const chunks: Uint8Array[] = [];
  for (let index = levels.length - 1; index >= 0; index--) {
    for (const tile of levels[index]!.tiles) {
      offsets[index]!.push(at);
      chunks.push(tile);
      at += tile.length;
    }
  }
  return [tiffHeader(directories(offsets, big), { big }), ...chunks];
}

/** {@link cogChunks} as one array. */
export async function cogBytes(input: RasterInput): Promise<Uint8Array> {
  const chunks = await cogChunks(input);
  const out = new Uint8Array(chunks.reduce((sum, chunk) => sum + chunk.length, 0));
  let at = 0;
  for (const chunk of chunks) {
    out.set(chunk, at);
    at += chunk.length;
  }
  return out;
}

/**
 * `peak.tif` in pieces. Bands: peak wind (m/s), peak gust (m/s), direction the wind blows from at the peak (degrees),
 * time of the peak (seconds after the first fix of the track), then hours at or above each wind of the swath; with a
 * surface also its share of land, its exposure class for the wind at the peak and its roughness length.
 * @throws UsageError `write.crs`
 */
export function peakTif(
  swath: Swath,
  options: { provenance: Provenance; deflate?: Deflate; surface?: SurfaceMap },
): Promise<Uint8Array[]> {
  const fields = [...peakBands(swath), ...(options.surface ? surfaceBands(swath, options.surface) : [])];
  const bands = fields.map(
    (band): RasterBand => ({
      name: band.name,
      unit: band.unit,
      values: band.values,
      overview: band.overview,
      description: band.description,
      items: band.items,
    }),
  );
  const metadata = {
    ...provenanceItems(options.provenance),
    time_origin: new Date(swath.originMs).toISOString(),
    ...(swath.cautions.length > 0 ? { cautions: swath.cautions.join('\n') } : {}),
  };
  return cogChunks({ grid: swath.grid, bands, metadata, ...(options.deflate && { deflate: options.deflate }) });
}

/** Compresses the tiles of a level: band after band, row by row; equal empty tiles are compressed once. */
function tilePacker(deflate: Deflate): (level: Level) => Promise<Uint8Array[]> {
  const constant = new Map<number, Promise<Uint8Array>>();
  return async (level) => {
    const { nx, ny } = level;
    const out: Promise<Uint8Array>[] = [];
    for (const values of level.bands) {
      const field = new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
      const patterns = new Uint32Array(values.buffer, values.byteOffset, values.length);
      for (let row = 0; row * TILE < ny; row++) {
        for (let column = 0; column * TILE < nx; column++) {
          const place = { nx, ny, column, row };
          const pattern = constantPattern(patterns, place);
          const known = pattern === null ? undefined : constant.get(pattern);
          const packed = known ?? Promise.resolve(deflate(predictedTile(field, place)));
          if (pattern !== null) constant.set(pattern, packed);
          out.push(packed);
          if (out.length > IN_WORK) await out[out.length - 1 - IN_WORK];
        }
      }
    }
    return Promise.all(out);
  };
}

/** The bits that every cell of a tile has, or null where they differ. */
function constantPattern(
  patterns: Uint32Array,
  place: { nx: number; ny: number; column: number; row: number },
): number | null {
  const { nx, ny } = place;
  const firstColumn = place.column * TILE;
  const lastColumn = Math.min(nx, firstColumn + TILE);
  const lastRow = Math.min(ny, (place.row + 1) * TILE);
  const pattern = patterns[place.row * TILE * nx + firstColumn]!;
  for (let row = place.row * TILE; row < lastRow; row++) {
    for (let k = row * nx + firstColumn, end = row * nx + lastColumn; k < end; k++)
      if (patterns[k] !== pattern) return null;
  }
  return pattern;
}

function imageFields(
  level: { nx: number; ny: number },
  { bands, overview }: { bands: number; overview: boolean },
): TiffField[] {
  const same = (value: number, count = bands): number[] => new Array<number>(count).fill(value);
  return [
    ...(overview ? [{ tag: 254, type: 'long', values: [1] } as const] : []),
    { tag: 256, type: 'long', values: [level.nx] },
    { tag: 257, type: 'long', values: [level.ny] },
    { tag: 258, type: 'short', values: same(32) },
    { tag: 259, type: 'short', values: [8] },
    { tag: 262, type: 'short', values: [1] },
    { tag: 277, type: 'short', values: [bands] },
    { tag: 284, type: 'short', values: [bands > 1 ? 2 : 1] },
    { tag: 317, type: 'short', values: [3] },
    { tag: 322, type: 'short', values: [TILE] },
    { tag: 323, type: 'short', values: [TILE] },
    ...(bands > 1 ? [{ tag: 338, type: 'short', values: same(0, bands - 1) } as const] : []),
    { tag: 339, type: 'short', values: same(3) },
  ];
}

function geographicFields(grid: Grid, keys: ReturnType<typeof geoKeys>): TiffField[] {
  return [
    { tag: 33550, type: 'double', values: [grid.cell, grid.cell, 0] },
    { tag: 33922, type: 'double', values: [0, 0, 0, grid.bounds[0], grid.bounds[3], 0] },
    { tag: 34735, type: 'short', values: keys.directory },
    ...(keys.doubles.length > 0 ? [{ tag: 34736, type: 'double', values: keys.doubles } as const] : []),
    asciiField(34737, keys.ascii),
  ];
}

/** The XML by which GDAL carries names, units and further items. */
function metadataXml(bands: readonly RasterBand[], metadata: Readonly<Record<string, string>>): string {
  const item = (name: string, value: string, more = ''): string =>
    `  <Item name="${xmlAscii(name)}"${more}>${xmlAscii(value)}</Item>\n`;
  let xml = '<GDALMetadata>\n';
  for (const [name, value] of Object.entries(metadata)) xml += item(name, value);
  bands.forEach((band, sample) => {
    xml += item('DESCRIPTION', band.name, ` sample="${sample}" role="description"`);
    xml += item('UNITTYPE', band.unit, ` sample="${sample}" role="unittype"`);
    if (band.description) xml += item('long_name', band.description, ` sample="${sample}"`);
    for (const [name, value] of Object.entries(band.items ?? {})) xml += item(name, value, ` sample="${sample}"`);
  });
  return `${xml}</GDALMetadata>\n`;
}
