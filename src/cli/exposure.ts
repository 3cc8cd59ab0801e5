import { basename, join } from 'node:path';
import { distanceM } from '../earth.js';
import { UsageError } from '../errors.js';
import { type AssetColumns, assetStore } from '../exposure/asset-columns.js';
import { assetOutcomes, type ExposureMeasures, exposureTotals } from '../exposure/exposure.js';
import { windAtPoints } from '../exposure/wind-at-points.js';
import { type ZoneFile, zonesOfGeojson } from '../exposure/zone-geojson.js';
import { sampleRows, zoneShares } from '../exposure/zone-winds.js';
import { zoneShape } from '../exposure/zones.js';
import { type InputRecord, readInputBytes, sha256Hex } from '../io/input.js';
import { readTextPieces, sourceName } from '../io/lines.js';
import { OutputFolder } from '../io/output.js';
import { type PointFile, readPoints } from '../io/points.js';
import { VERSION } from '../io/version.js';
import { type Recipe, recipeDocument, recipeNumber } from '../model/recipe.js';
import { type WindModel, windModel } from '../model/wind.js';
import { nearest } from '../nearest.js';
import { averagingFactor } from '../surface/averaging.js';
import { gustMethod } from '../surface/gust-method.js';
import { SEA_Z0_M } from '../surface/roughness.js';
import { WIND_SCALES, type WindScale } from '../surface/wind-scale.js';
import { shownList } from '../track/read/checks.js';
import { toKnots } from '../units.js';
import { assetsCsv, assetsGeojson, type ExposedAssets } from '../write/exposure-rows.js';
import {
  DAMAGE_CAUTION,
  type ExposureSummary,
  exposureDocument,
  zonesCsv,
  zonesGeojson,
} from '../write/exposure-summary.js';
import { CAUTION } from '../write/provenance.js';
import {
  type CommonOptions,
  levelsOf,
  list,
  type ModelOptions,
  oneOf,
  periodOf,
  recipeOf,
  type TrackOptions,
} from './choices.js';
import { type Console, makeConsole, table } from './console.js';
import { curveOf, curveWind, type DamageOptions } from './damage.js';
import { decayOnly, type LandOptions, landOfRun, refuseElsewhere } from './land.js';
import { readStorm } from './storm.js';

const FORMATS = ['csv', 'geojson', 'json'] as const;

export interface ExposureOptions extends CommonOptions, ModelOptions, TrackOptions, DamageOptions, LandOptions {
  readonly values?: string;
  readonly zones?: string;
  readonly zoneValues?: string;
  readonly levels: string;
  readonly of: 'wind' | 'gust';
  readonly scale?: string;
  readonly lossOf?: string;
  readonly currency?: string;
  readonly from?: string;
  readonly to?: string;
  readonly strict?: boolean;
  readonly out?: string;
  readonly formats?: string;
  readonly force?: boolean;
}

