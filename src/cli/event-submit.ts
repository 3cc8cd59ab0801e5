import { execFileSync } from 'node:child_process';
import { writeFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { LimitError, UsageError } from '../errors.js';
import { kubernetesManifest } from '../events/kubernetes-manifest.js';
import { slurmScripts } from '../events/slurm-script.js';
import { EventRun } from '../io/event-run.js';
import { type CommonOptions, countOf } from './choices.js';
import { makeConsole } from './console.js';
import { SHARD_EXIT } from './events.js';

export interface SubmitOptions extends CommonOptions {
  readonly dryRun?: boolean;
  readonly command: string;
  readonly tries: string;
  readonly image: string;
  readonly claim: string;
  readonly mount?: string;
}

const ENGINES = ['slurm', 'kubernetes'] as const;

/** `galewake events submit`: writes the scripts of a run for Slurm and submits them; prints them, or a manifest for Kubernetes. */
export async function submit(engine: string, folder: string, options: SubmitOptions): Promise<void> {
  const out = makeConsole({ quiet: options.quiet === true });
  const known = ENGINES.find((name) => name === engine.toLowerCase());
  if (known === undefined)
    throw new UsageError(
      'events.engine',
      `'${engine}': submitted to are ${ENGINES.join(' and ')}; other engines run galewake events shard ${folder} as an array, the index comes from their environment`,
    );
  const run = await EventRun.open(folder);
  const tries = countOf(options.tries, { name: '--tries', least: 0 });
  if (known === 'kubernetes') {
    if (!options.dryRun)
      throw new UsageError(
        'events.dry-run',
        'a manifest for Kubernetes is only printed: add --dry-run, write it to a file and hand that to kubectl apply -f',
      );
    out.print(
      kubernetesManifest({
        run: resolve(folder),
        inputs: [run.plan.input],
        shards: run.plan.shards,
        planHash: run.plan.planHash,
        image: options.image,
        claim: options.claim,
        command: options.command,
        tries,
        finalCodes: [SHARD_EXIT.usage, SHARD_EXIT.input, SHARD_EXIT.model],
        ...(options.mount === undefined ? {} : { mount: options.mount }),
      }),
    );
    return;
  }
  const scripts = slurmScripts({ run: resolve(folder), shards: run.plan.shards, command: options.command, tries });
  if (options.dryRun) {
    out.print(`${scripts.array}\n${scripts.reduce}`);
    return;
  }
  const [array, reduceScript] = [join(resolve(folder), 'slurm-shards.sh'), join(resolve(folder), 'slurm-reduce.sh')];
  await writeFile(array, scripts.array);
  await writeFile(reduceScript, scripts.reduce);
  const job = sbatch(['--parsable', array]).trim();
  const last = sbatch(['--parsable', `--dependency=afterany:${job}`, reduceScript]).trim();
  out.print(`array ${job}, reduction ${last}\n`);
}

function sbatch(words: readonly string[]): string {
  try {
    return execFileSync('sbatch', words, { encoding: 'utf8' });
  } catch (cause) {
    const missing = (cause as NodeJS.ErrnoException).code === 'ENOENT';
    throw new LimitError(
      'events.sbatch',
      missing
        ? 'sbatch is not on this machine; --dry-run prints the scripts'
        : `sbatch refused the job: ${(cause as { stderr?: string }).stderr ?? String(cause)}`,
      { cause },
    );
  }
}
