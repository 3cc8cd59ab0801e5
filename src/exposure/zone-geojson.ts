import { InputError } from '../errors.js';
import { didYouMean } from '../nearest.js';
import { cleanText, shown, shownList } from '../track/read/checks.js';
import { type Feature, featuresOf } from './geojson-features.js';
import { placeProblem, type SkippedRow } from './point-table.js';
import { type Ring, unwrapped, type Zone, zoneAreaM2 } from './zones.js';

export interface ZoneFile {
  readonly zones: readonly Zone[];
  /** features that were not taken; the number of the feature stands for the line */
  readonly skipped: readonly SkippedRow[];
  readonly cautions: readonly string[];
}

const NAMES = ['name', 'NAME', 'Name', 'zone', 'label', 'id'];
/** Pairs of edges that are compared at most when looking for crossings. */
const MOST_PAIRS = 20_000_000;

/**
 * Zones of a GeoJSON file. Values are the named properties, or every property that is a number. What cannot be a zone is
 * skipped, what is odd is told in a caution; `strict` refuses both.
 * @throws InputError `geojson.*`, `zones.empty`, `zones.values`, `zones.feature` (strict)
 */
export function zonesOfGeojson(
  text: string,
  options: { source: string; values?: readonly string[]; strict?: boolean },
): ZoneFile {
  const { source } = options;
  const zones: Zone[] = [];
  const skipped: SkippedRow[] = [];
  const cautions: string[] = [];
  const refuse = (where: string, reason: string, instead: string): void => {
    if (options.strict)
      throw new InputError(
        'zones.feature',
        `${source}: ${where}: ${reason}; mend it, or leave out --strict to ${instead}`,
      );
  };
  const features = featuresOf(text, source);
  for (const [i, feature] of features.entries()) {
    const line = i + 1;
    const found = zoneOf(feature, line, options.values);
    if ('reason' in found) {
      refuse(`feature ${line}`, found.reason, 'skip it');
      skipped.push({ line, reason: found.reason });
      continue;
    }
    for (const odd of found.odd) {
      refuse(`zone '${shown(found.zone.name)}' (feature ${line})`, odd, 'go on with a caution');
      cautions.push(`${source}: zone '${shown(found.zone.name)}' (feature ${line}): ${odd}`);
    }
    zones.push(found.zone);
  }
  if (zones.length === 0) {
    throw new InputError(
      'zones.empty',
      `${source}: holds no zone${skipped[0] ? ` (feature ${skipped[0].line}: ${skipped[0].reason})` : ''}; give Polygon or MultiPolygon features`,
    );
  }
  for (const name of options.values ?? []) {
    if (!zones.some((zone) => name in zone.values))
      throw new InputError(
        'zones.values',
        `${source}: no zone has a number '${shown(name)}'${didYouMean(name, propertyNames(features))}; its properties are ${shownList(propertyNames(features))}`,
      );
  }
  const seen = new Set<string>();
  const twice = [...new Set(zones.map((zone) => zone.name).filter((name) => seen.size === seen.add(name).size))];
  if (twice.length > 0) {
    refuse(`zone '${shown(twice[0]!)}'`, 'the name stands more than once', 'keep each as a zone of its own');
    cautions.push(`${source}: names of zones that stand more than once, each kept: ${shownList(twice)}`);
  }
  return { zones, skipped, cautions };
}

const propertyNames = (features: readonly Feature[]): string[] => [
  ...new Set(features.flatMap((feature) => Object.keys(feature?.properties ?? {}))),
];

