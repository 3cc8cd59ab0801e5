import { InputError, LimitError } from '../../errors.js';
import type { ReadOptions, Track } from '../track.js';
import { collectCautions } from './cautions.js';
import { refusal, type Spot, shown, spotIn } from './checks.js';
import type { TrackParser } from './parser.js';
import { planRows } from './row.js';
import { gatherStorms } from './storm-rows.js';

/** GeoJSON can only be read as a whole: longest text, in characters. */
const LONGEST_TEXT = 1 << 26;
/** Largest difference, degrees, of a property `lon_deg` or `lat_deg` from the rounded coordinate that it makes exact. */
const ROUNDING_DEG = 1e-5;

type Properties = Readonly<Record<string, unknown>>;
interface Row {
  readonly feature: number;
  readonly values: Properties;
}

/**
 * Reads tracks from GeoJSON [RFC7946]: points, each with the properties of its fix, or lines (LineString, MultiLineString)
 * whose properties are arrays with one value a vertex; a single value then holds for all. Properties have the keys of the
 * documented table. `storm` tells storms apart. Features without `time` are passed over when others have it.
 * @throws InputError, UsageError `track.*`; LimitError `track.too-large`
 */
export function geojsonParser(options: ReadOptions, emit: (track: Track) => void): TrackParser {
  const lines: string[] = [];
  let length = 0;
  return {
    line(text) {
      lines.push(text);
      length += text.length + 1;
      if (length > LONGEST_TEXT) {
        throw new LimitError(
          'track.too-large',
          `${options.source}: is longer than ${LONGEST_TEXT} characters, and GeoJSON is held as a whole; convert it to CSV, which is read as a stream`,
          {
            fields: { source: options.source, limit: LONGEST_TEXT },
          },
        );
      }
    },
    end() {
      readText(lines.join('\n'), options, emit);
    },
  };
}

function readText(text: string, options: ReadOptions, emit: (track: Track) => void): void {
  const spot = spotIn(options.source, collectCautions('feature'), 'feature');
  const rows = rowsOf(parse(text, options.source), spot, timeKey(options));
  if (rows.length === 0) return;
  const headings = [...new Set(rows.flatMap(({ values }) => Object.keys(values)))];
  const plan = planRows(headings, options, spot);
  const storms = gatherStorms(plan, spot, { ...options, format: 'geojson', emit });
  const stormKey = headings[plan.columns.storm !== -1 ? plan.columns.storm : plan.columns.name];

  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const key = stormKey === undefined ? '' : cellOf(row.values[stormKey], row.feature, spot);
    const group = groups.get(key);
    if (group) group.push(row);
    else groups.set(key, [row]);
  }
  for (const group of groups.values()) {
    for (const { feature, values } of group) {
      spot.line = feature;
      storms.add(headings.map((heading) => cellOf(values[heading], feature, spot, heading)));
    }
  }
  storms.end();
}

function parse(text: string, source: string): unknown {
  try {
    return JSON.parse(text);
  } catch (cause) {
    const where = /position (\d+)/.exec(String(cause));
    const line = where ? text.slice(0, Number(where[1])).split('\n').length : text.split('\n').length;
    throw new InputError(
      'track.json',
      `${source}:${line}: is no valid JSON (cut off, or edited by hand?); write it anew`,
      {
        fields: { source, line },
        cause,
      },
    );
  }
}

const isObject = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** The property that holds the time: the user's own or `time`. */
const timeKey = (options: ReadOptions): string => (options.columns?.['time'] ?? 'time').trim().toLowerCase();