/** `galewake exposure`: what stands in the wind. */
export async function exposure(file: string, assetsFile: string, options: ExposureOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const clock = stopwatch();
  if (options.out === undefined && (options.formats !== undefined || options.force))
    throw new UsageError('exposure.out', '--formats and --force go with --out, the folder of the results');
  if ([file, assetsFile, options.zones, options.curve].filter((path) => path === '-').length > 1)
    throw new UsageError('exposure.input', 'only one of the files can be standard input (-)');
  const formats = [...new Set(list(options.formats ?? 'csv,json').map((name) => oneOf(name, FORMATS, '--formats')))];
  if (formats.length === 0) throw new UsageError('formats', `--formats: name at least one of ${FORMATS.join(', ')}`);
  const levelsMps = levelsOf(options.levels);
  const recipe = await recipeOf(options);
  const gustFactor = gustAtSea(recipe);
  const { track, inputs } = await readStorm(file, options);
  const known = await landOfRun(options, 2000);
  const model = windModel(track, known ? decayOnly(recipe) : recipe, {
    ...(known ? { land: known.land } : {}),
    lowestLevelMps: levelsMps[0]! / (options.of === 'gust' ? gustFactor : 1),
  });
  refuseElsewhere(known, model);
  const period = periodOf(options.from, options.to, model.path, ['--from', '--to']);
  const scale = scaleOf(options.scale, model);
  const gustDurationS = recipeNumber(recipe, 'gust.duration_s');
  const damage = await curveOf(options, { averagingS: model.averagingS, gustDurationS });
  if (options.lossOf !== undefined && !damage)
    throw new UsageError('curve.none', '--loss-of goes with a curve: --curve, --cubic or --power');
  const zoneFile = options.zones === undefined ? null : await readZones(options.zones, options);

  const interrupted = new AbortController();
  const stop = (): void => interrupted.abort();
  process.once('SIGINT', stop);
  const files = filesOf(formats, zoneFile !== null);
  const folder =
    options.out === undefined
      ? null
      : await OutputFolder.open(options.out, { force: options.force === true, signal: interrupted.signal });
  try {
    await folder?.check(files);
    out.progress('assets …');
    const store = assetStore();
    const read = await readPoints(assetsFile, {
      onPoint: store.add,
      ...(options.values === undefined ? {} : { values: list(options.values) }),
      ...(options.strict ? { strict: true } : {}),
    });
    const assets = store.columns();
    const columns = lossColumns(options.lossOf, read.valueNames);
    clock.lap('read_s');

    const levelsOfWind = levelsMps.map((level) => level / (options.of === 'gust' ? gustFactor : 1));
    const winds = await windAtPoints(model, assets, {
      thresholdsMps: levelsOfWind,
      ...period,
      signal: interrupted.signal,
      onProgress: (share) => out.progress(`wind ${Math.round(100 * share)} %`),
    });
    const zones = zoneFile?.zones ?? [];
    const shapes = zones.map(zoneShape);
    const shares = await zoneShares(model, shapes, { levelsMps: levelsOfWind, ...period, signal: interrupted.signal });
    clock.lap('compute_s');

    const converted = damage && curveWind(damage.curve, model);
    const measures: ExposureMeasures = {
      levelsMps,
      of: options.of,
      gustFactor,
      classes: scale && classesOf(scale, model),
      damage: damage && converted && { curve: damage.curve, windOf: converted.windOf, columns },
      zones: shapes,
    };
    const outcomes = assetOutcomes(assets, winds, measures);
    const totals = exposureTotals(assets, outcomes, {
      levels: levelsMps.length,
      classes: scale?.classes.length ?? 0,
      zones: zones.length,
    });
    const exposed: ExposedAssets = {
      assets,
      outcomes,
      valueNames: read.valueNames,
      levelsMps,
      of: options.of,
      classCodes: scale?.classes.map(({ code }) => code) ?? [],
      zoneNames: zones.map((zone) => zone.name),
    };
    const summary: ExposureSummary = {
      provenance: {
        storm: track.id,
        ...(track.name === null ? {} : { stormName: track.name }),
        version: VERSION,
        recipe: recipeDocument(recipe),
        inputs: [
          ...inputs,
          ...(known?.inputs ?? []),
          read.record,
          ...(zoneFile ? [zoneFile.record] : []),
          ...(damage?.input ? [damage.input] : []),
        ],
        period: { startMs: period.fromMs, endMs: period.toMs },
      },
      averagingS: model.averagingS,
      gustDurationS,
      of: options.of,
      levelsMps,
      valueNames: read.valueNames,
      ...(options.currency === undefined ? {} : { currency: options.currency }),
      totals,
      scale,
      curve: damage && converted && { curve: damage.curve, conversion: converted.conversion },
      zones: zones.map((zone, k) => ({ zone, shape: shapes[k]!, shares: shares[k]! })),
      zoneSampleRows: zones.length > 0 ? sampleRows(zones.length) : 0,
      skipped: { count: read.skippedCount, unit: read.unit, rows: read.skipped },
      zonesSkipped: zoneFile?.skipped ?? [],
      cautions: [
        ...new Set([
          ...model.cautions,
          ...winds.cautions,
          ...cautionsOfAssets(assets, read, {
            model,
            peak: outcomes.windMps,
            valuesGiven: options.values !== undefined,
          }),
          ...(zoneFile?.cautions ?? []),
          ...cautionsOfZones(zoneFile, outcomes),
          ...cautionsOfCurve(damage?.curve ?? null, outcomes),
          ...(recipe['land.surface'] === 'on'
            ? ['land.surface is on, but the wind at assets is that over open sea: roughness does not act on it']
            : []),
        ]),
      ],
      files: folder ? files : [],
      timings: {},
    };
    if (folder) {
      out.progress('files …');
      for (const name of files) {
        if (name === 'assets.csv') await folder.write(name, assetsCsv(exposed));
        if (name === 'assets.geojson')
          await folder.write(
            name,
            assetsGeojson(exposed, { caution: CAUTION, ...(damage ? { damage_caution: DAMAGE_CAUTION } : {}) }),
          );
        if (name === 'zones.csv') await folder.write(name, [zonesCsv(summary)]);
        if (name === 'zones.geojson') await folder.write(name, [zonesGeojson(summary)]);
      }
    }
    clock.lap('write_s');
    const document = exposureDocument({ ...summary, timings: clock.times() });
    if (folder) {
      if (files.includes('summary.json'))
        await folder.write('summary.json', [`${JSON.stringify(document, null, 2)}\n`]);
      await folder.commit();
    }
    out.progress('');
    if (options.json) out.print(`${JSON.stringify(document, null, 2)}\n`);
    else report(out, summary, folder ? files.map((name) => join(folder.path, name)) : []);
  } finally {
    await folder?.discard();
    process.removeListener('SIGINT', stop);
  }
}

