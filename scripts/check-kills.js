// Kills a run of an event set at random moments (SIGKILL, to the whole process group), resumes it, and compares everything
// that it has written with an undisturbed run, byte for byte.
// usage: node scripts/check-kills.js [--kills N]     (needs `npm run build`)
import { execFileSync, spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const at = process.argv.indexOf('--kills');
const kills = at < 0 ? 50 : Number(process.argv[at + 1]);
const command = fileURLToPath(new URL('../dist/cli/main.js', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'galewake-kills-'));
const input = join(folder, 'set.csv');
writeFileSync(
  input,
  execFileSync(process.execPath, [fileURLToPath(new URL('make-events.js', import.meta.url)), '--events', '24']),
);
const words = (out) => [
  ...[command, 'events', 'run', input, '--out', out, '--bounds=-90,5,-30,45', '--cell', '0.4deg', '--shards', '12'],
  ...['--jobs', '2', '--quiet'],
];

/** Names and bytes of what counts: data, maps, and manifests without host and seconds. */
function contents(run) {
  const found = {};
  for (const name of readdirSync(join(run, 'shards'))) {
    if (name.endsWith('.part')) throw new Error(`${name} was left behind`);
    const bytes = readFileSync(join(run, 'shards', name));
    found[name] = name.endsWith('.json')
      ? JSON.stringify({ ...JSON.parse(bytes), seconds: 0, host: '' })
      : bytes.toString('base64');
  }
  for (const name of ['return-wind.tif', 'return-gust.tif', 'return-periods.nc', 'events.csv', 'events.parquet'])
    found[name] = readFileSync(join(run, name)).toString('base64');
  return found;
}

const undisturbed = join(folder, 'undisturbed');
const startedAt = performance.now();
execFileSync(process.execPath, words(undisturbed), { stdio: 'ignore' });
const usualMs = performance.now() - startedAt;
const expected = contents(undisturbed);
let [differ, during] = [0, 0];
for (let i = 0; i < kills; i++) {
  const run = join(folder, `run-${i}`);
  const child = spawn(process.execPath, words(run), { stdio: 'ignore', detached: true });
  const ended = new Promise((done) => child.on('close', done));
  await new Promise((done) => setTimeout(done, (usualMs * 1.05 * (i + Math.random())) / kills));
  try {
    process.kill(-child.pid, 'SIGKILL');
    during++;
  } catch {
    // it had ended
  }
  await ended;
  execFileSync(process.execPath, words(run), { stdio: 'ignore' });
  const found = contents(run);
  const same =
    Object.keys(expected).length === Object.keys(found).length &&
    Object.keys(expected).every((name) => expected[name] === found[name]);
  if (!same) {
    differ++;
    console.log(`kill ${i}: differs`);
  }
  rmSync(run, { recursive: true });
}
rmSync(folder, { recursive: true });
console.log(
  `${kills} kills over ${(usualMs / 1000).toFixed(1)} s, ${during} of them while it ran; ${differ} results differ`,
);
if (differ > 0) process.exitCode = 1;
