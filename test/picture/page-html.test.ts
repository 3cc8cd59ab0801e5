import { createHash } from 'node:crypto';
import { deflateSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { fromBase64, toBase64 } from '../../src/picture/base64.js';
import { parseDegrees } from '../../src/picture/page/degrees.js';
import { lighterPolygons, packFields, pageFields, unpackFields } from '../../src/picture/page-data.js';
import { mapPage } from '../../src/picture/page-html.js';
import { exactSwath } from '../../src/swath/exact.js';
import { gridOver } from '../../src/swath/grid.js';
import { madeStorm } from './invented.js';
import { pageInputOf } from './page-input.js';

describe('page data', () => {
  it('comes back within half a step', () => {
    const { swath } = madeStorm('open');
    const { grid, fields } = pageFields(swath, 1e6);
    const back = unpackFields(packFields(fields, grid.nx), grid);
    for (let k = 0; k < fields.wind.length; k++) {
      expect(Math.abs(back.wind[k]! - fields.wind[k]!)).toBeLessThan(0.00502);
      expect(Math.abs(back.hours[0]![k]! - fields.hours[0]![k]!)).toBeLessThan(0.0251);
      expect(Number.isNaN(back.from[k]!)).toBe(Number.isNaN(fields.from[k]!));
      if (!Number.isNaN(fields.time[k]!)) expect(Math.abs(back.time[k]! - fields.time[k]!)).toBeLessThan(30.1);
    }
  });

  it('keeps the peak on coarser cells and says so', () => {
    const { swath } = madeStorm('open');
    const { grid, fields } = pageFields(swath, 500);
    expect(grid.nx * grid.ny).toBeLessThanOrEqual(560);
    expect(Math.max(...fields.wind)).toBe(Math.max(...swath.windMps));
    expect(grid.note).toMatch(/Computed on cells of 0\.25°; shown here on cells of/);
  });

  it('lays a projected grid on longitude and latitude', () => {
    const { model } = madeStorm('open');
    const grid = gridOver({
      crs: '+proj=utm +zone=23 +datum=WGS84 +units=m',
      bounds: [0, 2_800_000, 900_000, 3_700_000],
      cell: 30_000,
    });
    const swath = exactSwath(model, grid, { stepS: 7200 });
    const page = pageFields(swath, 4000);
    expect(Math.max(...page.fields.wind)).toBeCloseTo(Math.max(...swath.windMps), 3);
    expect(page.grid.west).toBeGreaterThan(-51);
    expect(page.grid.west).toBeLessThan(-48);
  });

  it('thins lines and keeps them closed', () => {
    const ring = Array.from({ length: 361 }, (_, i) => [
      10 * Math.cos((i * Math.PI) / 180),
      10 * Math.sin((i * Math.PI) / 180),
    ]);
    const [[thin]] = lighterPolygons([[ring]], 1) as [[number[][]]];
    expect(thin!.length).toBeLessThan(80);
    expect(thin![0]![0]).toBeCloseTo(thin!.at(-1)![0]!, 6);
    expect(thin![0]![1]).toBeCloseTo(thin!.at(-1)![1]!, 6);
  });

  // independent: Node's own Buffer
  it('is base64', () => {
    for (const length of [0, 1, 2, 3, 50_001]) {
      const bytes = Uint8Array.from({ length }, (_, i) => (i * 97) & 255);
      expect(toBase64(bytes)).toBe(Buffer.from(bytes).toString('base64'));
      expect(fromBase64(toBase64(bytes))).toEqual(bytes);
    }
  });

  it('reads degrees as people write them', () => {
    expect(parseDegrees('27.9', 'NS')).toBe(27.9);
    expect(parseDegrees(' 27,9 n', 'NS')).toBe(27.9);
    expect(parseDegrees('45.2°W', 'EW')).toBe(-45.2);
    expect(parseDegrees('−45.2', 'EW')).toBe(-45.2);
    expect(parseDegrees('45N', 'EW')).toBeNull();
    expect(parseDegrees('1e3', 'EW')).toBeNull();
  });
});

describe('page', () => {
  const script = 'console.log(1)';
  const style = 'body{margin:0}';
  const sha256 = (text: string): string => createHash('sha256').update(text).digest('base64');
  const assets = { script, scriptSha256: sha256(script), style, styleSha256: sha256(style) };
  const deflate = (bytes: Uint8Array): Uint8Array => deflateSync(bytes);

  it('carries a policy that allows its own script and style and nothing else', async () => {
    const html = await mapPage(pageInputOf(madeStorm('oneFix')), { deflate, assets });
    const policy = /http-equiv="Content-Security-Policy" content="([^"]*)"/.exec(html)?.[1] ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain(`script-src 'sha256-${sha256(script)}'`);
    expect(policy).not.toMatch(/unsafe|\*|https?:/);
    expect(html).not.toMatch(/\b(?:src|href)="(?!#)/);
    expect(html).not.toMatch(/ style="/);
  });

  it('has no markup from a name', async () => {
    const html = await mapPage(pageInputOf(madeStorm('oneFix', '</script><img src=x onerror=alert(1)>')), {
      deflate,
      assets,
    });
    expect(html).not.toContain('<img');
    expect(html.match(/<script/g)).toHaveLength(4);
  });

  it('stays small even where nothing can be packed', async () => {
    const storm = madeStorm('open');
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-52, 18, -36, 30], cell: 0.05 });
    let seed = 7;
    const noise = Float32Array.from({ length: grid.nx * grid.ny }, () => {
      seed = (Math.imul(seed, 1664525) + 1013904223) >>> 0;
      return 10 + ((seed >>> 8) % 6000) / 100;
    });
    const swath = {
      ...storm.swath,
      grid,
      windMps: noise,
      gustMps: noise,
      windFromDeg: noise,
      peakTimeS: noise.map((w) => w * 3000),
      hoursAbove: storm.swath.hoursAbove.map((one) => ({ ...one, hours: noise })),
    };
    const html = await mapPage({ ...pageInputOf(storm), swath }, { deflate, assets });
    expect(html.length).toBeLessThan(2_000_000);
    expect(html.length).toBeGreaterThan(1_000_000);
  });

  it('stays small for 480,000 cells', async () => {
    const storm = madeStorm('open');
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-52, 18, -36, 30], cell: 0.02 });
    const n = grid.nx * grid.ny;
    expect(n).toBe(480_000);
    const wavy = Float32Array.from({ length: n }, (_, k) => 40 + 20 * Math.sin(k / 37) * Math.cos(k / 800 / 23));
    const swath = {
      ...storm.swath,
      grid,
      windMps: wavy,
      gustMps: wavy,
      windFromDeg: wavy,
      peakTimeS: wavy.map((w) => w * 3000),
      hoursAbove: storm.swath.hoursAbove.map((one) => ({ ...one, hours: wavy })),
    };
    const html = await mapPage({ ...pageInputOf(storm), swath }, { deflate, assets });
    expect(html.length).toBeLessThan(2_000_000);
  });
});