const counted = (count: number, one: string, many: string): string => `${count} ${count === 1 ? one : many}`;

function stopwatch(): { lap: (name: string) => void; times: () => Record<string, number> } {
  const started = performance.now();
  let last = started;
  const laps: Record<string, number> = {};
  const seconds = (ms: number): number => Number((ms / 1000).toFixed(3));
  return {
    lap(name) {
      const now = performance.now();
      laps[name] = seconds(now - last);
      last = now;
    },
    times: () => ({ ...laps, total_s: seconds(performance.now() - started) }),
  };
}

function filesOf(formats: readonly string[], zones: boolean): string[] {
  return [
    ...(formats.includes('csv') ? ['assets.csv', ...(zones ? ['zones.csv'] : [])] : []),
    ...(formats.includes('geojson') ? ['assets.geojson', ...(zones ? ['zones.geojson'] : [])] : []),
    ...(formats.includes('json') ? ['summary.json'] : []),
  ];
}

/** The gust factor of a recipe at sea. */
export function gustAtSea(recipe: Recipe): number {
  return gustMethod(recipe['gust.method']).factor({
    exposure: 'at-sea',
    z0M: SEA_Z0_M,
    durationS: recipeNumber(recipe, 'gust.duration_s'),
    periodS: recipeNumber(recipe, 'wind.averaging_s'),
  });
}

/** The scale of the classes: the one that is named, or Saffir–Simpson for 1-min winds. */
function scaleOf(name: string | undefined, model: WindModel): WindScale | null {
  if (name === 'none') return null;
  if (name === undefined)
    return model.averagingS === 60 ? WIND_SCALES.find(({ id }) => id === 'saffir-simpson')! : null;
  const id = oneOf(name, [...WIND_SCALES.map((scale) => scale.id), 'none'], '--scale');
  const scale = WIND_SCALES.find((one) => one.id === id)!;
  classesOf(scale, model);
  return scale;
}

/** Lower bounds of a scale's classes in the model's own wind or gust. */
function classesOf(scale: WindScale, model: WindModel): { of: 'wind' | 'gust'; boundsMps: number[] } {
  const gustDurationS = model.recipe['gust.duration_s'] as number;
  if (scale.averagingS < 60) {
    if (scale.averagingS !== gustDurationS)
      throw new UsageError(
        'scale.gust',
        `--scale ${scale.id} is for gusts of ${scale.averagingS} s; the recipe's gust.duration_s is ${gustDurationS}`,
      );
    return { of: 'gust', boundsMps: scale.classes.map((one) => one.fromMps) };
  }
  const factor = averagingFactor('at-sea', { fromS: model.averagingS, toS: scale.averagingS });
  return { of: 'wind', boundsMps: scale.classes.map((one) => one.fromMps / factor) };
}

