import { EARTH_RADIUS_M, RADIANS } from '../earth.js';

/** A zone: polygons with a name and perhaps values (people, insured sum), spread evenly over its area. */
export interface Zone {
  readonly name: string;
  /** MultiPolygon coordinates, longitude and latitude in degrees, each ring closed */
  readonly polygons: readonly (readonly Ring[])[];
  readonly values: Readonly<Record<string, number>>;
}

/** Closed ring of [longitude, latitude]; edges are straight in longitude and latitude   [RFC7946]. */
export type Ring = readonly (readonly [number, number])[];

/** A zone made ready: its rings in continuous longitude, across ±180° too. */
export interface ZoneShape {
  readonly rings: readonly Ring[];
  /** west, south, east, north; east may lie beyond 180 */
  readonly bounds: readonly [number, number, number, number];
  readonly areaM2: number;
}

/** Points spread over a zone, each with its share of the area; the shares add up to 1. */
export interface ZoneSamples {
  readonly lonDeg: Float64Array;
  readonly latDeg: Float64Array;
  readonly share: Float64Array;
}

/** A ring's longitudes made continuous. A step of 360° exactly goes round the Earth on purpose, along a pole. */
export function unwrapped(ring: Ring, near: number): [number, number][] {
  let last = near;
  let before = Number.NaN;
  return ring.map(([lon, lat]) => {
    last = Math.abs(lon - before) === 360 ? last + lon - before : lon + 360 * Math.round((last - lon) / 360);
    before = lon;
    return [last, lat];
  });
}

/** The shape of a zone. */
export function zoneShape(zone: Zone): ZoneShape {
  const near = zone.polygons[0]?.[0]?.[0]?.[0] ?? 0;
  const rings = zone.polygons.flatMap((polygon) => {
    const shell = unwrapped(polygon[0] ?? [], near);
    return [shell, ...polygon.slice(1).map((hole) => unwrapped(hole, shell[0]?.[0] ?? near))];
  });
  let [west, south, east, north] = [
    Number.POSITIVE_INFINITY,
    Number.POSITIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
  ];
  for (const ring of rings) {
    for (const [lon, lat] of ring) {
      west = Math.min(west, lon);
      east = Math.max(east, lon);
      south = Math.min(south, lat);
      north = Math.max(north, lat);
    }
  }
  return { rings, bounds: [west, south, east, north], areaM2: zoneAreaM2(zone) };
}

/** Area of a zone on the mean sphere, m²: shells less holes, whatever way their rings run. */
export function zoneAreaM2(zone: Zone): number {
  let sum = 0;
  for (const polygon of zone.polygons)
    for (const [i, ring] of polygon.entries())
      sum += (i === 0 ? 1 : -1) * Math.abs(ringAreaM2(unwrapped(ring, ring[0]?.[0] ?? 0)));
  return sum;
}

/** Signed area of a ring, m², positive anticlockwise: −R² ∮ sin φ dλ, exact for edges that are straight in longitude and latitude. */
export function ringAreaM2(ring: Ring): number {
  const base = Math.sin((ring[0]?.[1] ?? 0) * RADIANS);
  let sum = 0;
  for (let i = 1; i < ring.length; i++) {
    const [lon1, lat1] = ring[i - 1]!;
    const [lon2, lat2] = ring[i]!;
    const half = ((lat2 - lat1) / 2) * RADIANS;
    const sinc = Math.abs(half) < 1e-3 ? 1 - (half * half) / 6 : Math.sin(half) / half;
    sum -= (lon2 - lon1) * (Math.sin(((lat1 + lat2) / 2) * RADIANS) * sinc - base);
  }
  return sum * RADIANS * EARTH_RADIUS_M ** 2;
}

/** Where a scan line at a latitude enters and leaves the rings: sorted longitudes (even-odd rule). */
function crossings(edges: readonly Edge[], latDeg: number): number[] {
  const found: number[] = [];
  for (const [x0, y0, x1, y1] of edges)
    if (y0 > latDeg !== y1 > latDeg) found.push(x0 + ((x1 - x0) * (latDeg - y0)) / (y1 - y0));
  return found.sort((a, b) => a - b);
}

