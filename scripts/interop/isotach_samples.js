// Writes isotachs of difficult fields as GeoJSON, for check_polygons.py: plateaus at the levels, cells without data,
// noise, saddles, the antimeridian, both poles, grids round the Earth and beyond the end of a projection.
// usage: node scripts/interop/isotach_samples.js FOLDER      (needs `npm run build`)
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { isotachs } from '../../dist/isotach/isotachs.js';
import { isotachsGeojson } from '../../dist/write/isotachs-geojson.js';

const folder = process.argv[2];
if (!folder) {
  console.error('usage: isotach_samples.js FOLDER');
  process.exit(2);
}
mkdirSync(folder, { recursive: true });

let state = 11;
const random = () => {
  state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
  return state / 2 ** 32;
};
const grid = (crs, west, south, cell, nx, ny) => ({
  crs,
  geographic: crs === 'EPSG:4326',
  nx,
  ny,
  cell,
  bounds: [west, south, west + nx * cell, south + ny * cell],
});
const grids = {
  tropics: grid('EPSG:4326', -70, 10, 0.02, 80, 60),
  'cells-on-antimeridian': grid('EPSG:4326', 179.1, -20, 0.02, 90, 50),
  'antimeridian-between-cells': grid('EPSG:4326', 179.107, -20, 0.02, 90, 50),
  globe: grid('EPSG:4326', -180, -90, 5, 72, 36),
  'globe-from-greenwich': grid('EPSG:4326', 0, -90, 5, 72, 36),
  'north-pole': grid('EPSG:3995', -750_000, -750_000, 25_000, 60, 60),
  'south-pole-on-a-cell': grid('EPSG:3031', -762_500, -762_500, 25_000, 61, 61),
  'utm-60': grid('EPSG:32660', 500_000, 1e6, 10_000, 60, 50),
  mercator: grid('EPSG:3857', -20037508.342789244, -1e7, 20037508.342789244 / 32, 64, 32),
  'beyond-equal-area': grid('EPSG:6933', -18e6, -8e6, 600_000, 60, 27),
};
const fields = {
  quantised: (wave) => Math.round(wave * 2) / 2,
  'quantised-with-gaps': (wave) => (random() < 0.1 ? Number.NaN : Math.round(wave * 2) / 2),
  noise: () => 30 * random(),
  chequered: (_, k) => (k % 2 ? 24 : 0),
};
const LEVELS = [5, 10, 12.5, 15, 20, 24];

let files = 0;
for (const [place, area] of Object.entries(grids)) {
  for (const [kind, value] of Object.entries(fields)) {
    const field = Float32Array.from({ length: area.nx * area.ny }, (_, k) => {
      const [column, row] = [k % area.nx, Math.floor(k / area.nx)];
      return value(14 + 8 * Math.sin(column / 9) + 8 * Math.cos(row / 7 + column / 31), column + row);
    });
    for (const bands of [false, true]) {
      const list = isotachs(field, area, { levelsMps: LEVELS, bands });
      const text = isotachsGeojson({ isotachs: list, context: { quantity: 'wind', averagingS: 60 } });
      writeFileSync(join(folder, `${place}-${kind}-${bands ? 'bands' : 'above'}.geojson`), text);
      files++;
    }
  }
}
console.log(`${files} files in ${folder}`);
