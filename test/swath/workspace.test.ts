import { describe, expect, it } from 'vitest';
import { makeRecipe } from '../../src/model/recipe.js';
import { windModel } from '../../src/model/wind.js';
import { gridOver } from '../../src/swath/grid.js';
import { peakSwath } from '../../src/swath/peak.js';
import { createSwathWorkspace } from '../../src/swath/workspace.js';
import { mirrored, recurving, shifted } from '../storms.js';

describe('a workspace', () => {
  it('has the winds of the swath, storm after storm', async () => {
    const grid = gridOver({ crs: 'EPSG:4326', bounds: [-70, -32, -45, 35], cell: 0.25 });
    const workspace = createSwathWorkspace(grid);
    const footprints = [];
    for (const track of [recurving, mirrored(recurving), shifted(recurving, 7), recurving]) {
      const model = windModel(track, makeRecipe());
      const footprint = workspace.footprint(model, { leastMps: 12 });
      footprints.push(footprint);
      const swath = await peakSwath(model, grid, { peakOnly: true });
      const found = new Map([...footprint.cells].map((k, i) => [k, footprint.windMps[i]!]));
      expect(found.size).toBe(footprint.cells.length);
      expect(found.size).toBeGreaterThan(100);
      // identity: both are within 0.05 m/s of the plain model, and nothing that is high enough is missing
      for (const [k, wind] of swath.windMps.entries()) {
        if (wind > 12.05) expect(Math.abs(found.get(k)! - wind)).toBeLessThan(0.05);
        if (wind < 11.95) expect(found.has(k)).toBe(false);
      }
    }
    // identity: what was there before leaves nothing behind
    expect(footprints[3]).toEqual(footprints[0]);
  });
});
