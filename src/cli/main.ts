#!/usr/bin/env node
import { readFileSync } from 'node:fs';

/** The entry of the command. It loads nothing but what the first words ask for. */
const words = process.argv.slice(2);
if (words.length === 1 && (words[0] === '--version' || words[0] === '-V')) {
  const { version } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8')) as {
    version: string;
  };
  process.stdout.write(`${version}\n`);
} else if (words.length === 0 || (words.length === 1 && (words[0] === '--help' || words[0] === '-h'))) {
  const { OVERVIEW } = await import('./overview.js');
  process.stdout.write(OVERVIEW);
} else {
  const { runProgram } = await import('./program.js');
  await runProgram(process.argv);
}
