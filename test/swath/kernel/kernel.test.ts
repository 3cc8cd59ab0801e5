import { describe, expect, it } from 'vitest';
// other threads want JavaScript: the build, which `npm test` makes first
import { peakSwath as builtPeakSwath } from '../../../dist/swath/peak.js';
import { LimitError } from '../../../src/errors.js';
import { makeRecipe } from '../../../src/model/recipe.js';
import { windModel } from '../../../src/model/wind.js';
import { type Grid, gridOver } from '../../../src/swath/grid.js';
import { twinEngine } from '../../../src/swath/kernel/twin.js';
import { wasmEngine } from '../../../src/swath/kernel/wasm.js';
import { peakSwath } from '../../../src/swath/peak.js';
import type { Swath } from '../../../src/swath/swath.js';
import { recurving } from '../../storms.js';

// the storms and the judge of `scripts/check-kernel.js`, which runs hundreds
const { CONTRACT, harshStorm, judge } = await import(
  new URL('../../../scripts/kernel/harsh-storms.js', import.meta.url).href
);

const bytes = (swath: Swath): Buffer[] =>
  [swath.windMps, swath.gustMps, swath.windFromDeg, swath.peakTimeS, ...swath.hoursAbove.map(({ hours }) => hours)].map(
    (field) => Buffer.from(field.buffer, field.byteOffset, field.byteLength),
  );

const same = (a: Swath, b: Swath): boolean => bytes(a).every((field, i) => field.equals(bytes(b)[i]!));

describe('the fast swath', () => {
  // identity: the exact model at one-minute steps, in windows of seeded harsh storms
  it.each([
    [1, []],
    [3, []],
    [5, []],
    [9, []],
    [16, []],
    [22, []],
    [7, ['vortex.profile=holland-1980']],
    [10, ['vortex.profile=holland-1980']],
  ] as const)('of harsh storm %d keeps its promises (%s)', async (seed, settings) => {
    const { track, grid } = harshStorm(seed, { edge: 20 });
    const found = await judge(windModel(track, makeRecipe(undefined, [...settings])), grid);
    expect(found.cells).toBeGreaterThan(50);
    expect(found.below).toBeLessThan(CONTRACT.peakMps);
    expect(found.above).toBeLessThan(CONTRACT.peakMps);
    expect(found.directionDeg).toBeLessThan(CONTRACT.directionDeg);
    expect(found.timeS).toBeLessThanOrEqual(CONTRACT.timeS);
  });

  it('has the same bytes from WebAssembly and from its twin in JavaScript', async () => {
    for (const seed of [2, 4]) {
      const { track, grid } = harshStorm(seed, { edge: 40 });
      const model = windModel(track, makeRecipe());
      const wasm = await peakSwath(model, grid, { engine: wasmEngine()! });
      const twin = await peakSwath(model, grid, { engine: twinEngine() });
      expect(wasm.windMps.some((wind) => wind > 20)).toBe(true);
      expect(same(wasm, twin)).toBe(true);
    }
  });

  it('has the same bytes on 1, 2 and 3 threads', async () => {
    const model = windModel(recurving, makeRecipe());
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-66, 16, -52, 32], cell: 0.04 });
    const alone = await builtPeakSwath(model, grid, { jobs: 1 });
    expect(grid.nx * grid.ny).toBeGreaterThan(100_000);
    expect(alone.windMps.some((wind: number) => wind > 20)).toBe(true);
    expect(same(alone, await builtPeakSwath(model, grid, { jobs: 2 }))).toBe(true);
    expect(same(alone, await builtPeakSwath(model, grid, { jobs: 3 }))).toBe(true);
  });

  it('stops when it is told to', async () => {
    const model = windModel(recurving, makeRecipe());
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-66, 16, -52, 32], cell: 0.04 });
    for (const jobs of [1, 2]) {
      const stop = new AbortController();
      const run = builtPeakSwath(model, grid, { jobs, signal: stop.signal, onProgress: () => stop.abort() });
      await expect(run).rejects.toThrow(/abort/i);
    }
  });

  it('refuses a grid that memory does not hold before it takes any', async () => {
    const grid: Grid = {
      crs: 'EPSG:4326',
      geographic: true,
      nx: 4e6,
      ny: 2e6,
      cell: 9e-5,
      bounds: [-180, -90, 180, 90],
    };
    await expect(peakSwath(windModel(recurving, makeRecipe()), grid)).rejects.toThrow(LimitError);
  });
});
