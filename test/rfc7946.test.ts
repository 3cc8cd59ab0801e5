import { createRequire } from 'node:module';
import { describe, expect, it } from 'vitest';
import { checkRfc7946 } from './rfc7946.js';

/** geojson-validation (npm) as a second, laxer judge: it knows the structure, not the geometry. */
const validation = createRequire(import.meta.url)('geojson-validation') as { valid: (value: unknown) => boolean };

const square = (west: number, south: number, size: number): number[][] => [
  [west, south],
  [west + size, south],
  [west + size, south + size],
  [west, south + size],
  [west, south],
];
const clockwise = (ring: number[][]): number[][] => ring.toReversed();
const collection = (coordinates: unknown, bbox?: number[]) => ({
  type: 'FeatureCollection',
  ...(bbox ? { bbox } : {}),
  features: [{ type: 'Feature', properties: {}, geometry: { type: 'MultiPolygon', coordinates } }],
});

describe('what is right', () => {
  it('a polygon with a hole, an island in the hole, and a bbox', () => {
    const good = collection([[square(0, 0, 10), clockwise(square(2, 2, 6))], [square(4, 4, 2)]], [0, 0, 10, 10]);
    expect(checkRfc7946(good)).toEqual([]);
    expect(validation.valid(good)).toBe(true);
  });

  it('published: RFC 7946 section 5.2, the box of Fiji runs from 177 to −178', () => {
    const fiji = collection([[square(177, -20, 3)], [square(-180, -18, 2)]], [177, -20, -178, -16]);
    expect(checkRfc7946(fiji)).toEqual([]);
  });

  it('published: RFC 7946 section 3.1.6 example with a hole (appendix A.3)', () => {
    const example = {
      type: 'Polygon',
      coordinates: [
        [
          [100, 0],
          [101, 0],
          [101, 1],
          [100, 1],
          [100, 0],
        ],
        [
          [100.8, 0.8],
          [100.8, 0.2],
          [100.2, 0.2],
          [100.2, 0.8],
          [100.8, 0.8],
        ],
      ],
    };
    expect(checkRfc7946(example, { bbox: 'optional' })).toEqual([]);
  });

  it('rings that touch in one point, as simple features allow', () => {
    const diamond = [
      [5, 0],
      [3, 2],
      [5, 4],
      [7, 2],
      [5, 0],
    ];
    expect(checkRfc7946(collection([[square(0, 0, 10), diamond]], [0, 0, 10, 10]))).toEqual([]);
  });

  it('a polygon round the pole', () => {
    const cap = [
      [-180, 80],
      [-90, 80],
      [0, 80],
      [90, 80],
      [180, 80],
      [180, 90],
      [90, 90],
      [0, 90],
      [-90, 90],
      [-180, 90],
      [-180, 80],
    ];
    expect(checkRfc7946(collection([[cap]], [-180, 80, 180, 90]))).toEqual([]);
  });
});

