import { describe, expect, it } from 'vitest';
import { distanceM, EARTH_RADIUS_M, RADIANS } from '../../src/earth.js';
import { type Isotach, isotachs } from '../../src/isotach/isotachs.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { exactSwath } from '../../src/swath/exact.js';
import { fitGrid } from '../../src/swath/fit.js';
import { type Grid, gridOver } from '../../src/swath/grid.js';
import { peakSwath } from '../../src/swath/peak.js';
import type { Swath } from '../../src/swath/swath.js';
import type { Track } from '../../src/track/track.js';
import { knots } from '../../src/units.js';
import { isotachsGeojson } from '../../src/write/isotachs-geojson.js';
import { checkRfc7946 } from '../rfc7946.js';
import { mirrored, recurving, shifted, trackOf } from '../storms.js';

const LEVELS = [34, 50, 64, 83, 96].map(knots);
// the place does not decide the ambient pressure
const recipe = makeRecipe(undefined, ['completion.ambient_hpa=1010']);

async function run(
  track: Track,
  options: { cell: number; crs?: string },
): Promise<{ swath: Swath; grid: Grid; areas: Isotach[] }> {
  const model = windModel(track, recipe, { lowestLevelMps: LEVELS[0]! });
  const grid = fitGrid(model, {
    crs: options.crs ?? 'EPSG:4326',
    cell: options.cell,
    lowestMps: LEVELS[0]!,
    fromMs: model.path.startMs,
    toMs: model.path.endMs,
  });
  const swath = await peakSwath(model, grid, { jobs: 1 });
  return { swath, grid, areas: isotachs(swath.windMps, grid, { levelsMps: LEVELS }) };
}

/** Area of the cells at or above a level on the sphere, m². */
function cellArea(values: Float32Array, grid: Grid, level: number): number {
  let sum = 0;
  for (let row = 0; row < grid.ny; row++) {
    const north = grid.bounds[3] - row * grid.cell;
    const band =
      EARTH_RADIUS_M ** 2 * grid.cell * RADIANS * (Math.sin(north * RADIANS) - Math.sin((north - grid.cell) * RADIANS));
    for (let column = 0; column < grid.nx; column++) if (values[row * grid.nx + column]! >= level) sum += band;
  }
  return sum;
}