function zoneOf(
  feature: Feature,
  number: number,
  wanted: readonly string[] | undefined,
): { zone: Zone; odd: string[] } | { reason: string } {
  const geometry = feature?.geometry;
  if (geometry?.type !== 'Polygon' && geometry?.type !== 'MultiPolygon')
    return { reason: `the geometry is ${shown(String(geometry?.type ?? 'missing'))}, not a Polygon or MultiPolygon` };
  const raw = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates;
  if (!Array.isArray(raw) || raw.length === 0) return { reason: 'it has no coordinates' };
  const odd: string[] = [];
  const polygons: Ring[][] = [];
  for (const polygon of raw as unknown[]) {
    if (!Array.isArray(polygon) || polygon.length === 0) return { reason: 'a polygon has no ring' };
    const rings: Ring[] = [];
    for (const ring of polygon as unknown[]) {
      const read = ringOf(ring);
      if (typeof read === 'string') return { reason: read };
      if (read.closed) odd.push('a ring is not closed; its last position is joined to the first');
      rings.push(read.ring);
    }
    polygons.push(rings);
  }
  const properties = feature.properties ?? {};
  const name = NAMES.map((key) => properties[key]).find((one) => one !== undefined && one !== null && one !== '');
  const values: Record<string, number> = {};
  for (const [key, value] of Object.entries(properties)) {
    if (NAMES.includes(key) || (wanted && !wanted.includes(key))) continue;
    if (typeof value === 'number' && value >= 0) values[key] = value;
    else if (typeof value === 'number') odd.push(`${shown(key)} ${value} is negative and is not taken as a value`);
    else if (wanted) odd.push(`${shown(key)} '${shown(String(value))}' is not a number and is not taken as a value`);
  }
  for (const key of wanted ?? []) if (!(key in properties)) odd.push(`has no ${shown(key)}`);
  const zone: Zone = { name: cleanText(String(name ?? feature.id ?? `zone ${number}`)), polygons, values };
  if (!(zoneAreaM2(zone) > 0)) return { reason: 'it has no area' };
  const crossing = crossingOf(polygons);
  if (crossing === 'many') odd.push('has too many corners to be searched for borders that cross each other');
  else if (crossing)
    odd.push(
      `its border crosses itself near ${crossing[0].toFixed(4)}, ${crossing[1].toFixed(4)}; where it overlaps itself counts as outside`,
    );
  return { zone, odd };
}

/** A closed ring, or why it is none. */
function ringOf(ring: unknown): { ring: Ring; closed: boolean } | string {
  if (!Array.isArray(ring)) return 'a ring is no list of positions';
  const positions: [number, number][] = [];
  for (const position of ring as unknown[]) {
    const [lon, lat] = (Array.isArray(position) ? position : []) as unknown[];
    if (typeof lon !== 'number' || typeof lat !== 'number') return 'a position is no pair of numbers';
    const problem = placeProblem(lat, lon);
    if (problem) return problem;
    positions.push([lon, lat]);
  }
  const [first, last] = [positions[0], positions[positions.length - 1]];
  if (!first || !last) return 'a ring is empty';
  const open = first[0] !== last[0] || first[1] !== last[1];
  if (open) positions.push(first);
  if (positions.length < 4) return `a ring has ${positions.length - 1} corners; it needs three`;
  const whole = unwrapped(positions, first[0]);
  if (Math.abs(whole[whole.length - 1]![0] - whole[0]![0]) > 180)
    return 'a ring goes around a pole; lead it along ±180° and the pole (latitude ±90), as RFC 7946 has it';
  return { ring: positions, closed: open };
}

/** A point at which two edges of a zone's rings cross, null without one. Rings may touch. */
function crossingOf(polygons: readonly (readonly Ring[])[]): readonly [number, number] | 'many' | null {
  type Segment = readonly [x0: number, y0: number, x1: number, y1: number];
  const near = polygons[0]![0]![0]![0];
  const segments: Segment[] = polygons.flatMap((rings) =>
    rings.flatMap((ring) => {
      const points = unwrapped(ring, near);
      return points.slice(1).map(([x1, y1], i): Segment => [points[i]![0], points[i]![1], x1, y1]);
    }),
  );
  segments.sort((a, b) => Math.min(a[1], a[3]) - Math.min(b[1], b[3]));
  let pairs = 0;
  for (const [i, a] of segments.entries()) {
    const top = Math.max(a[1], a[3]);
    for (let j = i + 1; j < segments.length; j++) {
      const b = segments[j]!;
      if (Math.min(b[1], b[3]) > top) break;
      if (++pairs > MOST_PAIRS) return 'many';
      const side = (s: Segment, x: number, y: number): number =>
        (s[2] - s[0]) * (y - s[1]) - (s[3] - s[1]) * (x - s[0]);
      const [a0, a1] = [side(b, a[0], a[1]), side(b, a[2], a[3])];
      const [b0, b1] = [side(a, b[0], b[1]), side(a, b[2], b[3])];
      if (!(a0 * a1 < 0 && b0 * b1 < 0)) continue;
      const t = a0 / (a0 - a1);
      return [a[0] + t * (a[2] - a[0]), a[1] + t * (a[3] - a[1])];
    }
  }
  return null;
}
