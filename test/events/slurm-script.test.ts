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
});
