import { EARTH_RADIUS_M, RADIANS } from '../earth.js';
import { LimitError } from '../errors.js';
import { type Grid, projection } from '../swath/grid.js';
import { UNITS_PER_CELL, UNITS_PER_DEGREE } from './lattice.js';
import type { Field } from './node-classes.js';
import { projectionExtent } from './projection-extent.js';

/**
 * A ring in whole millionths of a degree, open. Longitudes run on across ±180° from vertex to vertex; those of a ring
 * round a pole end a whole turn away from where they began.
 */
export interface SphereRing {
  readonly lon: number[];
  readonly lat: number[];
}

/** How rings of a projected grid's lattice come to longitude and latitude. */
export interface RingMap {
  /** distance from a node, as a part of a cell, that crossings must keep so that rings stay apart once rounded */
  readonly margin: number;
  /** vertices `from` to `to − 1` of a ring in lattice units; null where too little of it has an inverse */
  readonly map: (x: Float64Array, y: Float64Array, from: number, to: number) => SphereRing | null;
  /** the field with NaN in cells outside what the projection shows */
  readonly withinProjection: (field: Field) => Field;
}

/** Share of the margin by which a straight edge in longitude and latitude may leave the straight edge on the grid. */
const TOLERANCE = 0.1;
/** Longer steps in longitude than this are divided, degrees. */
const LONGEST_STEP_DEG = 60;
/** Vertices keep just off the poles, units: what holds a pole is led there along the antimeridian. */
const HIGHEST = 90 * UNITS_PER_DEGREE - 2;
const MOST_DIVISIONS = 30;
/** Cells smaller than this have no isotachs with six decimals (0.1 m), m. */
const SMALLEST_CELL_M = 8;

/**
 * The map for a projected grid. Straight edges on the grid become straight edges in longitude and latitude; where the
 * two would differ by more than a tenth of the space kept between rings (large cells, near a pole) the edge is divided.
 * An edge that runs through a pole is led past it at a hair's breadth: a pole lies inside a ring or outside, never on it.
 * @throws LimitError `isotach.cell` when the cell is too small for six decimals
 */
export function ringMap(grid: Grid): RingMap {
  const { forward } = projection(grid.crs);
  const extent = projectionExtent(grid);
  const smallest = smallestCellM(grid, extent.lonLat);
  if (smallest < SMALLEST_CELL_M) {
    throw new LimitError(
      'isotach.cell',
      `cells of ${grid.cell} units of ${grid.crs} (down to ${smallest.toFixed(1)} m) are too small for isotachs with six decimals; take cells of at least ${SMALLEST_CELL_M} m`,
      { fields: { cell: grid.cell } },
    );
  }
  const margin = Math.min(1 / 8, Math.max(1 / 64, 1 / smallest));
  const poles = polesOn(grid, forward);
  const [shiftX, shiftY] = offLines(grid, poles, TOLERANCE * margin);
  const shifted = {
    poles: poles.map(([x, y]): [number, number] => [x + shiftX, y + shiftY]),
    lonLat: (x: number, y: number) => extent.lonLat(x - shiftX, y - shiftY),
    inside: extent.inside,
    berth: TOLERANCE * margin,
  };
  return {
    margin,
    map: (x, y, from, to) => new RingMapper(shifted).map(x, y, from, to),
    withinProjection: extent.withinProjection,
  };
}

/** Cells in metres on the sphere, at nine places of the grid. */
function smallestCellM(grid: Grid, lonLat: (x: number, y: number) => readonly [number, number]): number {
  let smallest = Number.POSITIVE_INFINITY;
  for (const u of [0, 0.5, 1]) {
    for (const v of [0, 0.5, 1]) {
      const [x, y] = [u * (grid.nx - 1), -v * (grid.ny - 1)];
      const here = lonLat(x, y);
      for (const there of [lonLat(x + 1, y), lonLat(x, y - 1)]) {
        const size = metresBetween(here[0], here[1], there[0], there[1]);
        if (size > 0 && size < smallest) smallest = size;
      }
    }
  }
  return Number.isFinite(smallest) ? smallest : grid.cell;
}

/** Distance of near places; good enough to compare with a tolerance. */
function metresBetween(lon1: number, lat1: number, lon2: number, lat2: number): number {
  const turn = (((((lon2 - lon1 + 180) % 360) + 360) % 360) - 180) * RADIANS;
  const east = 2 * Math.sin(turn / 2) * Math.sqrt(Math.abs(Math.cos(lat1 * RADIANS) * Math.cos(lat2 * RADIANS)));
  return EARTH_RADIUS_M * Math.hypot(east, (lat2 - lat1) * RADIANS);
}

/** Poles that the projection shows as one point, in cells from the north-west corner, y falling. */
function polesOn(grid: Grid, forward: (lon: number, lat: number) => readonly [number, number]): [number, number][] {
  const poles: [number, number][] = [];
  for (const lat of [90, -90]) {
    const places = [0, 90, 180, -90].map((lon) => {
      try {
        return forward(lon, lat);
      } catch {
        return [Number.NaN, Number.NaN] as const;
      }
    });
    const [x, y] = places[0]!;
    const point = places.every((place) => Math.hypot(place[0] - x, place[1] - y) < 1e-6 * grid.cell);
    if (point) poles.push([(x - grid.bounds[0]) / grid.cell, (y - grid.bounds[3]) / grid.cell]);
  }
  return poles;
}

/**
 * A shift of the whole grid, by a small part of a cell, that keeps a pole on it off the lines of the lattice: no
 * vertex of a ring lies there, and an edge can be led past it without leaving its cell.
 */
