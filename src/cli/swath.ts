import { join } from 'node:path';
import { UsageError } from '../errors.js';
import { isotachs } from '../isotach/isotachs.js';
import { recipeDocument } from '../model/recipe.js';
import { windModel } from '../model/wind.js';
import { gustFactor } from '../surface/averaging.js';
import { windClass } from '../surface/wind-scale.js';
import { fitGrid, METRES_PER_DEGREE } from '../swath/fit.js';
import { type Grid, gridOver, projection } from '../swath/grid.js';
import { peakSwath } from '../swath/peak.js';
import { parseQuantity, toKnots } from '../units.js';
import { CAUTION } from '../write/provenance.js';
import { peakOf, summaryDocument } from '../write/summary.js';
import {
  type CommonOptions,
  countOf,
  levelsOf,
  list,
  type ModelOptions,
  oneOf,
  periodOf,
  recipeOf,
  type TrackOptions,
} from './choices.js';
import { type Console, makeConsole, table } from './console.js';
import { drawnOf } from './drawn.js';
import { type LandOptions, landNotes, landOfRun, landOnMap, refuseElsewhere, surfaceOfRun, WORLD } from './land.js';
import { readStorm } from './storm.js';
import { FORMATS, openFolder, writeSwath } from './swath-files.js';
import type { SwathResult } from './swath-result.js';

export interface SwathCommandOptions extends CommonOptions, ModelOptions, TrackOptions, LandOptions {
  readonly surfaceBands?: boolean;
  readonly from?: string;
  readonly to?: string;
  readonly levels: string;
  readonly of: 'wind' | 'gust';
  readonly bands?: boolean;
  readonly crs: string;
  readonly bounds?: string;
  readonly cell?: string;
  readonly out?: string;
  readonly formats: string;
  readonly force?: boolean;
  readonly jobs?: string;
  readonly places?: string;
  readonly zones?: string;
}

/** `galewake swath`: from a track to isotachs, rasters and a summary. */
export async function swath(file: string, options: SwathCommandOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const startedAt = performance.now();
  const formats = list(options.formats).map((format) => oneOf(format, FORMATS, '--formats'));
  if (formats.length === 0) throw new UsageError('formats', `--formats: name at least one of ${FORMATS.join(', ')}`);
  const levels = levelsOf(options.levels);
  const jobs = options.jobs === undefined ? undefined : countOf(options.jobs, { name: '--jobs', least: 1 });
  const recipe = await recipeOf(options);
  const { track, inputs } = await readStorm(file, options);
  const drawn = await drawnOf(options);
  const readAt = performance.now();

  const known = await landOfRun(options, cellMOf(options));
  const model = windModel(track, recipe, { lowestLevelMps: levels[0]!, ...(known ? { land: known.land } : {}) });
  const gust = gustFactor('at-sea', { durationS: recipe['gust.duration_s'] as number, periodS: model.averagingS });
  const period = periodOf(options.from, options.to, model.path, ['--from', '--to']);
  const grid = gridOf(options, (crs, cell) =>
    fitGrid(model, { crs, cell, lowestMps: levels[0]! / (options.of === 'gust' ? gust : 1), ...period }),
  );
  refuseElsewhere(known, model, grid);
  const over = await surfaceOfRun(model, grid, known);
  if (options.surfaceBands && !over)
    throw new UsageError('surface-bands', `--surface-bands needs land: add --land ${WORLD}, or --land FILE`);
  const interrupted = new AbortController();
  const stop = (): void => interrupted.abort();
  process.once('SIGINT', stop);
  const folder = await openFolder(options.out ?? null, {
    storm: track.id,
    formats,
    force: options.force === true,
    signal: interrupted.signal,
  });
  try {
    out.progress('wind …');
    const field = await peakSwath(model, grid, {
      ...period,
      ...(jobs === undefined ? {} : { jobs }),
      ...(over ? { surface: over.surface } : {}),
      signal: interrupted.signal,
      onProgress: (share) => out.progress(`wind ${Math.round(100 * share)} %`),
    });
    const computedAt = performance.now();
    out.progress('isotachs …');
    const areas = isotachs(options.of === 'gust' ? field.gustMps : field.windMps, grid, {
      levelsMps: levels,
      bands: options.bands === true,
    });
    const isotachsAt = performance.now();
    out.progress('files …');
    const cautions = [...new Set([...field.cautions, ...model.cautions, ...drawn.cautions, ...(over?.cautions ?? [])])];
    if (areas.every((area) => area.polygons.length === 0))
      cautions.push(
        `no ${options.of} reaches the lowest level, ${toKnots(levels[0]!).toFixed(0)} kt: there is no isotach`,
      );
    const result: SwathResult = {
      model,
      swath: field,
      isotachs: areas,
      quantity: options.of,
      bands: options.bands === true,
      cautions,
      levels,
      places: drawn.places,
      zones: drawn.zones,
      land: landOnMap(known, recipe),
      surface: options.surfaceBands && over ? over.surface : null,
      classOf: (thresholdMps) =>
        options.of === 'wind' && model.averagingS === 60
          ? windClass(thresholdMps, { scale: 'saffir-simpson' }).name
          : null,
      period,
      provenance: {
        storm: track.id,
        ...(track.name === null ? {} : { stormName: track.name }),
        version: await version(),
        recipe: recipeDocument(recipe),
        inputs: [...inputs, ...(known?.inputs ?? [])],
        period: { startMs: period.fromMs, endMs: period.toMs },
      },
    };
    const summaryOf = (files: readonly string[]): Record<string, unknown> => {
      const now = performance.now();
      const seconds = (from: number, to: number): number => Number(((to - from) / 1000).toFixed(3));
      return summaryDocument({
        ...result,
        completed: model.completed,
        levels: areas,
        notes: landNotes(known, model),
        files,
        timings: {
          read_s: seconds(startedAt, readAt),
          compute_s: seconds(readAt, computedAt),
          isotach_s: seconds(computedAt, isotachsAt),
          write_s: seconds(isotachsAt, now),
          total_s: seconds(startedAt, now),
        },
      });
    };
    const written = await writeSwath(result, { folder, formats, summaryOf });
    out.progress('');
    if (options.json) out.print(`${JSON.stringify(written.summary, null, 2)}\n`);
    else report(out, result, grid, { folder: folder.path, files: written.files });
  } finally {
    await folder.discard();
    process.removeListener('SIGINT', stop);
  }
}

