import { describe, expect, it } from 'vitest';
import { knots } from '../../../src/units.js';
import { bare, failureOf, readOne, readText } from './read-text.js';

const point = (properties: object, coordinates: unknown = [-60, 15]) => ({
  type: 'Feature',
  properties,
  geometry: { type: 'Point', coordinates },
});
const collection = (...features: object[]) => JSON.stringify({ type: 'FeatureCollection', features });

const POINTS = collection(
  point({ storm: 'A', time: '2031-09-03T00:00Z', vmax_kt: 50, averaging_s: 60, name: null }),
  point({ storm: 'A', time: '2031-09-03T06:00Z', vmax_kt: 60, averaging_s: 60 }, [-61, 15.5]),
);

describe('GeoJSON tracks', () => {
  it('are points with the properties of their fixes', () => {
    const track = readOne(POINTS);
    expect(track).toMatchObject({ id: 'A', name: null, kind: 'drawn', format: 'geojson', cautions: [] });
    expect(track.fixes).toMatchObject([
      { latDeg: 15, lonDeg: -60, maxWindMps: knots(50), line: 1 },
      { latDeg: 15.5, lonDeg: -61, maxWindMps: knots(60), line: 2 },
    ]);
  });

  it('may be a line with arrays, one value a vertex; a single value holds for all', () => {
    const line = (type: string, coordinates: unknown) =>
      collection({
        type: 'Feature',
        properties: {
          storm: 'A',
          time: ['2031-09-03T00:00Z', '2031-09-03T06:00Z'],
          vmax_kt: [50, 60],
          averaging_s: 60,
        },
        geometry: { type, coordinates },
      });
    const ends = [
      [-60, 15],
      [-61, 15.5, 0],
    ];
    expect(bare(readOne(line('LineString', ends)))).toEqual(bare(readOne(POINTS)));
    expect(
      bare(
        readOne(
          line(
            'MultiLineString',
            ends.map((end) => [end]),
          ),
        ),
      ),
    ).toEqual(bare(readOne(POINTS)));
  });

  it('may be a single feature, spread over lines, with storms mixed and features without time', () => {
    const at = (storm: string, hour: number) => point({ storm, time: `2031-09-03T0${hour}:00Z` });
    const text = collection(at('A', 0), at('B', 0), point({ title: 'harbour' }), at('A', 6), at('B', 6));
    expect(
      readText(JSON.stringify(JSON.parse(text), null, 2)).map(({ id, fixes }) => [id, fixes.map(({ line }) => line)]),
    ).toEqual([
      ['A', [1, 4]],
      ['B', [2, 5]],
    ]);
    expect(readOne(JSON.stringify(at('A', 0))).fixes).toHaveLength(1);
  });

  it('may have properties of other names', () => {
    const text = collection(point({ id: 'A', when: '2031-09-03T00:00Z', gusty: 50 }));
    const columns = { storm: 'id', time: 'when', vmax_kt: 'gusty' };
    expect(readOne(text, { columns })).toMatchObject({ id: 'A', fixes: [{ maxWindMps: knots(50) }] });
  });

  it.each([
    ['cut off', POINTS.slice(0, -20), 'track.json', 'storm.csv:1: is no valid JSON'],
    ['an array', '[1, 2]', 'track.geojson', 'not a FeatureCollection or Feature'],
    ['a bare geometry', '{"type":"Point","coordinates":[0,0]}', 'track.geojson', 'is a Point, not a FeatureCollection'],
    ['no time', collection(point({ storm: 'A' })), 'track.heading', "no feature has the property 'time'"],
    [
      'a polygon',
      collection({
        type: 'Feature',
        properties: { time: '2031090300' },
        geometry: { type: 'Polygon', coordinates: [] },
      }),
      'track.geojson',
      'feature 1: has a Polygon',
    ],
    [
      'no geometry',
      collection({ type: 'Feature', properties: { time: '2031090300' }, geometry: null }),
      'track.geojson',
      'feature 1: has no geometry',
    ],
    [
      'text for a position',
      collection(point({ time: '2031090300' }, ['1', '2'])),
      'track.geojson',
      'feature 1: a position is not',
    ],
    [
      'a latitude of 95',
      collection(point({ time: '2031090300' }), point({ time: '2031090306' }, [0, 95])),
      'track.latitude',
      'feature 2: latitude 95',
    ],
    [
      'arrays that do not fit',
      collection({
        type: 'Feature',
        properties: { time: ['2031090300'] },
        geometry: {
          type: 'LineString',
          coordinates: [
            [0, 0],
            [1, 1],
          ],
        },
      }),
      'track.vertices',
      "the property 'time' has 1 values for 2 vertices",
    ],
    [
      'an object for a value',
      collection(point({ time: '2031090300', vmax_kt: { value: 3 } })),
      'track.geojson',
      "the property 'vmax_kt' is neither a number nor text",
    ],
    [
      'another reference system',
      JSON.stringify({ ...JSON.parse(POINTS), crs: { type: 'name', properties: { name: 'EPSG:3857' } } }),
      'track.geojson',
      "reference system 'EPSG:3857'",
    ],
  ])('refuse %s', (_, text, code, message) => {
    expect(failureOf(() => readText(text))).toMatchObject({
      name: 'InputError',
      code,
      message: expect.stringContaining(message),
    });
  });
});
