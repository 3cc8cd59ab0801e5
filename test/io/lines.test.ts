import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { afterAll, describe, expect, it, vi } from 'vitest';
import { readLines } from '../../src/io/lines.js';
import { readTrackFile } from '../../src/io/tracks.js';
import { readTracks } from '../../src/track/read/read.js';
import { fixtureText, readFixture } from '../track/read/read-text.js';

const folder = mkdtempSync(join(tmpdir(), 'lines-'));
afterAll(() => rmSync(folder, { recursive: true }));

function file(name: string, content: string | Uint8Array): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}
async function all<T>(items: AsyncIterable<T>): Promise<T[]> {
  const list: T[] = [];
  for await (const item of items) list.push(item);
  return list;
}
const fixture = (name: string): string => new URL(`../../fixtures/${name}`, import.meta.url).pathname;

describe('the lines of a file', () => {
  it.each([
    ['LF', 'a\nb\n\nc\n', ['a', 'b', '', 'c']],
    ['CRLF and a byte-order mark', '\uFEFFa\r\nb\r\n', ['a', 'b']],
    ['CR alone', 'a\rb\r', ['a', 'b']],
    ['no end of line at the end', 'a\nb', ['a', 'b']],
    ['nothing', '', []],
    ['an accent', 'é\nß🌀\n', ['é', 'ß🌀']],
  ])('with %s', async (name, text, lines) => expect(await all(readLines(file(`${name}.txt`, text)))).toEqual(lines));

  it('are whole where the file is longer than a piece of reading, wherever the pieces end', async () => {
    const lines = Array.from({ length: 60_000 }, (_, i) => `${i} é ${'x'.repeat(i % 23)}`);
    expect(await all(readLines(file('long.txt', lines.join('\r\n'))))).toEqual(lines);
  });

  it.each([
    ['gzip.csv', [0x1f, 0x8b, 8, 0], 'io.binary', 'is compressed (gzip), not a text file; unpack it first'],
    ['sheet.csv', [0x50, 0x4b, 3, 4], 'io.binary', 'export the sheet as CSV'],
    ['utf16.csv', [0xff, 0xfe, 0x61, 0], 'io.binary', 'save it as UTF-8'],
    ['netcdf.csv', [0x43, 0x44, 0x46, 1], 'io.binary', 'give the CSV edition'],
    ['zero.csv', [0x61, 0x0a, 0, 1], 'io.binary', 'bytes that no text has'],
    ['latin1.csv', [0x61, 0x0a, 0x62, 0xe9, 0x63, 0x0a], 'io.encoding', 'latin1.csv:2: is not UTF-8'],
    ['cut.csv', [0x61, 0x0a, 0xc3], 'io.encoding', 'is not UTF-8'],
  ])('%s is refused', async (name, bytes, code, says) => {
    await expect(all(readLines(file(name, Uint8Array.from(bytes))))).rejects.toMatchObject({
      name: 'InputError',
      code,
      message: expect.stringContaining(says),
    });
  });

  it('of a missing file, or a folder, are refused with the remedy', async () => {
    await expect(all(readLines(join(folder, 'none.csv')))).rejects.toMatchObject({
      name: 'InputError',
      code: 'io.missing',
    });
    await expect(all(readLines(folder))).rejects.toMatchObject({ name: 'InputError', code: 'io.read' });
  });

  it('over 1 MB are refused, but JSON may stand on one line', async () => {
    const long = 'x'.repeat(10_000_000);
    await expect(all(readLines(file('wide.csv', `a\n${long}\n`)))).rejects.toMatchObject({
      code: 'track.line-length',
      fields: { line: 2 },
    });
    expect(await all(readLines(file('wide.json', `{"${long}":1}`)))).toHaveLength(1);
  });
});

describe('a track file', () => {
  it.each(['hurdat2_odd_rows.txt', 'bdeck_bsh052021_YASA.dat', 'ibtracs_v04r01_2022_SP_CODY.csv', 'demo-quillon.csv'])(
    '%s reads as its text does, and its bytes can be summed on the way',
    async (name) => {
      const hash = createHash('sha256');
      expect(await all(readTrackFile(fixture(name), { onBytes: (bytes) => void hash.update(bytes) }))).toEqual(
        readFixture(name),
      );
      expect(hash.digest('hex')).toBe(
        createHash('sha256')
          .update(readFileSync(fixture(name)))
          .digest('hex'),
      );
    },
  );

  it('comes from single lines as well', async () => {
    const lines = fixtureText('hurdat2_odd_rows.txt').split('\n');
    expect(await all(readTracks(lines, { source: 'lines' }))).toEqual(readFixture('hurdat2_odd_rows.txt'));
  });

  it('gives storms while the rest is not read yet, and holds none of them', async () => {
    let taken = 0;
    function* lines(): Generator<string> {
      yield 'storm,time,lat_deg,lon_deg';
      for (let storm = 0; storm < 5000; storm++) {
        taken = storm;
        yield `S${storm},2031-09-03T00:00Z,15,-60`;
      }
    }
    let seen = 0;
    for await (const track of readTracks(lines(), { source: 'lines' })) {
      expect(track.id).toBe(`S${seen}`);
      // the next storm's first row ends this one; the last ends with the lines
      expect(taken).toBe(Math.min(seen + 1, 4999));
      seen++;
    }
    expect(seen).toBe(5000);
  });

  it('names the file and the line of what cannot be right', async () => {
    const path = file('bad.csv', 'storm,time,lat_deg,lon_deg\nA,2031-09-03T00:00Z,95,-60\n');
    await expect(all(readTrackFile(path))).rejects.toMatchObject({
      message: expect.stringContaining(`${path}:2: latitude 95`),
    });
  });

  it('may come from standard input', async () => {
    const stdin = vi.spyOn(process, 'stdin', 'get');
    stdin.mockReturnValue(Readable.from([Buffer.from(fixtureText('demo-quillon.csv'))]) as typeof process.stdin);
    const tracks = await all(readTrackFile('-'));
    stdin.mockReturnValue(Readable.from([Buffer.from('storm,time\n')]) as typeof process.stdin);
    await expect(all(readTrackFile('-'))).rejects.toMatchObject({
      message: expect.stringMatching(/^standard input:1: /),
    });
    stdin.mockRestore();
    expect(tracks).toEqual(readFixture('demo-quillon.csv'));
  });
});
