/**
 * A checker of GeoJSON by RFC 7946, and of what makes a polygon valid as a simple feature, written from the standard
 * alone and sharing nothing with the code that it judges.
 */

import { type Edge, meet, orientation } from './edges-meet.js';

type Ring = number[][];
/** Whole units in a degree: seven decimals. */
const SCALE = 1e7;
const GEOMETRIES = ['Point', 'MultiPoint', 'LineString', 'MultiLineString', 'Polygon', 'MultiPolygon'];

/**
 * @param options.bbox `required` (default): the outermost object must have one if it holds any place
 * @returns what is wrong, each with its path in the document; empty when nothing is
 */
export function checkRfc7946(geojson: unknown, options: { bbox?: 'required' | 'optional' } = {}): string[] {
  const problems: string[] = [];
  const parts = checkObject(geojson, '$', problems);
  if (options.bbox !== 'optional' && parts.length > 0 && (geojson as { bbox?: unknown }).bbox === undefined) {
    problems.push('$: no bbox');
  }
  return problems;
}

/** Checks an object and returns the longitudes and latitudes of its parts (a polygon, a line, a point). */
function checkObject(value: unknown, path: string, problems: string[]): number[][][] {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) {
    problems.push(`${path}: not an object`);
    return [];
  }
  const object = value as Record<string, unknown>;
  if ('crs' in object) problems.push(`${path}: has a crs`);
  const parts: number[][][] = [];
  if (object['type'] === 'FeatureCollection') {
    if (!Array.isArray(object['features'])) problems.push(`${path}: features is no array`);
    else
      object['features'].forEach((one, i) => {
        if ((one as { type?: unknown } | null)?.type !== 'Feature')
          problems.push(`${path}.features[${i}]: not a Feature`);
        parts.push(...checkObject(one, `${path}.features[${i}]`, problems));
      });
  } else if (object['type'] === 'Feature') {
    if (typeof object['properties'] !== 'object' || Array.isArray(object['properties']))
      problems.push(`${path}: properties is neither an object nor null`);
    if (object['geometry'] === undefined) problems.push(`${path}: no geometry`);
    else if (object['geometry'] !== null) parts.push(...checkObject(object['geometry'], `${path}.geometry`, problems));
  } else if (object['type'] === 'GeometryCollection') {
    if (!Array.isArray(object['geometries'])) problems.push(`${path}: geometries is no array`);
    else
      object['geometries'].forEach((one, i) => {
        parts.push(...checkObject(one, `${path}.geometries[${i}]`, problems));
      });
  } else if (GEOMETRIES.includes(object['type'] as string)) {
    parts.push(...checkGeometry(object['type'] as string, object['coordinates'], path, problems));
  } else problems.push(`${path}: unknown type ${String(object['type'])}`);
  if (object['bbox'] !== undefined) checkBbox(object['bbox'], parts, path, problems);
  return parts;
}

function checkGeometry(type: string, coordinates: unknown, path: string, problems: string[]): number[][][] {
  const arrays = (value: unknown, at: string): unknown[] => {
    if (Array.isArray(value)) return value;
    problems.push(`${at}: coordinates are no array`);
    return [];
  };
  const at = `${path}.coordinates`;
  const places = (value: unknown, where: string): Ring => {
    const list = arrays(value, where);
    return list.every((one, i) => checkPosition(one, `${where}[${i}]`, problems)) ? (list as Ring) : [];
  };
  switch (type) {
    case 'Point':
      return checkPosition(coordinates, at, problems) ? [[coordinates as number[]]] : [];
    case 'MultiPoint':
      return places(coordinates, at).map((one) => [one]);
    case 'LineString':
    case 'MultiLineString': {
      const lines = type === 'LineString' ? [coordinates] : arrays(coordinates, at);
      return lines.map((line, i) => {
        const where = type === 'LineString' ? at : `${at}[${i}]`;
        const list = places(line, where);
        if (list.length < 2) problems.push(`${where}: a line of fewer than 2 positions`);
        checkSteps(list, where, problems);
        return list;
      });
    }
    default: {
      const polygons = type === 'Polygon' ? [coordinates] : arrays(coordinates, at);
      const read = polygons.map((polygon, i) => {
        const where = type === 'Polygon' ? at : `${at}[${i}]`;
        return arrays(polygon, where).map((ring, k) => places(ring, `${where}[${k}]`));
      });
      checkPolygons(read, at, problems);
      return read.map((polygon) => polygon[0] ?? []).filter((ring) => ring.length > 0);
    }
  }
}

