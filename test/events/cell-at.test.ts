import { describe, expect, it } from 'vitest';
import { cellFinder } from '../../src/events/cell-at.js';
import { cellCentre, gridOver, projection } from '../../src/swath/grid.js';

const GRIDS = [
  { crs: 'EPSG:4326', bounds: [-90, 5, -30, 45], cell: 2.5 },
  { crs: 'EPSG:4326', bounds: [170, -30, 200, -5], cell: 1 },
  { crs: 'EPSG:4326', bounds: [-180, -60, 180, 60], cell: 10 },
  { crs: 'EPSG:32760', bounds: [200_000, 7_500_000, 800_000, 8_200_000], cell: 50_000 },
] as const;

describe('the cell of a place', () => {
  it.each(GRIDS)('is found again from its centre, however its longitude is written: $crs $bounds', (parts) => {
    // identity
    const grid = gridOver(parts);
    const at = cellFinder(grid);
    for (let cell = 0; cell < grid.nx * grid.ny; cell++) {
      const [lonDeg, latDeg] = projection(grid.crs).inverse(
        ...cellCentre(grid, cell % grid.nx, Math.floor(cell / grid.nx)),
      );
      for (const turn of grid.geographic ? [-360, 0, 360] : [0])
        expect(at({ latDeg, lonDeg: lonDeg + turn })).toBe(cell);
    }
  });

  it('is none outside the grid, and takes its edges in', () => {
    const at = cellFinder(gridOver(GRIDS[0]));
    for (const [latDeg, lonDeg] of [
      [46, -60],
      [4.9, -60],
      [20, -90.1],
      [20, -29.9],
      [20, 120],
    ])
      expect(at({ latDeg: latDeg!, lonDeg: lonDeg! })).toBe(-1);
    expect(at({ latDeg: 45, lonDeg: -90 })).toBe(0);
    expect(at({ latDeg: 5, lonDeg: -30 })).toBe(16 * 24 - 1);
  });
});
