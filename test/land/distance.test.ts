import { lineString, point, pointToLineDistance } from '@turf/turf';
import { describe, expect, it } from 'vitest';
import { worldLand } from '../../src/io/land-file.js';
import { shoreDistance } from '../../src/land/distance.js';
import { landOf } from '../../src/land/land.js';
import { landFromGeoJson } from '../../src/land/polygons.js';

/** Uniform numbers in 0–1 from a seed. */
function generator(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

describe('distance to the shore', () => {
  it('is that of another library at 1,000 places about an invented island', () => {
    const random = generator(5);
    const ring = Array.from({ length: 60 }, (_, i) => {
      const angle = (i / 60) * 2 * Math.PI;
      const reach = 1 + 0.5 * random();
      return [-60 + reach * Math.cos(angle), 17 + reach * Math.sin(angle)];
    });
    ring.push(ring[0]!);
    const land = landOf(landFromGeoJson({ type: 'Polygon', coordinates: [ring] }, { source: 'island' }));
    const { at } = shoreDistance(land);
    const shore = lineString(ring);
    let inland = 0;
    for (let i = 0; i < 1000; i++) {
      const [lonDeg, latDeg] = [-62.5 + 5 * random(), 14.5 + 5 * random()];
      const distance = at({ lonDeg, latDeg });
      if (distance > 0) inland++;
      // independent: turf, great circles on the same sphere; edges here are straight in longitude and latitude
      const other = pointToLineDistance(point([lonDeg, latDeg]), shore, { units: 'meters', method: 'geodesic' });
      expect(Math.abs(Math.abs(distance) - other)).toBeLessThan(Math.max(60, 0.003 * other));
    }
    expect(inland).toBeGreaterThan(100);
    expect(inland).toBeLessThan(900);
  });

  it('knows the coasts of the world', () => {
    const land = worldLand('50m');
    const { at } = shoreDistance(land);
    // from memory: Alice Springs lies deep inland, Bermuda is smaller than a map of this scale shows well
    expect(at({ latDeg: -23.7, lonDeg: 133.88 })).toBeGreaterThan(800_000);
    expect(at({ latDeg: 25, lonDeg: -45 })).toBeLessThan(-1_500_000);
    expect(land.isLand({ latDeg: 0, lonDeg: 0 })).toBe(false);
    expect(land.isLand({ latDeg: -89, lonDeg: 30 })).toBe(true);
  });
});
