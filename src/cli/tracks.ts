import { UsageError } from '../errors.js';
import { writeWhole } from '../io/output.js';
import { recipeDocument } from '../model/recipe.js';
import { windModel } from '../model/wind.js';
import type { CompletedFix, Traced } from '../track/complete.js';
import { pickTrackFrom } from '../track/pick.js';
import type { Track } from '../track/track.js';
import { tidy, toKnots } from '../units.js';
import { CAUTION } from '../write/provenance.js';
import { tracksToCsv } from '../write/track-csv.js';
import { tracksToGeojson } from '../write/track-geojson.js';
import { type CommonOptions, type ModelOptions, recipeOf, type TrackOptions } from './choices.js';
import { makeConsole, table } from './console.js';
import { stormsOf } from './storm.js';

interface TracksOptions extends CommonOptions, ModelOptions, TrackOptions {
  readonly to?: 'csv' | 'geojson' | 'svg' | 'png';
  readonly out?: string;
  readonly force?: boolean;
}

/** `galewake tracks`: what is in a file; the completed track; conversion. */
export async function tracks(file: string, options: TracksOptions): Promise<void> {
  if (options.out !== undefined && options.to === undefined)
    throw new UsageError('tracks.to', '--out goes with --to, such as --to csv --out track.csv');
  if (options.to !== undefined) return convert(file, options, options.to);
  if (options.storm !== undefined) return showStorm(file, options);
  return listStorms(file, options);
}

/** What the list says of a storm. */
function brief(track: Track) {
  const winds = track.fixes.flatMap((fix) => (fix.maxWindMps === null ? [] : [fix.maxWindMps]));
  return {
    id: track.id,
    name: track.name,
    basin: track.basin,
    kind: track.kind,
    format: track.format,
    first: new Date(track.fixes[0]!.timeMs).toISOString(),
    last: new Date(track.fixes[track.fixes.length - 1]!.timeMs).toISOString(),
    fixes: track.fixes.length,
    max_wind_mps: winds.length === 0 ? null : Math.max(...winds),
    averaging_s: track.fixes[0]!.averagingS,
    cautions: track.cautions,
  };
}

async function listStorms(file: string, options: TracksOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const { storms, record } = stormsOf(file, options);
  const briefs: ReturnType<typeof brief>[] = [];
  for await (const track of storms) briefs.push(brief(track));
  if (options.json) {
    out.print(`${JSON.stringify({ schema: 'galewake-tracks/1', input: record(), storms: briefs }, null, 2)}\n`);
    return;
  }
  const rows = briefs.map((storm) => [
    storm.id,
    storm.name ?? '-',
    storm.basin ?? '-',
    minute(storm.first),
    minute(storm.last),
    String(storm.fixes),
    storm.max_wind_mps === null ? '-' : toKnots(storm.max_wind_mps).toFixed(0),
  ]);
  out.print(table([['id', 'name', 'basin', 'first', 'last', 'fixes', 'max kt'], ...rows]));
  const odd = briefs.flatMap((storm) => storm.cautions);
  for (const caution of odd.slice(0, 20)) out.say(`caution: ${caution}`);
  if (odd.length > 20) out.say(`and ${odd.length - 20} more cautions; --json has them all`);
}

async function showStorm(file: string, options: TracksOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const recipe = await recipeOf(options);
  const { storms, record } = stormsOf(file, options);
  const track = await pickTrackFrom(storms, options.storm);
  const model = windModel(track, recipe);
  const { completed } = model;
  if (options.json) {
    const document = {
      schema: 'galewake-tracks/1',
      input: record(),
      storms: [brief(track)],
      recipe: recipeDocument(recipe),
      averaging_s: completed.averagingS,
      fixes: completed.fixes.map(fixDocument),
      cautions: model.cautions,
      caution: CAUTION,
    };
    out.print(`${JSON.stringify(document, null, 2)}\n`);
    return;
  }
  out.print(
    `${track.name ?? track.id} (${track.id}), ${track.fixes.length} fixes, ${track.kind} track from ${track.format}; winds are ${completed.averagingS}-s means\n\n`,
  );
  out.print(
    table([
      ['time', 'lat', 'lon', 'kt', 'hPa', 'ambient', 'rmax km', 'B', 'status'],
      ...completed.fixes.map((fix) => [
        minute(new Date(fix.timeMs).toISOString()),
        fix.latDeg.toFixed(2),
        fix.lonDeg.toFixed(2),
        marked(fix.maxWindMps, (mps) => toKnots(mps).toFixed(1)),
        marked(fix.centralPressurePa, (pa) => (pa / 100).toFixed(1)),
        marked(fix.ambientPressurePa, (pa) => (pa / 100).toFixed(1)),
        marked(fix.radiusOfMaxWindM, (m) => (m / 1000).toFixed(1)),
        marked(fix.hollandB, (b) => b.toFixed(2)),
        fix.fix.status ?? '-',
      ]),
    ]),
  );
  out.print(`\n${legend(completed.fixes)}`);
  for (const caution of model.cautions) out.say(`caution: ${caution}`);
  out.say(CAUTION);
}

