import { poolDeflate } from '../io/deflate.js';
import { OutputFolder } from '../io/output.js';
import { safeName } from '../io/safe-name.js';
import { isotachsFlatGeobuf } from '../write/flatgeobuf.js';
import { peakTif } from '../write/geotiff.js';
import { isotachsGeojson } from '../write/isotachs-geojson.js';
import { swathKml } from '../write/kml.js';
import { peakNetcdf } from '../write/netcdf.js';
import { peakCsv } from '../write/peak-csv.js';
import { tracksToGeojson } from '../write/track-geojson.js';
import type { SwathResult } from './swath-result.js';

/** What `--formats` may name. */
export const FORMATS = ['geojson', 'cog', 'csv', 'netcdf', 'kml', 'flatgeobuf', 'svg', 'png', 'html'] as const;
export type Format = (typeof FORMATS)[number];

/**
 * The folder of a run, opened before any work is done: what could not be written at the end is refused now.
 * @param path null: a folder named after the storm
 */
export async function openFolder(
  path: string | null,
  options: { storm: string; formats: readonly Format[]; force: boolean; signal: AbortSignal },
): Promise<OutputFolder> {
  const folder = await OutputFolder.open(path ?? safeName(options.storm), {
    force: options.force,
    signal: options.signal,
    derived: path === null,
  });
  try {
    await folder.check([...filesOf(options.formats), 'summary.json']);
  } catch (error) {
    await folder.discard();
    throw error;
  }
  return folder;
}

/** Writes the files of a run, all or none, and the summary that names them. */
export async function writeSwath(
  result: SwathResult,
  options: {
    folder: OutputFolder;
    formats: readonly Format[];
    summaryOf: (files: readonly string[]) => Record<string, unknown>;
  },
): Promise<{ files: readonly string[]; summary: Record<string, unknown> }> {
  const { folder } = options;
  const files = filesOf(options.formats);
  for (const name of files) await folder.write(name, await contentOf(name, result));
  const summary = options.summaryOf([...files, 'summary.json']);
  await folder.write('summary.json', [`${JSON.stringify(summary, null, 2)}\n`]);
  await folder.commit();
  return { files: [...files, 'summary.json'], summary };
}

const FILES: Readonly<Record<Format, readonly string[]>> = {
  geojson: ['isotachs.geojson', 'track.geojson'],
  cog: ['peak.tif'],
  csv: ['peak.csv'],
  netcdf: ['peak.nc'],
  kml: ['swath.kml'],
  flatgeobuf: ['isotachs.fgb'],
  svg: ['map.svg'],
  png: ['map.png'],
  html: ['map.html'],
};

/** Names of the files of some formats, in the order of the list of formats. */
export function filesOf(formats: readonly Format[]): string[] {
  return FORMATS.filter((format) => formats.includes(format)).flatMap((format) => FILES[format]);
}

/** The bytes or text of one file. Pictures are loaded only when asked for. */
async function contentOf(name: string, result: SwathResult): Promise<Iterable<Uint8Array | string>> {
  const { swath, isotachs, model, provenance } = result;
  const context = {
    quantity: result.quantity,
    averagingS: result.quantity === 'gust' ? swath.gustDurationS : swath.averagingS,
    classOf: result.classOf,
  };
  switch (name) {
    case 'isotachs.geojson':
      return [isotachsGeojson({ isotachs, context, provenance })];
    case 'track.geojson':
      return [tracksToGeojson([model.completed.track])];
    case 'peak.tif':
      return peakTif(swath, {
        provenance,
        deflate: poolDeflate,
        ...(result.surface ? { surface: result.surface } : {}),
      });
    case 'peak.csv':
      return peakCsv(swath);
    case 'peak.nc':
      return [await peakNetcdf(swath, { provenance })];
    case 'swath.kml': {
      const { levelColour } = await import('../picture/colours.js');
      const colourOf = (thresholdMps: number): string => levelColour(result.levels, thresholdMps);
      return [swathKml({ isotachs, context, track: model.completed.track, provenance, colourOf })];
    }
    case 'isotachs.fgb':
      return [isotachsFlatGeobuf({ isotachs, context, provenance })];
    case 'map.html':
      return [await (await import('./map-page.js')).mapPageOf(result)];
    default: {
      const { mapSvg } = await import('../picture/map-svg.js');
      const svg = mapSvg((await import('./map-input.js')).mapInput(result));
      return [name === 'map.svg' ? svg : (await import('../io/png.js')).svgToPng(svg)];
    }
  }
}
