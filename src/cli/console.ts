import { writeSync } from 'node:fs';

/** Where a command's words go: results to standard output, everything else to standard error. */
export interface Console {
  /** a piece of the result */
  readonly print: (text: string) => void;
  /** a message to the person; nothing with --quiet */
  readonly say: (text: string) => void;
  /** one line that is written over itself, to a terminal only; an empty text ends it */
  readonly progress: (text: string) => void;
}

/** Thrown when the reader of standard output has gone: the command ends quietly. */
export class ClosedPipe extends Error {}

/** Writes all of a text to a descriptor, however often the other side makes it wait. */
function writeAll(descriptor: number, text: string): void {
  const bytes = Buffer.from(text, 'utf8');
  let at = 0;
  while (at < bytes.length) {
    try {
      at += writeSync(descriptor, bytes, at);
    } catch (error) {
      const { code } = error as NodeJS.ErrnoException;
      if (code === 'EPIPE') throw new ClosedPipe();
      if (code !== 'EAGAIN') throw error;
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 5);
    }
  }
}

export function makeConsole({ quiet }: { quiet: boolean }): Console {
  const terminal = process.stderr.isTTY === true && !quiet;
  let drawn = 0;
  return {
    print: (text) => writeAll(1, text),
    say: (text) => {
      if (!quiet) writeAll(2, `${text}\n`);
    },
    progress: (text) => {
      if (!terminal) return;
      writeAll(2, `\r${text}${' '.repeat(Math.max(0, drawn - text.length))}${text === '' ? '\r' : ''}`);
      drawn = text.length;
    },
  };
}

/** A table in columns: the first row is the heading, numbers stand right. */
export function table(rows: readonly (readonly string[])[]): string {
  const widths: number[] = [];
  for (const row of rows) {
    for (const [i, cell] of row.entries()) widths[i] = Math.max(widths[i] ?? 0, cell.length);
  }
  const numeric = widths.map((_, i) =>
    rows.slice(1).every((row) => /^[-+]?[\d.]*(e[-+]?\d+)?$|^[–-]$/.test(row[i] ?? '')),
  );
  return rows
    .map((row) =>
      row
        .map((cell, i) => (numeric[i] ? cell.padStart(widths[i]!) : cell.padEnd(widths[i]!)))
        .join('  ')
        .trimEnd(),
    )
    .join('\n')
    .concat('\n');
}
