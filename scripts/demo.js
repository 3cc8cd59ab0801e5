// The main job on two invented storms, one on each side of the equator, drawn by hand as a planner would.
// Output in out/: every format, and what the command printed.
import { execFileSync } from 'node:child_process';
import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
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
run('swath', 'fixtures/demo-quillon.csv', '--out', 'out/quillon', '--formats', formats);
run('swath', 'fixtures/demo-tarrabel.csv', '--wind', '10min', '--bands', '--out', 'out/tarrabel', '--formats', formats);
writeFileSync(
  join(out, 'README.txt'),
  'Made by `npm run demo` from invented storms in an invented setting. No warning, no forecast.\n',
);
