// The main job on two invented storms, one on each side of the equator, drawn by hand as a planner would.
// Output in out/: every format, and what the command printed.
import { execFileSync } from 'node:child_process';
import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const command = join(root, 'dist/cli/main.js');
const out = join(root, 'out');
rmSync(out, { recursive: true, force: true });
mkdirSync(out, { recursive: true });

function run(...words) {
  console.log(`\n$ galewake ${words.join(' ')}`);
  const text = execFileSync(process.execPath, [command, ...words], {
    cwd: root,
    encoding: 'utf8',
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  process.stdout.write(text);
  return text;
}

const formats = 'geojson,cog,csv,netcdf,kml,flatgeobuf,svg,png,html';
run('tracks', 'fixtures/demo-quillon.csv', '--storm', 'Quillon');
run('profile', '--vmax', '110kt', '--rmax', '30km', '--lat', '27.9', '--radii', '10,20,30,40,60,100,200,400');
run(
  ...['swath', 'fixtures/demo-quillon.csv', '--out', 'out/quillon', '--formats', formats],
  ...['--zones', 'fixtures/demo-isles.geojson', '--places', 'fixtures/demo-places.csv'],
);
run(
  ...['swath', 'fixtures/demo-quillon.csv', '--land', 'fixtures/demo-isles.geojson', '--surface-bands'],
  ...['--of', 'gust', '--zones', 'fixtures/demo-isles.geojson', '--out', 'out/quillon-over-land', '--formats', formats],
);
// the README's picture, kept as fixtures/demo-map.png
const { svgToPng } = await import('../dist/io/png.js');
writeFileSync(join(out, 'demo-map.png'), svgToPng(readFileSync(join(out, 'quillon/map.svg'), 'utf8'), { width: 760 }));
run('sites', 'fixtures/demo-quillon.csv', 'fixtures/demo-places.csv');
run(
  ...['exposure', 'fixtures/demo-quillon.csv', 'fixtures/demo-assets.csv', '--zones', 'fixtures/demo-isles.geojson'],
  ...['--cubic', '25.7,74.7', '--loss-of', 'insured_sum', '--currency', 'crowns', '--out', 'out/isles'],
);
run('swath', 'fixtures/demo-tarrabel.csv', '--wind', '10min', '--bands', '--out', 'out/tarrabel', '--formats', formats);
writeFileSync(
  join(out, 'README.txt'),
  'Made by `npm run demo` from invented storms in an invented setting. No warning, no forecast.\n',
);