/** The edge of a cell on the ground, m. */
function cellMOf(options: SwathCommandOptions): number {
  const { cell, geographic } = cellOf(options);
  return geographic ? cell * METRES_PER_DEGREE : cell;
}

/** The edge of a cell in units of the reference system. */
function cellOf(options: SwathCommandOptions): { cell: number; geographic: boolean } {
  const { geographic } = projection(options.crs);
  const size = parseQuantity(options.cell ?? (geographic ? '0.02deg' : '2km'), ['angle', 'length'], {
    bareUnit: geographic ? 'deg' : 'm',
    name: '--cell',
  });
  if (!(size.value > 0))
    throw new UsageError('grid.cell', `--cell ${options.cell}: the cell size is a positive length or angle`);
  const cell =
    size.kind === 'angle'
      ? geographic
        ? size.value
        : size.value * METRES_PER_DEGREE
      : geographic
        ? size.value / METRES_PER_DEGREE
        : size.value;
  return { cell, geographic };
}

/** The grid that is asked for, or one fitted to the storm. */
function gridOf(options: SwathCommandOptions, fitted: (crs: string, cell: number) => Grid): Grid {
  const { cell, geographic } = cellOf(options);
  if (options.bounds === undefined) return fitted(options.crs, cell);
  const edges = list(options.bounds).map(Number);
  if (edges.length !== 4 || edges.some((edge) => !Number.isFinite(edge)))
    throw new UsageError('grid.bounds', `--bounds ${options.bounds}: give four numbers, west,south,east,north`);
  const [west, south, east, north] = edges as [number, number, number, number];
  // 175,…,-175 runs across ±180°
  const eastward = geographic && east < west ? east + 360 : east;
  return gridOver({ crs: options.crs, bounds: [west, south, eastward, north], cell });
}

/** What a person sees at the end. */
function report(
  out: Console,
  result: SwathResult,
  grid: Grid,
  written: { folder: string; files: readonly string[] },
): void {
  const peak = peakOf(result.swath);
  const name = result.provenance.stormName
    ? `${result.provenance.stormName} (${result.provenance.storm})`
    : result.provenance.storm;
  out.print(`${name}: ${time(result.period.fromMs)} to ${time(result.period.toMs)}\n`);
  if (peak.time !== null) {
    out.print(
      `peak wind ${peak.wind_mps.toFixed(1)} m/s (${toKnots(peak.wind_mps).toFixed(0)} kt, mean over ${result.swath.averagingS} s) at ${place(peak.lat_deg!, peak.lon_deg!)}, ${time(Date.parse(peak.time))}; highest gust ${peak.gust_mps.toFixed(1)} m/s (${result.swath.gustDurationS} s)\n`,
    );
  }
  out.print(`grid ${grid.nx} × ${grid.ny} cells, ${grid.crs}\n\n`);
  out.print(
    table([
      [`${result.quantity} kt`, 'm/s', 'area km²'],
      ...result.isotachs.map((one) => [
        tidyKnots(one.thresholdMps),
        one.thresholdMps.toFixed(2),
        (one.areaM2 / 1e6).toFixed(0),
      ]),
    ]),
  );
  out.print(`\n${written.files.map((file) => join(written.folder, file)).join('\n')}\n`);
  for (const caution of result.cautions) out.say(`caution: ${caution}`);
  out.say(CAUTION);
}

const tidyKnots = (speedMps: number): string => String(Number(toKnots(speedMps).toFixed(1)));
const time = (ms: number): string => `${new Date(ms).toISOString().slice(0, 16)}Z`;
const place = (lat: number, lon: number): string =>
  `${Math.abs(lat).toFixed(2)}°${lat < 0 ? 'S' : 'N'} ${Math.abs(lon).toFixed(2)}°${lon < 0 ? 'W' : 'E'}`;

/** The package's version. */
async function version(): Promise<string> {
  return (await import('../io/version.js')).VERSION;
}
