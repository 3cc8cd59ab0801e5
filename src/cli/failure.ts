import { GalewakeError, UsageError } from '../errors.js';
import { ClosedPipe } from './console.js';

export const EXIT = { done: 0, inside: 1, usage: 2, input: 3, interrupted: 130 } as const;

/** Runs a command and turns what it throws into a message and an exit code, never into a stack trace. */
export async function guarded(run: () => Promise<void>): Promise<void> {
  try {
    await run();
  } catch (error) {
    process.exitCode = report(error);
  }
}

function report(error: unknown): number {
  if (error instanceof ClosedPipe) return EXIT.done;
  if (error instanceof Error && error.name === 'AbortError') return EXIT.interrupted;
  if (error instanceof GalewakeError) {
    process.stderr.write(`galewake: ${error.message}\n`);
    return error instanceof UsageError ? EXIT.usage : EXIT.input;
  }
  const message = error instanceof Error ? error.message : String(error);
  process.stderr.write(
    `galewake: failure inside: ${message}\n  This is a defect. GALEWAKE_TRACE=1 shows where it happened.\n`,
  );
  if (process.env['GALEWAKE_TRACE'] && error instanceof Error) process.stderr.write(`${error.stack}\n`);
  return EXIT.inside;
}
