import { geoArea, geoContains } from 'd3-geo';
import { expect, it } from 'vitest';
import { landFromGeoJson } from '../../src/land/polygons.js';
import { landShape } from '../../src/picture/land-shape.js';

it('is land as a sphere has it, holes and all, also across ±180°', () => {
  const box = (west: number, south: number, east: number, north: number): number[][] => [
    [west, south],
    [east, south],
    [east, north],
    [west, north],
    [west, south],
  ];
  const shape = landShape(
    landFromGeoJson(
      {
        type: 'MultiPolygon',
        coordinates: [[box(175, -20, 190, -10), box(182, -17, 185, -13)], [box(10, 40, 12, 41)]],
      },
      { source: 'isles' },
    ),
  );
  // independent: d3-geo's winding; most of the sphere would be the wrong side of a ring
  expect(geoArea(shape)).toBeLessThan(0.1);
  expect(geoContains(shape, [178, -15])).toBe(true);
  expect(geoContains(shape, [-171, -15])).toBe(true);
  expect(geoContains(shape, [-176.5, -15])).toBe(false);
  expect(geoContains(shape, [11, 40.5])).toBe(true);
  expect(geoContains(shape, [11, 42])).toBe(false);
});
