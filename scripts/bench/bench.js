// Benchmarks of the swath: against a peer written with NumPy in the same run, and every profile and surface option against
// the exact model. Medians of CPU seconds, ratios before absolute times.
// usage: npm run bench -- [--rounds N] [--json]      (needs `npm run build` and Debian's python3-numpy)
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { cpus, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { makeRecipe } from '../../dist/model/recipe.js';
import { windModel } from '../../dist/model/wind.js';
import { INFLOWS } from '../../dist/surface/inflow.js';
import { MOTIONS } from '../../dist/surface/motion.js';
import { REDUCTIONS } from '../../dist/surface/reduction.js';
import { exactSwath } from '../../dist/swath/exact.js';
import { gridOver } from '../../dist/swath/grid.js';
import { peakSwath } from '../../dist/swath/peak.js';
import { readTracksFromText } from '../../dist/track/read/read.js';
import { PROFILES } from '../../dist/vortex/profiles.js';

const argument = (name, otherwise) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? otherwise : process.argv[at + 1];
};
const rounds = Number(argument('--rounds', 5));
const median = (values) => values.toSorted((a, b) => a - b)[values.length >> 1];

/** An invented storm of five days: it grows, turns to the north and hastens away; a fix every 6 h. */
function storm() {
  const lines = ['storm,time,lon_deg,lat_deg,vmax_mps,rmax_km,holland_b'];
  let [lon, lat] = [-60.5, 15];
  for (let i = 0; i <= 20; i++) {
    const time = new Date(Date.UTC(2031, 8, 3, 6 * i)).toISOString().slice(0, 16);
    const strength = Math.sin((Math.PI * Math.min(i, 16)) / 24);
    const vmax = 24 + 36 * strength;
    lines.push(
      `B1,${time}Z,${lon.toFixed(4)},${lat.toFixed(4)},${vmax.toFixed(2)},${(52 - 24 * strength).toFixed(2)},${(1.2 + 0.5 * strength).toFixed(3)}`,
    );
    const heading = ((-70 + 4.5 * i) * Math.PI) / 180;
    const degrees = 0.85 + 0.02 * i;
    lon += (degrees * Math.sin(heading)) / Math.cos((lat * Math.PI) / 180);
    lat += degrees * Math.cos(heading);
  }
  return `${lines.join('\n')}\n`;
}

const text = storm();
const [track] = readTracksFromText(text, { source: 'bench' });
const [WEST, SOUTH, CELL, NX, NY] = [-74, 14, 0.02, 600, 800];
const grid = gridOver({
  crs: 'EPSG:4326',
  cell: CELL,
  bounds: [WEST, SOUTH, WEST + NX * CELL, SOUTH + NY * CELL],
});
const folder = mkdtempSync(join(tmpdir(), 'galewake-bench-'));
writeFileSync(join(folder, 'storm.csv'), text);
const environment = { ...process.env, OPENBLAS_NUM_THREADS: '1', OMP_NUM_THREADS: '1' };
delete environment.OPENBLAS_CORETYPE;
delete environment.OPENBLAS_L2_SIZE;

function peer() {
  const script = fileURLToPath(new URL('numpy_peer.py', import.meta.url));
  const words = [script, join(folder, 'storm.csv'), WEST, SOUTH, CELL, NX, NY, 10].map(String);
  return JSON.parse(execFileSync('/usr/bin/python3', words, { env: environment, encoding: 'utf8' })).cpu_s[0];
}

/** CPU seconds and wall seconds of a run. */
async function timed(run) {
  const [cpu, wall] = [process.cpuUsage(), performance.now()];
  const value = await run();
  const { user, system } = process.cpuUsage(cpu);
  return { cpuS: (user + system) / 1e6, wallS: (performance.now() - wall) / 1000, value };
}

