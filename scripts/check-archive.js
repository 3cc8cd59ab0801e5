// Runs every storm of track files through the swath at 0.1° and reports errors, NaN and the slowest.
// usage: node scripts/check-archive.js FILE...      (npm run build first)
import { readTrackFile } from '../dist/io/tracks.js';
import { isotachs } from '../dist/isotach/isotachs.js';
import { makeRecipe } from '../dist/model/recipe.js';
import { windModel } from '../dist/model/wind.js';
import { fitGrid } from '../dist/swath/fit.js';
import { peakSwath } from '../dist/swath/peak.js';
import { knots } from '../dist/units.js';

const levels = [34, 50, 64, 83, 96, 113, 137].map(knots);
// a best track may have longer gaps than the built-in recipe takes without asking
const recipe = makeRecipe(undefined, ['completion.max_gap_h=240']);
let storms = 0;
let failed = 0;
let cells = 0;
let slowest = { id: '', ms: 0 };
for (const file of process.argv.slice(2)) {
  for await (const track of readTrackFile(file)) {
    storms++;
    const startedAt = performance.now();
    try {
      const model = windModel(track, recipe, { lowestLevelMps: levels[0] });
      const grid = fitGrid(model, {
        crs: 'EPSG:4326',
        cell: 0.1,
        lowestMps: levels[0],
        fromMs: model.path.startMs,
        toMs: model.path.endMs,
      });
      const swath = await peakSwath(model, grid, { jobs: 1 });
      const peak = swath.windMps.reduce((a, b) => Math.max(a, b), 0);
      const strongest = Math.max(...model.completed.fixes.map((fix) => fix.maxWindMps.value));
      if (
        swath.windMps.some(Number.isNaN) ||
        swath.gustMps.some(Number.isNaN) ||
        swath.hoursAbove.some(({ hours }) => hours.some(Number.isNaN))
      )
        throw new Error('NaN in the swath');
      if (
        swath.windMps.some(
          (wind, k) => wind > 0 && (Number.isNaN(swath.windFromDeg[k]) || Number.isNaN(swath.peakTimeS[k])),
        )
      )
        throw new Error('a peak without direction or time');
      if (peak > 1.01 * strongest) throw new Error(`peak ${peak} above the strongest fix ${strongest}`);
      const areas = isotachs(swath.windMps, grid, { levelsMps: levels });
      if (areas.some((area, i) => i > 0 && area.areaM2 > areas[i - 1].areaM2))
        throw new Error('a higher isotach is larger');
      cells += grid.nx * grid.ny;
    } catch (error) {
      failed++;
      console.log(`${file}: ${track.id} ${track.name ?? ''}: ${error.message}`);
    }
    const ms = performance.now() - startedAt;
    if (ms > slowest.ms) slowest = { id: track.id, ms };
  }
}
console.log(
  `${storms} storms, ${failed} failed, ${(cells / 1e6).toFixed(1)} million cells; slowest ${slowest.id}, ${(slowest.ms / 1000).toFixed(2)} s`,
);
process.exitCode = failed === 0 ? 0 : 1;
