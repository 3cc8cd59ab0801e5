// Before the compiler: the hot loops of the swath, from AssemblyScript to WebAssembly, as a text module, so that the same
// bytes run in Node.js and in a page; and the same source as plain JavaScript, for where there is no WebAssembly.
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import asc from 'assemblyscript/asc';

const root = fileURLToPath(new URL('../..', import.meta.url));
const out = join(mkdtempSync(join(tmpdir(), 'galewake-kernel-')), 'kernel.wasm');
const words = [
  'src/swath/kernel/assembly/kernel.ts',
  '--baseDir',
  root,
  '--outFile',
  out,
  '-O3',
  '--noAssert',
  '--runtime',
  'stub',
  '--enable',
  'simd',
  '--importMemory',
  '--initialMemory',
  '1',
];
const { error, stderr } = await asc.main(words);
if (error) {
  console.error(`${error.message}\n${stderr.toString()}`);
  process.exit(1);
}
const base64 = readFileSync(out).toString('base64');
writeFileSync(
  `${root}src/swath/kernel/kernel-bytes.ts`,
  `// Made by \`npm run build\` from assembly/kernel.ts.\nexport const KERNEL_BASE64 =\n  '${base64}';\n`,
);

for (const [from, to] of [
  ['trace', 'twin-trace'],
  ['places', 'places'],
]) {
  const source = readFileSync(`${root}src/swath/kernel/assembly/${from}.ts`, 'utf8')
    .replace("'./memory'", "'./twin-memory.js'")
    .replace("'./lanes'", "'./twin-lanes.js'")
    .replace("'./places'", "'./places.js'");
  writeFileSync(
    `${root}src/swath/kernel/${to}.ts`,
    `// Made by \`npm run build\` from assembly/${from}.ts.\n${/\bf64\b/.test(source.replace(/\/\*[\s\S]*?\*\//g, '')) ? 'type f64 = number;\n' : ''}type i32 = number;\n${source}`,
  );
}
