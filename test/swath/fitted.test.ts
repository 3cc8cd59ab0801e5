import { expect, it } from 'vitest';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { exactSwath } from '../../src/swath/exact.js';
import { gridOver } from '../../src/swath/grid.js';
import { peakSwath } from '../../src/swath/peak.js';
import { knots } from '../../src/units.js';
import { trackOf } from '../storms.js';

const nmi = (radii: readonly [number, number, number, number]) => [
  { thresholdMps: knots(34), radiiM: radii.map((radius) => radius * 1852) as [number, number, number, number] },
];

it('a storm whose radii were observed at some fixes only keeps the plain model’s peaks', async () => {
  const weak = trackOf([
    { hours: 0, latDeg: 14, lonDeg: -52, maxWindMps: knots(30) },
    { hours: 6, latDeg: 14.3, lonDeg: -53, maxWindMps: knots(35), windRadii: nmi([40, 0, 0, 30]) },
    { hours: 12, latDeg: 14.6, lonDeg: -54, maxWindMps: knots(35), windRadii: nmi([50, 20, 0, 40]) },
    { hours: 18, latDeg: 14.8, lonDeg: -55, maxWindMps: knots(30) },
  ]);
  const model = windModel(weak, makeRecipe());
  const grid = gridOver({ crs: 'EPSG:4326', bounds: [-56.5, 13, -51, 16.5], cell: 0.25 });
  const exact = exactSwath(model, grid, { stepS: 60 });
  const fast = await peakSwath(model, grid, { jobs: 1 });
  // identity: the plain model is the judge; of two maxima in time that come near each other the lower may be taken
  let compared = 0;
  for (const [k, wind] of exact.windMps.entries()) {
    if (wind < 8) continue;
    compared++;
    expect(Math.abs(fast.windMps[k]! - wind)).toBeLessThan(0.05);
  }
  expect(compared).toBeGreaterThan(50);
});
