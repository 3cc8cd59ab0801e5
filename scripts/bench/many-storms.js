// Benchmark of many storms on one grid, peak wind only: storms a second of the workspace and of a peer written with NumPy,
// each on one thread, and the memory after a few and after all storms.
// usage: node scripts/bench/many-storms.js [--storms N] [--peer-storms N]      (needs `npm run build` and Debian's python3-numpy)
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { makeRecipe } from '../../dist/model/recipe.js';
import { windModel } from '../../dist/model/wind.js';
import { gridOver } from '../../dist/swath/grid.js';
import { createSwathWorkspace } from '../../dist/swath/workspace.js';
import { readTracksFromText } from '../../dist/track/read/read.js';
import { generator } from '../kernel/harsh-storms.js';

const argument = (name, otherwise) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? otherwise : Number(process.argv[at + 1]);
};
const storms = argument('--storms', 200);
const peerStorms = Math.min(storms, argument('--peer-storms', 6));
const [WEST, SOUTH, CELL, NX, NY] = [-90, 5, 0.1, 600, 400];
const HEAD = 'storm,time,lon_deg,lat_deg,vmax_mps,rmax_km,holland_b';

/** An invented storm of four days, a fix every six hours. */
function storm(number) {
  const random = generator(number);
  let [lon, lat, heading] = [-35 - 25 * random(), 10 + 8 * random(), 270 + 30 * random()];
  const [weak, strong, speed] = [15 + 10 * random(), 30 + 40 * random(), 3 + 5 * random()];
  const rows = [];
  for (let i = 0; i <= 16; i++) {
    const time = `${new Date(Date.UTC(2031, 8, 1, 6 * i)).toISOString().slice(0, 16)}Z`;
    const wind = weak + (strong - weak) * Math.sin((Math.PI * i) / 16);
    rows.push(
      `S${number},${time},${lon.toFixed(4)},${lat.toFixed(4)},${wind.toFixed(2)},${(60 - 0.6 * wind).toFixed(1)},${(1.1 + 0.012 * wind).toFixed(3)}`,
    );
    const degrees = (speed * 21.6) / 111.2;
    const bearing = (heading * Math.PI) / 180;
    lat += degrees * Math.cos(bearing);
    lon += (degrees * Math.sin(bearing)) / Math.cos((lat * Math.PI) / 180);
    heading += 4;
  }
  return rows.join('\n');
}

const grid = gridOver({ crs: 'EPSG:4326', cell: CELL, bounds: [WEST, SOUTH, WEST + NX * CELL, SOUTH + NY * CELL] });
const workspace = createSwathWorkspace(grid);
const recipe = makeRecipe();
const megabytes = () => process.memoryUsage().rss / 1e6;
const run = (number) => {
  const [track] = readTracksFromText(`${HEAD}\n${storm(number)}\n`, { source: 'bench' });
  return workspace.footprint(windModel(track, recipe, { lowestLevelMps: 17 }), { leastMps: 17 }).cells.length;
};
let cells = 0;
for (let i = 0; i < 20; i++) run(i);
const early = megabytes();
const before = process.cpuUsage();
for (let i = 0; i < storms; i++) cells += run(i);
const { user, system } = process.cpuUsage(before);
const ours = (user + system) / 1e6 / storms;
const late = megabytes();

const folder = mkdtempSync(join(tmpdir(), 'galewake-bench-'));
const environment = { ...process.env, OPENBLAS_NUM_THREADS: '1', OMP_NUM_THREADS: '1' };
let peer = 0;
for (let i = 0; i < peerStorms; i++) {
  writeFileSync(join(folder, 'storm.csv'), `${HEAD}\n${storm(i)}\n`);
  const words = [join(folder, 'storm.csv'), WEST, SOUTH, CELL, NX, NY, 10].map(String);
  const script = fileURLToPath(new URL('numpy_peer.py', import.meta.url));
  peer += JSON.parse(execFileSync('/usr/bin/python3', [script, ...words], { env: environment, encoding: 'utf8' }))
    .cpu_s[0];
}
rmSync(folder, { recursive: true });
peer /= peerStorms;
console.log(
  `${storms} storms of four days, ${NX} × ${NY} cells of ${CELL}°, ${Math.round(cells / storms)} cells of 17 m/s or more a storm`,
);
console.log(
  `ours ${(1 / ours).toFixed(1)} storms a CPU second, peer ${(1 / peer).toFixed(1)}: ${(peer / ours).toFixed(1)} times`,
);
console.log(`memory after 20 storms ${early.toFixed(0)} MB, after ${storms} more ${late.toFixed(0)} MB`);
