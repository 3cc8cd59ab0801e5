import type { PolygonCoordinates, Position } from './area.js';
import { UNITS_PER_DEGREE } from './lattice.js';
import type { SphereRing } from './ring-on-sphere.js';

const HALF_TURN = 180 * UNITS_PER_DEGREE;
const TURN = 2 * HALF_TURN;
const POLE = 90 * UNITS_PER_DEGREE;
/** A vertex nearer than this to the antimeridian lies on it, units. */
const KEEP_OFF = 2;

/** A run of vertices within ±180°; an open one begins and ends on the antimeridian. */
interface Part {
  readonly lon: number[];
  readonly lat: number[];
}

/**
 * Cuts a polygon (shell and holes, higher ground on the left) at the antimeridian; a polygon with a pole inside reaches
 * ±90° along it. Works on the frame of the map from −180° to 180° and from pole to pole: rings are cut into
 * chains where they cross ±180°, and chains are joined again along the frame, anticlockwise.
 */
export function cutAtAntimeridian(rings: readonly SphereRing[]): PolygonCoordinates[] {
  const closed: Part[] = [];
  const open: Part[] = [];
  for (const ring of rings) cutRing(ring, closed, open);
  const shells = joinAlongFrame(open);
  const holes: Part[] = [];
  for (const ring of closed) (signedArea(ring) > 0 ? shells : holes).push(ring);
  if (shells.length === 0) {
    if (holes.length === 0) return [];
    // nothing but holes: the frame itself is the shell
    const whole: Part = { lon: [-HALF_TURN], lat: [-POLE] };
    walkFrame(whole, { from: corners.sw, count: 3 });
    shells.push(whole);
  }
  const polygons: Part[][] = shells.map((shell) => [shell]);
  for (const hole of holes) {
    const home = polygons.length === 1 ? polygons[0] : polygons.find(([shell]) => contains(shell!, hole));
    (home ?? polygons[0]!).push(hole);
  }
  return polygons.map((polygon) => polygon.map(positions));
}

/** Splits one ring where it passes from one turn of longitudes to the next. */
function cutRing(ring: SphereRing, closed: Part[], open: Part[]): void {
  const n = ring.lon.length;
  const turnOf = (lon: number): number => Math.round(lon / TURN);
  const inside = (lon: number): boolean => Math.abs(lon - turnOf(lon) * TURN) < HALF_TURN - KEEP_OFF;
  const start = ring.lon.findIndex(inside);
  if (start < 0) return;
  const winding = Math.round((closingLon(ring) - ring.lon[0]!) / TURN) * TURN;
  let turn = turnOf(ring.lon[start]!);
  let part: Part = { lon: [], lat: [] };
  const parts = [part];
  let lastLon = Number.NaN;
  let lastLat = Number.NaN;
  /** vertices on the antimeridian since the last one beside it */
  let on = 0;
  for (let k = 0; k <= n; k++) {
    const i = (start + k) % n;
    let lon = ring.lon[i]! + (start + k >= n ? winding : 0);
    const lat = ring.lat[i]!;
    if (inside(lon)) {
      const next = turnOf(lon);
      if (next !== turn) {
        const cut = Math.max(turn, next) * TURN - HALF_TURN;
        let leaveLat = Math.round(lastLat + ((cut - lastLon) / (lon - lastLon)) * (lat - lastLat));
        let enterLat = leaveLat;
        if (on > 0) {
          // passes over by way of vertices on the line: what runs along it belongs to neither side
          enterLat = lastLat;
          leaveLat = part.lat[part.lat.length - on]!;
          part.lon.length -= on;
          part.lat.length -= on;
        }
        part.lon.push(cut - turn * TURN);
        part.lat.push(leaveLat);
        part = { lon: [cut - next * TURN], lat: [enterLat] };
        parts.push(part);
        turn = next;
      }
      on = 0;
    } else {
      // for now beside the line, on the side where the ring came from
      lon = Math.max(turn * TURN - HALF_TURN + KEEP_OFF, Math.min(turn * TURN + HALF_TURN - KEEP_OFF, lon));
      on++;
    }
    if (k < n) {
      part.lon.push(lon - turn * TURN);
      part.lat.push(lat);
    }
    lastLon = lon;
    lastLat = lat;
  }
  if (parts.length === 1) {
    if (part.lon.length >= 3) closed.push(part);
    return;
  }
  // the ring began in the middle of a chain: its last part goes on in the first
  append(part, parts.shift()!);
  withoutTips(parts, closed);
  for (const chain of parts) open.push(chain);
}

function append(to: Part, more: Part): void {
  for (let i = 0; i < more.lon.length; i++) {
    to.lon.push(more.lon[i]!);
    to.lat.push(more.lat[i]!);
  }
}

