// After the compiler: make the command executable, which npm needs for a linked `bin`.
import { chmodSync } from 'node:fs';

chmodSync(new URL('../../dist/cli/main.js', import.meta.url), 0o755);
