import { existsSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import { fromPlainError, type PlainError } from '../../errors.js';
import type { SwathFields } from './fields.js';
import type { SwathPlan } from './work.js';

/** Tiles that several threads share: each takes the next one that nobody has taken. */
export interface Tiles {
  /** the next tile; as many as there are, or more, when none is left */
  readonly take: () => number;
  /** nobody takes a tile any more */
  readonly stop: () => void;
  /** resolved when every helper has done its last tile; rejected with a helper's error */
  readonly finished: Promise<void>;
}

/** Threads that help this one. */
export interface Threads {
  readonly start: (plan: SwathPlan, fields: SwathFields, tiles: number) => Tiles;
}

/** What a helper is given. */
export interface Task {
  readonly plan: SwathPlan;
  readonly fields: SwathFields;
  readonly tiles: number;
  /** next tile */
  readonly counter: Int32Array;
}

/** What a helper answers. */
export type Answer = { readonly error: PlainError | null };

const ENTRY = new URL('./swath-worker.js', import.meta.url);
/** helpers that wait for work */
const waiting: Worker[] = [];

/** Helpers for `jobs` threads in all, by default one a core; null for one alone and where this module is not built. */
export function threads(jobs = availableParallelism()): Threads | null {
  const helpers = Math.min(jobs, 64) - 1;
  if (helpers < 1 || !existsSync(ENTRY)) return null;
  return {
    start(plan, fields, tiles) {
      const counter = new Int32Array(new SharedArrayBuffer(4));
      const task: Task = { plan, fields, tiles, counter };
      const answers: Promise<void>[] = [];
      for (let i = 0; i < helpers; i++) answers.push(ask(waiting.pop() ?? new Worker(ENTRY), task));
      const finished = Promise.all(answers).then(() => undefined);
      // it is awaited when this thread has done its own tiles
      finished.catch(() => undefined);
      return {
        take: () => Atomics.add(counter, 0, 1),
        stop: () => Atomics.store(counter, 0, tiles),
        finished,
      };
    },
  };
}

function ask(worker: Worker, task: Task): Promise<void> {
  return new Promise((resolve, reject) => {
    const ended = (): void => {
      worker.off('message', answered);
      worker.off('error', failed);
      worker.off('exit', left);
    };
    const answered = ({ error }: Answer): void => {
      ended();
      // it keeps no process alive while it waits
      worker.unref();
      waiting.push(worker);
      if (error) reject(fromPlainError(error));
      else resolve();
    };
    const failed = (error: Error): void => {
      ended();
      Atomics.store(task.counter, 0, task.tiles);
      reject(error);
    };
    const left = (code: number): void => failed(new Error(`a thread of the swath ended with code ${code}`));
    worker.on('message', answered);
    worker.on('error', failed);
    worker.on('exit', left);
    worker.ref();
    worker.postMessage(task);
  });
}
