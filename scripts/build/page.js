// The script of the self-contained page: everything it runs on, bundled into one text that is put into each page.
import { mkdirSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { build } from 'vite';

const root = fileURLToPath(new URL('../..', import.meta.url));
const result = await build({
  root,
  configFile: false,
  logLevel: 'warn',
  publicDir: false,
  build: {
    write: false,
    target: 'es2022',
    minify: true,
    modulePreload: false,
    lib: { entry: `${root}src/picture/page/main.ts`, formats: ['es'], fileName: 'page' },
  },
});
const [output] = Array.isArray(result) ? result : [result];
const chunk = output.output.find((part) => part.type === 'chunk');
// a script with top-level await, put inline without being a module: wrapped, and never able to close its element
const code = `(async()=>{"use strict";${chunk.code.replace(/export\s*\{\s*\};?\s*$/, '')}})();`.replaceAll(
  '</',
  '<\\/',
);
mkdirSync(`${root}dist/picture/page`, { recursive: true });
writeFileSync(`${root}dist/picture/page/bundle.txt`, code);