function rowsOf(root: unknown, spot: Spot, time: string): Row[] {
  const type = isObject(root) ? root['type'] : undefined;
  const features = !isObject(root)
    ? undefined
    : type === 'Feature'
      ? [root]
      : type === 'FeatureCollection'
        ? root['features']
        : undefined;
  if (!isObject(root) || !Array.isArray(features)) {
    const found = typeof type === 'string' ? `a ${shown(type)}` : 'something else';
    throw new InputError(
      'track.geojson',
      `${spot.source}: is ${found}, not a FeatureCollection or Feature with a track's points; give points or lines with properties`,
      {
        fields: { source: spot.source },
      },
    );
  }
  refuseOtherCrs(root, spot);
  const rows: Row[] = [];
  let others = 0;
  features.forEach((feature: unknown, index) => {
    spot.line = index + 1;
    if (!isObject(feature) || feature['type'] !== 'Feature') {
      throw refusal(spot, 'track.geojson', 'is no Feature; every member of features must be one');
    }
    const properties = isObject(feature['properties']) ? feature['properties'] : {};
    if (!Object.keys(properties).some((key) => key.trim().toLowerCase() === time)) {
      others++;
      return;
    }
    rows.push(...rowsOfFeature(feature['geometry'], properties, spot));
  });
  if (rows.length === 0 && others > 0) {
    spot.line = 1;
    throw refusal(
      spot,
      'track.heading',
      `no feature has the property '${time}'; give each point its time, or map your own with columns: time=PROPERTY`,
    );
  }
  return rows;
}

/** RFC 7946 knows WGS 84 alone; an older file may say otherwise. */
function refuseOtherCrs(root: Readonly<Record<string, unknown>>, spot: Spot): void {
  const crs = root['crs'];
  const name = isObject(crs) && isObject(crs['properties']) ? crs['properties']['name'] : undefined;
  if (typeof name !== 'string' || /CRS:?84|4326/i.test(name)) return;
  throw new InputError(
    'track.geojson',
    `${spot.source}: has the coordinate reference system '${shown(name)}'; convert it to longitude and latitude (WGS 84)`,
    {
      fields: { source: spot.source, value: shown(name) },
    },
  );
}

function rowsOfFeature(geometry: unknown, properties: Properties, spot: Spot): Row[] {
  const feature = spot.line;
  const type = isObject(geometry) ? geometry['type'] : null;
  const coordinates = isObject(geometry) ? geometry['coordinates'] : null;
  if (type === 'Point') return [{ feature, values: withCentre(properties, coordinates, spot) }];
  if ((type !== 'LineString' && type !== 'MultiLineString') || !Array.isArray(coordinates)) {
    const found = typeof type === 'string' ? `a ${shown(type)}` : 'no geometry';
    throw refusal(
      spot,
      'track.geojson',
      `has ${found}; a track is made of Point features, or of a LineString with one value a vertex`,
    );
  }
  const vertices: unknown[] = type === 'LineString' ? coordinates : coordinates.flat(1);
  return vertices.map((vertex, i) => {
    const values: Record<string, unknown> = {};
    for (const [key, value] of Object.entries(properties)) {
      if (Array.isArray(value) && value.length !== vertices.length) {
        const problem = `the property '${shown(key)}' has ${value.length} values for ${vertices.length} vertices; give one a vertex`;
        throw refusal(spot, 'track.vertices', problem, value.length);
      }
      values[key] = Array.isArray(value) ? value[i] : value;
    }
    return { feature, values: withCentre(values, vertex, spot) };
  });
}

/** The properties with `lat_deg` and `lon_deg`: the coordinates, or the property whose rounding the coordinate is. */
function withCentre(properties: Properties, coordinates: unknown, spot: Spot): Properties {
  const [lonDeg, latDeg] = Array.isArray(coordinates) ? (coordinates as unknown[]) : [];
  if (typeof lonDeg !== 'number' || typeof latDeg !== 'number') {
    throw refusal(spot, 'track.geojson', 'a position is not [longitude, latitude] in numbers; write both');
  }
  const exact = (key: string, rounded: number): number => {
    const value = properties[key];
    return typeof value === 'number' && Math.abs(value - rounded) <= ROUNDING_DEG ? value : rounded;
  };
  const kept = Object.entries(properties).filter(([key]) => !/^(lat|lon)_deg$/i.test(key));
  return { ...Object.fromEntries(kept), lat_deg: exact('lat_deg', latDeg), lon_deg: exact('lon_deg', lonDeg) };
}

/** A property as the cell of a table. */
function cellOf(value: unknown, feature: number, spot: Spot, key = 'storm'): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'string') return value;
  if (typeof value === 'number' || typeof value === 'boolean') return String(value);
  spot.line = feature;
  throw refusal(
    spot,
    'track.geojson',
    `the property '${shown(key)}' is neither a number nor text; give a single value, or an array of one value a vertex of a line`,
  );
}
