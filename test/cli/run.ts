import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';

const COMMAND = resolve(import.meta.dirname, '../../dist/cli/main.js');
export const FIXTURES = resolve(import.meta.dirname, '../../fixtures');

export interface Outcome {
  readonly code: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs the built command as a person would: as a process of its own. */
export function galewake(
  words: readonly string[],
  options: { input?: string | Buffer; cwd?: string; env?: Record<string, string> } = {},
): Promise<Outcome> {
  return new Promise((done, fail) => {
    const child = spawn(process.execPath, [COMMAND, ...words], {
      cwd: options.cwd,
      env: { ...process.env, NO_COLOR: '1', ...options.env },
      stdio: ['pipe', 'pipe', 'pipe'],
    });
    const out: Buffer[] = [];
    const err: Buffer[] = [];
    child.stdout.on('data', (chunk: Buffer) => out.push(chunk));
    child.stderr.on('data', (chunk: Buffer) => err.push(chunk));
    child.on('error', fail);
    child.on('close', (code) =>
      done({ code, stdout: Buffer.concat(out).toString('utf8'), stderr: Buffer.concat(err).toString('utf8') }),
    );
    child.stdin.on('error', () => undefined);
    child.stdin.end(options.input ?? '');
  });
}

/** A folder of its own, removed at the end. */
export async function inFolder<T>(work: (folder: string) => Promise<T>): Promise<T> {
  const folder = mkdtempSync(join(tmpdir(), 'galewake-test-'));
  try {
    return await work(folder);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
