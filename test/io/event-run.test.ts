import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
  cpSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  truncateSync,
  utimesSync,
  writeFileSync,
} from 'node:fs';
import { hostname, tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { fromArrayBuffer } from 'geotiff';
import { parquetReadObjects } from 'hyparquet';
import { parquetWriteBuffer } from 'hyparquet-writer';
import { describe, expect, it } from 'vitest';
import { exceedanceCurve, returnValue } from '../../src/events/return-period.js';
import { RETURN_YEARS, returnPeriodMaps } from '../../src/io/event-hazard.js';
import { EventRun, indexEvents, type Manifest } from '../../src/io/event-run.js';
import { runShard } from '../../src/io/event-shard.js';
import { makeRecipe, recipeDocument } from '../../src/model/recipe.js';
import { cfFaults, readNetcdf } from '../write/cf-check.js';

const make = (events: number): string =>
  execFileSync(
    process.execPath,
    [resolve(import.meta.dirname, '../../scripts/make-events.js'), '--events', String(events), '--years', '20'],
    { encoding: 'utf8' },
  );
const folderOf = (): string => mkdtempSync(join(tmpdir(), 'galewake-events-'));
const GRID = { crs: 'EPSG:4326', bounds: [-90, 5, -30, 45], cell: 0.5 };

async function planOf(
  text: string,
  shards: number,
  more: Partial<{ badEvents: 'stop' | 'set-aside'; grid: typeof GRID }> = {},
) {
  const folder = folderOf();
  const input = join(folder, 'set.csv');
  writeFileSync(input, text);
  const { heading, events, sha256 } = await indexEvents(input);
  return EventRun.create(
    join(folder, 'run'),
    {
      input,
      inputsSha256: sha256,
      recipe: recipeDocument(makeRecipe()),
      recipeSha256: 'x',
      grid: more.grid ?? GRID,
      leastMps: 17.5,
      badEvents: more.badEvents ?? 'stop',
      shards,
      years: null,
    },
    { heading, events },
  );
}

async function rowsOf(run: EventRun): Promise<Record<string, number>[]> {
  const rows: Record<string, number>[] = [];
  for (let shard = 0; shard < run.plan.shards; shard++) {
    const { manifest } = await runShard(run, shard);
    const bytes = readFileSync(run.dataPath(manifest));
    const file = bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer;
    rows.push(...((await parquetReadObjects({ file })) as Record<string, number>[]));
  }
  return rows.sort((a, b) => a['cell']! - b['cell']! || a['event']! - b['event']!);
}

describe('the shards of an event set', () => {
  const text = make(6);

  it('give the same rows for any number of them, by cell and event', async () => {
    const whole = await rowsOf(await planOf(text, 1));
    expect(whole.length).toBeGreaterThan(500);
    expect(new Set(whole.map((row) => row['event'])).size).toBeGreaterThan(2);
    expect(await rowsOf(await planOf(text, 4))).toEqual(whole);
    const first = whole[0]!;
    expect(first['gust']! / first['wind']!).toBeCloseTo(1.11, 5);
  });

  it('are found where they are cut off, changed, of another plan or not there, and done once more', async () => {
    const run = await planOf(text, 3);
    const manifests = [];
    for (const shard of [0, 1, 2]) manifests.push((await runShard(run, shard)).manifest);
    expect(await run.missing()).toEqual([]);
    expect((await runShard(run, 1)).done).toBe(false);
    const bytes = readFileSync(run.dataPath(manifests[1]!));
    truncateSync(run.dataPath(manifests[0]!), 100);
    bytes[bytes.length >> 1]! ^= 1;
    writeFileSync(run.dataPath(manifests[1]!), bytes);
    const third = join(run.folder, 'shards', '000002.json');
    writeFileSync(third, readFileSync(third, 'utf8').replace(run.plan.planHash, '0'.repeat(64)));
    expect(await run.missing()).toEqual([0, 1, 2]);
    for (const [shard, before] of manifests.entries()) {
      const { manifest, done } = await runShard(run, shard);
      expect(done).toBe(true);
      expect(manifest.sha256).toBe(before.sha256);
    }
    rmSync(third);
    expect(await run.missing()).toEqual([2]);
  });

  it('leave temporary files only while their writer lives', async () => {
    const run = await planOf(text, 1);
    const host = createHash('sha256').update(hostname()).digest('hex').slice(0, 8);
    const gone = spawnSync(process.execPath, ['-e', '']).pid;
    const [alive, other, old] = [`.${host}-${process.pid}-bb.part`, '.00000000-1-cc.part', '.00000000-1-dd.part'];
    for (const name of [`.${host}-${gone}-aa.part`, alive, other, old])
      writeFileSync(join(run.folder, 'shards', name), 'half');
    utimesSync(join(run.folder, 'shards', old), 1, 1);
    await run.tidy();
    expect(readdirSync(join(run.folder, 'shards')).sort()).toEqual([other, alive].sort());
  });

  it('never name a file outside their folder', async () => {
    const run = await planOf(text, 1);
    const { manifest } = await runShard(run, 0);
    const path = join(run.folder, 'shards', '000000.json');
    writeFileSync(path, JSON.stringify({ ...manifest, file: '../../set.csv' }));
    expect(await run.missing()).toEqual([0]);
  });

  it('stop at a bad event with its id and row, or set it aside', async () => {
    const bad = text.replace(/^(E2,[^,]*,)[^,]*/m, '$195');
    await expect(runShard(await planOf(bad, 1), 0)).rejects.toThrow(/event 'E2' \(from row 36\):.*95/);
    const { manifest } = await runShard(await planOf(bad, 1, { badEvents: 'set-aside' }), 0);
    expect(manifest.setAside).toEqual([{ event: 'E2', row: 36, why: expect.stringMatching(/95/) }]);
  });

  it('refuse another plan in the same folder', async () => {
    const run = await planOf(text, 2);
    const { heading, events } = run;
    const { schema: _, version: __, planHash: ___, events: ____, ...parts } = run.plan;
    await expect(EventRun.create(run.folder, { ...parts, shards: 3 }, { heading, events })).rejects.toThrow(
      /another plan/,
    );
    expect((await EventRun.create(run.folder, parts, { heading, events })).plan.planHash).toBe(run.plan.planHash);
  });
});

/** A run whose only shard holds given rows. */
async function runWith(
  rates: readonly number[],
  rows: readonly { cell: number; event: number; wind: number }[],
  at?: string,
) {
  const text = ['event,time,lat_deg,lon_deg,vmax_mps,rate', ...rates.map((rate, i) => `E${i},t,0,0,20,${rate}`)].join(
    '\n',
  );
  const planned = await planOf(`${text}\n`, 1, { grid: { crs: 'EPSG:4326', bounds: [0, 0, 2, 1], cell: 0.5 } });
  if (at !== undefined) cpSync(planned.folder, at, { recursive: true });
  const run = await EventRun.open(at ?? planned.folder);
  const sorted = rows.toSorted((a, b) => a.cell - b.cell || a.event - b.event);
  const data = parquetWriteBuffer({
    columnData: [
      { name: 'cell', data: Int32Array.from(sorted, (row) => row.cell), type: 'INT32' },
      { name: 'event', data: Int32Array.from(sorted, (row) => row.event), type: 'INT32' },
      { name: 'wind', data: Float32Array.from(sorted, (row) => row.wind), type: 'FLOAT' },
      { name: 'gust', data: Float32Array.from(sorted, (row) => 1.25 * row.wind), type: 'FLOAT' },
    ],
  });
  const parts = { shard: 0, first: 0, end: rates.length, rows: rows.length, setAside: [], seconds: 0 };
  const manifests: Manifest[] = [await run.commit(parts, new Uint8Array(data))];
  const { files } = await returnPeriodMaps(run, manifests);
  const [windFile, gustFile, netcdfFile] = files;
  const read = async (name: string): Promise<Float32Array[]> => {
    const bytes = readFileSync(join(run.folder, name));
    const tiff = await fromArrayBuffer(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer,
    );
    return (await (await tiff.getImage()).readRasters()) as unknown as Float32Array[];
  };
  const netcdf = await readNetcdf(readFileSync(join(run.folder, netcdfFile!)));
  return { wind: await read(windFile!), gust: await read(gustFile!), netcdf };
}

describe('return-period maps', () => {
  it('of twelve events with unequal rates are those worked out by hand', async () => {
    const rates = [0.001, 0.002, 0.004, 0.005, 0.01, 0.02, 0.03, 0.04, 0.05, 0.1, 0.2, 0.5];
    // one cell: 70, 65 … 15 m/s, the rarer the stronger; another: the same winds the other way round
    const rows = rates.flatMap((_, event) => [
      { cell: 0, event, wind: 70 - 5 * event },
      { cell: 5, event, wind: 15 + 5 * event },
    ]);
    const { wind, gust, netcdf } = await runWith(rates, rows);
    // by hand, cell 0: running rates .001 .003 .007 .012 .022 .042 .072 .112 .162 …
    // 10 y: .112 → 35; 25: .042 → 45; 50: .022 → 50; 100: .012 → 55; 250: .007 → 60; 500: .003 → 65; 1000: .001 → 70
    expect(wind.map((band) => band[0])).toEqual([35, 45, 50, 55, 60, 65, 70]);
    expect(gust.map((band) => band[0])).toEqual([35, 45, 50, 55, 60, 65, 70].map((value) => 1.25 * value));
    // by hand, cell 5: the strongest event comes every other year
    expect(wind.map((band) => band[5])).toEqual([70, 70, 70, 70, 70, 70, 70]);
    expect(wind.map((band) => band[1])).toEqual([0, 0, 0, 0, 0, 0, 0]);
    // identity: the netCDF holds the same fields to the last bit, and keeps the conventions
    expect(cfFaults(netcdf)).toEqual([]);
    for (const [name, bands] of [
      ['return_wind', wind],
      ['return_gust', gust],
    ] as const) {
      const { values, shape } = netcdf.variables.find((one) => one.name === name)!;
      expect(shape).toEqual([7, 2, 4]);
      expect([...(values as Float32Array)]).toEqual(bands.flatMap((band) => [...band]));
    }
    expect(Array.from(netcdf.variables.find((one) => one.name === 'return_period')!.values)).toEqual([...RETURN_YEARS]);
    expect(netcdf.attributes['surface']!.value).toMatch(/ignore land/);
  });

  it('of 2,000 random events are those of a plain computation', async () => {
    let state = 9;
    const random = (): number => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return state / 2 ** 32;
    };
    const rates = Array.from({ length: 2000 }, () => 0.0002 + 0.01 * random() ** 4);
    const rows = rates.flatMap((_, event) =>
      Array.from({ length: 8 }, (__, cell) => ({
        cell,
        event,
        wind: Math.fround(17 + Math.round(300 * random()) / 5),
      })).filter(() => random() < 0.2),
    );
    const { wind } = await runWith(rates, rows);
    for (let cell = 0; cell < 8; cell++) {
      const curve = exceedanceCurve(
        rows.filter((row) => row.cell === cell).map((row) => ({ value: row.wind, rate: rates[row.event]! })),
      );
      // independent: the curve in memory, ties of winds sharing one point
      for (const [i, years] of RETURN_YEARS.entries()) expect(wind[i]![cell]).toBe(returnValue(curve, years));
    }
  });

  it('are of their own folder, whatever its name means as a pattern or in a statement', async () => {
    const parent = folderOf();
    const at = (name: string): string => join(parent, name);
    // the same manifest, other winds: only the folder tells them apart
    await runWith([0.2], [{ cell: 0, event: 0, wind: 20 }], at('run1'));
    for (const name of ['run[1]', 'run*', 'run?', "run'; drop table rates; --"]) {
      const { wind } = await runWith([0.2], [{ cell: 0, event: 0, wind: 40 }], at(name));
      expect(wind[0]![0]).toBe(40);
      // once its own file has gone there is nothing to read, though run1 has one of the same name
      const run = await EventRun.open(at(name));
      const manifest = (await run.manifest(0, { checksum: true }))!;
      cpSync(run.dataPath(manifest), join(at('run1'), 'shards', manifest.file));
      rmSync(run.dataPath(manifest));
      await expect(returnPeriodMaps(run, [manifest])).rejects.toThrow();
    }
  });
});
