import { describe, expect, it } from 'vitest';
import { worldLand } from '../../src/io/land-file.js';
import { EXPOSURE_CODES } from '../../src/land/surface-map.js';
import { SECTORS } from '../../src/land/upwind.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { type WindModel, windModel } from '../../src/model/wind.js';
import { gustFactor } from '../../src/surface/averaging.js';
import { blendingRatio } from '../../src/surface/roughness.js';
import { exactSwath } from '../../src/swath/exact.js';
import { type Grid, gridOver } from '../../src/swath/grid.js';
import { twinEngine } from '../../src/swath/kernel/twin.js';
import { wasmEngine } from '../../src/swath/kernel/wasm.js';
import { peakSwath } from '../../src/swath/peak.js';
import { surfaceOf } from '../../src/swath/surface.js';
import type { Fix } from '../../src/track/track.js';
import { knots } from '../../src/units.js';
import { rectangles } from '../land-world.js';
import { trackOf } from '../storms.js';

/** A coast that runs north and south at 60° W, land to its west; a storm passes offshore to the north. */
const coast = rectangles([-70, 0, -60, 40]);
const passing = trackOf([
  { hours: 0, latDeg: 15.5, lonDeg: -59.2, maxWindMps: 48, radiusOfMaxWindM: 35_000 },
  { hours: 12, latDeg: 17.2, lonDeg: -59.5, maxWindMps: 50, radiusOfMaxWindM: 35_000 },
  { hours: 24, latDeg: 19.4, lonDeg: -59.6, maxWindMps: 46, radiusOfMaxWindM: 38_000 },
]);
const grid = gridOver({ crs: 'EPSG:4326', bounds: [-61.5, 16, -58, 19], cell: 0.05 });
const model = windModel(passing, makeRecipe());
const surface = surfaceOf(model, grid, { land: coast });
const at = (lonDeg: number, latDeg: number, { bounds, cell, nx }: Grid = grid): number =>
  Math.floor((bounds[3] - latDeg) / cell) * nx + Math.floor((lonDeg - bounds[0]) / cell);