function checkPosition(value: unknown, path: string, problems: string[]): boolean {
  if (!Array.isArray(value) || value.length < 2 || value.length > 3) {
    problems.push(`${path}: a position has 2 or 3 numbers`);
    return false;
  }
  if (!value.every((one) => typeof one === 'number' && Number.isFinite(one))) {
    problems.push(`${path}: not finite numbers`);
    return false;
  }
  const [lon, lat] = value as [number, number];
  if (Math.abs(lon) > 180) problems.push(`${path}: longitude ${lon} beyond 180`);
  if (Math.abs(lat) > 90) problems.push(`${path}: latitude ${lat} beyond 90`);
  if (Number(lon.toFixed(7)) !== lon || Number(lat.toFixed(7)) !== lat) problems.push(`${path}: more than 7 decimals`);
  return true;
}

function checkSteps(list: Ring, path: string, problems: string[]): void {
  for (let i = 1; i < list.length; i++) {
    if (Math.abs(list[i]![0]! - list[i - 1]![0]!) > 180) {
      problems.push(`${path}[${i}]: an edge of more than 180 degrees: not cut at the antimeridian`);
    }
  }
}

/** Rings and polygons of one geometry. */
function checkPolygons(polygons: Ring[][], path: string, problems: string[]): void {
  const rings: { ring: Ring; polygon: number; name: string }[] = [];
  polygons.forEach((polygon, p) => {
    if (polygon.length === 0) problems.push(`${path}[${p}]: a polygon without rings`);
    polygon.forEach((ring, r) => {
      const name = polygons.length === 1 ? `${path} ring ${r}` : `${path}[${p}] ring ${r}`;
      if (ring.length < 4) problems.push(`${name}: fewer than 4 positions`);
      else {
        const first = ring[0]!;
        const last = ring.at(-1)!;
        if (first[0] !== last[0] || first[1] !== last[1]) problems.push(`${name}: not closed`);
        const area = shoelace(ring);
        if (area === 0) problems.push(`${name}: no area`);
        else if (area > 0 !== (r === 0))
          problems.push(`${name}: wrong winding, ${r === 0 ? 'a shell runs anticlockwise' : 'a hole runs clockwise'}`);
        checkSteps(ring, name, problems);
      }
      rings.push({ ring, polygon: p, name });
    });
  });
  const touching = checkEdges(rings, problems);
  checkNesting(polygons, rings, touching, problems);
}

function shoelace(ring: Ring): number {
  const [x0, y0] = ring[0] as [number, number];
  let sum = 0;
  for (let i = 1; i < ring.length; i++) {
    sum += (ring[i - 1]![0]! - x0) * (ring[i]![1]! - y0) - (ring[i]![0]! - x0) * (ring[i - 1]![1]! - y0);
  }
  return sum / 2;
}

/**
 * Edges that cross, lie on one another, or (within a ring) touch. Found through a grid of about as many boxes as edges.
 * @returns rings that touch another ring in single points, which is allowed
 */
