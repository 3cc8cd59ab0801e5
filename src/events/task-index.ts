import { UsageError } from '../errors.js';

type Environment = Readonly<Record<string, string | undefined>>;

/** Variables by which batch engines hand a task its index, in the order in which they are asked; `first` is the index that the engine begins at. */
const ENGINES: readonly { readonly name: string; readonly first: 0 | 1 }[] = [
  { name: 'SLURM_ARRAY_TASK_ID', first: 0 },
  { name: 'JOB_COMPLETION_INDEX', first: 0 },
  { name: 'AWS_BATCH_JOB_ARRAY_INDEX', first: 0 },
  { name: 'CLOUD_RUN_TASK_INDEX', first: 0 },
  { name: 'PBS_ARRAY_INDEX', first: 0 },
  { name: 'LSB_JOBINDEX', first: 1 },
  { name: 'SGE_TASK_ID', first: 1 },
];

/**
 * The shard that this task is to do. `argument` wins, then SHARD_INDEX, then the first variable of a batch engine that is
 * set; with SHARD_LIST=3,17,40 the index selects from the list. An empty variable counts as unset.
 * @throws UsageError `shard.index` when there is none, or it is no shard of the plan
 */
export function taskIndex(options: { argument?: string | undefined; env: Environment; shards: number }): number {
  const found =
    options.argument === undefined
      ? indexFromEnvironment(options.env)
      : { text: options.argument, from: 'the argument', first: 0 };
  if (!found) {
    throw new UsageError(
      'shard.index',
      `no shard index: give one as an argument, or set SHARD_INDEX (batch engines set ${ENGINES.map((engine) => engine.name).join(', ')})`,
    );
  }
  const index = whole(found.text, found.from) - found.first;
  const list = options.argument === undefined ? (options.env['SHARD_LIST'] ?? '').trim() : '';
  const shard = list === '' ? index : fromList(list, index);
  if (shard < 0 || shard >= options.shards) {
    throw new UsageError(
      'shard.index',
      `shard ${shard} (from ${found.from}) is not in this plan, which has shards 0 to ${options.shards - 1}`,
      { fields: { shard } },
    );
  }
  return shard;
}

function indexFromEnvironment(env: Environment): { text: string; from: string; first: number } | null {
  const own = env['SHARD_INDEX'];
  if (own !== undefined && own.trim() !== '') return { text: own, from: 'SHARD_INDEX', first: 0 };
  for (const { name, first } of ENGINES) {
    const text = env[name]?.trim();
    if (text === undefined || text === '' || text === 'undefined') continue;
    // LSF says 0 to a job that is no array
    if (name === 'LSB_JOBINDEX' && text === '0') continue;
    return { text, from: name, first };
  }
  return null;
}

function whole(text: string, from: string): number {
  if (!/^\s*\d+\s*$/.test(text))
    throw new UsageError('shard.index', `the shard index '${text}' from ${from} is not a whole number`);
  return Number(text);
}

function fromList(list: string, index: number): number {
  const shards = list.split(',').map((part) => whole(part, 'SHARD_LIST'));
  const shard = shards[index];
  if (shard === undefined)
    throw new UsageError('shard.index', `the index ${index} is beyond SHARD_LIST, which names ${shards.length} shards`);
  return shard;
}
