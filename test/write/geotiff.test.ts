import { deflateSync } from 'node:zlib';
import { fromArrayBuffer, type GeoTIFFImage } from 'geotiff';
import { describe, expect, it } from 'vitest';
import { gridOver } from '../../src/swath/grid.js';
import { cogBytes, cogChunks, peakTif, type RasterInput } from '../../src/write/geotiff.js';
import { exampleProvenance, exampleSwath } from './example-swath.js';

const deflate = (bytes: Uint8Array): Uint8Array => deflateSync(bytes);
const open = (bytes: Uint8Array) => fromArrayBuffer(new Uint8Array(bytes).buffer);
const joined = (chunks: readonly Uint8Array[]): Uint8Array => new Uint8Array(Buffer.concat(chunks));
const bitsOf = (values: Float32Array): Buffer => Buffer.from(values.buffer, values.byteOffset, values.byteLength);
const sameBits = (a: Float32Array, b: Float32Array): boolean => bitsOf(a).equals(bitsOf(b));
const bandsOf = async (image: GeoTIFFImage): Promise<Float32Array[]> =>
  (await image.readRasters()) as unknown as Float32Array[];

function noise(nx: number, ny: number, seed = 1): Float32Array {
  let state = seed;
  return Float32Array.from({ length: nx * ny }, () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state % 97 === 0 ? Number.NaN : (state / 2 ** 32 - 0.5) * 10 ** ((state % 9) - 4);
  });
}
const gridOf = (nx: number, ny: number) =>
  gridOver({ crs: 'EPSG:4326', bounds: [-60, 10, -60 + nx * 0.01, 10 + ny * 0.01], cell: 0.01 });
const rasterOf = (nx: number, ny: number, more: Partial<RasterInput> = {}): RasterInput => ({
  grid: gridOf(nx, ny),
  bands: [
    { name: 'wind', unit: 'm/s', values: noise(nx, ny), overview: 'max' },
    { name: 'when', unit: 's', values: noise(nx, ny, 2), overview: 'like-first' },
    { name: 'other', unit: '1', values: noise(nx, ny, 3), overview: 'nearest' },
  ],
  deflate,
  ...more,
});

