import { type GeoProjection, geoConicConformal, geoEqualEarth, geoMercator, geoStereographic } from 'd3-geo';
import { distanceM, EARTH_RADIUS_M, RADIANS, wrapLongitude } from '../earth.js';
import type { Box } from './labels.js';

export type LonLat = readonly [lonDeg: number, latDeg: number];

/** What a map has to show, seen from its middle. */
export interface Extent {
  readonly middle: LonLat;
  /** longitudes from the middle, latitudes */
  readonly west: number;
  readonly east: number;
  readonly south: number;
  readonly north: number;
  /** the farthest place from the middle, degrees of arc */
  readonly radiusDeg: number;
}

/** The extent of places anywhere on Earth, across ±180° as well; the middle is a pole's own where they lie around it. */
export function extentOf(places: readonly LonLat[]): Extent {
  let [x, y, z] = [0, 0, 0];
  for (const [lon, lat] of places) {
    x += Math.cos(lat * RADIANS) * Math.cos(lon * RADIANS);
    y += Math.cos(lat * RADIANS) * Math.sin(lon * RADIANS);
    z += Math.sin(lat * RADIANS);
  }
  const meanLon = Math.atan2(y, x) / RADIANS;
  let [west, east, south, north] = [180, -180, 90, -90];
  for (const [lon, lat] of places) {
    const from = wrapLongitude(lon - meanLon);
    west = Math.min(west, from);
    east = Math.max(east, from);
    south = Math.min(south, lat);
    north = Math.max(north, lat);
  }
  const polar = Math.max(Math.abs(south), Math.abs(north)) > 70;
  const middle: LonLat = polar
    ? [meanLon, Math.atan2(z, Math.hypot(x, y)) / RADIANS]
    : [wrapLongitude(meanLon + (west + east) / 2), (south + north) / 2];
  let farthest = 0;
  for (const [lonDeg, latDeg] of places)
    farthest = Math.max(farthest, distanceM({ lonDeg, latDeg }, { lonDeg: middle[0], latDeg: middle[1] }));
  return {
    middle,
    west: west - (middle[0] - meanLon),
    east: east - (middle[0] - meanLon),
    south,
    north,
    radiusDeg: farthest / EARTH_RADIUS_M / RADIANS,
  };
}

export type ProjectionKind = 'mercator' | 'conic-conformal' | 'stereographic' | 'equal-earth';

/** Names for the foot of a map. */
export const PROJECTION_NAMES: Readonly<Record<ProjectionKind, string>> = {
  mercator: 'Mercator',
  'conic-conformal': 'Lambert conformal conic',
  stereographic: 'stereographic',
  'equal-earth': 'Equal Earth',
};

/** The projection that suits an extent: angles are kept, except on a map of more than half the Earth [Snyder1987]. */
export function projectionKind({ middle, south, north, radiusDeg }: Extent): ProjectionKind {
  if (radiusDeg > 55) return 'equal-earth';
  if (Math.max(Math.abs(south), Math.abs(north)) > 70 || Math.abs(middle[1]) > 60) return 'stereographic';
  if (south < 0 !== north < 0 || Math.abs(middle[1]) < 18) return 'mercator';
  return 'conic-conformal';
}

/** A map's projection on a frame, and the lines of longitude and latitude that the frame cuts off. */
export interface MapFrame {
  readonly kind: ProjectionKind;
  readonly projection: GeoProjection;
  readonly box: Box;
  /** [longitude, latitude] → picture; null where the place is on the far side */
  readonly project: (place: LonLat) => readonly [number, number] | null;
  /** what is seen: longitudes from `middle[0]`, latitudes */
  readonly seen: {
    readonly middleLon: number;
    readonly west: number;
    readonly east: number;
    readonly south: number;
    readonly north: number;
  };
}

/** Half the least span of a map, degrees of latitude: one place alone still gets its surroundings. */
const LEAST_HALF_SPAN_DEG = 2.2;

/**
 * A frame of a given width, as high as the extent needs within `heights`, with the places at least `margin` of the
 * width away from its edges.
 */
