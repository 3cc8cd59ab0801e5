import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { BIBLIOGRAPHY } from '../src/bibliography.js';

const KEY = /\b[A-Z][A-Za-z]+\d{2,5}(?![A-Za-z0-9])/g;

/** keys that a source text cites: in [brackets] of its comments and in its `source` fields */
function citedIn(text: string): string[] {
  const comments = [...text.matchAll(/\/\*[\s\S]*?\*\/|\/\/[^\n]*/g)].map((match) => match[0]);
  const brackets = comments.flatMap((comment) => [...comment.matchAll(/\[([^\]]*)\]/g)].map((match) => match[1]!));
  const fields = [...text.matchAll(/\bsource: '([^']*)'/g)].map((match) => match[1]!);
  return [...brackets, ...fields].flatMap((part) => part.match(KEY) ?? []);
}

function sourceFiles(folder: string): string[] {
  return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const path = join(folder, entry.name);
    if (entry.isDirectory()) return sourceFiles(path);
    return entry.name.endsWith('.ts') ? [path] : [];
  });
}

const cited = new Map<string, string>();
for (const path of sourceFiles('src')) for (const key of citedIn(readFileSync(path, 'utf8'))) cited.set(key, path);

describe('bibliography', () => {
  it('finds keys in comments and source fields', () => {
    expect(citedIn("/** V = 1 [Holland1980, eq. 2; Smith99] */ const a = { source: 'Sobey1977' }; // [WGS84]")).toEqual(
      ['Holland1980', 'Smith99', 'WGS84', 'Sobey1977'],
    );
    expect(citedIn('const a: [Float64Array, A1980] = b; /** [east, north] */')).toEqual([]);
  });

  it('has an entry for every key in use', () => {
    expect([...cited].filter(([key]) => BIBLIOGRAPHY[key] === undefined)).toEqual([]);
  });

  it('has a use for every entry', () => {
    expect(Object.keys(BIBLIOGRAPHY).filter((key) => !cited.has(key))).toEqual([]);
  });

  it('lists its entries in the order of their keys, each with its year', () => {
    const keys = Object.keys(BIBLIOGRAPHY);
    expect(keys).toEqual([...keys].sort());
    for (const [key, text] of Object.entries(BIBLIOGRAPHY)) {
      const year = /(\d{4})$/.exec(key)?.[1];
      if (year !== undefined && !key.startsWith('RFC') && !key.startsWith('IEC')) expect(text, key).toContain(year);
      if (text.includes('doi:')) expect(text, key).toMatch(/doi:10\.\d{4,5}\/\S+$/);
    }
  });
});