/** Columns of values that a curve is applied to: those that are named, or all. */
export function lossColumns(text: string | undefined, valueNames: readonly string[]): number[] {
  if (text === undefined) return valueNames.map((_, c) => c);
  return list(text).map((name) => {
    const column = valueNames.findIndex((one) => one.toLowerCase() === name.toLowerCase());
    if (column === -1) {
      const near = nearest(name, valueNames);
      throw new UsageError(
        'curve.columns',
        `--loss-of: '${name}' is no value column; they are ${shownList(valueNames) || 'none'}${near ? `; did you mean ${near}?` : ''}`,
      );
    }
    return column;
  });
}

async function readZones(path: string, options: ExposureOptions): Promise<ZoneFile & { record: InputRecord }> {
  const pieces: string[] = [];
  for await (const piece of readTextPieces(path)) pieces.push(piece);
  const text = pieces.join('').replace(/^\uFEFF/, '');
  const file = zonesOfGeojson(text, {
    source: sourceName(path),
    ...(options.zoneValues === undefined ? {} : { values: list(options.zoneValues) }),
    ...(options.strict ? { strict: true } : {}),
  });
  const sha256 = path === '-' ? sha256Hex(pieces.join('')) : sha256Hex(await readInputBytes(path));
  return { ...file, record: { name: path === '-' ? 'standard input' : basename(path), sha256 } };
}

function cautionsOfAssets(
  assets: AssetColumns,
  read: PointFile,
  { model, peak, valuesGiven }: { model: WindModel; peak: Float64Array; valuesGiven: boolean },
): string[] {
  const cautions: string[] = [];
  if (read.skippedCount > 0)
    cautions.push(
      `${counted(read.skippedCount, 'row was', 'rows were')} skipped: ${read.skipped
        .slice(0, 3)
        .map((row) => `${read.unit} ${row.line}, ${row.reason}`)
        .join('; ')}${read.skippedCount > 3 ? ' … (the summary lists them)' : ''}`,
    );
  if (assets.count === 0) cautions.push('there is no asset in the file');
  if (assets.sameNames.count > 0)
    cautions.push(
      `${counted(assets.sameNames.count, 'asset has', 'assets have')} a name that came before, such as '${assets.sameNames.example}'; each row is kept and counted`,
    );
  if (assets.atZero > 0)
    cautions.push(
      `${counted(assets.atZero, 'asset lies', 'assets lie')} at 0° N, 0° E; does that stand for a missing place?`,
    );
  if (assets.count > 0 && read.valueNames.length === 0 && !valuesGiven)
    cautions.push('no column of values was found: assets are only counted');
  else if (!valuesGiven && read.unusedNames.length > 0)
    cautions.push(
      `taken as values: ${shownList(read.valueNames)}; not taken, as their first cell is no number: ${shownList(read.unusedNames)}. --values names the columns`,
    );
  if (assets.count > 0 && !peak.some((wind) => wind > 0)) {
    const swapped = nearTrack(model, assets, { swapped: true });
    cautions.push(
      `no asset lies within ${Math.round(model.outerRadiusM / 1000)} km of the track, the model's radius${
        swapped ? '; with latitude and longitude exchanged some would: are they swapped?' : ''
      }`,
    );
  }
  return cautions;
}

/** Whether any of some assets lies in the model's reach. */
function nearTrack(model: WindModel, assets: AssetColumns, { swapped }: { swapped: boolean }): boolean {
  const { startMs, endMs } = model.path;
  const centres = Array.from({ length: 100 }, (_, i) => model.path.at(startMs + ((endMs - startMs) * i) / 99));
  const step = Math.max(1, Math.floor(assets.count / 1000));
  for (let i = 0; i < assets.count; i += step) {
    const place = swapped
      ? { latDeg: assets.lonDeg[i]!, lonDeg: assets.latDeg[i]! }
      : { latDeg: assets.latDeg[i]!, lonDeg: assets.lonDeg[i]! };
    if (Math.abs(place.latDeg) > 90) continue;
    if (centres.some((centre) => distanceM(centre, place) < model.outerRadiusM)) return true;
  }
  return false;
}

