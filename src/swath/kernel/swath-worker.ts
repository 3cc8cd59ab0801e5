import { parentPort } from 'node:worker_threads';
import { toPlainError } from '../../errors.js';
import type { Answer, Task } from './pool.js';
import { swathWork } from './work.js';

/** A helper of the swath: takes tiles until none is left, then answers. */
parentPort?.on('message', ({ plan, fields, tiles, counter }: Task) => {
  let answer: Answer = { error: null };
  try {
    // a helper that comes too late has nothing to set up
    if (Atomics.load(counter, 0) < tiles) {
      const work = swathWork(plan);
      for (let tile = Atomics.add(counter, 0, 1); tile < tiles; tile = Atomics.add(counter, 0, 1))
        work.runTile(tile, fields);
      work.done();
    }
  } catch (error) {
    Atomics.store(counter, 0, tiles);
    answer = { error: toPlainError(error) };
  }
  parentPort?.postMessage(answer);
});
