import { execFileSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { slurmScripts } from '../../src/events/slurm-script.js';

describe('scripts for Slurm', () => {
  it('are shell scripts in which a folder’s name is never a command', () => {
    const { array, reduce } = slurmScripts({ run: "/data/it's $(reboot)", shards: 40, command: 'galewake', tries: 3 });
    for (const script of [array, reduce]) execFileSync('sh', ['-n'], { input: script });
    expect(array).toMatch(/^#SBATCH --array=0-39$/m);
    expect(array).toMatch(/^#SBATCH --requeue$/m);
    expect(array).toMatch(/^#SBATCH --open-mode=append$/m);
    // identity: what the shell makes of the quoted word is the word
    const word = /events shard (.*) --quiet/.exec(array)![1]!;
    expect(execFileSync('sh', ['-c', `printf %s ${word}`], { encoding: 'utf8' })).toBe("/data/it's $(reboot)");
    expect(reduce).toMatch(/--dependency=afterany:/);
    expect(reduce).toMatch(/-ge 3/);
  });

  it('name their logs so that the engine reads nothing into them', () => {
    const { array, reduce } = slurmScripts({ run: '/data/100%A', shards: 2, command: 'galewake', tries: 3 });
    expect(array).toMatch(/^#SBATCH --output='\/data\/100%%A\/slurm-%A_%a\.log'$/m);
    expect(reduce).toMatch(/^#SBATCH --output='\/data\/100%%A\/slurm-reduce\.log'$/m);
    expect(array).toMatch(/events shard '\/data\/100%A' /);
    expect(() => slurmScripts({ run: '/data/a\n#SBATCH --uid=0', shards: 2, command: 'galewake', tries: 3 })).toThrow(
      expect.objectContaining({ code: 'events.run-name' }),
    );
  });
});
