import { describe, expect, it } from 'vitest';
import { taskIndex } from '../../src/events/task-index.js';

const of = (env: Record<string, string>, argument?: string): number => taskIndex({ env, shards: 50, argument });

describe('the index of a task', () => {
  // each engine's own manual says where its array begins: from memory
  const engines = [
    ['SLURM_ARRAY_TASK_ID', 0],
    ['JOB_COMPLETION_INDEX', 0],
    ['AWS_BATCH_JOB_ARRAY_INDEX', 0],
    ['CLOUD_RUN_TASK_INDEX', 0],
    ['PBS_ARRAY_INDEX', 0],
    ['LSB_JOBINDEX', 1],
    ['SGE_TASK_ID', 1],
  ] as const;

  it.each(engines)('comes from %s, which begins at %d', (name, first) => {
    expect(of({ [name]: String(first) })).toBe(0);
    expect(of({ [name]: String(first + 49) })).toBe(49);
    expect(() => of({ [name]: String(first + 50) })).toThrow(`shard 50 (from ${name})`);
    expect(of({ [name]: ` ${first + 7} ` })).toBe(7);
    expect(() => of({ [name]: '3.5' })).toThrow(`'3.5' from ${name}`);
    // the index selects from a list, whatever its engine begins at
    expect(of({ SHARD_LIST: '3,17, 40', [name]: String(first) })).toBe(3);
    expect(of({ SHARD_LIST: '3,17, 40', [name]: String(first + 2) })).toBe(40);
    expect(() => of({ SHARD_LIST: '3,17, 40', [name]: String(first + 3) })).toThrow(/index 3 is beyond SHARD_LIST/);
    // empty counts as unset
    expect(() => of({ [name]: '' })).toThrow(/no shard index/);
    expect(of({ SHARD_LIST: ' ', [name]: String(first + 5) })).toBe(5);
    // SHARD_INDEX wins, and the argument over everything, the list included
    expect(of({ SHARD_INDEX: '2', [name]: String(first + 5) })).toBe(2);
    expect(of({ SHARD_INDEX: '', [name]: String(first + 5) })).toBe(5);
    expect(of({ SHARD_INDEX: '2', SHARD_LIST: '3', [name]: String(first + 5) }, '9')).toBe(9);
  });

  it('comes from the first engine that says one', () => {
    for (let i = 0; i < engines.length; i++) {
      const env = Object.fromEntries(engines.slice(i).map(([name, first], k) => [name, String(first + i + k)]));
      expect(of(env)).toBe(i);
    }
  });

  it('is none outside an array', () => {
    expect(() => of({ LSB_JOBINDEX: '0', SGE_TASK_ID: 'undefined' })).toThrow(/no shard index/);
    expect(of({ LSB_JOBINDEX: '0', SGE_TASK_ID: '5' })).toBe(4);
    expect(() => of({ SGE_TASK_ID: '0' })).toThrow(expect.objectContaining({ code: 'shard.index' }));
  });

  it('selects from a list, which SHARD_INDEX counts from 0', () => {
    expect(of({ SHARD_LIST: '3,17,40', SHARD_INDEX: '1' })).toBe(17);
    expect(() => of({ SHARD_LIST: '3,x', SHARD_INDEX: '1' })).toThrow(/'x' from SHARD_LIST/);
    expect(() => of({ SHARD_LIST: '3,60', SHARD_INDEX: '1' })).toThrow(/shard 60/);
  });

  it('refuses what is no shard', () => {
    for (const bad of ['-1', '1.5', 'x', '50'])
      expect(() => of({}, bad)).toThrow(expect.objectContaining({ code: 'shard.index' }));
  });
});