describe('what is wrong', () => {
  const s = square(0, 0, 10);
  const box = [0, 0, 10, 10];
  const cases: [what: string, value: unknown, expected: RegExp][] = [
    ['a clockwise shell', collection([[clockwise(s)]], box), /wrong winding, a shell/],
    ['an anticlockwise hole', collection([[s, square(2, 2, 2)]], box), /wrong winding, a hole/],
    [
      'an uncut antimeridian',
      collection(
        [
          [
            [
              [170, 0],
              [-170, 0],
              [-170, 5],
              [170, 5],
              [170, 0],
            ],
          ],
        ],
        [-170, 0, 170, 5],
      ),
      /not cut/,
    ],
    ['longitudes beyond 180', collection([[square(175, 0, 10)]], [175, 0, 185, 10]), /longitude 185 beyond/],
    ['latitudes beyond 90', collection([[square(0, 85, 10)]], [0, 85, 10, 95]), /latitude 95 beyond/],
    [
      '8 decimals',
      collection(
        [
          [
            [
              [0, 0],
              [10.12345678, 0],
              [5, 5],
              [0, 0],
            ],
          ],
        ],
        [0, 0, 10.12345678, 5],
      ),
      /more than 7 decimals/,
    ],
    [
      'a bow-tie',
      collection(
        [
          [
            [
              [0, 0],
              [10, 10],
              [10, 0],
              [0, 11],
              [0, 0],
            ],
          ],
        ],
        [0, 0, 10, 11],
      ),
      /cross/,
    ],
    [
      'a ring that touches itself',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [10, 10],
              [5, 0],
              [0, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /touch/,
    ],
    [
      'a ring that passes a position twice',
      collection(
        [
          [
            [
              [0, 0],
              [5, 5],
              [10, 0],
              [10, 10],
              [5, 5],
              [0, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /touch/,
    ],
    [
      'a spike',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [10, 10],
              [10, 5],
              [0, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /overlap/,
    ],
    ['a hole outside', collection([[s, clockwise(square(20, 0, 1))]], box), /outside its shell/],
    ['a hole that crosses its shell', collection([[s, clockwise(square(8, 8, 5))]], box), /cross/],
    ['a hole along its shell', collection([[s, clockwise(square(0, 2, 3))]], box), /overlap/],
    [
      'a hole in a hole',
      collection([[s, clockwise(square(1, 1, 8)), clockwise(square(3, 3, 2))]], box),
      /inside another/,
    ],
    ['a hole that is its shell', collection([[s, clockwise(s)]], box), /overlap/],
    [
      'a hole outside that touches its shell',
      collection(
        [
          [
            s,
            [
              [10, 0],
              [12, 1],
              [12, -1],
              [10, 0],
            ].toReversed(),
          ],
        ],
        box,
      ),
      /outside its shell/,
    ],
    ['polygons that cross', collection([[s], [square(5, 5, 10)]], [0, 0, 15, 15]), /cross/],
    ['polygons side by side along an edge', collection([[s], [square(10, 0, 10)]], [0, 0, 20, 10]), /overlap/],
    ['a polygon in another', collection([[s], [square(2, 2, 2)]], box), /inside/],
    ['no bbox', collection([[s]]), /no bbox/],
    ['a bbox too wide', collection([[s]], [0, 0, 11, 10]), /wrong east/],
    ['a bbox too low', collection([[s]], [0, -1, 10, 10]), /wrong south/],
    ['a bbox in another order', collection([[s]], [0, 10, 0, 10]), /wrong/],
    [
      'a bbox round the globe',
      collection([[square(177, -20, 3)], [square(-180, -18, 2)]], [-180, -20, 180, -16]),
      /spans the globe/,
    ],
    ['a bbox across the antimeridian without need', collection([[s]], [10, 0, 0, 10]), /across the antimeridian/],
    ['a bbox of three', collection([[s]], [0, 0, 10]), /four finite/],
    [
      'an open ring',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [10, 10],
              [0, 10],
            ],
          ],
        ],
        box,
      ),
      /not closed/,
    ],
    [
      'three positions',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [0, 0],
            ],
          ],
        ],
        [0, 0, 10, 0],
      ),
      /fewer than 4/,
    ],
    [
      'no area',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [5, 0],
              [0, 0],
            ],
          ],
        ],
        [0, 0, 10, 0],
      ),
      /no area/,
    ],
    [
      'a repeated position',
      collection(
        [
          [
            [
              [0, 0],
              [10, 0],
              [10, 0],
              [10, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /repeats/,
    ],
    [
      'NaN',
      collection(
        [
          [
            [
              [0, 0],
              [10, Number.NaN],
              [10, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /not finite/,
    ],
    [
      'null for a number',
      collection(
        [
          [
            [
              [0, 0],
              [10, null],
              [10, 10],
              [0, 0],
            ],
          ],
        ],
        box,
      ),
      /not finite/,
    ],
    ['a crs', { ...collection([[s]], box), crs: { type: 'name' } }, /has a crs/],
    ['an unknown type', { type: 'Polygone', coordinates: [] }, /unknown type/],
    ['a feature without geometry', { type: 'Feature', properties: {} }, /no geometry/],
    ['no object', [], /not an object/],
  ];
  it.each(cases)('%s', (_, value, expected) => {
    expect(checkRfc7946(value).join('\n')).toMatch(expected);
  });

  it('a crossing far from all others among thousands of edges', () => {
    const ring: number[][] = [];
    for (let i = 0; i < 20_000; i++) {
      const angle = (i / 20_000) * 2 * Math.PI;
      ring.push([Number((50 * Math.cos(angle)).toFixed(6)), Number((50 * Math.sin(angle)).toFixed(6))]);
    }
    const closed = [...ring, ring[0]!];
    const wide = (list: number[][]) => collection([[list]], [-50, -50, 50, 50]);
    expect(checkRfc7946(wide(closed))).toEqual([]);
    const swapped = closed.slice();
    [swapped[777], swapped[778]] = [swapped[778]!, swapped[777]!];
    expect(checkRfc7946(wide(swapped)).join('\n')).toMatch(/cross/);
  });
});
