import { parentPort } from 'node:worker_threads';
import { toPlainError } from '../../errors.js';
import type { Answer, Task } from './pool.js';
import { swathWork } from './work.js';

/** A helper of the swath: takes rows until none is left, then answers. */
parentPort?.on('message', ({ plan, fields, rows, counter }: Task) => {
  let answer: Answer = { error: null };
  try {
    // a helper that comes too late has nothing to set up
    if (Atomics.load(counter, 0) < rows) {
      const work = swathWork(plan);
      for (let row = Atomics.add(counter, 0, 1); row < rows; row = Atomics.add(counter, 0, 1)) work.runRow(row, fields);
      work.done();
    }
  } catch (error) {
    Atomics.store(counter, 0, rows);
    answer = { error: toPlainError(error) };
  }
  parentPort?.postMessage(answer);
});