function checkEdges(rings: { ring: Ring; polygon: number; name: string }[], problems: string[]): Set<number> {
  const edges: Edge[] = [];
  const touching = new Set<number>();
  rings.forEach(({ ring, name }, r) => {
    for (let i = 1; i < ring.length; i++) {
      const [ax, ay, bx, by] = [ring[i - 1]![0]!, ring[i - 1]![1]!, ring[i]![0]!, ring[i]![1]!].map((deg) =>
        Math.round(deg * SCALE),
      ) as [number, number, number, number];
      if (ax === bx && ay === by) problems.push(`${name}: position ${i} repeats the one before`);
      else edges.push({ ax, ay, bx, by, ring: r, index: i - 1 });
    }
  });
  if (edges.length === 0) return touching;
  const west = edges.reduce((least, e) => Math.min(least, e.ax), Number.POSITIVE_INFINITY);
  const east = edges.reduce((most, e) => Math.max(most, e.ax), Number.NEGATIVE_INFINITY);
  const south = edges.reduce((least, e) => Math.min(least, e.ay), Number.POSITIVE_INFINITY);
  const north = edges.reduce((most, e) => Math.max(most, e.ay), Number.NEGATIVE_INFINITY);
  const side = Math.max(1, Math.ceil(Math.sqrt(edges.length)));
  const column = (x: number) => Math.min(side - 1, Math.floor(((x - west) / (east - west || 1)) * side));
  const row = (y: number) => Math.min(side - 1, Math.floor(((y - south) / (north - south || 1)) * side));
  const boxes = new Map<number, Edge[]>();
  const said = new Set<string>();
  const report = (problem: string) => {
    if (!said.has(problem) && said.size < 20) problems.push(problem);
    said.add(problem);
  };
  for (const edge of edges) {
    for (let r = row(Math.min(edge.ay, edge.by)); r <= row(Math.max(edge.ay, edge.by)); r++) {
      for (let c = column(Math.min(edge.ax, edge.bx)); c <= column(Math.max(edge.ax, edge.bx)); c++) {
        const key = r * side + c;
        const box = boxes.get(key);
        if (!box) {
          boxes.set(key, [edge]);
          continue;
        }
        for (const other of box) {
          const meeting = meet(edge, other);
          if (meeting === 'apart') continue;
          const [a, b] = [rings[edge.ring]!, rings[other.ring]!];
          const where = `near ${edge.ax / SCALE},${edge.ay / SCALE}`;
          if (edge.ring === other.ring) {
            if (meeting === 'touch' && follows(edge, other, a.ring.length - 1)) continue;
            report(`${a.name}: its edges ${meeting === 'touch' ? 'touch' : meeting} ${where}`);
          } else if (meeting === 'touch') {
            touching.add(edge.ring).add(other.ring);
          } else report(`${a.name} and ${b.name}: edges ${meeting} ${where}`);
        }
        box.push(edge);
      }
    }
  }
  return touching;
}

/** Whether two edges of one ring are neighbours that share just their common position. */
function follows(a: Edge, b: Edge, count: number): boolean {
  const gap = Math.abs(a.index - b.index);
  if (gap !== 1 && gap !== count - 1) return false;
  const shared = (a.bx === b.ax && a.by === b.ay ? 1 : 0) + (b.bx === a.ax && b.by === a.ay ? 1 : 0);
  return shared === 1;
}

/** 1 inside, 0 on the ring, −1 outside. */
function sideOf(ring: Ring, position: number[]): number {
  const [x, y] = position.map((deg) => Math.round(deg * SCALE)) as [number, number];
  let inside = false;
  for (let i = 1; i < ring.length; i++) {
    const [ax, ay, bx, by] = [ring[i - 1]![0]!, ring[i - 1]![1]!, ring[i]![0]!, ring[i]![1]!].map((deg) =>
      Math.round(deg * SCALE),
    ) as [number, number, number, number];
    if ((ay > y && by > y) || (ay < y && by < y) || (ax < x && bx < x)) continue;
    const side = orientation(ax, ay, bx, by, x, y);
    if (side === 0 && x >= Math.min(ax, bx) && x <= Math.max(ax, bx)) return 0;
    if (ay > y !== by > y && side > 0 === by > ay) inside = !inside;
  }
  return inside ? 1 : -1;
}

/** Where one ring lies against another that it does not cross; a single vertex tells unless they touch. */
function ringSide(outer: Ring, inner: Ring, touch: boolean): { in: boolean; out: boolean } {
  const found = { in: false, out: false };
  for (const position of inner) {
    const side = sideOf(outer, position);
    if (side > 0) found.in = true;
    if (side < 0) found.out = true;
    if (!touch && side !== 0) break;
  }
  return found;
}

function boxOf(ring: Ring): [number, number, number, number] {
  const box: [number, number, number, number] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const [x, y] of ring as [number, number][]) {
    box[0] = Math.min(box[0], x);
    box[1] = Math.min(box[1], y);
    box[2] = Math.max(box[2], x);
    box[3] = Math.max(box[3], y);
  }
  return box;
}