type Edge = readonly [x0: number, y0: number, x1: number, y1: number];

/** The edges of a shape by bands of latitude, so that a scan line meets few of them. */
function edgesByBand({ rings, bounds }: ZoneShape): (latDeg: number) => readonly Edge[] {
  const [, south, , north] = bounds;
  const edges: Edge[] = rings.flatMap((ring) =>
    ring.slice(1).map(([x1, y1], i): Edge => [ring[i]![0], ring[i]![1], x1, y1]),
  );
  const count = Math.max(1, Math.min(1024, edges.length >> 2));
  const bands: Edge[][] = Array.from({ length: count }, () => []);
  const bandOf = (lat: number): number =>
    Math.max(0, Math.min(count - 1, Math.floor(((lat - south) / (north - south)) * count) || 0));
  for (const edge of edges) {
    if (edge[1] === edge[3]) continue;
    const to = bandOf(Math.max(edge[1], edge[3]));
    for (let band = bandOf(Math.min(edge[1], edge[3])); band <= to; band++) bands[band]!.push(edge);
  }
  return (latDeg) => bands[bandOf(latDeg)]!;
}

/**
 * A test of many places against one zone (even-odd rule). A place on an edge belongs to the zone to the east or north of
 * it, so that it lies in one of two neighbours only.
 */
export function zoneTest(shape: ZoneShape): (lonDeg: number, latDeg: number) => boolean {
  const [west, south, east, north] = shape.bounds;
  const near = edgesByBand(shape);
  const middle = 0.5 * (west + east);
  return (lonDeg, latDeg) => {
    if (!(latDeg >= south && latDeg <= north)) return false;
    const lon = lonDeg + 360 * Math.round((middle - lonDeg) / 360);
    if (lon < west || lon > east) return false;
    let inside = false;
    for (const [x0, y0, x1, y1] of near(latDeg)) {
      if (y0 > latDeg !== y1 > latDeg && x0 + ((x1 - x0) * (latDeg - y0)) / (y1 - y0) <= lon) inside = !inside;
    }
    return inside;
  };
}

/**
 * Points on `rows` parallels across a zone, as many on each as its width asks for, weighted by the area they stand for:
 * a share of the area is right to about 1/rows^1.5 where the border of what is sought is smooth, about 1/rows at worst.
 */
export function zoneSamples(shape: ZoneShape, { rows }: { rows: number }): ZoneSamples {
  const [west, south, east, north] = shape.bounds;
  const near = edgesByBand(shape);
  const step = (north - south) / rows;
  const [lon, lat, weight]: [number[], number[], number[]] = [[], [], []];
  let total = 0;
  for (let row = 0; row < rows; row++) {
    const y = south + (row + 0.5) * step;
    const cuts = crossings(near(y), y);
    for (let k = 0; k + 1 < cuts.length; k += 2) {
      const span = cuts[k + 1]! - cuts[k]!;
      const count = Math.max(1, Math.round((span / (east - west)) * rows));
      const share = (Math.cos(y * RADIANS) * span) / count;
      for (let i = 0; i < count; i++) {
        lon.push(cuts[k]! + ((i + 0.5) * span) / count);
        lat.push(y);
        weight.push(share);
        total += share;
      }
    }
  }
  return {
    lonDeg: Float64Array.from(lon),
    latDeg: Float64Array.from(lat),
    share: Float64Array.from(weight, (one) => one / total),
  };
}

/** Share of a zone in which a wind is at or above each level, 0 … 1, from the winds at its samples. */
export function sharesAbove(samples: ZoneSamples, windMps: ArrayLike<number>, levelsMps: readonly number[]): number[] {
  return levelsMps.map((level) => {
    let [sum, all] = [0, true];
    for (let i = 0; i < samples.share.length; i++) {
      if (windMps[i]! >= level) sum += samples.share[i]!;
      else all = false;
    }
    // the whole is one, without what rounding leaves
    return all && samples.share.length > 0 ? 1 : Math.min(1, sum);
  });
}
