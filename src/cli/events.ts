import { spawn } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { availableParallelism, tmpdir } from 'node:os';
import { basename, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { GalewakeError, InputError, LimitError, UsageError } from '../errors.js';
import { hasRadii, trackText, usualShards, withRates } from '../events/event-index.js';
import type { NamedPlace } from '../events/event-row.js';
import { OPEN_SEA } from '../events/open-sea.js';
import { taskIndex } from '../events/task-index.js';
import { eventTableOf, readRates } from '../io/event-input.js';
import { EventRun, hashOf, indexEvents, type Manifest, readRange } from '../io/event-run.js';
import { readInputBytes } from '../io/input.js';
import { readPoints } from '../io/points.js';
import { makeRecipe, recipeDocument } from '../model/recipe.js';
import { nearest } from '../nearest.js';
import { gridOver } from '../swath/grid.js';
import { knots, quantityOf } from '../units.js';
import { CAUTION } from '../write/provenance.js';
import { type CommonOptions, countOf, list, type ModelOptions, readOptionsOf, recipeOf } from './choices.js';
import { type Console, makeConsole } from './console.js';
import { WORLD } from './land.js';

export interface PlanOptions extends CommonOptions, ModelOptions {
  readonly out: string;
  readonly shards?: string;
  readonly crs: string;
  readonly bounds?: string;
  readonly cell: string;
  readonly least: string;
  readonly years?: string;
  readonly rates?: string;
  readonly columns?: string;
  readonly places?: string;
  readonly landfalls?: string;
  readonly badEvents: 'stop' | 'set-aside';
  readonly jobs?: string;
}

/** Exit codes of a shard, as batch engines want them: whether to try again. */
export const SHARD_EXIT = { usage: 64, input: 65, model: 70, disk: 74, stopped: 75 } as const;
/** Exit code of `missing` and `reduce` where shards are missing. */
const MISSING_EXIT = 3;

/** `galewake events plan`: what a run does, written once. */
export async function plan(input: string, options: PlanOptions): Promise<EventRun> {
  const out = makeConsole({ quiet: options.quiet === true });
  const chosen = await recipeOf(options);
  if (chosen['surface.layer'] !== 'none' || chosen['surface.motion'] === 'georgiou-1985')
    throw new UsageError(
      'events.recipe',
      'event sets take every wind from the fast tables, which blur the edges of surface.layer=kepert-2001 and surface.motion=georgiou-1985; choose another method, or run such storms singly with galewake swath',
    );
  const recipe = recipeDocument(chosen);
  if (options.bounds === undefined)
    throw new UsageError('grid.bounds', '--bounds W,S,E,N: an event set needs the edges of its grid');
  const edges = list(options.bounds).map(Number);
  if (edges.length !== 4 || edges.some((edge) => !Number.isFinite(edge)))
    throw new UsageError('grid.bounds', `--bounds ${options.bounds}: give four numbers, west,south,east,north`);
  const cell = quantityOf('angle', options.cell, { bareUnit: 'deg', name: '--cell' });
  const bounds = edges as [number, number, number, number];
  // refuses what is no grid now rather than in every shard
  gridOver({ crs: options.crs, bounds, cell });
  const leastMps = quantityOf('speed', options.least, { bareUnit: 'kt', name: '--least' });
  const places = options.places === undefined ? [] : await placesOf(options.places);
  const land = await landOfLandfalls(options.landfalls);
  const table = await eventTableOf(input, options.out);
  const { heading, events: listed, sha256 } = await indexEvents(table, readOptionsOf(options).columns);
  const years = options.years === undefined ? null : Number(options.years);
  if (years !== null && !(years > 0))
    throw new UsageError('events.years', `--years ${options.years}: a number above zero`);
  const given = [
    heading.rateAt >= 0 && "the set's column rate",
    years !== null && '--years',
    options.rates !== undefined && '--rates',
  ];
  const twice = given.filter((one) => one !== false);
  if (twice.length > 1)
    throw new UsageError('events.years', `${twice.join(' and ')}: an event has one rate; leave out all but one`);
  const events =
    options.rates === undefined ? listed : withRates(listed, await readRates(options.rates), basename(options.rates));
  const run = await EventRun.create(
    options.out,
    {
      input: table,
      inputsSha256: sha256,
      recipe,
      recipeSha256: hashOf(JSON.stringify(recipe)),
      grid: { crs: options.crs, bounds, cell },
      leastMps,
      badEvents: options.badEvents,
      shards: Math.min(
        events.length,
        countOf(options.shards ?? String(usualShards(events.length)), { name: '--shards', least: 1 }),
      ),
      years,
      ...(options.rates === undefined ? {} : { ratesSha256: hashOf(await readInputBytes(options.rates)) }),
      table: {
        levelsMps: LEVELS_KT.map(knots).filter((level) => level >= leastMps - 1e-9),
        places,
        landfalls: land !== null,
        ...land,
      },
    },
    { heading, events },
  );
  if (options.quiet !== true)
    out.print(`${run.plan.events} events in ${run.plan.shards} shards: ${run.folder}/plan.json\n`);
  return run;
}

/** Levels of the event table and of `show`, kt. */
const LEVELS_KT = [34, 50, 64, 83, 96, 113, 137];

async function placesOf(path: string): Promise<NamedPlace[]> {
  const places: NamedPlace[] = [];
  await readPoints(path, {
    values: [],
    strict: true,
    onPoint: ({ name, latDeg, lonDeg }) => places.push({ name, latDeg, lonDeg }),
  });
  if (places.length === 0)
    throw new InputError('events.places', `${basename(path)}: holds no place; give name,lat_deg,lon_deg`);
  return places;
}

/** The land of landfalls as a plan holds it; null where nobody asks for them. */
async function landOfLandfalls(
  land: string | undefined,
): Promise<{ readonly land: string; readonly landSha256?: string } | null> {
  if (land === undefined || land === 'none') return null;
  if (land === WORLD) return { land };
  const { record } = await (await import('../io/land-file.js')).readLand(land);
  return { land: resolve(land), landSha256: record.sha256 };
}

/** `galewake events shard`: one shard of a run; its exit code says whether to try again. */
export async function shard(folder: string, index: string | undefined, options: CommonOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  process.once('SIGTERM', () => process.exit(SHARD_EXIT.stopped));
  try {
    const run = await EventRun.open(folder);
    const number = taskIndex({ argument: index, env: process.env, shards: run.plan.shards });
    const { runShard } = await import('../io/event-shard.js');
    const { manifest, done } = await runShard(run, number);
    out.say(done ? `shard ${number}: ${manifest.rows} rows in ${manifest.seconds} s` : `shard ${number}: done already`);
    if (options.json) out.print(`${JSON.stringify(manifest)}\n`);
  } catch (error) {
    out.say(`galewake: ${(error as Error).message}`);
    process.exitCode = shardExit(error);
  }
}

/** What a failure of a shard tells a batch engine. */
function shardExit(error: unknown): number {
  const { code } = error as { code?: string };
  // a full disk or a lost file system may be mended by another try, elsewhere or later
  if (code?.startsWith('io.') || (code?.startsWith('E') && !(error instanceof GalewakeError))) return SHARD_EXIT.disk;
  if (error instanceof UsageError) return SHARD_EXIT.usage;
  return error instanceof InputError ? SHARD_EXIT.input : SHARD_EXIT.model;
}

/** Says why shards that had been done are missing. */
function sayFaults(run: EventRun, out: Console): void {
  for (const [shard, fault] of [...run.faults].slice(0, 20))
    out.say(`shard ${shard}: ${fault}; it is to be done again`);
  if (run.faults.size > 20) out.say(`and ${run.faults.size - 20} more shards`);
}

/** `galewake events missing`: the shards that are not done, checked by their checksums. */
export async function missing(folder: string, options: CommonOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const run = await EventRun.open(folder);
  await run.tidy();
  const shards = await run.missing();
  sayFaults(run, out);
  const faults = Object.fromEntries(run.faults);
  out.print(
    options.json ? `${JSON.stringify({ schema: 'galewake-missing/1', shards, faults })}\n` : `${shards.join(',')}\n`,
  );
  if (shards.length > 0) process.exitCode = MISSING_EXIT;
}

/** The manifests of a run whose shards are all done; else null: what is missing has been said and the exit code set. */
export async function manifestsOf(run: EventRun, out: Console): Promise<Manifest[] | null> {
  const manifests: Manifest[] = [];
  const absent: number[] = [];
  for (let number = 0; number < run.plan.shards; number++) {
    const manifest = await run.manifest(number, { checksum: true });
    if (manifest) manifests.push(manifest);
    else absent.push(number);
  }
  if (absent.length === 0) return manifests;
  sayFaults(run, out);
  out.print(`${absent.join(',')}\n`);
  out.say(
    `galewake: ${absent.length} of ${run.plan.shards} shards are missing; do them with galewake events shard ${run.folder} N`,
  );
  process.exitCode = MISSING_EXIT;
  return null;
}

/** What is to be said of events that were set aside: they count as if they had no wind. */
export function setAsideCautions(manifests: readonly Manifest[]): string[] {
  const count = manifests.reduce((sum, { setAside }) => sum + setAside.length, 0);
  const first = manifests.find(({ setAside }) => setAside.length > 0)?.setAside[0];
  return first
    ? [
        `${count} ${count === 1 ? 'event was' : 'events were'} set aside, such as '${first.event}' (row ${first.row}): no wind of theirs counts`,
      ]
    : [];
}

/** `galewake events reduce`: return-period maps of all shards. */
export async function reduce(folder: string, options: CommonOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const run = await EventRun.open(folder);
  const manifests = await manifestsOf(run, out);
  if (!manifests) return;
  const { RETURN_YEARS, returnPeriodMaps } = await import('../io/event-hazard.js');
  const { files: maps, cautions } = await returnPeriodMaps(run, manifests);
  const { joinEventTables } = await import('../io/event-table.js');
  const files = [...maps, ...(await joinEventTables(run, manifests))];
  const setAside = manifests.flatMap((manifest) => manifest.setAside);
  if (hasRadii(run.heading) && makeRecipe(run.plan.recipe)['vortex.radii'] === 'fit')
    cautions.push(
      'observed wind radii shape the fields of this set: the fast tables hold them in part, some cells may be off by up to 0.8 m/s; vortex.radii=ignore leaves the radii out',
    );
  // one event more or less decides what is rarer than the rarest of them
  const longest = 1 / run.events.reduce((least, { rate }) => Math.min(least, rate), Number.POSITIVE_INFINITY);
  const beyond = RETURN_YEARS.filter((years) => years > longest);
  if (beyond.length > 0)
    cautions.push(
      `the rarest event comes once in ${longest.toFixed(0)} years; the maps of ${beyond.join(', ')} years show the highest wind of the set`,
    );
  for (const caution of cautions) out.say(`caution: ${caution}`);
  for (const { event, row, why } of setAside.slice(0, 20)) out.say(`set aside: event '${event}' (row ${row}): ${why}`);
  if (options.json)
    out.print(
      `${JSON.stringify({ schema: 'galewake-event-run/1', events: run.plan.events, set_aside: setAside, files, cautions, surface: OPEN_SEA, caution: CAUTION }, null, 2)}\n`,
    );
  else {
    out.print(`${run.plan.events - setAside.length} events, ${setAside.length} set aside\n`);
    out.print(`${files.map((name) => `${folder}/${name}`).join('\n')}\n`);
    out.say(OPEN_SEA);
    out.say(CAUTION);
  }
}

/** `galewake events run`: plan, every shard over local processes, reduce. */
export async function run(input: string, options: PlanOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const jobs =
    options.jobs === undefined ? availableParallelism() : countOf(options.jobs, { name: '--jobs', least: 1 });
  const planned = await plan(input, { ...options, quiet: true });
  await planned.tidy();
  const waiting = await planned.missing();
  sayFaults(planned, out);
  const [total, startedAt] = [waiting.length, performance.now()];
  let done = 0;
  const worker = async (): Promise<void> => {
    for (let next = waiting.shift(); next !== undefined; next = waiting.shift()) {
      await inProcess(options.out, next, out);
      done++;
      const perShard = (performance.now() - startedAt) / done / 1000;
      const rate = planned.plan.events / planned.plan.shards / perShard;
      out.progress(
        `shard ${done} of ${total}, ${rate.toFixed(0)} events/s, ${Math.ceil(perShard * (total - done))} s left`,
      );
    }
  };
  await Promise.all(Array.from({ length: Math.min(jobs, total) }, worker));
  out.progress('');
  await reduce(options.out, options);
}

/** A shard in a process of its own, so that its memory is given back. */
function inProcess(folder: string, number: number, out: Console): Promise<void> {
  const command = fileURLToPath(new URL('./main.js', import.meta.url));
  return new Promise((done, reject) => {
    const child = spawn(process.execPath, [command, 'events', 'shard', folder, String(number)], {
      stdio: ['ignore', 'ignore', 'pipe'],
    });
    let told = '';
    child.stderr.on('data', (chunk: Buffer) => {
      told += chunk.toString('utf8');
    });
    child.on('error', reject);
    child.on('close', (code) => {
      if (code === 0) return done();
      out.progress('');
      const message = told.replace(/^galewake: /, '').trim() || `shard ${number} ended with code ${code}`;
      reject(
        code === SHARD_EXIT.input ? new InputError('events.shard', message) : new LimitError('events.shard', message),
      );
    });
  });
}

export interface ShowOptions extends CommonOptions {
  readonly out?: string;
  readonly formats: string;
  readonly force?: boolean;
}

/** `galewake events show`: the full swath of one event, with the recipe and on the grid of the run. */
export async function show(folder: string, id: string, options: ShowOptions): Promise<void> {
  const run = await EventRun.open(folder);
  const event = run.events.find((one) => one.id === id);
  if (!event) {
    const near = nearest(
      id,
      run.events.slice(0, NAMED).map((one) => one.id),
    );
    throw new InputError(
      'events.unknown',
      `${folder}: there is no event '${id}'${near ? `; did you mean '${near}'?` : ''}`,
    );
  }
  const rows = (await readRange(run.plan.input, event.start, event.end)).toString('utf8');
  const work = await mkdtemp(join(tmpdir(), 'galewake-event-'));
  try {
    await writeFile(join(work, 'event.csv'), trackText(run.heading, rows));
    await writeFile(join(work, 'recipe.json'), JSON.stringify(run.plan.recipe));
    const { swath } = await import('./swath.js');
    const { crs, bounds, cell } = run.plan.grid;
    await swath(join(work, 'event.csv'), {
      ...options,
      recipe: join(work, 'recipe.json'),
      levels: LEVELS_KT.map((kt) => `${kt}kt`).join(','),
      of: 'wind',
      crs,
      bounds: bounds.join(','),
      cell: `${cell}deg`,
      land: 'none',
    });
    makeConsole({ quiet: options.quiet === true }).say(OPEN_SEA);
  } finally {
    await rm(work, { recursive: true, force: true });
  }
}

/** Events whose ids are looked through for a near miss. */
const NAMED = 100_000;
