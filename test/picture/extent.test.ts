import { geoPath } from 'd3-geo';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { distanceM } from '../../src/earth.js';
import { pictureCoast } from '../../src/io/coast-picture.js';
import { coastDetailFor, coastNear } from '../../src/picture/coast-near.js';
import { extentOf, type LonLat, mapFrame } from '../../src/picture/extent.js';
import { graticule, latitudeText, longitudeText } from '../../src/picture/graticule.js';
import { roundBelow, unitsPerKm } from '../../src/picture/scale-bar.js';
import { STORMS } from './invented.js';

const FRAME = { x: 50, y: 100, width: 600, heights: [300, 700] } as const;
const placesOf = (storm: (typeof STORMS)[keyof typeof STORMS]): LonLat[] =>
  storm.track.fixes.map((fix) => [fix.lonDeg, fix.latDeg]);

describe('frame', () => {
  it('holds every place, anywhere on Earth', () => {
    const place = fc.tuple(
      fc.double({ min: -180, max: 180, noNaN: true }),
      fc.double({ min: -88, max: 88, noNaN: true }),
    );
    const cluster = fc.tuple(
      place,
      fc.array(fc.tuple(fc.double({ min: -12, max: 12, noNaN: true }), fc.double({ min: -9, max: 9, noNaN: true })), {
        minLength: 1,
        maxLength: 6,
      }),
    );
    fc.assert(
      fc.property(cluster, ([[lon, lat], offsets]) => {
        const places: LonLat[] = offsets.map(([dx, dy]) => [
          ((lon + dx + 540) % 360) - 180,
          Math.max(-89, Math.min(89, lat + dy)),
        ]);
        const { box, project } = mapFrame(places, FRAME);
        for (const one of places) {
          const at = project(one)!;
          expect(at[0]).toBeGreaterThanOrEqual(box.x - 0.01);
          expect(at[0]).toBeLessThanOrEqual(box.x + box.width + 0.01);
          expect(at[1]).toBeGreaterThanOrEqual(box.y - 0.01);
          expect(at[1]).toBeLessThanOrEqual(box.y + box.height + 0.01);
        }
      }),
      { numRuns: 200 },
    );
  });

  it('does not change when the Earth is turned under it', () => {
    const places: LonLat[] = [
      [150, 10],
      [158, 17],
      [161, 14],
    ];
    const turned = places.map(([lon, lat]): LonLat => [((lon + 25 + 540) % 360) - 180, lat]);
    const [a, b] = [mapFrame(places, FRAME), mapFrame(turned, FRAME)];
    places.forEach((place, i) => {
      const [p, q] = [a.project(place)!, b.project(turned[i]!)!];
      expect(q[0]).toBeCloseTo(p[0], 4);
      expect(q[1]).toBeCloseTo(p[1], 4);
    });
    expect(extentOf(turned).radiusDeg).toBeCloseTo(extentOf(places).radiusDeg, 8);
  });
});

describe('scale bar', () => {
  // identity: a known distance through the middle of the map is as long as the scale says, to the map's own distortion
  it('is true in the middle of the map', () => {
    for (const storm of Object.values(STORMS)) {
      const frame = mapFrame(placesOf(storm), FRAME);
      const { box, projection } = frame;
      const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
      const [west, east] = [projection.invert!([x - 40, y])!, projection.invert!([x + 40, y])!];
      const middle = projection.invert!([x, y])!;
      const km = distanceM({ lonDeg: west[0], latDeg: west[1] }, { lonDeg: east[0], latDeg: east[1] }) / 1000;
      const ours = 80 / unitsPerKm(frame, { lonDeg: middle[0], latDeg: middle[1] });
      expect(ours / km).toBeGreaterThan(0.985);
      expect(ours / km).toBeLessThan(1.015);
    }
  });

  it('is 1, 2 or 5 times a power of ten', () => {
    expect([0.7, 1, 3, 7.9, 49, 50, 1999].map(roundBelow)).toEqual([0.5, 1, 2, 5, 20, 50, 1000]);
  });
});

describe('graticule', () => {
  it('names its lines', () => {
    expect([-180, 180, -75, 0, 190, 12.5].map(longitudeText)).toEqual([
      '180°',
      '180°',
      '75°W',
      '0°',
      '170°W',
      '12.5°E',
    ]);
    expect([-12.5, 0, 60].map(latitudeText)).toEqual(['12.5°S', '0°', '60°N']);
  });

  it('stands where the projection says', () => {
    for (const storm of Object.values(STORMS)) {
      const frame = mapFrame(placesOf(storm), FRAME);
      for (const { text, x, inside } of graticule(frame, { size: 14 }).labels) {
        const match = /^(\d+(?:\.\d+)?)°([EW]?)$/.exec(text);
        if (!match || inside || Number(match[1]) % 180 === 0 || x < frame.box.x) continue;
        const place = frame.projection.invert!([x, frame.box.y + frame.box.height])!;
        const lon = Number(match[1]) * (match[2] === 'W' ? -1 : 1);
        expect(Math.abs(((place[0] - lon + 540) % 360) - 180)).toBeLessThan(0.3);
      }
    }
  });
});

describe('coast', () => {
  it('drawn from the near polygons alone is the coast', () => {
    const coast = pictureCoast('50m');
    for (const storm of Object.values(STORMS)) {
      const frame = mapFrame(placesOf(storm), FRAME);
      const path = geoPath(frame.projection).digits(1);
      expect(path(coastNear(coast, frame))).toBe(path(coast));
    }
  });

  it('is finer on a small map', () => {
    expect(
      coastDetailFor([
        [178, -17],
        [-179, -19],
      ]),
    ).toBe('10m');
    expect(
      coastDetailFor([
        [-40, 10],
        [-80, 30],
      ]),
    ).toBe('50m');
  });
});
