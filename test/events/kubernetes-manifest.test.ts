import { describe, expect, it } from 'vitest';
import { commonFolder, kubernetesManifest, yamlOf } from '../../src/events/kubernetes-manifest.js';

const of = (more: Partial<Parameters<typeof kubernetesManifest>[0]> = {}): string =>
  kubernetesManifest({
    run: "/data/it's: #1",
    inputs: ['/data/sets/set.csv'],
    shards: 40,
    planHash: '0123456789abcdef',
    image: 'registry.example/galewake',
    claim: 'galewake',
    command: 'galewake',
    tries: 3,
    finalCodes: [64, 65, 70],
    ...more,
  });

describe('the manifest for Kubernetes', () => {
  it('is an Indexed Job of all shards and a suspended reduction', () => {
    // frozen: by hand from the reference of the batch/v1 API, from memory
    const manifest = of();
    const [note, array, reduce] = manifest.split(/^---$/m);
    expect(note!.split('\n').every((line) => line === '' || line.startsWith('#'))).toBe(true);
    expect(array).toContain(
      '\n  completionMode: "Indexed"\n  completions: 40\n  parallelism: 40\n  backoffLimitPerIndex: 3\n',
    );
    expect(array).toContain('values:\n            - 64\n            - 65\n            - 70\n');
    expect(array).toContain('            - "/bin/sh"\n            - "-c"\n');
    expect(array).toContain(`exec galewake events shard '/data/it'\\\\''s: #1' --quiet"\n`);
    expect(array).toContain('mountPath: "/data"');
    expect(reduce).toMatch(/^ {2}suspend: true$/m);
    expect(reduce).toContain('events reduce ');
    expect(of({ run: '/data/$(HOME)' })).toContain("'/data/$$(HOME)'");
    expect(of({ shards: 1000 })).toContain('parallelism: 50\n');
  });

  it('mounts the folder that holds run and input, or the one that is named', () => {
    expect(commonFolder(['/a/b/run', '/a/b/c/set.csv'])).toBe('/a/b');
    expect(commonFolder(['/a/b', '/a/b/c'])).toBe('/a');
    expect(commonFolder(['/a/x', '/b/x'])).toBe('/');
    expect(of({ mount: '/data/' })).toContain('mountPath: "/data"');
    expect(() => of({ mount: '/dat' })).toThrow(/--mount \/dat: .* does not lie in it/);
    expect(() => of({ inputs: ['/elsewhere/set.csv'] })).toThrow(/no folder in common/);
  });

  it('writes nested lists and texts with anything in them as YAML', () => {
    expect(yamlOf({ a: [{ b: 1, c: ['x: y', '#\n'] }, 'z'], d: {}, e: true })).toBe(
      'a:\n  - b: 1\n    c:\n      - "x: y"\n      - "#\\n"\n  - "z"\nd: {}\ne: true\n',
    );
  });
});
