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

  it('is that of another library at 1,000 places about a real coast', () => {
    const land = worldLand('50m');
    const { at } = shoreDistance(land);
    const random = generator(11);
    const [west, south, east, north] = [-88, 22, -72, 32];
    // the coast within 4° of the places, as lines
    const lines: number[][][] = [];
    for (const ring of land.rings) {
      let line: number[][] = [];
      for (let i = 0; i < ring.length; i += 2) {
        const [lon, lat] = [ring[i]!, ring[i + 1]!];
        if (lon > west - 4 && lon < east + 4 && lat > south - 4 && lat < north + 4) line.push([lon, lat]);
        else {
          if (line.length > 1) lines.push(line);
          line = [];
        }
      }
      if (line.length > 1) lines.push(line);
    }
    const shore = lines.map((line) => lineString(line));
    let [compared, inland] = [0, 0];
    while (compared < 1000) {
      const [lonDeg, latDeg] = [west + (east - west) * random(), south + (north - south) * random()];
      const distance = at({ lonDeg, latDeg });
      // what is farther off may be nearer to a coast that was left out
      if (Math.abs(distance) > 150_000) continue;
      compared++;
      if (distance > 0) inland++;
      // independent: turf on the Natural Earth coast, whose longer edges bow more as great circles
      const other = Math.min(
        ...shore.map((line) =>
          pointToLineDistance(point([lonDeg, latDeg]), line, { units: 'meters', method: 'geodesic' }),
        ),
      );
      expect(Math.abs(Math.abs(distance) - other)).toBeLessThan(Math.max(120, 0.003 * other));
    }
    expect(inland).toBeGreaterThan(200);
    expect(inland).toBeLessThan(900);
  }, 30_000);

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
