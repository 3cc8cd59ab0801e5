import { describe, expect, it } from 'vitest';
import { taskIndex } from '../../src/events/task-index.js';

const of = (env: Record<string, string>, argument?: string): number => taskIndex({ env, shards: 50, argument });

describe('the index of a task', () => {
  it('comes from the argument, then from SHARD_INDEX, then from the engine', () => {
    expect(of({ SHARD_INDEX: '3', SLURM_ARRAY_TASK_ID: '4' }, '2')).toBe(2);
    expect(of({ SHARD_INDEX: '3', SLURM_ARRAY_TASK_ID: '4' })).toBe(3);
    expect(of({ SHARD_INDEX: '', SLURM_ARRAY_TASK_ID: '4' })).toBe(4);
    for (const name of [
      'JOB_COMPLETION_INDEX',
      'AWS_BATCH_JOB_ARRAY_INDEX',
      'CLOUD_RUN_TASK_INDEX',
      'PBS_ARRAY_INDEX',
    ]) {
      expect(of({ [name]: '7' })).toBe(7);
    }
  });

  it('knows engines that count from one, and what they say outside an array', () => {
    expect(of({ LSB_JOBINDEX: '1' })).toBe(0);
    expect(of({ SGE_TASK_ID: '5' })).toBe(4);
    expect(() => of({ LSB_JOBINDEX: '0', SGE_TASK_ID: 'undefined' })).toThrow(/no shard index/);
  });

  it('selects from a list', () => {
    expect(of({ SHARD_LIST: '3,17,40', SLURM_ARRAY_TASK_ID: '1' })).toBe(17);
    expect(() => of({ SHARD_LIST: '3,17,40', SLURM_ARRAY_TASK_ID: '3' })).toThrow(/beyond SHARD_LIST/);
  });

  it('refuses what is no shard', () => {
    for (const bad of ['-1', '1.5', 'x', '50'])
      expect(() => of({}, bad)).toThrow(expect.objectContaining({ code: 'shard.index' }));
  });
});
