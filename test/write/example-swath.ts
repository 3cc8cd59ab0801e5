import { type Grid, gridOver } from '../../src/swath/grid.js';
import type { Swath } from '../../src/swath/swath.js';
import { knots } from '../../src/units.js';
import type { Provenance } from '../../src/write/provenance.js';

/** A made-up swath of round contours, calm in the corners, on any grid: for tests of the writers. */
export function exampleSwath(
  options: { crs?: string; nx?: number; ny?: number; west?: number; north?: number; cell?: number } = {},
): Swath {
  const { crs = 'EPSG:4326', nx = 70, ny = 50, west = 170, north = -10 } = options;
  const cell = options.cell ?? (crs === 'EPSG:4326' ? 0.3 : 2000);
  const grid: Grid = gridOver({ crs, bounds: [west, north - ny * cell, west + nx * cell, north], cell });
  const field = (value: (r: number, column: number, row: number) => number): Float32Array => {
    const out = new Float32Array(nx * ny);
    for (let row = 0, k = 0; row < ny; row++)
      for (let column = 0; column < nx; column++, k++)
        out[k] = value(Math.hypot((column - nx / 2 + 0.3) / nx, (row - ny / 2 + 0.2) / ny), column, row);
    return out;
  };
  const wind = (r: number): number => (r > 0.5 ? 0 : 62 * Math.exp(-4 * r) * (0.8 + 0.2 * Math.sin(20 * r)));
  return {
    grid,
    windMps: field(wind),
    gustMps: field((r) => 1.23 * wind(r)),
    windFromDeg: field((r, column, row) =>
      r > 0.5 ? Number.NaN : ((Math.atan2(row - ny / 2, column - nx / 2) * 180) / Math.PI + 360) % 360,
    ),
    peakTimeS: field((r, column, row) => (r > 0.5 ? Number.NaN : 43210.123 * column + 17 * row)),
    hoursAbove: [34, 50, 64].map((level) => ({
      thresholdMps: knots(level),
      hours: field((r) => Math.max(0, (wind(r) - knots(level)) / 3)),
    })),
    originMs: Date.UTC(2031, 1, 5, 6),
    averagingS: 60,
    gustDurationS: 3,
    cautions: ['made up'],
  };
}

export const exampleProvenance: Provenance = {
  storm: 'EX012031',
  stormName: 'Ærin & <b>',
  version: '9.9.9',
  recipe: { 'vortex.profile': 'holland-1980', note: 'é "quoted"' },
  inputs: [{ name: 'storm.csv', sha256: 'ab'.repeat(32) }],
  period: { startMs: Date.UTC(2031, 1, 5, 6), endMs: Date.UTC(2031, 1, 9, 18) },
  references: ['Holland, G. J., 1980'],
};
