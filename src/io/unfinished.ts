/** Something on disk that must not stay when the process ends early. */
export interface Unfinished {
  /** Removes it, at once and without waiting; never throws. */
  readonly remove: () => void;
  /** somebody else ends the work in order after the first interrupt */
  readonly patient: boolean;
}

const SIGNALS = { SIGINT: 130, SIGTERM: 143, SIGHUP: 129 } as const;
type Signal = keyof typeof SIGNALS;

const open = new Set<Unfinished>();
let interrupts = 0;
let held = 0;
let waiting: Signal | null = null;

/** Has `unfinished` removed should the process be interrupted or end, until {@link settle}. */
export function watch(unfinished: Unfinished): void {
  if (open.size === 0) {
    interrupts = 0;
    process.on('exit', removeAll);
    for (const signal of Object.keys(SIGNALS) as Signal[]) process.on(signal, onSignal);
  }
  open.add(unfinished);
}

/** It is finished, or already removed. */
export function settle(unfinished: Unfinished): void {
  if (!open.delete(unfinished) || open.size > 0) return;
  process.off('exit', removeAll);
  for (const signal of Object.keys(SIGNALS) as Signal[]) process.off(signal, onSignal);
}

/** Runs the few moments that must not be cut in two; an interrupt waits until they are over. */
export async function uninterrupted<T>(work: () => Promise<T>): Promise<T> {
  held++;
  try {
    return await work();
  } finally {
    held--;
    if (held === 0 && waiting !== null) {
      const signal = waiting;
      waiting = null;
      onSignal(signal);
    }
  }
}

function removeAll(): void {
  for (const unfinished of open) unfinished.remove();
}

function onSignal(signal: Signal): void {
  if (held > 0) {
    waiting = signal;
    return;
  }
  interrupts++;
  if (signal === 'SIGINT' && interrupts === 1 && open.size > 0 && [...open].every((one) => one.patient)) return;
  removeAll();
  process.exit(SIGNALS[signal]);
}
