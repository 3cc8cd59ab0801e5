import type { Land } from '../src/land/land.js';
import { landOf } from '../src/land/land.js';
import { landFromGeoJson } from '../src/land/polygons.js';

/** Invented land from rectangles [west, south, east, north], degrees. */
export function rectangles(...boxes: readonly (readonly [number, number, number, number])[]): Land {
  return landOf(
    landFromGeoJson(
      {
        type: 'MultiPolygon',
        coordinates: boxes.map(([west, south, east, north]) => [
          [
            [west, south],
            [east, south],
            [east, north],
            [west, north],
            [west, south],
          ],
        ]),
      },
      { source: 'invented.geojson' },
    ),
  );
}
