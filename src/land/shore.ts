import { RADIANS } from '../earth.js';
import type { Land } from './land.js';
import type { LonLatBox } from './land-grid.js';

/**
 * Edges of land that are shore, as arcs of great circles on the unit sphere. Not shore: borders that two polygons share,
 * cuts at ±180° with land on the other side, and edges along a pole.
 * `ax…bz` are the ends, one element an arc; arcs that follow each other in a ring follow each other here.
 */
export interface Shore {
  readonly ax: Float64Array;
  readonly ay: Float64Array;
  readonly az: Float64Array;
  readonly bx: Float64Array;
  readonly by: Float64Array;
  readonly bz: Float64Array;
}

/**
 * Longest arc, degrees. Edges are straight in longitude and latitude; cut to a tenth of a degree, their arcs stay within
 * 1.3 m of them (Δλ² R sin 2φ/16).
 */
const LONGEST_ARC_DEG = 0.1;
/** How near ±180° an edge is a cut, and how far across it land is looked for, degrees. */
const CUT_DEG = 1e-6;
const ACROSS_DEG = 1e-3;

/** @param box only edges that touch this box; all by default */
export function shoreOf(land: Land, box?: LonLatBox): Shore {
  const isShore = shoreTest(land);
  const ends: number[][] = [];
  for (const [r, ring] of land.rings.entries()) {
    if (box && !touches(box, ...land.ringBounds[r]!)) continue;
    for (let i = 0; i + 3 < ring.length; i += 2) {
      const [x0, y0, x1, y1] = [ring[i]!, ring[i + 1]!, ring[i + 2]!, ring[i + 3]!];
      if ((x0 === x1 && y0 === y1) || !isShore(x0, y0, x1, y1)) continue;
      if (box && !touches(box, Math.min(x0, x1), Math.min(y0, y1), Math.max(x0, x1), Math.max(y0, y1))) continue;
      const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0)) / LONGEST_ARC_DEG));
      for (let k = 0; k < pieces; k++) {
        const [s, t] = [k / pieces, (k + 1) / pieces];
        ends.push([x0 + s * (x1 - x0), y0 + s * (y1 - y0), x0 + t * (x1 - x0), y0 + t * (y1 - y0)]);
      }
    }
  }
  const n = ends.length;
  const shore = {
    ax: new Float64Array(n),
    ay: new Float64Array(n),
    az: new Float64Array(n),
    bx: new Float64Array(n),
    by: new Float64Array(n),
    bz: new Float64Array(n),
  };
  for (let i = 0; i < n; i++) {
    const [x0, y0, x1, y1] = ends[i] as [number, number, number, number];
    const [c0, c1] = [Math.cos(y0 * RADIANS), Math.cos(y1 * RADIANS)];
    shore.ax[i] = c0 * Math.cos(x0 * RADIANS);
    shore.ay[i] = c0 * Math.sin(x0 * RADIANS);
    shore.az[i] = Math.sin(y0 * RADIANS);
    shore.bx[i] = c1 * Math.cos(x1 * RADIANS);
    shore.by[i] = c1 * Math.sin(x1 * RADIANS);
    shore.bz[i] = Math.sin(y1 * RADIANS);
  }
  return shore;
}

/** Whether a box and [west, south, east, north] overlap, longitudes taken modulo 360. */
function touches(box: LonLatBox, west: number, south: number, east: number, north: number): boolean {
  if (north < box.south || south > box.north) return false;
  return west + 360 * Math.ceil((box.west - east) / 360) <= box.east;
}

type EdgeTest = (x0: number, y0: number, x1: number, y1: number) => boolean;

function shoreTest(land: Land): EdgeTest {
  const shared = land.detailM === null ? sharedEdges(land.rings) : null;
  return (x0, y0, x1, y1) => {
    if (Math.abs(y0) >= 90 && Math.abs(y1) >= 90) return false;
    if (isCut(x0) && isCut(x1)) {
      const latDeg = 0.5 * (y0 + y1);
      return !(land.isLand({ latDeg, lonDeg: 180 - ACROSS_DEG }) && land.isLand({ latDeg, lonDeg: ACROSS_DEG - 180 }));
    }
    if (shared?.has(edgeKey(x1, y1, x0, y0))) return false;
    // a ring around a pole goes down to it and up again along one meridian
    return !(x0 === x1 && (Math.abs(y0) >= 90 || Math.abs(y1) >= 90));
  };
}

const isCut = (lon: number): boolean => Math.abs(Math.abs(lon - 360 * Math.round(lon / 360)) - 180) < CUT_DEG;
const edgeKey = (x0: number, y0: number, x1: number, y1: number): string => `${x0},${y0},${x1},${y1}`;

/** Every edge of the rings; one whose reverse is here as well has land on both sides. */
function sharedEdges(rings: readonly Float64Array[]): Set<string> {
  const edges = new Set<string>();
  for (const ring of rings)
    for (let i = 0; i + 3 < ring.length; i += 2) edges.add(edgeKey(ring[i]!, ring[i + 1]!, ring[i + 2]!, ring[i + 3]!));
  return edges;
}