describe('a Cloud Optimized GeoTIFF', () => {
  // independent: read by another library, to the last bit
  it.each([
    [1, 1],
    [256, 256],
    [257, 256],
    [300, 517],
    [1, 600],
    [600, 1],
  ])('of %i × %i reads back exactly', async (nx, ny) => {
    const input = rasterOf(nx, ny);
    const tiff = await open(await cogBytes(input));
    const image = await tiff.getImage(0);
    expect([image.getWidth(), image.getHeight(), image.getSamplesPerPixel()]).toEqual([nx, ny, 3]);
    const bands = await bandsOf(image);
    input.bands.forEach((band, i) => {
      expect(sameBits(bands[i]!, band.values), band.name).toBe(true);
    });
    expect(image.getGDALNoData()).toBeNaN();
    expect(image.getBoundingBox().map((edge) => Number(edge.toFixed(9)))).toEqual(
      input.grid.bounds.map((edge) => Number(edge.toFixed(9))),
    );
  });

  it('is the same through the compressor of the browser', async () => {
    const { deflate: _, ...input } = rasterOf(300, 280);
    const bands = await bandsOf(await (await open(await cogBytes(input))).getImage(0));
    input.bands.forEach((band, i) => {
      expect(sameBits(bands[i]!, band.values), band.name).toBe(true);
    });
  });

  it('is a BigTIFF where it is asked for, with the same content', async () => {
    const input = rasterOf(300, 280, { bigTiff: true });
    const bytes = await cogBytes(input);
    expect([...bytes.subarray(0, 8)]).toEqual([0x49, 0x49, 43, 0, 8, 0, 0, 0]);
    const tiff = await open(bytes);
    expect(await tiff.getImageCount()).toBe(2);
    const bands = await bandsOf(await tiff.getImage(0));
    expect(sameBits(bands[1]!, input.bands[1]!.values)).toBe(true);
  });

  it('takes 8-byte offsets by itself above 4 GiB', async () => {
    // a compressor that claims 600 MB a tile, without holding them
    const huge = new Proxy(new Uint8Array(0), {
      get: (target, key) => (key === 'length' ? 600_000_000 : Reflect.get(target, key)),
    });
    const [header] = await cogChunks({ ...rasterOf(500, 500), deflate: () => huge });
    expect(header![2]).toBe(43);
    const view = new DataView(header!.buffer);
    expect(view.getBigUint64(8, true)).toBe(16n);
    const [small] = await cogChunks(rasterOf(300, 280));
    expect(small![2]).toBe(42);
  });

  it('has all directories first, then tiles from the smallest overview to the full image', async () => {
    const chunks = await cogChunks(rasterOf(600, 520));
    const tiff = await open(joined(chunks));
    const count = await tiff.getImageCount();
    const sizes: string[] = [];
    let lastOfLevelAbove = Number.POSITIVE_INFINITY;
    for (let i = 0; i < count; i++) {
      const image = await tiff.getImage(i);
      sizes.push(`${image.getWidth()}x${image.getHeight()}`);
      expect([image.getTileWidth(), image.getTileHeight()]).toEqual([256, 256]);
      const directory = image.fileDirectory;
      expect(await directory.loadValue('Compression')).toBe(8);
      expect(await directory.loadValue('Predictor')).toBe(3);
      expect((await directory.loadValue('NewSubfileType')) ?? 0).toBe(i === 0 ? 0 : 1);
      const offsets = [...((await directory.loadValue('TileOffsets')) as Iterable<number>)].map(Number);
      const lengths = [...((await directory.loadValue('TileByteCounts')) as Iterable<number>)].map(Number);
      expect(offsets[0]).toBeGreaterThanOrEqual(chunks[0]!.length);
      for (let k = 1; k < offsets.length; k++) expect(offsets[k]).toBe(offsets[k - 1]! + lengths[k - 1]!);
      const end = offsets.at(-1)! + lengths.at(-1)!;
      if (i === 0) expect(end).toBe(joined(chunks).length);
      else expect(end).toBe(lastOfLevelAbove);
      lastOfLevelAbove = offsets[0]!;
    }
    expect(sizes).toEqual(['600x520', '300x260', '150x130']);
    // the first directory follows the header
    expect(new DataView(chunks[0]!.buffer).getUint32(4, true)).toBe(8);
  });

  it('takes maxima, companions of the maximum, and north-western cells into its overviews', async () => {
    const input = rasterOf(517, 300);
    const tiff = await open(await cogBytes(input));
    const image = await tiff.getImage(1);
    const [wind, when, other] = (await bandsOf(image)) as [Float32Array, Float32Array, Float32Array];
    const [nx, ny] = [image.getWidth(), image.getHeight()];
    expect([nx, ny]).toEqual([259, 150]);
    const [fine, fineWhen, fineOther] = input.bands.map((band) => band.values) as [
      Float32Array,
      Float32Array,
      Float32Array,
    ];
    const wrong: number[] = [];
    for (let row = 0; row < ny; row++) {
      for (let column = 0; column < nx; column++) {
        const cells = [0, 1]
          .flatMap((dy) => [0, 1].map((dx) => [2 * column + dx, 2 * row + dy] as const))
          .filter(([x, y]) => x < 517 && y < 300)
          .map(([x, y]) => y * 517 + x);
        const known = cells.filter((k) => !Number.isNaN(fine[k]));
        const best = known.reduce((a, b) => (fine[b]! > fine[a]! ? b : a), known[0] ?? cells[0]!);
        const k = row * nx + column;
        const right =
          Object.is(wind[k], fine[best]) &&
          Object.is(when[k], fineWhen[best]) &&
          Object.is(other[k], fineOther[cells[0]!]);
        if (!right) wrong.push(k);
      }
    }
    expect(wrong).toEqual([]);
  });

  it('refuses a band of the wrong length and a system that it cannot describe', async () => {
    const input = rasterOf(10, 10);
    await expect(cogBytes({ ...input, bands: [] })).rejects.toMatchObject({ code: 'write.bands' });
    await expect(cogBytes({ ...input, grid: gridOf(10, 11) })).rejects.toMatchObject({ code: 'write.bands' });
    await expect(
      cogBytes({ ...input, grid: { ...input.grid, crs: '+proj=omerc +lat_0=4 +alpha=3' } }),
    ).rejects.toMatchObject({ code: 'write.crs' });
  });

  it('keeps any text in its metadata', async () => {
    const text = '<&>"\' é 台 🌀 \u0000 \uD800 end';
    const bytes = await cogBytes(rasterOf(4, 4, { metadata: { note: text } }));
    const metadata = (await (await open(bytes)).getImage(0)).getGDALMetadata() as
      | Promise<Record<string, string>>
      | Record<string, string>;
    expect((await metadata)['note']).toBeDefined();
    // an ASCII tag: no byte above 126
    const start = Buffer.from(bytes).indexOf('<GDALMetadata>');
    const end = Buffer.from(bytes).indexOf('</GDALMetadata>');
    expect(bytes.subarray(start, end).every((byte) => byte < 127 && (byte >= 32 || byte === 10))).toBe(true);
    expect(Buffer.from(bytes.subarray(start, end)).toString()).toContain(
      '&lt;&amp;&gt;&quot;&apos; &#233; &#21488; &#127744; &#65533; &#65533; end',
    );
  });
});

