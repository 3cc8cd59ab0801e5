import { chmodSync, mkdirSync, readdirSync, symlinkSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { writeArrayBuffer } from 'geotiff';
import { describe, expect, it } from 'vitest';
import { FIXTURES, galewake, inFolder } from './run.js';

const HEAD = 'storm,time,lat_deg,lon_deg,vmax_kt,averaging_s';
const good = [`${HEAD}`, 'A,2031-09-03T00:00Z,20,-60,60,60', 'A,2031-09-03T06:00Z,21,-61,70,60'].join('\n');
const demo = join(FIXTURES, 'demo-quillon.csv');
const small = ['--cell', '0.2deg', '--out', 'o'];

interface Case {
  readonly what: string;
  /** content of `bad.csv` in the folder */
  readonly file?: string | Buffer;
  readonly words: readonly string[];
  readonly code: number;
  readonly says: RegExp;
  /** prepares the folder */
  readonly before?: (folder: string) => void;
}

const farLand = (folder: string): void => {
  const ring = '[[100,0],[101,0],[101,1],[100,0]]';
  writeFileSync(join(folder, 'far.geojson'), `{"type":"Polygon","coordinates":[${ring}]}`);
  writeFileSync(join(folder, 'places.csv'), 'name,lat_deg,lon_deg\nA,20.5,-60.5\n');
};

const farRoughness = (folder: string): void => {
  const raster = writeArrayBuffer(Float32Array.of(0.1, 0.1, 0.1, 0.1), {
    height: 2,
    width: 2,
    GeographicTypeGeoKey: 4326,
    GTModelTypeGeoKey: 2,
    ModelPixelScale: [1, 1, 0],
    ModelTiepoint: [0, 0, 0, 100, 2, 0],
    BitsPerSample: [32],
    SampleFormat: [3],
  }) as ArrayBuffer;
  writeFileSync(join(folder, 'far.tif'), new Uint8Array(raster));
};

const swathOf = (...more: string[]): string[] => ['swath', 'bad.csv', ...small, ...more];

const CASES: readonly Case[] = [
  // land
  {
    what: 'land that is not there',
    file: good,
    words: swathOf('--land', 'no.geojson'),
    code: 3,
    says: /no\.geojson: there is no such file/,
  },
  {
    what: 'land that is no GeoJSON',
    file: good,
    words: swathOf('--land', 'bad.csv'),
    code: 3,
    says: /bad\.csv: this is no JSON/,
  },
  {
    what: 'land that lies elsewhere',
    file: good,
    before: farLand,
    words: swathOf('--land', 'far.geojson'),
    code: 3,
    says: /far\.geojson: its polygons \(longitudes 100\.0 to 101\.0.*nowhere near the track.*leave out --land/,
  },
  {
    what: 'land that lies elsewhere, for places',
    file: good,
    before: farLand,
    words: ['sites', 'bad.csv', 'places.csv', '--land', 'far.geojson'],
    code: 3,
    says: /far\.geojson: .*nowhere near the track/,
  },
  {
    what: 'land that lies elsewhere, for assets',
    file: good,
    before: farLand,
    words: ['exposure', 'bad.csv', 'places.csv', '--land', 'far.geojson'],
    code: 3,
    says: /far\.geojson: .*nowhere near the track/,
  },
  {
    what: 'a roughness raster that lies elsewhere',
    file: good,
    before: farRoughness,
    words: swathOf('--land', 'natural-earth', '--roughness', 'far.tif'),
    code: 3,
    says: /far\.tif: the raster does not overlap the grid; check its coordinate reference system/,
  },
  {
    what: 'roughness without land',
    file: good,
    words: swathOf('--roughness', 'z0.tif'),
    code: 2,
    says: /--roughness needs land/,
  },
  {
    what: 'classes without a raster',
    file: good,
    words: swathOf('--land', 'natural-earth', '--roughness-classes', 'c.csv'),
    code: 2,
    says: /--roughness-classes goes with --roughness/,
  },
  {
    what: 'a roughness raster that is none',
    file: good,
    words: swathOf('--land', 'natural-earth', '--roughness', 'bad.csv'),
    code: 3,
    says: /bad\.csv: this is no GeoTIFF/,
  },
  {
    what: 'bands of a surface without land',
    file: good,
    words: swathOf('--surface-bands'),
    code: 2,
    says: /needs land/,
  },
  // files
  { what: 'an empty file', file: '', words: swathOf(), code: 3, says: /bad\.csv: is empty/ },
  { what: 'a header without rows', file: `${HEAD}\n`, words: swathOf(), code: 3, says: /holds no storm/ },
  {
    what: 'a binary file',
    file: Buffer.from([0x7f, 0x45, 0x4c, 0x46, 0, 0, 1, 2]),
    words: swathOf(),
    code: 3,
    says: /bad\.csv/,
  },
  {
    what: 'a compressed file',
    file: Buffer.from([0x1f, 0x8b, 8, 0, 0, 0]),
    words: swathOf(),
    code: 3,
    says: /gzip.*unpack/,
  },
  {
    what: 'a file in another encoding',
    file: Buffer.from(`${HEAD},name\nA,2031-09-03T00:00Z,20,-60,60,60,Jos\xe9\n`, 'latin1'),
    words: swathOf(),
    code: 3,
    says: /UTF-8/,
  },
  {
    what: 'a line of 10 MB',
    file: `${HEAD}\n${'x'.repeat(10_000_000)}\n`,
    words: swathOf(),
    code: 3,
    says: /line is longer/,
  },
  {
    what: 'a truncated row',
    file: `${good}\nA,2031-09-03T12:00Z,22`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:4: the row has 3 cells/,
  },
  { what: 'a wrong header', file: 'a,b,c\n1,2,3\n', words: swathOf(), code: 3, says: /bad\.csv:1/ },
  { what: 'no header at all', file: '1,2,3\n4,5,6\n', words: swathOf(), code: 3, says: /heading/ },
  {
    what: 'latitude 95',
    file: `${HEAD}\nA,2031-09-03T00:00Z,95,-60,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:2: latitude 95 is beyond the poles/,
  },
  {
    what: 'longitude 400',
    file: `${HEAD}\nA,2031-09-03T00:00Z,20,400,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:2: longitude 400/,
  },
  {
    what: 'time going back',
    file: `${HEAD}\nA,2031-09-03T06:00Z,20,-60,60,60\nA,2031-09-03T00:00Z,21,-61,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:3.*sort/,
  },
  {
    what: 'a negative wind',
    file: `${HEAD}\nA,2031-09-03T00:00Z,20,-60,-5,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:2.*-5/,
  },
  {
    what: 'a wind that is text',
    file: `${HEAD}\nA,2031-09-03T00:00Z,20,-60,strong,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:2.*'strong' is not a number/,
  },
  {
    what: 'an impossible date',
    file: `${HEAD}\nA,2031-02-30T00:00Z,20,-60,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /bad\.csv:2.*2031-02-30/,
  },
  {
    what: 'a decimal comma',
    file: `${HEAD}\nA,2031-09-03T00:00Z,"20,5",-60,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /decimal comma/,
  },
  {
    what: 'a quote that is never closed',
    file: `${HEAD}\n"A,2031-09-03T00:00Z,20,-60,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /never closed/,
  },
  {
    what: 'a gap of two days',
    file: `${HEAD}\nA,2031-09-03T00:00Z,20,-60,60,60\nA,2031-09-05T00:00Z,24,-64,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /48\.0 h.*completion\.max_gap_h=48/,
  },
  {
    what: 'no intensity anywhere',
    file: 'storm,time,lat_deg,lon_deg\nA,2031-09-03T00:00Z,20,-60\n',
    words: swathOf(),
    code: 3,
    says: /maximum wind or a central pressure/,
  },
  {
    what: 'a storm that stays on the equator',
    file: `${HEAD}\nA,2031-09-03T00:00Z,0,-60,60,60\n`,
    words: swathOf(),
    code: 3,
    says: /equator/,
  },
  {
    what: 'a half JSON file',
    file: '{"type":"FeatureCollection","features":[',
    words: swathOf(),
    code: 3,
    says: /JSON/,
  },
  {
    what: 'JSON that is no track',
    file: '{"type":"FeatureCollection","features":[]}',
    words: swathOf(),
    code: 3,
    says: /bad\.csv/,
  },
  { what: 'a missing file', words: ['swath', 'none.csv'], code: 3, says: /none\.csv: there is no such file/ },
  { what: 'a folder for a file', words: ['swath', '.'], code: 3, says: /folder/ },
  // the command line
  { what: 'no file', words: ['swath'], code: 2, says: /FILE/ },
  { what: 'an unknown command', words: ['swaths', demo], code: 2, says: /Did you mean swath/ },
  { what: 'an unknown option', words: ['swath', demo, '--level', '34kt'], code: 2, says: /Did you mean --levels/ },
  { what: 'an unknown storm', words: ['swath', demo, '--storm', 'Quilon'], code: 2, says: /did you mean Quillon/ },
  {
    what: 'several storms and none named',
    file: `${good}\nB,2031-09-03T00:00Z,20,-60,60,60\n`,
    words: swathOf(),
    code: 2,
    says: /2 storms.*A.*B/,
  },
  { what: 'an unknown CRS', words: ['swath', demo, ...small, '--crs', 'EPSG:99999'], code: 2, says: /EPSG:99999/ },
  {
    what: 'a grid of 10¹⁰ cells',
    words: ['swath', demo, '--bounds', '-100,0,0,100', '--crs', 'EPSG:3857', '--cell', '0.001m', '--out', 'o'],
    code: 3,
    says: /cells.*larger --cell/,
  },
  {
    what: 'bounds upside down',
    words: ['swath', demo, ...small, '--bounds', '-50,30,-40,20'],
    code: 2,
    says: /west,south,east,north/,
  },
  { what: 'three bounds', words: ['swath', demo, ...small, '--bounds', '-50,30,-40'], code: 2, says: /four numbers/ },
  { what: 'a cell of no size', words: ['swath', demo, '--cell', '0deg', '--out', 'o'], code: 2, says: /positive/ },
  { what: 'a unit of another kind', words: ['swath', demo, ...small, '--levels', '34km'], code: 2, says: /34km.*unit/ },
  {
    what: 'a level that is no number',
    words: ['swath', demo, ...small, '--levels', 'gale'],
    code: 2,
    says: /'gale' is not a quantity/,
  },
  { what: 'no level', words: ['swath', demo, ...small, '--levels', ','], code: 2, says: /at least one/ },
  {
    what: 'an unknown format',
    words: ['swath', demo, ...small, '--formats', 'geojsn'],
    code: 2,
    says: /did you mean geojson/,
  },
  {
    what: 'an unknown recipe entry',
    words: ['swath', demo, ...small, '--set', 'vortex.profle=rankine'],
    code: 3,
    says: /did you mean 'vortex\.profile'/,
  },
  {
    what: 'an unknown profile',
    words: ['swath', demo, ...small, '--set', 'vortex.profile=rankin'],
    code: 3,
    says: /did you mean 'rankine'/,
  },
  {
    what: 'a value out of bounds',
    words: ['swath', demo, ...small, '--set', 'surface.factor=7'],
    code: 3,
    says: /surface\.factor cannot be '7'/,
  },
  {
    what: 'a setting without a value',
    words: ['swath', demo, ...small, '--set', 'surface.factor'],
    code: 2,
    says: /KEY=VALUE/,
  },
  {
    what: 'a recipe that is no JSON',
    file: 'vortex: rankine',
    words: ['swath', demo, ...small, '--recipe', 'bad.csv'],
    code: 2,
    says: /not valid JSON/,
  },
  {
    what: 'a period outside the track',
    words: ['swath', demo, ...small, '--from', '2040-01-01'],
    code: 2,
    says: /outside the track|after/,
  },
  {
    what: 'a time that is none',
    words: ['swath', demo, ...small, '--from', 'noon'],
    code: 2,
    says: /'noon' is not a time/,
  },
  {
    what: 'an averaging period without factors',
    words: ['swath', demo, ...small, '--wind', '5min'],
    code: 3,
    says: /300.*60, 120, 180, 600/,
  },
  { what: 'no jobs', words: ['swath', demo, ...small, '--jobs', '0'], code: 2, says: /whole number/ },
  // the places that are written to
  {
    what: 'an existing file',
    words: ['swath', demo, ...small],
    code: 3,
    says: /--force/,
    before: (folder) => {
      mkdirSync(join(folder, 'o'));
      writeFileSync(join(folder, 'o/peak.tif'), 'mine');
    },
  },
  {
    what: 'a file where a folder should be',
    words: ['swath', demo, ...small],
    code: 3,
    says: /no folder/,
    before: (folder) => writeFileSync(join(folder, 'o'), 'mine'),
  },
  {
    what: 'a link where a file should be',
    words: ['swath', demo, ...small, '--force'],
    code: 3,
    says: /symbolic link/,
    before: (folder) => {
      mkdirSync(join(folder, 'o'));
      writeFileSync(join(folder, 'elsewhere'), 'mine');
      symlinkSync('../elsewhere', join(folder, 'o/peak.tif'));
    },
  },
  {
    what: 'a disk that is full',
    words: ['tracks', demo, '--to', 'csv', '--out', '/dev/full'],
    code: 3,
    says: /\/dev\/full/,
  },
  {
    what: 'a folder that is not there',
    words: ['tracks', demo, '--to', 'csv', '--out', 'nowhere/track.csv'],
    code: 3,
    says: /nowhere/,
  },
  { what: 'a calm profile', words: ['profile', '--vmax', '0kt'], code: 2, says: /--vmax/ },
  {
    what: 'a profile on the equator',
    words: ['profile', '--vmax', '80kt', '--lat', '0'],
    code: 2,
    says: /sense of rotation/,
  },
];

/** Every file below a folder with its size. */
const listing = (folder: string): string[] => readdirSync(folder, { recursive: true, encoding: 'utf8' }).sort();

describe('bad input', () => {
  it.concurrent.each(CASES)('$what', async ({ file, words, code, says, before }) => {
    await inFolder(async (folder) => {
      if (file !== undefined) writeFileSync(join(folder, 'bad.csv'), file);
      before?.(folder);
      const was = listing(folder);
      const run = await galewake(words, { cwd: folder });
      expect(run.stderr).toMatch(says);
      expect(run.code).toBe(code);
      expect(run.stdout).toBe('');
      expect(run.stderr).not.toMatch(/\n\s+at /);
      expect(listing(folder)).toEqual(was);
    });
  });

  it('a folder that may not be written to', async () => {
    await inFolder(async (folder) => {
      mkdirSync(join(folder, 'closed'));
      chmodSync(join(folder, 'closed'), 0o555);
      // the superuser may write anywhere: there a folder below a file stands for it
      const target = process.getuid?.() === 0 ? '/proc/galewake' : join(folder, 'closed/o');
      const run = await galewake(['swath', demo, '--cell', '0.2deg', '--out', target], { cwd: folder });
      expect(run.code).toBe(3);
      expect(run.stderr).toContain(target);
      expect(run.stderr).not.toMatch(/\n\s+at /);
    });
  });

  it('a storm named ../../x stays in its folder', async () => {
    await inFolder(async (folder) => {
      mkdirSync(join(folder, 'a/b'), { recursive: true });
      writeFileSync(join(folder, 'a/b/t.csv'), good.replaceAll('A,', '../../x,'));
      const run = await galewake(['swath', 't.csv', '--cell', '0.2deg', '--formats', 'geojson'], {
        cwd: join(folder, 'a/b'),
      });
      expect(run.stderr).not.toMatch(/failure inside/);
      expect(run.code).toBe(0);
      expect(readdirSync(folder)).toEqual(['a']);
      expect(readdirSync(join(folder, 'a'))).toEqual(['b']);
      expect(readdirSync(join(folder, 'a/b'))).toHaveLength(2);
    });
  });
});
