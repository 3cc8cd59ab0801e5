import { describe, expect, it } from 'vitest';
import { knots } from '../../src/units.js';
import { isotachAttributes, isotachLabel } from '../../src/write/isotach-attributes.js';
import { swathKml } from '../../src/write/kml.js';
import { exampleContext, exampleIsotachs, exampleTrack } from './example-isotachs.js';
import { exampleProvenance } from './example-swath.js';

const input = {
  isotachs: exampleIsotachs,
  context: exampleContext,
  track: exampleTrack,
  provenance: exampleProvenance,
  colourOf: (thresholdMps: number) => (thresholdMps < 20 ? '#3366CC' : '#aa0000'),
};

/** Every element opens and closes in order, and nothing but known entities follows an ampersand. */
function wellFormed(xml: string): boolean {
  const open: string[] = [];
  const rest = xml
    .replace(/^<\?xml[^?]*\?>\n/, '')
    .replace(/<(\/?)([A-Za-z][\w:]*)((?:\s+[\w:]+="[^"<]*")*)\s*(\/?)>/g, (_, close, name, __, empty) => {
      if (close) return open.pop() === name ? '' : '<';
      if (!empty) open.push(name);
      return '';
    });
  return open.length === 0 && !/[<>]/.test(rest) && !/&(?!(?:amp|lt|gt|quot|apos|#\d+);)/.test(xml);
}

describe('swath.kml', () => {
  const kml = swathKml(input);

  it('is well-formed, whatever the storm is called', () => {
    expect(wellFormed(kml)).toBe(true);
    expect(wellFormed(kml.replace('</Folder>', ''))).toBe(false);
    expect(kml).toContain('&lt;img src=x onerror=alert(1)&gt; &amp; &quot;Ærin&quot;\uFFFD');
    expect(kml).not.toContain('<img');
    expect(kml).not.toContain('<TY>');
  });

  it('refers to nothing outside itself', () => {
    expect(kml.replace('xmlns="http://www.opengis.net/kml/2.2"', '')).not.toMatch(/https?:|href|src=(?!x)/);
  });

  it('styles each level with its colour, as alpha, blue, green, red', () => {
    expect(kml).toContain('<Style id="level-0"><LineStyle><color>ffcc6633</color>');
    expect(kml).toContain('<PolyStyle><color>99cc6633</color><outline>0</outline>');
    expect(kml).toContain('<PolyStyle><color>990000aa</color><outline>1</outline>');
    expect(() => swathKml({ ...input, colourOf: () => 'red' })).toThrow("'red' is not a colour");
  });

  it('draws no outline along the antimeridian, holes inside, and nothing for a level that is never reached', () => {
    const placemarks = kml.split('<Placemark>').slice(1);
    expect(placemarks.map((one) => /<name>([^<]*)/.exec(one)![1])).toEqual([
      '34 kt and above',
      '50 kt and above',
      'Track of &lt;img src=x onerror=alert(1)&gt; &amp; &quot;Ærin&quot;\uFFFD (EX012031)',
      '2031-02-05 06:00Z',
      '2031-02-05 12:00Z',
    ]);
    expect(placemarks[0]!.match(/<outerBoundaryIs>/g)).toHaveLength(2);
    expect(placemarks[0]!.match(/<innerBoundaryIs>/g)).toHaveLength(1);
  });

  it('has longitudes within ±180 and cuts the track there', () => {
    const lines = [...kml.matchAll(/<coordinates>([^<]*)/g)].map((match) => match[1]!);
    for (const place of lines.flatMap((line) => line.split(' '))) {
      const [lon, lat, ...more] = place.split(',').map(Number);
      expect(Math.abs(lon!)).toBeLessThanOrEqual(180);
      expect(Math.abs(lat!)).toBeLessThanOrEqual(90);
      expect(more).toEqual([]);
    }
    // no line jumps over more than half the globe
    for (const line of lines) {
      const lons = line.split(' ').map((place) => Number(place.split(',')[0]));
      for (let i = 1; i < lons.length; i++) expect(Math.abs(lons[i]! - lons[i - 1]!)).toBeLessThan(180);
    }
    expect(kml).toContain('<coordinates>178,-12 180,-13.333333</coordinates>');
    expect(kml).toContain('<coordinates>-180,-13.333333 -179,-14</coordinates>');
  });

  it('stamps the fixes with their time and says what is known of them', () => {
    expect(kml).toContain(
      '<description>58 kt (30.0 m/s), 975 hPa</description><TimeStamp><when>2031-02-05T06:00:00.000Z</when></TimeStamp>',
    );
    expect(kml).toContain('<SimpleField name="threshold_mps" type="double"/>');
    expect(kml).toContain('<SimpleData name="area_km2">1234567.891</SimpleData>');
    expect(kml).toContain('no warning service');
  });

  it('of a storm of one fix and no isotach is a file all the same', () => {
    const bare = swathKml({
      ...input,
      isotachs: [],
      track: { ...exampleTrack, name: null, fixes: exampleTrack.fixes.slice(0, 1) },
    });
    expect(wellFormed(bare)).toBe(true);
    expect(bare).not.toContain('LineString');
    expect(bare).toContain('<name>Wind of EX012031</name>');
  });
});

describe('an isotach', () => {
  it.each([
    [{ thresholdMps: knots(34), upperMps: null }, '34 kt and above'],
    [{ thresholdMps: knots(34), upperMps: knots(50) }, '34–50 kt'],
    [{ thresholdMps: 17.5, upperMps: null }, '17.5 m/s and above'],
    [{ thresholdMps: knots(34), upperMps: 30 }, '17.5–30 m/s'],
  ])('is called by its level', (isotach, label) => expect(isotachLabel(isotach)).toBe(label));

  it('has its attributes', () => {
    expect(isotachAttributes(exampleIsotachs[0]!, exampleContext)).toEqual({
      threshold_mps: 17.4911,
      threshold_kt: 34,
      quantity: 'wind',
      averaging_s: 60,
      area_km2: 1234567.891,
      class: null,
    });
    const { classOf: _, ...context } = exampleContext;
    expect(isotachAttributes({ ...exampleIsotachs[1]!, upperMps: knots(64) }, context)).toEqual({
      threshold_mps: 25.7222,
      threshold_kt: 50,
      upper_mps: 32.9244,
      quantity: 'wind',
      averaging_s: 60,
      area_km2: 90000,
    });
  });
});
