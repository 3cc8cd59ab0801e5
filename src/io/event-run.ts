import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, open, readdir, readFile, rm, stat } from 'node:fs/promises';
import { hostname } from 'node:os';
import { basename, join, resolve } from 'node:path';
import { GalewakeError, InputError } from '../errors.js';
import { type EventHeading, type EventRange, eventHeading, eventIndexer } from '../events/event-index.js';
import type { NamedPlace } from '../events/event-row.js';
import { type Grid, gridOver } from '../swath/grid.js';
import { isLeftOver, writeDurably } from './durable.js';
import { unreadable } from './input.js';
import { unwritable } from './unwritable.js';
import { VERSION } from './version.js';

export const PLAN_SCHEMA = 'galewake-event-plan/1';

/** What a run of an event set does: written once. */
export interface Plan {
  readonly schema: typeof PLAN_SCHEMA;
  readonly version: string;
  readonly input: string;
  readonly inputsSha256: string;
  readonly recipe: unknown;
  readonly recipeSha256: string;
  readonly grid: { readonly crs: string; readonly bounds: readonly number[]; readonly cell: number };
  readonly leastMps: number;
  readonly badEvents: 'stop' | 'set-aside';
  readonly shards: number;
  readonly events: number;
  /** years that the set stands for, where its rates are equal */
  readonly years: number | null;
  /** of the second table that the rates came from */
  readonly ratesSha256?: string;
  /** what the event table holds */
  readonly table?: {
    readonly levelsMps: readonly number[];
    readonly places: readonly NamedPlace[];
    readonly landfalls: boolean;
    /** the land of the landfalls: `natural-earth` or a file, and its checksum */
    readonly land?: string;
    readonly landSha256?: string;
  };
  readonly planHash: string;
}

/** What a shard has done: the manifest is the commit. */
export interface Manifest {
  readonly shard: number;
  readonly shards: number;
  readonly planHash: string;
  readonly first: number;
  readonly end: number;
  readonly rows: number;
  readonly file: string;
  readonly bytes: number;
  readonly sha256: string;
  /** the shard's part of the event table */
  readonly table?: { readonly file: string; readonly bytes: number; readonly sha256: string };
  readonly setAside: readonly { readonly event: string; readonly row: number; readonly why: string }[];
  readonly host: string;
  readonly seconds: number;
}

export const hashOf = (content: string | Uint8Array): string => createHash('sha256').update(content).digest('hex');
const shardName = (shard: number): string => String(shard).padStart(6, '0');
const DATA = /^\d{6}\.[0-9a-f]{12}\.parquet$/;
const TABLE = /^\d{6}\.[0-9a-f]{12}\.events\.csv$/;

/** One pass over an event table: its heading, where each event stands, and its checksum. */
export async function indexEvents(
  path: string,
  columns: Readonly<Record<string, string>> = {},
): Promise<{ heading: EventHeading; events: readonly EventRange[]; sha256: string }> {
  const hash = createHash('sha256');
  const source = basename(path);
  let heading: EventHeading | null = null;
  let indexer: ReturnType<typeof eventIndexer> | null = null;
  let rest: Buffer = Buffer.alloc(0);
  let [at, row] = [0, 0];
  const line = (bytes: Buffer, from: number, to: number): void => {
    row++;
    const text = bytes.toString('utf8').replace(/\r?\n?$/, '');
    if (heading === null) {
      heading = eventHeading(text, source, columns);
      indexer = eventIndexer(heading, source);
    } else indexer!.add(text, from, to, row);
  };
  try {
    for await (const chunk of createReadStream(path, { highWaterMark: 1 << 20 })) {
      hash.update(chunk as Buffer);
      const bytes = rest.length === 0 ? (chunk as Buffer) : Buffer.concat([rest, chunk as Buffer]);
      let from = 0;
      for (let end = bytes.indexOf(10); end >= 0; end = bytes.indexOf(10, from)) {
        line(bytes.subarray(from, end + 1), at + from, at + end + 1);
        from = end + 1;
      }
      at += from;
      rest = bytes.subarray(from);
      if (rest.length > 1_000_000)
        throw new InputError(
          'events.line',
          `${source}, row ${row + 1}: a line is longer than 1 MB; this is no event table`,
        );
    }
  } catch (error) {
    if (error instanceof GalewakeError) throw error;
    throw unreadable(path, error);
  }
  if (rest.length > 0) line(rest, at, at + rest.length);
  if (heading === null) throw new InputError('events.empty', `${source}: is empty`);
  return { heading, events: indexer!.finish(), sha256: hash.digest('hex') };
}

