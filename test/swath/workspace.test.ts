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
    for (const track of [recurving, mirrored(recurving), shifted(recurving, 7), recurving]) {
      const model = windModel(track, makeRecipe());
      const { cells, windMps } = workspace.footprint(model, { leastMps: 12 });
      const swath = await peakSwath(model, grid, { peakOnly: true });
      // identity: the same bits where the wind is high enough, and nothing else
      const expected = swath.windMps.filter((wind) => wind >= 12);
      expect(cells.length).toBe(expected.length);
      expect(cells.length).toBeGreaterThan(100);
      expect([...cells].every((k, i) => swath.windMps[k] === windMps[i])).toBe(true);
    }
  });
});
