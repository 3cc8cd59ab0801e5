#!/usr/bin/env bash
# An event set as a Slurm array on three emulated nodes: a task and a node are killed in the middle, what is missing is
# submitted once more, the reduction follows; the result is that of one machine, byte for byte. As root; installs Slurm.
# usage: check_slurm.sh     (needs `npm run build`)
set -euo pipefail
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$(mktemp -d)
chmod 755 "$work"
lab=$work/lab
export SLURM_CONF=$lab/slurm.conf
end() {
  local code=$?
  if [ $code -ne 0 ]; then
    for file in "$work"/cluster/slurm-*.log; do echo "== $file" >&2 && tail -n 20 "$file" >&2; done 2>/dev/null || true
    squeue >&2 2>/dev/null || true
  fi
  bash "$here/slurm_nodes.sh" down "$lab"
  rm -rf "$work"
  exit $code
}
trap end EXIT
fail() { echo "check_slurm: $*" >&2 && exit 1; }

# the command of the machines: it writes down which process does which task, so that one can be killed
command=$work/galewake
cat >"$command" <<SH
#!/bin/sh
if [ "\$2" = shard ]; then echo \$\$ >"$work/task-\$SLURM_ARRAY_TASK_ID-\${SLURM_RESTART_COUNT:-0}"; fi
exec "$(command -v node)" "$root/dist/cli/main.js" "\$@"
SH
chmod +x "$command"

bash "$here/slurm_nodes.sh" up "$lab"
node "$root/scripts/make-events.js" --events 300 --years 200 >"$work/set.csv"
set -- --bounds=-90,5,-30,45 --cell 0.2deg --shards 6 --quiet
"$command" events run "$work/set.csv" --out "$work/single" "$@" >/dev/null

"$command" events plan "$work/set.csv" --out "$work/cluster" "$@" >/dev/null
# the two scripts of the dry run, each as sbatch takes it
"$command" events submit slurm "$work/cluster" --dry-run --command "$command" |
  awk -v at="$work/dry" '/^#!/ { n++ } { print > (at n ".sh") }'
for script in "$work"/dry1.sh "$work"/dry2.sh; do
  sbatch --test-only "$script" 2>"$work/said" || fail "sbatch refuses a script: $(cat "$work/said")"
done
"$command" events submit slurm "$work/cluster" --command "$command" --tries 2

# waits until a task runs; says its process
process_of_task() {
  for _ in $(seq 300); do
    if [ -s "$work/task-$1-0" ]; then cat "$work/task-$1-0" && return 0; fi
    sleep 0.05
  done
  fail "task $1 did not start"
}
task=$(process_of_task 1)
sleep 0.4
kill -9 "$task" || fail "task 1 had ended before it was killed"
process_of_task 2 >/dev/null
sleep 0.4
node=$(squeue -h -r -t R -o '%K %N' | awk '$1 == 2 { print $2 }')
[ -n "$node" ] || fail "task 2 had ended before its node was killed"
lost=$(bash "$here/slurm_nodes.sh" kill "$lab" "$node")
[ -n "$lost" ] || fail "no job ran on node $node"

for _ in $(seq 900); do
  [ -e "$work/cluster/return-gust.tif" ] && [ -z "$(squeue -h)" ] && break
  [ -z "$(squeue -h)" ] && fail "the jobs have ended without maps"
  sleep 0.1
done
[ -z "$(squeue -h)" ] || fail "jobs are left in the queue"

# the killed task failed and was submitted once more; the lost one was started again by Slurm
tries=$(awk '{ for (i = 1; i <= NF; i++) if ($i == "Name=galewake-shards" && /JobState=FAILED/) n++ } END { print n + 0 }' "$lab/log/jobs.txt")
[ "$tries" -ge 1 ] || fail "no task has failed: nothing was tested"
[ -e "$work/task-2-1" ] || fail "task 2 was not started again after its node was lost"

node - "$work/single" "$work/cluster" <<'JS'
const { readdirSync, readFileSync } = require('node:fs');
const { join } = require('node:path');
const contents = (run) => {
  const found = {};
  for (const name of readdirSync(join(run, 'shards'))) {
    const bytes = readFileSync(join(run, 'shards', name));
    found[name] = name.endsWith('.json') ? JSON.stringify({ ...JSON.parse(bytes), seconds: 0, host: '' }) : bytes.toString('base64');
  }
  for (const name of readdirSync(run)) if (/^return-/.test(name)) found[name] = readFileSync(join(run, name)).toString('base64');
  return found;
};
const [single, cluster] = process.argv.slice(2).map(contents);
const names = new Set([...Object.keys(single), ...Object.keys(cluster)]);
const differ = [...names].filter((name) => single[name] !== cluster[name]);
if (names.size < 14 || differ.length > 0) {
  console.error(`check_slurm: of ${names.size} files these differ: ${differ.join(', ')}`);
  process.exit(1);
}
console.log(`slurm: ${names.size} files equal those of one machine`);
JS
