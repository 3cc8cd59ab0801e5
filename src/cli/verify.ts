import { UsageError } from '../errors.js';
import type { InputRecord } from '../io/input.js';
import { writeWhole } from '../io/output.js';
import { VERSION } from '../io/version.js';
import { recipeDocument } from '../model/recipe.js';
import { hideableOf, summarize, type VerificationRow, verifyTrack, WITHOUT_RADII } from '../model/verify.js';
import type { Track } from '../track/track.js';
import { csvLine } from '../write/csv-cell.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, list, type ModelOptions, recipeOf, type TrackOptions } from './choices.js';
import { makeConsole, table } from './console.js';
import { stormsOf } from './storm.js';

interface VerifyOptions extends CommonOptions, ModelOptions, TrackOptions {
  readonly hide?: string;
  readonly withoutRadii?: boolean;
  readonly as?: 'csv' | 'svg' | 'png';
  readonly out?: string;
  readonly force?: boolean;
}

/** `galewake verify`: modelled against observed wind radii, radius of maximum wind and pressure. */
export async function verify(files: readonly string[], options: VerifyOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  if (options.out !== undefined && options.as === undefined) {
    throw new UsageError('verify.as', '--out goes with --as, such as --as svg --out verify.svg');
  }
  const hide = [...new Set([...hideableOf(list(options.hide)), ...(options.withoutRadii ? WITHOUT_RADII : [])])];
  const recipe = await recipeOf(options);
  const rows: VerificationRow[] = [];
  const inputs: InputRecord[] = [];
  const cautions: string[] = [];
  let storms = 0;
  for (const file of files) {
    const source = stormsOf(file, options);
    for await (const track of source.storms) {
      if (!wanted(track, options.storm)) continue;
      storms++;
      try {
        rows.push(...verifyTrack(track, recipe, { hide }));
      } catch (error) {
        cautions.push(`${file}: ${track.id} is left out: ${(error as Error).message}`);
      }
      out.progress(`${storms} storms, ${rows.length} fixes`);
    }
    inputs.push(source.record());
  }
  out.progress('');
  if (options.storm !== undefined && storms === 0)
    throw new UsageError('track.unknown-storm', `no file has a storm '${options.storm}'`);
  const summary = summarize(rows);
  const write = async (content: string | Uint8Array): Promise<void> => {
    if (options.out !== undefined) await writeWhole(options.out, [content], { force: options.force === true });
    else if (typeof content === 'string') out.print(content);
    else process.stdout.write(content);
  };
  if (options.json) {
    const document = {
      schema: 'galewake-verify/1',
      version: VERSION,
      inputs,
      recipe: recipeDocument(recipe),
      hidden: hide,
      rows,
      summary,
      cautions,
      caution: CAUTION,
    };
    out.print(`${JSON.stringify(document)}\n`);
    return;
  }
  if (options.as === 'csv') await write(csvOf(rows));
  else if (options.as !== undefined) {
    const { verifySvg } = await import('../picture/verify-svg.js');
    const svg = verifySvg(rows, { title: titleOf(files), hidden: hide });
    await write(options.as === 'svg' ? svg : (await import('../io/png.js')).svgToPng(svg));
  } else {
    const number = (value: number | null, digits: number): string => (value === null ? '-' : value.toFixed(digits));
    out.print(
      `${storms} storms, ${rows.length} fixes with something observed${hide.length > 0 ? `; hidden from the model: ${hide.join(', ')}` : ''}\n\n`,
    );
    out.print(
      table([
        ['quantity', 'n', 'bias', 'mae', 'rmse', 'r'],
        ...Object.entries(summary).map(([name, score]) => [
          name.endsWith('kt') ? `${name} km` : name.replace('_', ' '),
          String(score.n),
          number(score.bias, 2),
          number(score.mae, 2),
          number(score.rmse, 2),
          number(score.r, 3),
        ]),
      ]),
    );
    out.say('\nModelled less observed. Radii: mean of the quadrants, where all four are observed above zero.');
  }
  for (const caution of cautions) out.say(`caution: ${caution}`);
}

/** The files by their names alone; more than two by their number. */
function titleOf(files: readonly string[]): string {
  const names = files.map((file) => (file === '-' ? 'standard input' : file.replace(/^.*[\\/]/, '')));
  return names.length > 2 ? `${names[0]} and ${names.length - 1} more files` : names.join(', ');
}

/** Whether a storm is the one that was named, if one was. */
function wanted(track: Track, name: string | undefined): boolean {
  const asked = name?.trim().toLowerCase();
  return asked === undefined || track.id.toLowerCase() === asked || track.name?.toLowerCase() === asked;
}

function csvOf(rows: readonly VerificationRow[]): string {
  const winds = ['34kt', '50kt', '64kt'] as const;
  const quadrants = ['ne', 'se', 'sw', 'nw'];
  const heading = [
    'storm',
    'time',
    'lat_deg',
    'lon_deg',
    ...winds.flatMap((wind) =>
      quadrants.flatMap((quadrant) => [`r${wind}_${quadrant}_observed_km`, `r${wind}_${quadrant}_modelled_km`]),
    ),
    'rmax_observed_km',
    'rmax_modelled_km',
    'pressure_observed_hpa',
    'pressure_modelled_hpa',
  ];
  const round = (value: number | null | undefined): number | null =>
    value === null || value === undefined ? null : Number(value.toFixed(2));
  const lines = rows.map((row) => [
    row.storm,
    row.time,
    row.lat_deg,
    row.lon_deg,
    ...winds.flatMap((wind) =>
      quadrants.flatMap((_, q) => [round(row.radii[wind]?.observed_km[q]), round(row.radii[wind]?.modelled_km[q])]),
    ),
    round(row.rmax_km.observed),
    round(row.rmax_km.modelled),
    round(row.pressure_hpa.observed),
    round(row.pressure_hpa.modelled),
  ]);
  return [heading, ...lines].map(csvLine).join('');
}
