import { UsageError } from '../errors.js';
import { quoted } from './shell-word.js';

/**
 * The two batch scripts of a run for Slurm: an array with one task a shard, and the reduction after it. The reduction waits
 * for the array's end, not for its success: it finds what is missing, and submits that once more, `tries` times at most.
 * @param command how galewake is called on the cluster's machines
 * @throws UsageError `events.run-name` for a folder whose name breaks the line: what follows would be a directive
 */
export function slurmScripts({
  run,
  shards,
  command,
  tries,
}: {
  run: string;
  shards: number;
  command: string;
  tries: number;
}): { array: string; reduce: string } {
  if (/[\r\n]/.test(run))
    throw new UsageError('events.run-name', `${JSON.stringify(run)}: a script cannot name a folder with a line break`);
  // the engine writes the job's number for %A and the like
  const plain = run.replaceAll('%', '%%');
  const log = quoted(`${plain}/slurm-%A_%a.log`);
  const head = (name: string): string =>
    `#!/bin/sh\n#SBATCH --job-name=${name}\n#SBATCH --requeue\n#SBATCH --open-mode=append\n#SBATCH --cpus-per-task=1\n`;
  return {
    array: `${head('galewake-shards')}#SBATCH --array=0-${shards - 1}\n#SBATCH --output=${log}\nexec ${command} events shard ${quoted(run)} --quiet\n`,
    reduce: `${head('galewake-reduce')}#SBATCH --output=${quoted(`${plain}/slurm-reduce.log`)}
missing=$(${command} events missing ${quoted(run)})
if [ -n "$missing" ]; then
  tries=\${GALEWAKE_TRIES:-0}
  if [ "$tries" -ge ${tries} ]; then
    echo "shards $missing are still missing after $tries more tries" >&2
    exit 3
  fi
  job=$(sbatch --parsable --array="$missing" ${quoted(`${run}/slurm-shards.sh`)}) || exit 74
  sbatch --dependency=afterany:"$job" --export=ALL,GALEWAKE_TRIES=$((tries + 1)) ${quoted(`${run}/slurm-reduce.sh`)}
  exit 0
fi
exec ${command} events reduce ${quoted(run)}
`,
  };
}
