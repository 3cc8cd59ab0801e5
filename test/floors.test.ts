import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';

const SRC = resolve(import.meta.dirname, '../src');

/** The floors of the house, ground first: an import runs down or stays on its floor within one folder. */
const FLOORS = [
  ['errors', 'units', 'earth', 'nearest', 'bibliography', 'geojson'],
  ['vortex'],
  ['surface'],
  ['track'],
  ['land'],
  ['model'],
  ['swath'],
  ['isotach', 'exposure', 'events'],
  ['write'],
  ['picture'],
  ['io', 'index'],
  ['cli'],
];

const files = readdirSync(SRC, { recursive: true, encoding: 'utf8' }).filter(
  (file) => file.endsWith('.ts') && !file.includes('/assembly/'),
);

const room = (file: string): string => file.replace(/\.ts$/, '').split('/')[0]!;
const floorOf = (file: string): number => FLOORS.findIndex((rooms) => rooms.includes(room(file)));

function importsOf(file: string): { from: string; typeOnly: boolean }[] {
  const text = readFileSync(join(SRC, file), 'utf8');
  const found = text.matchAll(
    /(?:^|\n)\s*(import|export)\s+(type\s)?[^'"();]*?from\s+'([^']+)'|import\(\s*'([^']+)'\s*\)|\n\s*import '([^']+)'/g,
  );
  return [...found].map((match) => ({ from: (match[3] ?? match[4] ?? match[5])!, typeOnly: match[2] !== undefined }));
}

describe('the plan of the house', () => {
  it('knows every room', () => {
    expect(files.length).toBeGreaterThan(20);
    expect(files.filter((file) => floorOf(file) === -1)).toEqual([]);
  });

  it('imports run down', () => {
    const up: string[] = [];
    for (const file of files) {
      for (const { from } of importsOf(file)) {
        if (!from.startsWith('.')) continue;
        const target = relative(SRC, resolve(SRC, dirname(file), from)).replace(/\.js$/, '.ts');
        if (floorOf(target) > floorOf(file)) up.push(`${file} → ${target}`);
        if (floorOf(target) === floorOf(file) && room(target) !== room(file) && floorOf(file) > 0)
          up.push(`${file} → ${target} (same floor)`);
      }
    }
    expect(up).toEqual([]);
  });

  it('only io, cli and the loaders of workers and WebAssembly touch node', () => {
    const touching = files.filter((file) => importsOf(file).some(({ from }) => from.startsWith('node:')));
    expect(
      touching.filter((file) => !/^(io|cli)\//.test(file) && !/^swath\/kernel\/.*(loader|worker|pool)/.test(file)),
    ).toEqual([]);
  });

  it('has no circles', () => {
    const graph = new Map(
      files.map((file) => [
        file,
        importsOf(file)
          .filter(({ from, typeOnly }) => from.startsWith('.') && !typeOnly)
          .map(({ from }) => relative(SRC, resolve(SRC, dirname(file), from)).replace(/\.js$/, '.ts')),
      ]),
    );
    const state = new Map<string, 'open' | 'done'>();
    const circles: string[] = [];
    const visit = (file: string, trail: string[]): void => {
      if (state.get(file) === 'done') return;
      if (state.get(file) === 'open') {
        circles.push([...trail.slice(trail.indexOf(file)), file].join(' → '));
        return;
      }
      state.set(file, 'open');
      for (const next of graph.get(file) ?? []) visit(next, [...trail, file]);
      state.set(file, 'done');
    };
    for (const file of files) visit(file, []);
    expect(circles).toEqual([]);
  });
});