function offLines(grid: Grid, poles: readonly [number, number][], berth: number): [number, number] {
  const pole = poles.find(([x, y]) => x > -1 && x < grid.nx + 1 && y < 1 && y > -grid.ny - 1);
  if (!pole) return [0, 0];
  const shift = (at: number, cells: number): number => {
    for (const line of [0, cells, Math.round(at - 0.5) + 0.5]) {
      if (Math.abs(at - line) < 2 * berth) return line + 3 * berth - at;
    }
    return 0;
  };
  return [shift(pole[0], grid.nx), shift(pole[1], -grid.ny)];
}

type Place = (x: number, y: number) => readonly [number, number];

class RingMapper {
  private readonly lon: number[] = [];
  private readonly lat: number[] = [];
  /** the last vertex, degrees, its longitude running on */
  private lastLon = Number.NaN;
  private lastLat = Number.NaN;
  private readonly lonLat: Place;
  private readonly berth: number;

  constructor(
    private readonly on: { lonLat: Place; inside: Place; poles: readonly [number, number][]; berth: number },
  ) {
    this.lonLat = on.lonLat;
    this.berth = on.berth;
  }

  map(x: Float64Array, y: Float64Array, from: number, to: number): SphereRing | null {
    let first: readonly [number, number] | null = null;
    let last: readonly [number, number] | null = null;
    for (let i = from; i < to; i++) {
      const at = this.on.inside(x[i]! / UNITS_PER_CELL, y[i]! / UNITS_PER_CELL);
      const [lon, lat] = this.lonLat(at[0], at[1]);
      if (!Number.isFinite(lon) || !Number.isFinite(lat)) continue;
      if (last) this.edge(last, at);
      else {
        first = at;
        this.add(lon, lat);
      }
      last = at;
    }
    if (!first || !last) return null;
    this.edge(last, first);
    // the last vertex closes the ring: it is the first again
    this.lon.pop();
    this.lat.pop();
    return this.rounded();
  }

  private add(lon: number, lat: number): void {
    this.lon.push(lon);
    this.lat.push(lat);
    this.lastLon = lon;
    this.lastLat = lat;
  }

  private rounded(): SphereRing | null {
    const lon: number[] = [];
    const lat: number[] = [];
    for (let i = 0; i < this.lon.length; i++) {
      const x = Math.round(this.lon[i]! * UNITS_PER_DEGREE);
      const y = Math.max(-HIGHEST, Math.min(HIGHEST, Math.round(this.lat[i]! * UNITS_PER_DEGREE)));
      if (x === lon.at(-1) && y === lat.at(-1)) continue;
      lon.push(x);
      lat.push(y);
    }
    while (lon.length > 1 && lon[0] === lon.at(-1) && lat[0] === lat.at(-1)) {
      lon.pop();
      lat.pop();
    }
    return lon.length < 3 ? null : { lon, lat };
  }

  /** The edge from `a` (added already) to `b`, led past a pole that lies on it. */
  private edge(a: readonly [number, number], b: readonly [number, number]): void {
    const dx = b[0] - a[0];
    const dy = b[1] - a[1];
    const length = Math.hypot(dx, dy);
    for (const [px, py] of this.on.poles) {
      const along = length === 0 ? 0 : ((px - a[0]) * dx + (py - a[1]) * dy) / (length * length);
      if (along <= 0 || along >= 1) continue;
      const [qx, qy] = [a[0] + along * dx, a[1] + along * dy];
      if (Math.hypot(px - qx, py - qy) >= this.berth / 2) continue;
      // always to the same side, whichever way the edge is walked
      const side = (dy < 0 || (dy === 0 && dx > 0) ? this.berth : -this.berth) / length;
      const by = [px - dy * side, py + dx * side] as const;
      this.divide(a, by, 0);
      this.divide(by, b, 0);
      return;
    }
    this.divide(a, b, 0);
  }

  private divide(a: readonly [number, number], b: readonly [number, number], depth: number): void {
    const [lon, lat] = this.lonLat(b[0], b[1]);
    const cells = Math.hypot(b[0] - a[0], b[1] - a[1]);
    const metres = metresBetween(this.lastLon, this.lastLat, lon, lat);
    const steep = Math.max(Math.abs(lat), Math.abs(this.lastLat));
    // sagitta of a straight line against one in longitude and latitude: about L² tan φ / 8R
    const sagitta = steep < 89 ? (metres * cells * Math.tan(steep * RADIANS)) / (8 * EARTH_RADIUS_M) : 1;
    const turn = nearTurn(lon - this.lastLon);
    if (depth >= MOST_DIVISIONS || (sagitta < 0.2 * this.berth && Math.abs(turn) < LONGEST_STEP_DEG)) {
      this.add(this.lastLon + turn, lat);
      return;
    }
    const middle = [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2] as const;
    const [midLon, midLat] = this.lonLat(middle[0], middle[1]);
    const half = nearTurn(midLon - this.lastLon);
    const rest = nearTurn(lon - midLon);
    const off = metresBetween(this.lastLon + (half + rest) / 2, (this.lastLat + lat) / 2, midLon, midLat);
    const straight = Math.abs(half) < LONGEST_STEP_DEG / 2 && Math.abs(rest) < LONGEST_STEP_DEG / 2;
    if (!Number.isFinite(off) || (straight && off * cells <= this.berth * metres)) {
      this.add(this.lastLon + half + rest, lat);
      return;
    }
    this.divide(a, middle, depth + 1);
    this.divide(middle, b, depth + 1);
  }
}

/** A difference of longitudes within ±180°. */
function nearTurn(deg: number): number {
  return deg - 360 * Math.round(deg / 360);
}
