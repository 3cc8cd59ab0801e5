import { describe, expect, it } from 'vitest';
import { pictureCoast } from '../../src/io/coast-picture.js';
import { svgToPng } from '../../src/io/png.js';
import { boxesMeet } from '../../src/picture/labels.js';
import { mapPicture, mapSvg } from '../../src/picture/map-svg.js';
import { CAUTION } from '../../src/write/provenance.js';
import { madeStorm, STORMS, type StormKey } from './invented.js';

const KEYS = Object.keys(STORMS) as StormKey[];
const count = (svg: string, what: RegExp): number => svg.match(what)?.length ?? 0;
const words = (svg: string): string =>
  [...svg.matchAll(/<text[^>]*>([^<]*)<\/text>/g)]
    .map(([, text]) => text)
    .join(' ')
    .replaceAll('&#39;', "'");

describe('map', () => {
  it.each(KEYS)('%s: holds what a map needs, and its labels do not meet', (key) => {
    const { input } = madeStorm(key);
    const map = mapPicture(input);
    const filled = input.isotachs.filter((isotach) => isotach.polygons.length > 0).length;
    expect(count(map.svg, /<path class="area"/g)).toBe(filled);
    expect(count(map.svg, /<path class="isotach"/g)).toBe(filled);
    expect(count(map.svg, /class="level"/g)).toBe(input.isotachs.length);
    expect(count(map.svg, /class="peak-label"/g)).toBe(2);
    expect(count(map.svg, /class="time-label"/g)).toBeGreaterThan(0);
    expect(count(map.svg, /class="degrees"/g)).toBeGreaterThan(3);
    expect(count(map.svg, /class="scale-bar"/g)).toBe(1);
    const text = words(map.svg);
    expect(text).toContain(input.storm.name);
    expect(text).toContain('1-minute mean');
    expect(text).toContain('holland-1980');
    expect(text).toContain('Sep 2031');
    for (const sentence of CAUTION.split('. ')[0]!.split(' ')) expect(text).toContain(sentence);
    expect(map.svg).not.toContain('NaN');
    map.labels.forEach((label, i) => {
      for (const other of map.labels.slice(i + 1))
        expect(boxesMeet(label, other), `${label.text} on ${other.text}`).toBe(false);
    });
    expect(mapSvg(input)).toBe(map.svg);
  });

  it('says when nothing reaches the lowest level', () => {
    expect(words(mapSvg(madeStorm('weak').input))).toContain('No wind at or above 34 kt (17.5 m/s)');
    expect(words(mapSvg(madeStorm('open').input))).not.toContain('No wind at or above');
  });

  it('takes a projection that suits the place', () => {
    expect(words(mapSvg(madeStorm('open').input))).toContain('Lambert conformal conic');
    expect(words(mapSvg(madeStorm('oneFix').input))).toContain('Mercator');
    expect(words(mapSvg(madeStorm('pole').input))).toContain('stereographic');
  });

  it('has no seam on ±180°: the antimeridian is one map', () => {
    const { input } = madeStorm('antimeridian');
    const svg = mapSvg(input);
    expect(input.isotachs[0]!.polygons.length).toBeGreaterThan(1);
    expect(words(svg)).toMatch(/175°E.*180°.*175°W/);
    // no edge of an isotach runs along the cut: all its straight vertical pieces are short
    for (const [, d] of svg.matchAll(/class="isotach"[^>]* d="([^"]*)"/g)) {
      const points = d!
        .split(/[ML]/)
        .filter(Boolean)
        .map((pair) => pair.split(',').map(Number));
      const last = points
        .slice(1)
        .map((point, i) => Math.hypot(point[0]! - points[i]![0]!, point[1]! - points[i]![1]!));
      // moves between pieces count as well, so only many long steps would betray a cut
      expect(last.filter((length) => length > 40).length).toBeLessThanOrEqual(count(d!, /M/g));
    }
  });

  it('mirrors: a southern storm is the northern one upside down', () => {
    const { input } = madeStorm('oneFix');
    const flip = (positions: readonly (readonly number[])[]) => positions.map(([x, y]) => [x!, -y!]).reverse();
    const south = {
      ...input,
      fixes: input.fixes.map((fix) => ({ ...fix, latDeg: -fix.latDeg })),
      isotachs: input.isotachs.map((isotach) => ({
        ...isotach,
        polygons: isotach.polygons.map((polygon) => polygon.map(flip)),
      })),
      peak: { ...input.peak!, latDeg: -input.peak!.latDeg },
      centreAt: undefined,
    };
    const { centreAt: _unused, ...without } = south;
    const [a, b] = [mapPicture(input), mapPicture(without)];
    expect(b.height).toBeCloseTo(a.height, 0);
    expect(words(b.svg)).toContain('°S');
  });

  it('takes text from files as text', () => {
    const { input } = madeStorm('oneFix', '<img src=x onerror=alert(1)> & "more" \u0000');
    const svg = mapSvg(input);
    expect(svg).not.toContain('<img');
    expect(svg).toContain('&#60;img src=x onerror=alert(1)&#62; &#38;');
    expect(svg).not.toContain('\u0000');
  });

  it('draws the coast, the user’s zones and places', () => {
    const { input } = madeStorm('open');
    const svg = mapSvg({
      ...input,
      coast: pictureCoast('50m'),
      places: [{ name: 'Port Ansel', lonDeg: -44.95, latDeg: 29.02 }],
      zones: [
        {
          name: 'Great Merrow',
          polygons: [
            [
              [
                [-45.9, 29.1],
                [-44.5, 29.5],
                [-45.4, 30.1],
                [-45.9, 29.1],
              ],
            ],
          ],
        },
      ],
    });
    expect(count(svg, /class="zone"/g)).toBe(1);
    expect(count(svg, /class="place"/g)).toBe(1);
    expect(words(svg)).toContain('Port Ansel');
    expect(words(svg)).toContain('Natural Earth');
  });

  it('becomes the PNG of the width asked for, quickly', () => {
    const { input } = madeStorm('antimeridian');
    const whole = { ...input, coast: pictureCoast('50m') };
    const start = performance.now();
    const png = svgToPng(mapSvg(whole));
    expect(performance.now() - start).toBeLessThan(4000);
    expect([...png.subarray(1, 4)]).toEqual([80, 78, 71]);
    expect(new DataView(png.buffer, png.byteOffset).getUint32(16)).toBe(1800);
  });
});