describe('peak.tif', () => {
  it('has its bands in order, with names, units, averaging periods and where it comes from', async () => {
    const swath = exampleSwath();
    const tiff = await open(joined(await peakTif(swath, { provenance: exampleProvenance, deflate })));
    const image = await tiff.getImage(0);
    const bands = await bandsOf(image);
    const expected = [
      swath.windMps,
      swath.gustMps,
      swath.windFromDeg,
      swath.peakTimeS,
      ...swath.hoursAbove.map((one) => one.hours),
    ];
    expect(bands).toHaveLength(7);
    expected.forEach((values, i) => {
      expect(sameBits(bands[i]!, values)).toBe(true);
    });
    const item = async (sample: number | null): Promise<Record<string, unknown>> =>
      (await image.getGDALMetadata(sample)) as Record<string, unknown>;
    // one after another: the reader loads the tag once and not for two at a time
    const samples: Record<string, unknown>[] = [];
    for (let sample = 0; sample < 7; sample++) samples.push(await item(sample));
    expect(samples.map((one) => one['DESCRIPTION'])).toEqual([
      'peak_wind',
      'peak_gust',
      'wind_from_direction',
      'peak_time',
      'hours_34kt',
      'hours_50kt',
      'hours_64kt',
    ]);
    expect(samples.map((one) => one['UNITTYPE'])).toEqual(['m/s', 'm/s', 'degree', 's', 'h', 'h', 'h']);
    expect(samples.map((one) => one['averaging_s'])).toEqual(['60', '3', undefined, undefined, '60', '60', '60']);
    const whole = await item(null);
    expect(whole['time_origin']).toBe('2031-02-05T06:00:00.000Z');
    expect(whole['software']).toBe('Galewake 9.9.9');
    expect(whole['input_sha256']).toBe(`${'ab'.repeat(32)}  storm.csv`);
    expect(whole['caution']).toContain('no warning service');
    expect(whole['cautions']).toBe('made up');
    expect(image.getGeoKeys()).toMatchObject({
      GTModelTypeGeoKey: 2,
      GTRasterTypeGeoKey: 1,
      GeographicTypeGeoKey: 4326,
    });
  });

  it('across the antimeridian runs past 180', async () => {
    const swath = exampleSwath({ west: 170 });
    const image = await (await open(joined(await peakTif(swath, { provenance: exampleProvenance, deflate })))).getImage(
      0,
    );
    expect(image.getBoundingBox()[0]).toBeCloseTo(170, 9);
    expect(image.getBoundingBox()[2]).toBeCloseTo(191, 9);
  });

  it('has the EPSG code of a projected grid', async () => {
    const swath = exampleSwath({ crs: 'EPSG:32760', west: 300_000, north: 8_000_000 });
    const image = await (await open(joined(await peakTif(swath, { provenance: exampleProvenance, deflate })))).getImage(
      0,
    );
    expect(image.getGeoKeys()).toMatchObject({
      GTModelTypeGeoKey: 1,
      ProjectedCSTypeGeoKey: 32760,
      ProjLinearUnitsGeoKey: 9001,
    });
  });

  it('is the same bytes for the same swath', async () => {
    const once = joined(await peakTif(exampleSwath(), { provenance: exampleProvenance, deflate }));
    const twice = joined(await peakTif(exampleSwath(), { provenance: exampleProvenance, deflate }));
    expect(Buffer.compare(once, twice)).toBe(0);
  });
});