export function mapFrame(
  places: readonly LonLat[],
  frame: {
    readonly x: number;
    readonly y: number;
    readonly width: number;
    readonly heights: readonly [number, number];
    readonly margin?: number;
  },
): MapFrame {
  const extent = extentOf(places);
  const kind = projectionKind(extent);
  const projection = unitProjection(kind, extent);
  let [x0, x1, y0, y1] = [Infinity, -Infinity, Infinity, -Infinity];
  const around = (place: LonLat): LonLat[] => {
    const lat = Math.min(89, Math.max(-89, place[1]));
    const side = LEAST_HALF_SPAN_DEG / Math.cos(lat * RADIANS);
    return [
      [place[0] - side, lat],
      [place[0] + side, lat],
      [place[0], Math.max(-89.9, lat - LEAST_HALF_SPAN_DEG)],
      [place[0], Math.min(89.9, lat + LEAST_HALF_SPAN_DEG)],
    ];
  };
  for (const place of [...places, ...around(extent.middle)]) {
    const at = projection(place as [number, number]);
    if (!at) continue;
    x0 = Math.min(x0, at[0]);
    x1 = Math.max(x1, at[0]);
    y0 = Math.min(y0, at[1]);
    y1 = Math.max(y1, at[1]);
  }
  const margin = (frame.margin ?? 0.08) * frame.width;
  const [least, most] = frame.heights;
  const inner = frame.width - 2 * margin;
  const height = Math.min(most, Math.max(least, ((y1 - y0) / (x1 - x0)) * inner + 2 * margin));
  const scale = Math.min(inner / (x1 - x0), (height - 2 * margin) / (y1 - y0));
  const box: Box = { x: frame.x, y: frame.y, width: frame.width, height };
  projection.scale(projection.scale() * scale);
  projection.translate([
    box.x + box.width / 2 - scale * ((x0 + x1) / 2),
    box.y + box.height / 2 - scale * ((y0 + y1) / 2),
  ]);
  projection.precision(0.4);
  projection.clipExtent([
    [box.x - 4, box.y - 4],
    [box.x + box.width + 4, box.y + box.height + 4],
  ]);
  const project = (place: LonLat) => projection(place as [number, number]);
  return { kind, projection, box, project, seen: seenThrough(projection, box, extent.middle[0]) };
}

/** The projection with its middle at the origin and one radian about one unit long. */
function unitProjection(kind: ProjectionKind, { middle, south, north }: Extent): GeoProjection {
  const [lon, lat] = middle;
  const make = (): GeoProjection => {
    if (kind === 'mercator') return geoMercator().rotate([-lon, 0]);
    if (kind === 'equal-earth') return geoEqualEarth().rotate([-lon, 0]);
    if (kind === 'stereographic') return geoStereographic().rotate([-lon, -lat]).clipAngle(120);
    const sixth = Math.max(0.5, (north - south) / 6);
    return geoConicConformal()
      .parallels([lat - 2 * sixth, lat + 2 * sixth])
      .rotate([-lon, 0]);
  };
  return make().scale(1).translate([0, 0]).center([0, 0]).precision(0.0001);
}

/** Longitudes and latitudes inside a frame, from its edges and the poles. */
export function seenThrough(projection: GeoProjection, box: Box, middleLon: number): MapFrame['seen'] {
  let [west, east, south, north] = [180, -180, 90, -90];
  const STEPS = 24;
  for (let i = 0; i <= STEPS; i++) {
    const along = i / STEPS;
    for (const [x, y] of [
      [box.x + along * box.width, box.y],
      [box.x + along * box.width, box.y + box.height],
      [box.x, box.y + along * box.height],
      [box.x + box.width, box.y + along * box.height],
      [box.x + box.width / 2, box.y + along * box.height],
    ] as const) {
      const place = projection.invert?.([x, y]);
      if (!place || !Number.isFinite(place[0]) || !Number.isFinite(place[1])) continue;
      const from = wrapLongitude(place[0] - middleLon);
      west = Math.min(west, from);
      east = Math.max(east, from);
      south = Math.min(south, place[1]);
      north = Math.max(north, place[1]);
    }
  }
  for (const pole of [-90, 90] as const) {
    const at = projection([middleLon, pole * 0.99999]);
    const inside = at && at[0] >= box.x && at[0] <= box.x + box.width && at[1] >= box.y && at[1] <= box.y + box.height;
    if (!inside) continue;
    [west, east] = [-180, 180];
    if (pole > 0) north = 90;
    else south = -90;
  }
  return { middleLon, west, east, south, north };
}
