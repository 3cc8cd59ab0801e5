import { type BoundingBox, boundingBox } from '../isotach/bounding-box.js';

/** Longitudes are gathered in belts of this width, degrees. */
const BELT_DEG = 0.1;

/** The smallest box round places given as −180 ≤ λ ≤ 180; null without any   [RFC7946]. */
export function placesBox(lonDeg: ArrayLike<number>, latDeg: ArrayLike<number>): BoundingBox | null {
  const belts = new Map<number, [west: number, south: number, east: number, north: number]>();
  for (let i = 0; i < lonDeg.length; i++) {
    const [lon, lat] = [lonDeg[i]!, latDeg[i]!];
    const key = Math.floor(lon / BELT_DEG);
    const belt = belts.get(key);
    if (!belt) belts.set(key, [lon, lat, lon, lat]);
    else {
      if (lon < belt[0]) belt[0] = lon;
      if (lat < belt[1]) belt[1] = lat;
      if (lon > belt[2]) belt[2] = lon;
      if (lat > belt[3]) belt[3] = lat;
    }
  }
  return boxOfBoxes([...belts.values()]);
}

/** The smallest box round boxes; an east beyond 180 runs across ±180°. */
export function boxOfBoxes(
  boxes: readonly (readonly [west: number, south: number, east: number, north: number])[],
): BoundingBox | null {
  return boundingBox(
    boxes.flatMap(([west, south, east, north]) => {
      const from = west - 360 * Math.floor((west + 180) / 360);
      const to = from + (east - west);
      const span = (a: number, b: number) => [
        [
          [a, south],
          [b, north],
        ],
      ];
      if (to - from >= 360) return [span(-180, 180)];
      return to > 180 ? [span(from, 180), span(-180, to - 360)] : [span(from, to)];
    }),
  );
}