/** Leaves out chains that come back to where they began (a tip that only just reaches across), and joins what they part. */
function withoutTips(chains: Part[], closed: Part[]): void {
  for (;;) {
    const tip = chains.findIndex(({ lon, lat }) => lon[0] === lon.at(-1) && lat[0] === lat.at(-1));
    if (tip < 0) return;
    const before = chains.at(tip - 1)!;
    const after = chains[(tip + 1) % chains.length]!;
    before.lon.pop();
    before.lat.pop();
    after.lon.shift();
    after.lat.shift();
    if (before === after) {
      chains.length = 0;
      if (before.lon.length >= 3) closed.push(before);
      return;
    }
    append(before, after);
    const gone = new Set([chains[tip], after]);
    chains.splice(0, chains.length, ...chains.filter((chain) => !gone.has(chain)));
  }
}

/** The first longitude again, running on from the last. */
function closingLon(ring: SphereRing): number {
  const last = ring.lon.at(-1)!;
  const step = ring.lon[0]! - last;
  return last + step - TURN * Math.round(step / TURN);
}

/** Places on the frame: east side upward, top westward, west side downward, bottom eastward; the corners are whole. */
const corners = { se: 0, ne: 1, nw: 2, sw: 3 } as const;

function placeOnFrame(lon: number, lat: number): number {
  // a pole still belongs to the side
  const up = Math.max(1e-12, Math.min(1 - 1e-12, (lat + POLE) / (2 * POLE)));
  return lon > 0 ? corners.se + up : corners.nw + 1 - up;
}

/** Joins chains into rings, from the end of each along the frame to the next start. */
function joinAlongFrame(chains: readonly Part[]): Part[] {
  const starts = chains
    .map((chain) => ({ chain, at: placeOnFrame(chain.lon[0]!, chain.lat[0]!) }))
    .sort((a, b) => a.at - b.at);
  const rings: Part[] = [];
  const done = new Set<Part>();
  for (const { chain: first } of starts) {
    if (done.has(first)) continue;
    const ring: Part = { lon: [], lat: [] };
    let chain = first;
    do {
      done.add(chain);
      for (let i = 0; i < chain.lon.length; i++) {
        ring.lon.push(chain.lon[i]!);
        ring.lat.push(chain.lat[i]!);
      }
      const end = placeOnFrame(chain.lon.at(-1)!, chain.lat.at(-1)!);
      const next = starts.find((start) => start.at > end) ?? starts[0]!;
      const to = next.at > end ? next.at : next.at + 4;
      walkFrame(ring, { from: Math.floor(end), count: Math.floor(to) - Math.floor(end) });
      chain = next.chain;
    } while (!done.has(chain));
    if (ring.lon.length >= 3) rings.push(ring);
  }
  return rings;
}

/** Adds the corners after side `from`, `count` of them; the parallels of the poles in steps of 90°. */
function walkFrame(ring: Part, along: { from: number; count: number }): void {
  for (let i = 1; i <= along.count; i++) {
    const corner = (along.from + i) % 4;
    const lat = corner === corners.ne || corner === corners.nw ? POLE : -POLE;
    const lon = corner === corners.se || corner === corners.ne ? HALF_TURN : -HALF_TURN;
    if (corner === corners.nw || corner === corners.se) {
      for (const step of [-0.5, 0, 0.5]) {
        ring.lon.push(corner === corners.nw ? -step * HALF_TURN : step * HALF_TURN);
        ring.lat.push(lat);
      }
    }
    ring.lon.push(lon);
    ring.lat.push(lat);
  }
}

function signedArea(ring: Part): number {
  const [x0, y0] = [ring.lon[0]!, ring.lat[0]!];
  let sum = 0;
  for (let i = 0, j = ring.lon.length - 1; i < ring.lon.length; j = i++) {
    sum += (ring.lon[j]! - x0) * (ring.lat[i]! - y0) - (ring.lon[i]! - x0) * (ring.lat[j]! - y0);
  }
  return sum;
}

function contains(shell: Part, hole: Part): boolean {
  const [x, y] = [hole.lon[0]!, hole.lat[0]!];
  let inside = false;
  for (let i = 0, j = shell.lon.length - 1; i < shell.lon.length; j = i++) {
    const [y1, y2] = [shell.lat[j]!, shell.lat[i]!];
    if (y1 > y === y2 > y) continue;
    const cross = shell.lon[j]! + ((y - y1) / (y2 - y1)) * (shell.lon[i]! - shell.lon[j]!);
    if (cross > x) inside = !inside;
  }
  return inside;
}

/** Degrees, closed. */
function positions(ring: Part): Position[] {
  const out: Position[] = [];
  for (let i = 0; i <= ring.lon.length; i++) {
    const k = i % ring.lon.length;
    out.push([ring.lon[k]! / UNITS_PER_DEGREE + 0, ring.lat[k]! / UNITS_PER_DEGREE + 0]);
  }
  return out;
}
