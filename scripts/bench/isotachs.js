// Isotachs of a 2000 × 2000 field at 8 levels against contourpy's filled contours: both in turn in one run, medians.
// usage: node scripts/bench/isotachs.js [--rounds N] [--json]      (needs `npm run build` and Debian's python3-contourpy)
import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { isotachs } from '../../dist/isotach/isotachs.js';

const NX = 2000;
const NY = 2000;
const LEVELS = [10, 17.49, 25.72, 32.92, 42.7, 49.39, 58.13, 62];
const argument = (name, otherwise) => {
  const at = process.argv.indexOf(name);
  return at < 0 ? otherwise : process.argv[at + 1];
};
const rounds = Number(argument('--rounds', 15));

/** Uniform numbers in 0–1 from a seed (mulberry32). */
function generator(seed) {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** Peak wind of three invented storms: a winding path each, a core that swells and shrinks, a broad outer field. */
function smoothField() {
  const random = generator(20);
  const field = new Float32Array(NX * NY);
  for (let storm = 0; storm < 3; storm++) {
    const [across, sway, length, phase] = [
      0.25 + 0.5 * random(),
      0.1 + 0.15 * random(),
      200 + 300 * random(),
      6 * random(),
    ];
    const [vmax, core] = [45 + 20 * random(), 20 + 40 * random()];
    for (let row = 0, k = 0; row < NY; row++) {
      for (let column = 0; column < NX; column++, k++) {
        const path = NY * (across + sway * Math.sin(column / length + phase));
        const away = Math.abs(row - path) / core;
        const strength = vmax * (0.75 + 0.25 * Math.cos(column / 270 + phase));
        const wind = strength * (away < 1 ? 0.8 + 0.2 * away : away ** -0.6);
        if (wind > field[k]) field[k] = wind;
      }
    }
  }
  return field;
}

function fields() {
  const smooth = smoothField();
  const random = generator(21);
  const quantised = smooth.map((wind) => Math.round(wind * 2) / 2);
  for (let hole = 0; hole < 60; hole++) {
    const [x, y, size] = [random() * NX, random() * NY, 5 + random() * 60];
    for (let row = Math.max(0, Math.floor(y - size)); row < Math.min(NY, y + size); row++) {
      quantised.fill(
        Number.NaN,
        row * NX + Math.max(0, Math.floor(x - size)),
        row * NX + Math.min(NX, Math.ceil(x + size)),
      );
    }
  }
  const rough = smooth.map((wind) => wind + 2 * (random() + random() - 1));
  return { smooth, 'quantised to 0.5 m/s, NaN': quantised, rough };
}

const median = (values) => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)];
const folder = mkdtempSync(join(tmpdir(), 'isotachs-'));
const grid = { crs: 'EPSG:4326', geographic: true, nx: NX, ny: NY, cell: 0.01, bounds: [-80, 10, -60, 30] };
const peerScript = fileURLToPath(new URL('contour_peer.py', import.meta.url));
const environment = { ...process.env };
delete environment.OPENBLAS_CORETYPE;
delete environment.OPENBLAS_L2_SIZE;

const rows = [];
try {
  for (const [name, field] of Object.entries(fields())) {
    const path = join(folder, 'field.f32');
    writeFileSync(path, new Uint8Array(field.buffer));
    const peer = spawn('/usr/bin/python3', [peerScript, path, String(NX), String(NY), ...LEVELS.map(String)], {
      env: environment,
      stdio: ['pipe', 'pipe', 'inherit'],
    });
    const answers = createInterface({ input: peer.stdout })[Symbol.asyncIterator]();
    for (const mode of ['above', 'bands']) {
      const ours = [];
      const theirs = [];
      let vertices = 0;
      let peerVertices = 0;
      for (let round = -3; round < rounds; round++) {
        const began = performance.now();
        const result = isotachs(field, grid, { levelsMps: LEVELS, bands: mode === 'bands' });
        const seconds = (performance.now() - began) / 1000;
        peer.stdin.write(`${mode}\n`);
        const [peerSeconds, count] = (await answers.next()).value.split(' ').map(Number);
        if (round < 0) continue; // warm-up
        ours.push(seconds);
        theirs.push(peerSeconds);
        vertices = result.reduce(
          (sum, { polygons }) => sum + polygons.flat().reduce((n, ring) => n + ring.length, 0),
          0,
        );
        peerVertices = count;
      }
      const row = {
        field: name,
        mode,
        ours_ms: median(ours) * 1000,
        contourpy_ms: median(theirs) * 1000,
        vertices,
        peerVertices,
      };
      rows.push({ ...row, ratio: row.ours_ms / row.contourpy_ms });
    }
    peer.stdin.end();
  }
} finally {
  rmSync(folder, { recursive: true, force: true });
}

if (process.argv.includes('--json')) console.log(JSON.stringify({ schema: 'galewake-bench-isotachs/1', rounds, rows }));
else {
  console.log(
    `${NX} × ${NY} cells, ${LEVELS.length} levels, medians of ${rounds}; ours to nested GeoJSON positions with areas`,
  );
  for (const row of rows) {
    console.log(
      `${row.field.padEnd(28)} ${row.mode.padEnd(6)} ${row.ours_ms.toFixed(1).padStart(7)} ms  contourpy ${row.contourpy_ms.toFixed(1).padStart(7)} ms  ratio ${row.ratio.toFixed(2)}  vertices ${row.vertices} / ${row.peerVertices}`,
    );
  }
}
