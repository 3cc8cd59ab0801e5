import { describe, expect, it } from 'vitest';
import { EARTH_RADIUS_M, RADIANS } from '../../src/earth.js';
import { closestApproach, eventRows, firstLandfall } from '../../src/events/event-row.js';
import { cellAreasM2 } from '../../src/isotach/area.js';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { gridOver } from '../../src/swath/grid.js';
import { createSwathWorkspace } from '../../src/swath/workspace.js';
import { HOUR_MS, knots } from '../../src/units.js';
import { rectangles } from '../land-world.js';
import { recurving, trackOf } from '../storms.js';

const steady = (from: readonly [number, number], to: readonly [number, number]) =>
  windModel(
    trackOf(
      [0, 1, 2, 3, 4].map((i) => ({
        hours: 6 * i,
        latDeg: from[0] + ((to[0] - from[0]) * i) / 4,
        lonDeg: from[1] + ((to[1] - from[1]) * i) / 4,
        maxWindMps: 40,
        radiusOfMaxWindM: 30_000,
      })),
    ),
    makeRecipe(),
  );

describe('the row of an event', () => {
  it('has the closest approach of a great circle', () => {
    const model = steady([10, -60], [20, -60]);
    const { distanceM, timeMs } = closestApproach(model, { latDeg: 15, lonDeg: -58 });
    // identity: to a meridian it is R asin(cos φ sin Δλ)
    expect(distanceM).toBeCloseTo(EARTH_RADIUS_M * Math.asin(Math.cos(15 * RADIANS) * Math.sin(2 * RADIANS)), -1);
    // abeam a little poleward of the place's parallel: tan φ' = tan φ / cos Δλ
    const abeamDeg = Math.atan(Math.tan(15 * RADIANS) / Math.cos(2 * RADIANS)) / RADIANS;
    expect(model.path.at(timeMs).latDeg).toBeCloseTo(abeamDeg, 2);
    // what it never comes nearer to is at an end
    expect(closestApproach(model, { latDeg: 5, lonDeg: -60 }).timeMs).toBe(model.path.startMs);
  });

  it('has the first landfall, and none where it starts over land or stays at sea', () => {
    const { isLand } = rectangles([-70, 10, -60, 20]);
    const model = steady([15, -55], [15, -65]);
    const landfall = firstLandfall(model, isLand)!;
    // identity: half of the way after half of the time
    expect(Math.abs(landfall.timeMs - model.path.startMs - 12 * HOUR_MS)).toBeLessThan(120_000);
    expect(landfall.lonDeg).toBeCloseTo(-60, 2);
    expect(landfall.maxWindMps).toBeCloseTo(40, 6);
    expect(firstLandfall(steady([15, -65], [15, -55]), isLand)).toBeNull();
    expect(firstLandfall(steady([25, -55], [25, -65]), isLand)).toBeNull();
  });

  it('counts cells and areas at or above each level, and finds the strongest', () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-70, 10, -45, 35], cell: 0.25 });
    const model = windModel(recurving, makeRecipe());
    const footprint = createSwathWorkspace(grid).footprint(model, { leastMps: knots(34) });
    const levelsMps = [34, 64, 137].map(knots);
    const { areasM2 } = cellAreasM2(grid);
    const cellAreaM2 = (cell: number): number => areasM2[Math.trunc(cell / grid.nx)]!;
    const row = eventRows(grid, { cellAreaM2, levelsMps, places: [], isLand: null })(model, footprint);
    for (const [l, level] of levelsMps.entries()) {
      const cells = [...footprint.cells].filter((_, i) => footprint.windMps[i]! >= level);
      expect(row.levels[l]!.cells).toBe(cells.length);
      // identity: a cell of a graticule has R² Δλ (sin φ₂ − sin φ₁)
      const areaM2 = cells.reduce((sum, cell) => {
        const north = (35 - 0.25 * Math.trunc(cell / grid.nx)) * RADIANS;
        return sum + EARTH_RADIUS_M ** 2 * 0.25 * RADIANS * (Math.sin(north) - Math.sin(north - 0.25 * RADIANS));
      }, 0);
      expect(Math.abs(row.levels[l]!.areaM2 - areaM2)).toBeLessThan(1e-9 * areaM2 + 1);
    }
    expect(row.levels[2]!.cells).toBe(0);
    expect(row.peak!.windMps).toBe(Math.max(...footprint.windMps));
    expect(row.lowestPressurePa).toBe(
      Math.min(...model.completed.fixes.map(({ centralPressurePa }) => centralPressurePa.value)),
    );
    const nothing = eventRows(grid, { cellAreaM2, levelsMps, places: [], isLand: null })(model, {
      cells: new Int32Array(0),
      windMps: new Float32Array(0),
    });
    expect(nothing.peak).toBeNull();
  });
});
