import { describe, expect, it } from 'vitest';
import { EARTH_RADIUS_M, RADIANS } from '../../src/earth.js';
import { landFraction } from '../../src/land/mask.js';
import { type Grid, gridOver } from '../../src/swath/grid.js';
import { landGrid } from '../../src/swath/surface.js';
import { rectangles } from '../land-world.js';

type Box = readonly [number, number, number, number];
const fractionOn = (grid: Grid, ...boxes: readonly Box[]): Float32Array =>
  landFraction(landGrid(grid), rectangles(...boxes));

describe('share of land in cells', () => {
  it('counts an island smaller than a cell with its area', () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [0, 0, 4, 4], cell: 1 });
    const share = fractionOn(grid, [1.25, 2.1, 1.5, 2.3]);
    // identity: 0.25° × 0.2° of a square degree; row 0 is the northernmost
    expect(share[1 * 4 + 1]).toBeCloseTo(0.05, 6);
    expect(share.reduce((a, b) => a + b)).toBeCloseTo(0.05, 6);
  });

  it('is exactly 1 inland, exactly 0 at sea, and what is left at a straight coast', () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [0, 0, 4, 2], cell: 0.5 });
    const share = fractionOn(grid, [-10, -10, 2.2, 10]);
    expect([...share.slice(0, 8)]).toEqual([1, 1, 1, 1, expect.closeTo(0.4, 6), 0, 0, 0]);
  });

  it('goes on across ±180°', () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [178, -1, 182, 1], cell: 1 });
    const share = fractionOn(grid, [179.5, -5, 180, 5], [-180, -5, -179.5, 5]);
    expect([...share.slice(0, 4)]).toEqual([0, expect.closeTo(0.5, 6), expect.closeTo(0.5, 6), 0]);
  });

  it('keeps an area on a projected grid', () => {
    const grid = gridOver({ crs: '+proj=laea +lat_0=20 +lon_0=-60', bounds: [-2e5, -2e5, 2e5, 2e5], cell: 10_000 });
    const share = fractionOn(grid, [-60.5, 19.5, -59.5, 20.5]);
    const areaM2 = share.reduce((a, b) => a + b) * 1e8;
    // identity: a cell of longitude and latitude on the sphere; proj4 takes an ellipsoid, 0.5 % apart
    const expected = EARTH_RADIUS_M ** 2 * RADIANS * (Math.sin(20.5 * RADIANS) - Math.sin(19.5 * RADIANS));
    expect(Math.abs(areaM2 / expected - 1)).toBeLessThan(0.01);
  });
});
