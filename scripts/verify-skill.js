#!/usr/bin/env node
// The skill of the default recipe on best tracks:
//   npm run build && node scripts/verify-skill.js FILE…
// HURDAT2 files are scored by the rules of the calibration (over water at least 100 km off land, HU or TS, synoptic hours,
// translation below 25 m/s); `--all` counts every fix. Modelled minus observed; radii are means of the quadrants where all
// four are observed above zero.
import { readFileSync } from 'node:fs';
import { makeRecipe } from '../dist/model/recipe.js';
import { summarize, verifyTrack } from '../dist/model/verify.js';
import { readTracksFromText } from '../dist/track/read/read.js';
import { isCounted } from './skill/fixes.js';
import { translationSpeed } from './skill/motion.js';

const args = process.argv.slice(2);
const everything = args.includes('--all');
const files = args.filter((arg) => !arg.startsWith('--'));
if (files.length === 0) {
  console.error('usage: node scripts/verify-skill.js [--all] FILE…');
  process.exit(2);
}
const recipe = makeRecipe(undefined, ['completion.max_gap_h=240']);
const tracks = files.flatMap((file) => readTracksFromText(readFileSync(file, 'utf8'), { source: file }));
const counted = new Set();
for (const track of tracks)
  for (const [i, fix] of track.fixes.entries())
    if (everything || isCounted(fix, translationSpeed(track.fixes, i)))
      counted.add(`${track.id} ${new Date(fix.timeMs).toISOString()}`);

const RADII = ['34kt', '50kt', '64kt', 'rmax'];
const SETTINGS = [
  ['no size given', RADII],
  ['34-kt radii given', ['50kt', '64kt', 'rmax']],
  ['34 and 64 kt given', ['50kt']],
  ['all radii given', []],
  ['no pressure, no size', [...RADII, 'pressure']],
  ['no pressure, 34 kt given', ['50kt', '64kt', 'rmax', 'pressure']],
];
console.log(`${tracks.length} storms, ${counted.size} fixes counted; mean absolute error (bias), number`);
for (const [name, hide] of SETTINGS) {
  const rows = tracks.flatMap((track) =>
    verifyTrack(track, recipe, { hide }).filter((row) => counted.has(`${row.storm} ${row.time}`)),
  );
  const cells = Object.entries(summarize(rows)).map(([key, { n, mae, bias }]) =>
    n === 0 ? `${key} –` : `${key} ${mae.toFixed(2)} (${bias.toFixed(2)}) ${n}`,
  );
  console.log(`${name.padEnd(25)} ${cells.join('   ')}`);
  if (name === 'no size given') console.log(`${''.padEnd(25)} quadrants of a given mean, 34 kt: ${splitError(rows)}`);
  if (name === '34 and 64 kt given') console.log(`${''.padEnd(25)} single quadrants, 50 kt: ${quadrantError(rows)}`);
}

/** Error of the quadrants when the modelled ones are scaled to the observed mean. */
function splitError(rows) {
  let sum = 0;
  let n = 0;
  for (const row of rows) {
    const pair = row.radii['34kt'];
    if (!pair?.observed_km.every((radius) => radius > 0)) continue;
    const mean = (values) => values.reduce((total, value) => total + value, 0) / 4;
    const scale = mean(pair.modelled_km) > 0 ? mean(pair.observed_km) / mean(pair.modelled_km) : 0;
    for (let j = 0; j < 4; j++)
      sum += Math.abs((scale > 0 ? scale * pair.modelled_km[j] : mean(pair.observed_km)) - pair.observed_km[j]);
    n += 4;
  }
  return `${(sum / n).toFixed(2)} km, ${n}`;
}

/** Error of single quadrants of 50 kt where 34, 50 and 64 kt are all observed above zero. */
function quadrantError(rows) {
  let sum = 0;
  let bias = 0;
  let n = 0;
  for (const { radii } of rows)
    for (let j = 0; j < 4; j++) {
      const observed = radii['50kt']?.observed_km[j];
      if (!(observed > 0 && radii['34kt']?.observed_km[j] > 0 && radii['64kt']?.observed_km[j] > 0)) continue;
      const error = radii['50kt'].modelled_km[j] - observed;
      sum += Math.abs(error);
      bias += error;
      n++;
    }
  return `${(sum / n).toFixed(2)} (${(bias / n).toFixed(2)}) km, ${n}`;
}