/** Holes lie inside their shell and beside each other; polygons lie beside each other or in each other's holes. */
function checkNesting(
  polygons: Ring[][],
  rings: { ring: Ring; name: string }[],
  touching: Set<number>,
  problems: string[],
): void {
  const boxes = rings.map(({ ring }) => boxOf(ring));
  const apart = (a: number, b: number): boolean => {
    const [p, q] = [boxes[a]!, boxes[b]!];
    return p[2] < q[0] || q[2] < p[0] || p[3] < q[1] || q[3] < p[1];
  };
  let next = 0;
  const shells = polygons.map((polygon) => {
    const shell = next;
    next += polygon.length;
    const holes = polygon.slice(1).map((_, i) => shell + 1 + i);
    return { shell, holes };
  });
  const lies = (inner: number, outer: number): { in: boolean; out: boolean } =>
    apart(inner, outer)
      ? { in: false, out: true }
      : ringSide(rings[outer]!.ring, rings[inner]!.ring, touching.has(inner) && touching.has(outer));
  for (const { shell, holes } of shells) {
    for (const hole of holes) {
      const side = lies(hole, shell);
      if (side.out || !side.in) problems.push(`${rings[hole]!.name}: a hole outside its shell`);
      for (const other of holes) {
        if (other !== hole && lies(hole, other).in) problems.push(`${rings[hole]!.name}: a hole inside another`);
      }
    }
  }
  for (const a of shells) {
    for (const b of shells) {
      if (a === b || polygons[shells.indexOf(a)]!.length === 0 || polygons[shells.indexOf(b)]!.length === 0) continue;
      if (!lies(a.shell, b.shell).in) continue;
      if (!b.holes.some((hole) => lies(a.shell, hole).in))
        problems.push(`${rings[a.shell]!.name}: inside ${rings[b.shell]!.name}`);
    }
  }
}

/** A bbox must be the smallest one; across the antimeridian it runs from the eastern part to the western one (section 5.2). */
function checkBbox(bbox: unknown, parts: number[][][], path: string, problems: string[]): void {
  const bad = (what: string) => problems.push(`${path}.bbox: ${what}`);
  if (
    !Array.isArray(bbox) ||
    bbox.length !== 4 ||
    !bbox.every((one) => typeof one === 'number' && Number.isFinite(one))
  ) {
    bad('not four finite numbers');
    return;
  }
  const [west, south, east, north] = bbox as [number, number, number, number];
  if (Math.abs(west) > 180 || Math.abs(east) > 180 || Math.abs(south) > 90 || Math.abs(north) > 90) bad('out of range');
  if (parts.length === 0) {
    bad('a box of nothing');
    return;
  }
  const boxes = parts.map(boxOf);
  const differs = (a: number, b: number) => Math.abs(a - b) > 1e-9;
  if (differs(south, Math.min(...boxes.map((box) => box[1])))) bad(`wrong south ${south}`);
  if (differs(north, Math.max(...boxes.map((box) => box[3])))) bad(`wrong north ${north}`);
  if (west <= east) {
    if (differs(west, Math.min(...boxes.map((box) => box[0])))) bad(`wrong west ${west}`);
    if (differs(east, Math.max(...boxes.map((box) => box[2])))) bad(`wrong east ${east}`);
    if (west === -180 && east === 180 && hasGap(boxes))
      bad('spans the globe, the parts lie on both sides of the antimeridian');
    return;
  }
  const eastern = boxes.filter((box) => box[0] >= west - 1e-9);
  const western = boxes.filter((box) => box[0] < west - 1e-9);
  if (eastern.length === 0 || western.length === 0) {
    bad('runs across the antimeridian, the parts do not');
    return;
  }
  if (differs(west, Math.min(...eastern.map((box) => box[0])))) bad(`wrong west ${west}`);
  if (differs(east, Math.max(...western.map((box) => box[2])))) bad(`wrong east ${east}`);
}

/** Whether some longitude is free of all parts. */
function hasGap(boxes: [number, number, number, number][]): boolean {
  let reach = -180;
  for (const box of boxes.toSorted((a, b) => a[0] - b[0])) {
    if (box[0] > reach) return true;
    reach = Math.max(reach, box[2]);
  }
  return reach < 180;
}
