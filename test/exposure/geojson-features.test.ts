import { describe, expect, it } from 'vitest';
import { type Feature, featureReader, featuresOf } from '../../src/exposure/geojson-features.js';

const tricky = {
  type: 'FeatureCollection',
  name: 'a "features": [ {} ] in a text',
  about: { features: [{ not: 'one' }], list: [[1], [{ x: '}' }]] },
  features: [
    {
      type: 'Feature',
      id: 1,
      properties: { text: 'braces } ] { [ and \\ " quotes \\"', features: [{ a: 1 }] },
      geometry: null,
    },
    { type: 'Feature', id: 2, properties: null, geometry: { type: 'Point', coordinates: [1, 2] } },
    { type: 'Feature', id: 3, properties: { 'ключ,]}': '}' }, geometry: { type: 'Point', coordinates: [-1e-7, 2.5] } },
  ],
  after: ['x'],
};

describe('features of a text that comes in pieces', () => {
  for (const [style, text] of [
    ['on one line', JSON.stringify(tricky)],
    ['spread over lines', JSON.stringify(tricky, null, 2)],
  ] as const) {
    it(`are those of the whole, cut anywhere: ${style}`, () => {
      // independent: JSON.parse of the whole
      for (let size = 1; size < 40; size++) {
        const found: Feature[] = [];
        const reader = featureReader('f', (feature) => found.push(feature));
        for (let at = 0; at < text.length; at += size) reader.push(text.slice(at, at + size));
        reader.end();
        expect(found).toEqual(tricky.features);
      }
    });
  }

  it('may be one feature alone, or none', () => {
    const one = tricky.features[0]!;
    expect(featuresOf(JSON.stringify(one), 'f')).toEqual([one]);
    expect(featuresOf('{"type":"FeatureCollection","features":[]}', 'f')).toEqual([]);
  });

  it('says which feature cannot be read', () => {
    expect(() => featuresOf('{"type":"FeatureCollection","features":[{"a":1},{"b":}]}', 'f.json')).toThrow(
      /f\.json: feature 2 is not valid JSON/,
    );
    expect(() => featuresOf('{"type":"FeatureCollection","features":[{"a":1},{"b"', 'f.json')).toThrow(
      /ends in the middle of feature 2/,
    );
    expect(() => featuresOf('{"type":"FeatureCollection","features":[]', 'f.json')).toThrow(/not valid JSON/);
    expect(() => featuresOf('[1,2]', 'f.json')).toThrow(/no GeoJSON FeatureCollection/);
  });
});