describe('the swath', () => {
  it('of a southern storm mirrors its northern twin', () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-64, 17, -52, 31], cell: 0.5 });
    const south = gridOver({ crs: 'EPSG:4326', bounds: [-64, -31, -52, -17], cell: 0.5 });
    const a = exactSwath(windModel(recurving, recipe), grid, { stepS: 1800 });
    const b = exactSwath(windModel(mirrored(recurving), recipe), south, { stepS: 1800 });
    // identity
    for (let row = 0; row < grid.ny; row++) {
      for (let column = 0; column < grid.nx; column++) {
        const k = row * grid.nx + column;
        const mirror = (grid.ny - 1 - row) * grid.nx + column;
        expect(Math.abs(a.windMps[k]! - b.windMps[mirror]!)).toBeLessThanOrEqual(1e-9);
        if (a.windMps[k]! > 0)
          expect(Math.abs(((a.windFromDeg[k]! + b.windFromDeg[mirror]! - 180 + 540) % 360) - 180)).toBeLessThan(1e-3);
      }
    }
  });

  it.each([30, 55.5, 120, 236.75])('moved by %d degrees of longitude keeps its areas', async (byDeg) => {
    const here = await run(recurving, { cell: 0.1 });
    const there = await run(shifted(recurving, byDeg), { cell: 0.1 });
    // identity: the fitted grid moves along
    for (const [i, area] of here.areas.entries()) {
      expect(Math.abs(there.areas[i]!.areaM2 / area.areaM2 - 1)).toBeLessThan(1e-6);
    }
  });

  it('by the plain model, moved by any longitude, keeps its areas to a millionth', () => {
    const areasOf = (track: Track): Isotach[] => {
      const model = windModel(track, recipe, { lowestLevelMps: LEVELS[0]! });
      const grid = fitGrid(model, {
        crs: 'EPSG:4326',
        cell: 0.25,
        lowestMps: LEVELS[0]!,
        fromMs: model.path.startMs,
        toMs: model.path.endMs,
      });
      return isotachs(exactSwath(model, grid, { stepS: 1800 }).windMps, grid, { levelsMps: LEVELS });
    };
    const here = areasOf(recurving);
    // identity
    for (const byDeg of [55.5, 236.75]) {
      for (const [i, area] of areasOf(shifted(recurving, byDeg)).entries()) {
        expect(Math.abs(area.areaM2 / here[i]!.areaM2 - 1)).toBeLessThan(1e-6);
      }
    }
  });

  it('of a storm that stands still is made of circles', async () => {
    const still = trackOf([
      { hours: 0, latDeg: 20, lonDeg: -60, maxWindMps: 50, radiusOfMaxWindM: 40_000 },
      { hours: 6, latDeg: 20, lonDeg: -60, maxWindMps: 50, radiusOfMaxWindM: 40_000 },
    ]);
    const { areas } = await run(still, { cell: 0.05 });
    for (const area of areas) {
      // isotachs at or above the level: a disk, less the calm centre
      expect(area.polygons).toHaveLength(1);
      for (const ring of area.polygons[0]!) {
        const radii = ring.map(([lonDeg, latDeg]) =>
          distanceM({ latDeg: 20, lonDeg: -60 }, { latDeg: latDeg!, lonDeg: lonDeg! }),
        );
        const spread = Math.max(...radii) - Math.min(...radii);
        // half a cell: the wind falls sharply outside R, straight between cells
        expect(spread).toBeLessThan(0.05 * 111_195 * 0.5);
      }
    }
  });

  it('on half the cell changes no area by more than the edge explains', async () => {
    const coarse = await run(recurving, { cell: 0.1 });
    const fine = await run(recurving, { cell: 0.05 });
    for (const [i, area] of fine.areas.entries()) {
      let edge = 0;
      for (const polygon of area.polygons) {
        for (const ring of polygon) {
          for (let k = 1; k < ring.length; k++)
            edge += distanceM(
              { lonDeg: ring[k - 1]![0]!, latDeg: ring[k - 1]![1]! },
              { lonDeg: ring[k]![0]!, latDeg: ring[k]![1]! },
            );
        }
      }
      // the contour lies within a quarter of a coarse cell of its place
      expect(Math.abs(coarse.areas[i]!.areaM2 - area.areaM2)).toBeLessThan(edge * 0.25 * 0.1 * 111_195);
    }
  });

  it('has isotachs inside one another, and their area is that of the cells', async () => {
    const { swath, grid, areas } = await run(recurving, { cell: 0.02 });
    for (const [i, area] of areas.entries()) {
      if (i > 0) expect(area.areaM2).toBeLessThan(areas[i - 1]!.areaM2);
      const cells = cellArea(swath.windMps, grid, area.thresholdMps);
      expect(Math.abs(area.areaM2 / cells - 1)).toBeLessThan(0.005);
    }
    const bands = isotachs(swath.windMps, grid, { levelsMps: LEVELS, bands: true });
    const sum = bands.reduce((total, band) => total + band.areaM2, 0);
    expect(sum / areas[0]!.areaM2).toBeCloseTo(1, 6);
    for (const list of [areas, bands]) {
      const text = isotachsGeojson({ isotachs: list, context: { quantity: 'wind', averagingS: 60 } });
      expect(checkRfc7946(JSON.parse(text))).toEqual([]);
    }
  });

  it('across ±180° and on projected grids is valid', async () => {
    const east = shifted(recurving, 238);
    const geographic = await run(east, { cell: 0.1 });
    const projected = await run(east, { cell: 11_000, crs: '+proj=laea +lat_0=23 +lon_0=180 +datum=WGS84' });
    for (const { areas } of [geographic, projected]) {
      expect(
        checkRfc7946(JSON.parse(isotachsGeojson({ isotachs: areas, context: { quantity: 'wind', averagingS: 60 } }))),
      ).toEqual([]);
    }
    for (const [i, area] of geographic.areas.entries())
      expect(Math.abs(projected.areas[i]!.areaM2 / area.areaM2 - 1)).toBeLessThan(0.02);
  });

  it('keeps the fix’s wind as its peak, and none outside the model', async () => {
    const { swath } = await run(recurving, { cell: 0.02 });
    const peak = swath.windMps.reduce((a, b) => Math.max(a, b), 0);
    expect(peak).toBeGreaterThan(0.99 * knots(120));
    expect(peak).toBeLessThan(1.001 * knots(120));
  });

  it('has no cliff at the outer edge', () => {
    const model = windModel(recurving, recipe);
    const field = model.fieldAt(model.path.startMs + 24 * 3_600_000);
    let before = field.strongestOnCircle(0.5 * model.outerRadiusM);
    for (let r = 0.5 * model.outerRadiusM; r <= model.outerRadiusM; r += 500) {
      const wind = field.strongestOnCircle(r);
      expect(Math.abs(wind - before)).toBeLessThan(0.15);
      before = wind;
    }
    expect(before).toBeLessThan(0.05);
  });
});
