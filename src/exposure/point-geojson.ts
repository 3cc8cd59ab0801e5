import { InputError } from '../errors.js';
import { cleanText, shown } from '../track/read/checks.js';
import { type PointRow, placeProblem, type SkippedRow } from './point-table.js';

interface Feature {
  readonly type?: unknown;
  readonly id?: unknown;
  readonly geometry?: { readonly type?: unknown; readonly coordinates?: unknown } | null;
  readonly properties?: Readonly<Record<string, unknown>> | null;
}

/**
 * Parses GeoJSON text to its features.
 * @throws InputError `geojson.syntax`, `geojson.collection`
 */
export function featuresOf(text: string, source: string): readonly Feature[] {
  let document: unknown;
  try {
    document = JSON.parse(text);
  } catch (cause) {
    throw new InputError('geojson.syntax', `${source}: is not valid JSON (${(cause as Error).message})`, { cause });
  }
  const { type, features } = (document ?? {}) as { type?: unknown; features?: unknown };
  if (type === 'Feature') return [document as Feature];
  if (type !== 'FeatureCollection' || !Array.isArray(features)) {
    throw new InputError('geojson.collection', `${source}: is no GeoJSON FeatureCollection`);
  }
  return features as Feature[];
}

/** Points of a GeoJSON text; the number of a feature stands for the line. */
export function pointsOfGeojson(
  text: string,
  options: { source: string; values?: readonly string[]; strict?: boolean },
): { points: PointRow[]; skipped: SkippedRow[]; valueNames: readonly string[] } {
  const features = featuresOf(text, options.source);
  const points: PointRow[] = [];
  const skipped: SkippedRow[] = [];
  const first = features.find((feature) => feature.geometry?.type === 'Point')?.properties ?? {};
  const valueNames = options.values ?? Object.keys(first).filter((key) => typeof first[key] === 'number');
  for (const [i, feature] of features.entries()) {
    const reason = ((): string | null => {
      if (feature.geometry?.type !== 'Point')
        return `the geometry is ${shown(String(feature.geometry?.type ?? 'missing'))}, not a Point`;
      const [lonDeg, latDeg] = (feature.geometry.coordinates ?? []) as [number, number];
      const problem = placeProblem(
        typeof latDeg === 'number' ? latDeg : Number.NaN,
        typeof lonDeg === 'number' ? lonDeg : Number.NaN,
      );
      if (problem) return problem;
      const properties = feature.properties ?? {};
      const values = valueNames.map((name) => properties[name]);
      const wrong = values.findIndex((value) => typeof value !== 'number' || !(value >= 0));
      if (wrong !== -1) return `${shown(valueNames[wrong]!)} is not a number of at least 0`;
      const name =
        ['name', 'id', 'place', 'asset'].map((key) => properties[key]).find((value) => value !== undefined) ??
        feature.id ??
        `feature ${i + 1}`;
      points.push({ name: cleanText(String(name)), latDeg, lonDeg, values: values as number[], line: i + 1 });
      return null;
    })();
    if (reason === null) continue;
    if (options.strict)
      throw new InputError(
        'points.row',
        `${options.source}: feature ${i + 1}: ${reason}; mend it, or leave out --strict to skip it`,
        { fields: { feature: i + 1 } },
      );
    skipped.push({ line: i + 1, reason });
  }
  return { points, skipped, valueNames };
}