const report = { machine: cpus()[0]?.model, cores: cpus().length, rounds, swath: {}, options: [] };
const model = windModel(track, makeRecipe());
for (let i = 0; i < 3; i++) await peakSwath(model, grid, { jobs: 1 });
const seconds = { peer: [], one: [], peak: [], two: [] };
for (let round = 0; round < rounds; round++) {
  seconds.peer.push(peer());
  seconds.one.push(await timed(() => peakSwath(model, grid, { jobs: 1 })));
  seconds.peak.push(await timed(() => peakSwath(model, grid, { jobs: 1, peakOnly: true })));
  seconds.two.push(await timed(() => peakSwath(model, grid, { jobs: 2 })));
}
const cpu = (runs) => median(runs.map(({ cpuS }) => cpuS));
const wall = (runs) => median(runs.map(({ wallS }) => wallS));
report.swath = {
  peerCpuS: median(seconds.peer),
  cpuS: cpu(seconds.one),
  peakOnlyCpuS: cpu(seconds.peak),
  peerOverUs: median(seconds.peer) / cpu(seconds.one),
  peerOverPeakOnly: median(seconds.peer) / cpu(seconds.peak),
  oneThreadWallS: wall(seconds.one),
  twoThreadsWallS: wall(seconds.two),
  oneOverTwo: wall(seconds.one) / wall(seconds.two),
};

/** Time on the whole grid, worst error in a window about the strongest part of the track. */
const OPTIONS = [
  [],
  ...PROFILES.slice(1).map(({ id }) => [`vortex.profile=${id}`]),
  ...REDUCTIONS.slice(1).map(({ id }) => [`surface.reduction=${id}`]),
  ...INFLOWS.filter(({ id }) => id !== 'sobey-1977').map(({ id }) => [`surface.inflow=${id}`]),
  ...MOTIONS.filter(({ id }) => id !== 'lin-chavas-2012').map(({ id }) => [`surface.motion=${id}`]),
  ['surface.layer=kepert-2001'],
  ['path.interpolation=linear'],
];
const window = gridOver({ crs: 'EPSG:4326', cell: 0.05, bounds: [-71.5, 20.5, -69.5, 22.5] });
let base = 0;
for (const settings of OPTIONS) {
  try {
    const chosen = windModel(track, makeRecipe(undefined, settings));
    const runs = [];
    for (let i = 0; i < 3; i++) runs.push(await timed(() => peakSwath(chosen, grid, { jobs: 1 })));
    const [fast, exact] = [await peakSwath(chosen, window, { jobs: 1 }), exactSwath(chosen, window)];
    let [below, above] = [0, 0];
    for (let k = 0; k < exact.windMps.length; k++) {
      if (!(exact.windMps[k] >= 8)) continue;
      below = Math.max(below, exact.windMps[k] - fast.windMps[k]);
      above = Math.max(above, fast.windMps[k] - exact.windMps[k]);
    }
    const cpuS = cpu(runs);
    if (settings.length === 0) base = cpuS;
    report.options.push({ option: settings.join(' ') || 'as built in', cpuS, overBuiltIn: cpuS / base, below, above });
  } catch (error) {
    report.options.push({ option: settings.join(' '), error: error.message });
  }
}
rmSync(folder, { recursive: true });

if (process.argv.includes('--json')) console.log(JSON.stringify(report, null, 2));
else {
  console.log(`${report.machine}, ${report.cores} cores; medians of ${rounds} rounds, grid of ${NX} × ${NY} cells\n`);
  for (const [name, value] of Object.entries(report.swath)) console.log(`${name.padEnd(18)} ${value.toFixed(3)}`);
  console.log('\noption                                  CPU s   over built-in   below exact   above exact (m/s)');
  for (const { option, error, cpuS, overBuiltIn, below, above } of report.options)
    console.log(
      error
        ? `${option.padEnd(38)}  ${error}`
        : `${option.padEnd(38)} ${cpuS.toFixed(2).padStart(6)} ${overBuiltIn.toFixed(2).padStart(12)} ${below.toFixed(3).padStart(14)} ${above.toFixed(3).padStart(12)}`,
    );
}