/** Text of a range of bytes of a file. */
export async function readRange(path: string, start: number, end: number): Promise<Buffer> {
  const file = await open(path, 'r');
  try {
    const bytes = Buffer.alloc(end - start);
    let done = 0;
    while (done < bytes.length) {
      const { bytesRead } = await file.read(bytes, done, bytes.length - done, start + done);
      if (bytesRead === 0)
        throw new InputError(
          'events.changed',
          `${basename(path)}: it has become shorter since the plan was made; make a new plan`,
        );
      done += bytesRead;
    }
    return bytes;
  } finally {
    await file.close();
  }
}

/** A folder with a plan and its shards. */
export class EventRun {
  private constructor(
    readonly folder: string,
    readonly plan: Plan,
    readonly heading: EventHeading,
    readonly events: readonly EventRange[],
  ) {}

  /**
   * Writes a plan and the index of its events into a folder; the same plan again is no error.
   * @throws InputError `events.plan` where the folder holds another one
   */
  static async create(
    folder: string,
    parts: Omit<Plan, 'schema' | 'version' | 'planHash' | 'events'>,
    { heading, events }: { heading: EventHeading; events: readonly EventRange[] },
  ): Promise<EventRun> {
    const body = {
      schema: PLAN_SCHEMA,
      version: VERSION,
      ...parts,
      input: resolve(parts.input),
      events: events.length,
    } as const;
    const plan: Plan = { ...body, planHash: hashOf(JSON.stringify({ ...body, input: basename(body.input) })) };
    await mkdir(join(folder, 'shards'), { recursive: true }).catch((error: unknown) => {
      throw unwritable(join(folder, 'shards'), error);
    });
    const existing = await readFile(join(folder, 'plan.json'), 'utf8').catch(() => null);
    if (existing !== null && (JSON.parse(existing) as Plan).planHash !== plan.planHash)
      throw new InputError(
        'events.plan',
        `${folder}: the folder holds another plan (other input, recipe, grid or number of shards); name a new folder with --out`,
      );
    const index = events.map(({ id, start, end, row, rate }) =>
      JSON.stringify([id, start, end, row, Number.isNaN(rate) ? null : rate]),
    );
    await writeDurably(join(folder, 'events.jsonl'), `${JSON.stringify(heading)}\n${index.join('\n')}\n`);
    await writeDurably(join(folder, 'plan.json'), `${JSON.stringify(plan, null, 2)}\n`);
    return new EventRun(folder, plan, heading, events);
  }

  /** @throws InputError `events.run` where the folder holds no plan */
  static async open(folder: string): Promise<EventRun> {
    const text = await readFile(join(folder, 'plan.json'), 'utf8').catch(() => {
      throw new InputError(
        'events.run',
        `${folder}: there is no plan.json; make a plan first with galewake events plan`,
      );
    });
    const plan = JSON.parse(text) as Plan;
    if (plan.schema !== PLAN_SCHEMA)
      throw new InputError('events.run', `${folder}/plan.json: this is no plan of an event set (${PLAN_SCHEMA})`);
    const [first, ...rest] = (await readFile(join(folder, 'events.jsonl'), 'utf8')).trimEnd().split('\n');
    const events = rest.map((line): EventRange => {
      const [id, start, end, row, rate] = JSON.parse(line) as [string, number, number, number, number | null];
      return { id, start, end, row, rate: rate ?? (plan.years === null ? Number.NaN : 1 / plan.years) };
    });
    if (events.length !== plan.events)
      throw new InputError(
        'events.run',
        `${folder}/events.jsonl: ${events.length} events, the plan has ${plan.events}; make the plan again`,
      );
    return new EventRun(folder, plan, JSON.parse(first!) as EventHeading, events);
  }

