import { InputError } from '../errors.js';
import { nearest } from '../nearest.js';
import { cleanText, shown } from '../track/read/checks.js';
import { type Feature, featureReader } from './geojson-features.js';
import { type PointTableOptions, placeProblem, valueProblem } from './point-table.js';

/** Reads GeoJSON points: pieces of text are pushed in, points are handed out; a feature's number stands for the line. */
export interface PointFeatureReader {
  readonly push: (piece: string) => void;
  readonly end: () => void;
  readonly valueNames: () => readonly string[];
  readonly unusedNames: () => readonly string[];
}

const NAMES = ['name', 'id', 'place', 'asset', 'site', 'label'];

/**
 * Points of a GeoJSON file. Values are the named properties, or every property of the first point that is a number.
 * @throws InputError `geojson.*`, `points.row` (strict), `points.values`
 */
export function pointFeatures(options: PointTableOptions): PointFeatureReader {
  let valueNames = options.values;
  let firstNames: readonly string[] | null = null;

  const reasonAgainst = (feature: Feature, number: number): string | null => {
    if (feature === null || typeof feature !== 'object') return 'it is no feature';
    const { geometry } = feature;
    if (geometry?.type !== 'Point') return `the geometry is ${shown(String(geometry?.type ?? 'missing'))}, not a Point`;
    const [lonDeg, latDeg] = (Array.isArray(geometry.coordinates) ? geometry.coordinates : []) as unknown[];
    const place = {
      latDeg: typeof latDeg === 'number' ? latDeg : Number.NaN,
      lonDeg: typeof lonDeg === 'number' ? lonDeg : Number.NaN,
    };
    const problem = placeProblem(place.latDeg, place.lonDeg);
    if (problem) return problem;
    const properties = feature.properties ?? {};
    firstNames ??= Object.keys(properties);
    valueNames ??= firstNames.filter(
      (key) => typeof properties[key] === 'number' && !NAMES.includes(key.toLowerCase()),
    );
    const values: number[] = [];
    for (const name of valueNames) {
      const value = properties[name];
      const wrong = typeof value === 'number' ? valueProblem(value) : 'is not a number of at least 0';
      if (wrong) {
        const near = value === undefined ? nearest(name, Object.keys(properties)) : undefined;
        return `${shown(name)} ${value === undefined ? 'is missing' : wrong}${near ? `; did you mean ${shown(near)}?` : ''}`;
      }
      values.push(value as number);
    }
    const name =
      NAMES.map((key) => properties[key]).find((value) => value !== undefined && value !== null && value !== '') ??
      feature.id ??
      `feature ${number}`;
    options.onPoint({ name: cleanText(String(name)), ...place, values, line: number });
    return null;
  };

  const reader = featureReader(options.source, (feature, number) => {
    const reason = reasonAgainst(feature, number);
    if (reason === null) return;
    if (options.strict)
      throw new InputError(
        'points.row',
        `${options.source}: feature ${number}: ${reason}; mend it, or leave out --strict to skip it`,
        { fields: { feature: number } },
      );
    options.onSkip({ line: number, reason });
  });
  return {
    ...reader,
    valueNames: () => valueNames ?? [],
    unusedNames: () =>
      (firstNames ?? []).filter((name) => !NAMES.includes(name.toLowerCase()) && !(valueNames ?? []).includes(name)),
  };
}