function cautionsOfZones(
  file: ZoneFile | null,
  outcomes: { zone: Int32Array; furtherZones: ReadonlyMap<number, unknown> },
): string[] {
  if (!file) return [];
  const cautions: string[] = [];
  if (file.skipped.length > 0)
    cautions.push(
      `${counted(file.skipped.length, 'feature of the zones was', 'features of the zones were')} skipped: ${file.skipped
        .slice(0, 3)
        .map((row) => `feature ${row.line}, ${row.reason}`)
        .join('; ')}${file.skipped.length > 3 ? ' …' : ''}`,
    );
  if (outcomes.furtherZones.size > 0)
    cautions.push(
      `${counted(outcomes.furtherZones.size, 'asset lies', 'assets lie')} in more than one zone, each of which counts them`,
    );
  const outside = outcomes.zone.reduce((sum, zone) => sum + (zone < 0 ? 1 : 0), 0);
  if (outside > 0) cautions.push(`${counted(outside, 'asset lies', 'assets lie')} in no zone`);
  return cautions;
}

function cautionsOfCurve(
  curve: { knownFromMps: number; knownToMps: number } | null,
  outcomes: { belowCurve: number; aboveCurve: number },
): string[] {
  const cautions: string[] = [];
  if (curve && outcomes.aboveCurve > 0)
    cautions.push(
      `${counted(outcomes.aboveCurve, 'asset has', 'assets have')} more wind than the curve's last row, ${curve.knownToMps.toFixed(1)} m/s: its last ratio is held, which may be too low`,
    );
  if (curve && outcomes.belowCurve > 0)
    cautions.push(
      `${counted(outcomes.belowCurve, 'asset has', 'assets have')} less wind than the curve's first row, ${curve.knownFromMps.toFixed(1)} m/s, whose ratio is above 0: no loss is taken below it`,
    );
  return cautions;
}

/** What a person sees at the end. */
function report(out: Console, summary: ExposureSummary, files: readonly string[]): void {
  const { totals, valueNames, provenance, curve } = summary;
  const name = provenance.stormName ? `${provenance.stormName} (${provenance.storm})` : provenance.storm;
  const unit = summary.currency === undefined ? '' : ` (${summary.currency})`;
  const losses = valueNames.flatMap((value, c) => (totals.all.losses[c] ? [{ value, c }] : []));
  const cells = (tally: (typeof totals)['all']): string[] => [
    String(tally.assets),
    ...tally.values.map((sum) => plain(sum.value())),
    ...losses.map(({ c }) => plain(tally.losses[c]!.value())),
  ];
  const headings = ['assets', ...valueNames, ...losses.map(({ value }) => `loss of ${value}`)];
  out.print(`${name}: ${counted(totals.all.assets, 'asset', 'assets')}${unit}\n\n`);
  out.print(
    table([
      [`${summary.of} kt`, 'm/s', ...headings],
      ...summary.levelsMps.map((level, k) => [
        String(Number(toKnots(level).toFixed(1))),
        level.toFixed(2),
        ...cells(totals.levels[k]!),
      ]),
      ['all', '', ...cells(totals.all)],
    ]),
  );
  if (summary.scale)
    out.print(
      `\n${table([['class', ...headings], ...summary.scale.classes.map((one, k) => [one.name, ...cells(totals.classes[k]!)])])}`,
    );
  if (summary.zones.length > 0) {
    const shown = summary.levelsMps.map((level) => `${Number(toKnots(level).toFixed(1))} kt`);
    out.print(
      `\n${table([
        ['zone', 'area km²', ...shown.map((one) => `≥ ${one}`), 'assets'],
        ...summary.zones.map(({ zone, shape, shares }, k) => [
          zone.name,
          (shape.areaM2 / 1e6).toFixed(0),
          ...shares.map((share) => `${(100 * share).toFixed(1)} %`),
          String(totals.zones[k]!.all.assets),
        ]),
      ])}`,
    );
  }
  if (curve) out.print(`\ncurve: ${curve.curve.title}; ${curve.conversion}\n`);
  if (files.length > 0) out.print(`\n${files.join('\n')}\n`);
  for (const caution of summary.cautions) out.say(`caution: ${caution}`);
  if (curve) out.say(DAMAGE_CAUTION);
  out.say(CAUTION);
}

/** A number of a table: whole where it is large. */
const plain = (value: number): string => (value >= 1e6 ? value.toFixed(0) : String(value));
