import type { Feature, FeatureCollection, LineString, MultiLineString, Point, Position } from 'geojson';
import { boundingBox } from '../isotach/bounding-box.js';
import { formatTime } from '../track/read/time.js';
import type { Fix, Track } from '../track/track.js';
import { type TrackColumn, trackColumns } from './track-columns.js';

/** Decimals of a coordinate: 0.1 m; RFC 7946 advises against more [RFC7946]. */
const DECIMALS = 6;

const rounded = (degrees: number): number => Number(degrees.toFixed(DECIMALS)) + 0;

/** Degrees east of the first fix's meridian circle, without the jump at ±180°. */
function unwrapped(fixes: readonly Fix[]): number[] {
  const longitudes: number[] = [];
  let last = fixes[0]?.lonDeg ?? 0;
  for (const { lonDeg } of fixes) {
    const step = ((((lonDeg - last) % 360) + 540) % 360) - 180;
    last += step;
    longitudes.push(last);
  }
  return longitudes;
}

/** The line through the fixes, cut where it crosses ±180°; null for a storm of one fix. */
function lineOf(track: Track): LineString | MultiLineString | null {
  const { fixes } = track;
  if (fixes.length < 2) return null;
  const longitudes = unwrapped(fixes);
  const sheetOf = (lonDeg: number): number => Math.floor((lonDeg + 180) / 360);
  const place = (lonDeg: number, latDeg: number, sheet: number): Position => [
    Math.min(180, Math.max(-180, rounded(lonDeg - sheet * 360))),
    rounded(latDeg),
  ];
  let sheet = sheetOf(longitudes[0]!);
  let part: Position[] = [place(longitudes[0]!, fixes[0]!.latDeg, sheet)];
  const parts: Position[][] = [part];
  for (let i = 1; i < fixes.length; i++) {
    const [fromLon, toLon] = [longitudes[i - 1]!, longitudes[i]!];
    const [fromLat, toLat] = [fixes[i - 1]!.latDeg, fixes[i]!.latDeg];
    const next = sheetOf(toLon);
    if (next !== sheet) {
      const cutLon = Math.max(sheet, next) * 360 - 180;
      const share = (cutLon - fromLon) / (toLon - fromLon);
      const cutLat = fromLat + share * (toLat - fromLat);
      part.push(place(cutLon, cutLat, sheet));
      part = [place(cutLon, cutLat, next)];
      parts.push(part);
      sheet = next;
    }
    part.push(place(toLon, fixes[i]!.latDeg, sheet));
  }
  // a part of one place (a storm that starts on the antimeridian) is no line
  const lines = parts
    .map((line) => line.filter((at, i) => i === 0 || at[0] !== line[i - 1]![0] || at[1] !== line[i - 1]![1]))
    .filter((line) => line.length > 1);
  if (lines.length === 0) return null;
  return lines.length === 1
    ? { type: 'LineString', coordinates: lines[0]! }
    : { type: 'MultiLineString', coordinates: lines };
}

function pointOf(fix: Fix, track: Track, columns: readonly TrackColumn[]): Feature<Point> {
  const coordinates = [rounded(fix.lonDeg), rounded(fix.latDeg)];
  const properties: Record<string, string | number> = {};
  for (const column of columns) {
    const value = column.value(fix, track);
    if (value === null) continue;
    // a centre with more digits than the coordinate keeps them beside it
    if (column.key === 'lon_deg' && value === coordinates[0]) continue;
    if (column.key === 'lat_deg' && value === coordinates[1]) continue;
    properties[column.key] = value;
  }
  return { type: 'Feature', properties, geometry: { type: 'Point', coordinates } };
}

/**
 * Tracks as GeoJSON [RFC7946]: for each storm its line, cut at ±180°, then one point for each fix, with the keys of the
 * documented table as properties. A value that is not known has no property. The points read back to the same values to
 * the last bit; the line is for maps.
 */
export function tracksToFeatures(tracks: readonly Track[]): FeatureCollection<Point | LineString | MultiLineString> {
  const columns = trackColumns(tracks);
  const features = tracks.flatMap((track) => {
    const line = lineOf(track);
    const { id, name, kind, fixes } = track;
    const properties = {
      storm: id,
      ...(name === null ? {} : { name }),
      kind,
      first: formatTime(fixes[0]!.timeMs),
      last: formatTime(fixes.at(-1)!.timeMs),
    };
    const lines: Feature<LineString | MultiLineString>[] = line
      ? [{ type: 'Feature', properties, geometry: line }]
      : [];
    return [...lines, ...fixes.map((fix) => pointOf(fix, track, columns))];
  });
  const box = boundingBox(features.flatMap(({ geometry }) => linesOf(geometry).map((line) => [line])));
  return { type: 'FeatureCollection', ...(box ? { bbox: box } : {}), features };
}

/** The pieces of a geometry; a point is a piece of one position. */
function linesOf(geometry: Point | LineString | MultiLineString): readonly (readonly number[])[][] {
  if (geometry.type === 'Point') return [[geometry.coordinates]];
  return geometry.type === 'LineString' ? [geometry.coordinates] : geometry.coordinates;
}

/** {@link tracksToFeatures} as text, one feature a line. */
export function tracksToGeojson(tracks: readonly Track[]): string {
  const { bbox, features } = tracksToFeatures(tracks);
  const box = bbox ? `"bbox":${JSON.stringify(bbox)},` : '';
  return `{"type":"FeatureCollection",${box}"features":[\n${features.map((feature) => JSON.stringify(feature)).join(',\n')}\n]}\n`;
}
