import type { Place } from '../earth.js';
import type { LandPolygons } from './coast.js';

/** Land that can be asked: is there land at a place? */
export interface Land extends LandPolygons {
  readonly isLand: (place: Place) => boolean;
  /** [west, south, east, north] of each ring, degrees; east may exceed 180 */
  readonly ringBounds: readonly (readonly [number, number, number, number])[];
}

/** Bands of latitude in which the edges are kept. */
const BANDS = 1440;
const BAND_DEG = 180 / BANDS;

/**
 * Prepares polygons for questions. Edges are kept by bands of latitude; a place is on land when the rings wind around it
 * at least once (so overlapping polygons unite and holes of one are filled by another).
 */
export function landOf(polygons: LandPolygons): Land {
  const ringBounds = polygons.rings.map(boundsOf);
  let edges: Edges | undefined;
  const isLand = ({ latDeg, lonDeg }: Place): boolean => {
    edges ??= edgesByBand(polygons.rings);
    const lon = lonDeg - 360 * Math.floor((lonDeg + 180) / 360);
    for (let at = lon; at <= edges.east; at += 360) if (winding(edges, at, latDeg) > 0) return true;
    return false;
  };
  return { ...polygons, isLand, ringBounds };
}

/** Edges that rise or fall; those of band b are `first[b] … first[b+1]` of `list`, as indices into the four arrays. */
interface Edges {
  readonly x0: Float64Array;
  readonly y0: Float64Array;
  readonly x1: Float64Array;
  readonly y1: Float64Array;
  readonly first: Uint32Array;
  readonly list: Uint32Array;
  /** easternmost longitude */
  readonly east: number;
}

const bandOf = (lat: number): number => Math.min(BANDS - 1, Math.max(0, Math.floor((lat + 90) / BAND_DEG)));

function edgesByBand(rings: readonly Float64Array[]): Edges {
  const most = rings.reduce((sum, ring) => sum + ring.length / 2 - 1, 0);
  const [x0, y0, x1, y1] = [
    new Float64Array(most),
    new Float64Array(most),
    new Float64Array(most),
    new Float64Array(most),
  ];
  let n = 0;
  let east = Number.NEGATIVE_INFINITY;
  for (const ring of rings) {
    for (let i = 0; i + 3 < ring.length; i += 2) {
      east = Math.max(east, ring[i]!);
      if (ring[i + 1] === ring[i + 3]) continue;
      x0[n] = ring[i]!;
      y0[n] = ring[i + 1]!;
      x1[n] = ring[i + 2]!;
      y1[n] = ring[i + 3]!;
      n++;
    }
  }
  const first = new Uint32Array(BANDS + 1);
  const eachBand = (e: number, visit: (band: number) => void): void => {
    const low = bandOf(Math.min(y0[e]!, y1[e]!));
    const high = bandOf(Math.max(y0[e]!, y1[e]!));
    for (let band = low; band <= high; band++) visit(band);
  };
  for (let e = 0; e < n; e++) eachBand(e, (band) => first[band + 1]!++);
  for (let band = 0; band < BANDS; band++) first[band + 1]! += first[band]!;
  const list = new Uint32Array(first[BANDS]!);
  const next = first.slice();
  for (let e = 0; e < n; e++) {
    eachBand(e, (band) => {
      list[next[band]!++] = e;
    });
  }
  return { x0, y0, x1, y1, first, list, east };
}

/** How often the rings wind around a place: rising edges to its east count +1, falling ones −1. */
function winding({ x0, y0, x1, y1, first, list }: Edges, lon: number, lat: number): number {
  const band = bandOf(lat);
  let turns = 0;
  for (let k = first[band]!; k < first[band + 1]!; k++) {
    const e = list[k]!;
    const from = y0[e]!;
    const to = y1[e]!;
    const rising = from <= lat && lat < to;
    if (!rising && !(to <= lat && lat < from)) continue;
    const crossing = x0[e]! + ((lat - from) / (to - from)) * (x1[e]! - x0[e]!);
    if (crossing > lon) turns += rising ? 1 : -1;
  }
  return turns;
}

function boundsOf(ring: Float64Array): readonly [number, number, number, number] {
  let [west, south, east, north] = [Infinity, Infinity, -Infinity, -Infinity];
  for (let i = 0; i < ring.length; i += 2) {
    const lon = ring[i]!;
    const lat = ring[i + 1]!;
    if (lon < west) west = lon;
    if (lon > east) east = lon;
    if (lat < south) south = lat;
    if (lat > north) north = lat;
  }
  return [west, south, east, north];
}
