// The fast swath against the exact one at one-minute steps, on seeded harsh storms: stalls, loops, 22 m/s movers, a radius
// of maximum wind of 8 km, eyewall changes, both hemispheres, across ±180° and the equator, cells of 0.02° to 0.2°,
// projected grids. Every storm is judged in a window of cells at a random place of its track.
// usage: node scripts/check-kernel.js [--storms N] [--first N] [--edge CELLS] [--set K=V]… [--each]     (needs `npm run build`)
import { makeRecipe } from '../dist/model/recipe.js';
import { windModel } from '../dist/model/wind.js';
import { harshStorm, judge } from './kernel/harsh-storms.js';

const argument = (name, otherwise) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? otherwise : process.argv[at + 1];
};
const settings = process.argv.flatMap((word, i) => (process.argv[i - 1] === '--set' ? [word] : []));
const storms = Number(argument('--storms', 200));
const first = Number(argument('--first', 1));
const edge = Number(argument('--edge', 36));

const worst = { below: 0, above: 0, directionDeg: 0, timeS: 0, hours: 0 };
const where = { ...worst };
let [cells, failed] = [0, 0];
for (let seed = first; seed < first + storms; seed++) {
  const { track, grid, kind } = harshStorm(seed, { edge });
  const model = windModel(track, makeRecipe(undefined, settings));
  const found = await judge(model, grid);
  cells += found.cells;
  failed += found.failed;
  for (const key of Object.keys(worst))
    if (found[key] > worst[key]) [worst[key], where[key]] = [found[key], `storm ${seed} (${kind})`];
  if (process.argv.includes('--each') || found.failed > 0)
    console.log(
      `${String(seed).padStart(4)} ${kind.padEnd(34)} ${grid.crs.padEnd(10).slice(0, 10)} cell ${grid.cell}: below ${found.below.toFixed(3)} above ${found.above.toFixed(3)} ` +
        `direction ${found.directionDeg.toFixed(2)} time ${found.timeS.toFixed(0)} hours ${found.hours.toFixed(2)} failed ${found.failed} of ${found.cells}`,
    );
}
console.log(`${storms} storms, ${cells} cells at 8 m/s or more, ${failed} outside the contract`);
for (const key of Object.keys(worst)) console.log(`  ${key.padEnd(13)} ${worst[key].toFixed(4)}  ${where[key]}`);
if (failed > 0) process.exitCode = 1;