describe('a swath over land', () => {
  it('is that of the plain model over the same surface', async () => {
    const small = gridOver({ crs: 'EPSG:4326', bounds: [-61, 16.8, -59.4, 18.2], cell: 0.1 });
    for (const settings of [[], ['land.fetch_km=3'], ['gust.method=simiu-scanlan-1996']]) {
      const own: WindModel = windModel(passing, makeRecipe(undefined, settings));
      const over = surfaceOf(own, small, { land: coast });
      const exact = exactSwath(own, small, { surface: over, stepS: 30 });
      const fast = await peakSwath(own, small, { jobs: 1, surface: over });
      for (const k of exact.windMps.keys()) {
        // identity: the plain model at half-minute steps, which corners of the ratio need
        expect(Math.abs(fast.windMps[k]! - exact.windMps[k]!)).toBeLessThan(0.05);
        expect(Math.abs(fast.gustMps[k]! - exact.gustMps[k]!)).toBeLessThan(0.055);
        for (const [h, { hours }] of exact.hoursAbove.entries())
          expect(Math.abs(fast.hoursAbove[h]!.hours[k]! - hours[k]!)).toBeLessThan(0.05);
      }
    }
  });

  it('is that of the plain model on real coasts, also where radii shape the field', async () => {
    const land = worldLand('10m');
    const radii = (byM: number): Fix['windRadii'] => [
      { thresholdMps: knots(34), radiiM: [250_000 * byM, 200_000 * byM, 120_000 * byM, 160_000 * byM] },
    ];
    for (const [lonDeg, latDeg, fitted] of [
      [-80.5, 26, false],
      [121, 16, false],
      [-66, 18.2, true],
      [146, -19, true],
    ] as const) {
      const storm = trackOf(
        [-12, -6, 0, 6, 12].map((hours, i) => ({
          hours,
          latDeg: latDeg + 0.06 * hours,
          lonDeg: lonDeg - 0.05 * hours + [0.1, -0.1, 0, 0.1, -0.05][i]!,
          maxWindMps: 45 + 3 * i,
          radiusOfMaxWindM: 30_000 + 3000 * i,
          ...(fitted ? { windRadii: radii([1, 0.8, 1.1, 0.9, 1.2][i]!) } : {}),
        })),
      );
      const own = windModel(storm, makeRecipe(), { land });
      const small = gridOver({
        crs: 'EPSG:4326',
        bounds: [lonDeg - 0.4, latDeg - 0.4, lonDeg + 0.4, latDeg + 0.4],
        cell: 0.05,
      });
      const over = surfaceOf(own, small, { land });
      const exact = exactSwath(own, small, { surface: over, stepS: fitted ? 60 : 30 });
      const fast = await peakSwath(own, small, { jobs: 1, surface: over });
      let outside = 0;
      for (const [k, wind] of exact.windMps.entries()) {
        // identity: the plain model
        const off = Math.max(Math.abs(fast.windMps[k]! - wind), Math.abs(fast.gustMps[k]! - exact.gustMps[k]!));
        if (off > 0.055) outside++;
        expect(off).toBeLessThan(0.6);
      }
      // of a field fitted to radii a single cell may take the lower of two maxima that are near each other
      expect(outside).toBeLessThanOrEqual(fitted ? 1 : 0);
    }
  }, 30_000);

  it('cautions where the coast is coarser than the cells', () => {
    const fine = gridOver({ crs: 'EPSG:4326', bounds: [-80.3, 25.7, -80, 26], cell: 0.01 });
    const coarse = gridOver({ crs: 'EPSG:4326', bounds: [-82, 25, -80, 27], cell: 0.1 });
    const cautionsOn = (on: Grid): readonly string[] => surfaceOf(model, on, { land: worldLand('10m') }).cautions;
    expect(cautionsOn(fine)[0]).toMatch(/Natural Earth 1:10 million.*give finer polygons with --land/);
    expect(cautionsOn(coarse)).toEqual([]);
  });

  it('changes nothing over open sea, to the last bit', async () => {
    const [plain, over] = [
      await peakSwath(model, grid, { jobs: 1 }),
      await peakSwath(model, grid, { jobs: 1, surface }),
    ];
    let sea = 0;
    for (const [k, row] of surface.rowOf.entries()) {
      if (row > 0) continue;
      sea++;
      expect(over.windMps[k]).toBe(plain.windMps[k]);
      expect(over.gustMps[k]).toBe(plain.gustMps[k]);
      expect(over.windFromDeg[k]).toEqual(plain.windFromDeg[k]);
      expect(over.peakTimeS[k]).toEqual(plain.peakTimeS[k]);
    }
    expect(sea).toBeGreaterThan(500);
  });

  it('steps at the coast as the roughness does, and gusts as the classes say', async () => {
    const over = await peakSwath(model, grid, { jobs: 1, surface });
    const plain = await peakSwath(model, grid, { jobs: 1 });
    const inland = at(-60.525, 17.525);
    // identity: the blending height's ratio of roughly open country, 0.1 m, to the sea
    expect(over.windMps[inland]! / plain.windMps[inland]!).toBeCloseTo(blendingRatio(0.1), 5);
    // published: the table's class in land, 3 s on 1 min
    expect(over.gustMps[inland]! / over.windMps[inland]!).toBeCloseTo(
      gustFactor('in-land', { durationS: 3, periodS: 60 }),
      4,
    );
    const beach = at(-59.975, 17.525);
    const row = surface.rowOf[beach]!;
    const classOf = (sector: number): string => EXPOSURE_CODES[surface.exposure[row * SECTORS + sector]!]!;
    expect([classOf(2), classOf(6)]).toEqual(['off-sea', 'off-land']);
    const gusts = (sector: number): number =>
      surface.gustRatio[row * SECTORS + sector]! / surface.windRatio[row * SECTORS + sector]!;
    // published: the table's classes for onshore and offshore wind at one beach
    expect(gusts(2)).toBeCloseTo(gustFactor('off-sea', { durationS: 3, periodS: 60 }), 9);
    expect(gusts(6)).toBeCloseTo(gustFactor('off-land', { durationS: 3, periodS: 60 }), 9);
  });

  it('has the highest gust over time, not that of the highest wind', async () => {
    const over = await peakSwath(model, grid, { jobs: 1, surface });
    let higher = 0;
    for (const [k, row] of surface.rowOf.entries()) {
      if (row === 0 || !(over.windMps[k]! > 15)) continue;
      const sector = Math.round(over.windFromDeg[k]! / 45) % SECTORS;
      const factor = surface.gustRatio[row * SECTORS + sector]! / surface.windRatio[row * SECTORS + sector]!;
      const ofPeak = over.windMps[k]! * factor;
      if (over.gustMps[k]! > 1.01 * ofPeak) higher++;
    }
    expect(higher).toBeGreaterThan(10);
  });

  it('has the same bytes from WebAssembly and from its twin', async () => {
    const small = gridOver({ crs: 'EPSG:4326', bounds: [-60.6, 17, -59.6, 18], cell: 0.05 });
    const over = surfaceOf(model, small, { land: coast });
    const wasm = await peakSwath(model, small, { engine: wasmEngine()!, surface: over });
    const twin = await peakSwath(model, small, { engine: twinEngine(), surface: over });
    expect(wasm.gustMps.some((gust) => gust > 20)).toBe(true);
    expect(twin).toEqual(wasm);
  });
});