  /** The grid of the plan. */
  get grid(): Grid {
    const { crs, cell, bounds } = this.plan.grid;
    return gridOver({ crs, cell, bounds: bounds as unknown as readonly [number, number, number, number] });
  }

  /** Why shards that had a manifest count as missing, by number: found since the run was opened. */
  readonly faults = new Map<number, string>();

  private path(name: string): string {
    return join(this.folder, 'shards', name);
  }

  /** Puts a shard's rows and then its manifest into place. */
  async commit(
    parts: Pick<Manifest, 'shard' | 'first' | 'end' | 'rows' | 'setAside' | 'seconds'>,
    bytes: Uint8Array,
    table?: string,
  ): Promise<Manifest> {
    const sha256 = hashOf(bytes);
    const file = `${shardName(parts.shard)}.${sha256.slice(0, 12)}.parquet`;
    await writeDurably(this.path(file), bytes);
    const tablePart = table === undefined ? {} : { table: await this.putTable(parts.shard, table) };
    const { shards, planHash } = this.plan;
    const manifest: Manifest = {
      ...parts,
      shards,
      planHash,
      file,
      bytes: bytes.length,
      sha256,
      ...tablePart,
      host: hostname(),
    };
    await writeDurably(this.path(`${shardName(parts.shard)}.json`), `${JSON.stringify(manifest, null, 2)}\n`);
    return manifest;
  }

  private async putTable(shard: number, table: string): Promise<NonNullable<Manifest['table']>> {
    const sha256 = hashOf(table);
    const file = `${shardName(shard)}.${sha256.slice(0, 12)}.events.csv`;
    await writeDurably(this.path(file), table);
    return { file, bytes: Buffer.byteLength(table), sha256 };
  }

  /** The manifest of a shard that is done; null, and its manifest removed, where it is not or not as it says. */
  async manifest(shard: number, { checksum }: { checksum: boolean }): Promise<Manifest | null> {
    const path = this.path(`${shardName(shard)}.json`);
    const text = await readFile(path, 'utf8').catch(() => null);
    if (text === null) return null;
    const fault = await this.faultOf(shard, text, checksum);
    if (fault === null) return JSON.parse(text) as Manifest;
    this.faults.set(shard, fault);
    await rm(path, { force: true });
    return null;
  }

  /** What is wrong with a shard and its manifest, in words; null for nothing. */
  private async faultOf(shard: number, text: string, checksum: boolean): Promise<string | null> {
    let manifest: Manifest;
    try {
      manifest = JSON.parse(text) as Manifest;
    } catch {
      return 'its manifest is no JSON';
    }
    if (manifest.planHash !== this.plan.planHash) return 'its manifest is of another plan';
    if (manifest.shard !== shard || !DATA.test(manifest.file)) return 'its manifest is not one of this shard';
    if (manifest.table && !TABLE.test(manifest.table.file)) return 'its manifest is not one of this shard';
    for (const { file, bytes, sha256 } of manifest.table ? [manifest, manifest.table] : [manifest]) {
      const found = await stat(this.path(file)).catch(() => null);
      if (!found) return `${file} is not there`;
      if (found.size !== bytes) return `${file} has ${found.size} bytes instead of ${bytes}`;
      if (checksum && hashOf(await readFile(this.path(file))) !== sha256)
        return `${file} has changed since it was written: its SHA-256 is another one`;
    }
    return null;
  }

  /** Shards that are not done. */
  async missing(): Promise<number[]> {
    const missing: number[] = [];
    for (let shard = 0; shard < this.plan.shards; shard++)
      if (!(await this.manifest(shard, { checksum: true }))) missing.push(shard);
    return missing;
  }

  /** Removes what unfinished attempts have left; what a living one is writing stays. */
  async tidy(): Promise<void> {
    for (const folder of [this.folder, join(this.folder, 'shards')])
      for (const name of await readdir(folder))
        if (await isLeftOver(join(folder, name))) await rm(join(folder, name), { force: true });
  }

  /** A shard's part of the event table; null where it has none. */
  tablePath(manifest: Manifest): string | null {
    return manifest.table && this.plan.table ? this.path(manifest.table.file) : null;
  }

  dataPath(manifest: Manifest): string {
    return this.path(manifest.file);
  }
}