const MARKS = { given: ' ', interpolated: '~', estimated: '*' } as const;

/** A value with a mark for its origin: none = given, ~ = interpolated, * = estimated. */
function marked(value: Traced, format: (value: number) => string): string {
  return `${format(value.value)}${MARKS[value.origin]}`;
}

/** Which relations the marks stand for. */
function legend(fixes: readonly CompletedFix[]): string {
  const lines = new Set<string>();
  const quantities = {
    wind: 'maxWindMps',
    pressure: 'centralPressurePa',
    ambient: 'ambientPressurePa',
    rmax: 'radiusOfMaxWindM',
    B: 'hollandB',
  } as const;
  for (const [name, key] of Object.entries(quantities)) {
    for (const fix of fixes) {
      const { origin, by } = fix[key];
      if (origin !== 'given') lines.add(`${MARKS[origin]} ${name}: ${origin}, ${by ?? ''}`);
      else if (by !== null) lines.add(`  ${name}: given, ${by}`);
    }
  }
  return [...lines].map((line) => `${line}\n`).join('');
}

function fixDocument(fix: CompletedFix): Record<string, unknown> {
  const traced = (value: Traced, factor = 1): Record<string, unknown> => ({
    value: Number((value.value * factor).toPrecision(9)),
    origin: value.origin,
    by: value.by,
  });
  return {
    time: new Date(fix.timeMs).toISOString(),
    line: fix.fix.line,
    lat_deg: fix.latDeg,
    lon_deg: fix.lonDeg,
    status: fix.fix.status,
    record: fix.fix.record,
    max_wind_mps: traced(fix.maxWindMps),
    central_pressure_hpa: traced(fix.centralPressurePa, 0.01),
    ambient_pressure_hpa: traced(fix.ambientPressurePa, 0.01),
    radius_of_max_wind_km: traced(fix.radiusOfMaxWindM, 0.001),
    holland_b: traced(fix.hollandB),
    wind_radii: fix.fix.windRadii.map((radii) => ({
      threshold_kt: Number(tidy(toKnots(radii.thresholdMps), 2)),
      averaging_s: fix.fix.averagingS,
      radii_km: radii.radiiM.map((m) => (m === null ? null : Number(tidy(m / 1000, 3)))),
    })),
  };
}

const minute = (iso: string): string => `${iso.slice(0, 16)}Z`;

/** Converts all storms of the file, or the one that is named. */
async function convert(file: string, options: TracksOptions, to: 'csv' | 'geojson' | 'svg' | 'png'): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const { storms } = stormsOf(file, options);
  const chosen: Track[] = [];
  if (options.storm !== undefined) chosen.push(await pickTrackFrom(storms, options.storm));
  else for await (const track of storms) chosen.push(track);
  for (const caution of chosen.flatMap((track) => track.cautions).slice(0, 20)) out.say(`caution: ${caution}`);
  const content =
    to === 'csv' ? tracksToCsv(chosen) : to === 'geojson' ? tracksToGeojson(chosen) : await drawing(chosen, to);
  if (options.out !== undefined) await writeWhole(options.out, [content], { force: options.force === true });
  else if (typeof content === 'string') out.print(content);
  else process.stdout.write(content);
}

async function drawing(chosen: readonly Track[], to: 'svg' | 'png'): Promise<string | Uint8Array> {
  const { trackSvg } = await import('../picture/track-svg.js');
  const { pictureCoast } = await import('../io/coast-picture.js');
  const svg = trackSvg(chosen, { coast: pictureCoast('50m') });
  return to === 'svg' ? svg : (await import('../io/png.js')).svgToPng(svg);
}
