import { boundingBox } from '../isotach/bounding-box.js';
import { type IsotachContext, type IsotachShape, isotachAttributes } from './isotach-attributes.js';
import { CAUTION, type Provenance } from './provenance.js';

/** Version of the layout of the collection. */
export const ISOTACHS_SCHEMA = 'galewake-isotachs/1';

/**
 * Isotachs as a GeoJSON feature collection [RFC7946]: one MultiPolygon for each level that is reached, by rising
 * threshold, with its attributes and its `bbox`. What the collection says beyond the standard (foreign members): `schema`,
 * `caution`, where it comes from, and `levels_mps`, all levels asked for.
 * @returns the text, one feature a line
 */
export function isotachsGeojson(input: {
  readonly isotachs: readonly IsotachShape[];
  readonly context: IsotachContext;
  readonly provenance?: Provenance;
}): string {
  const { isotachs, context, provenance } = input;
  const reached = isotachs.filter((isotach) => isotach.polygons.length > 0);
  const box = boundingBox(reached.flatMap((isotach) => isotach.polygons));
  const head = {
    type: 'FeatureCollection',
    ...(box ? { bbox: box } : {}),
    schema: ISOTACHS_SCHEMA,
    caution: CAUTION,
    levels_mps: isotachs.map((isotach) => Number(isotach.thresholdMps.toFixed(4))),
    ...(provenance
      ? {
          storm: provenance.storm,
          ...(provenance.stormName === undefined ? {} : { storm_name: provenance.stormName }),
          version: provenance.version,
          recipe: provenance.recipe,
          inputs: provenance.inputs,
          period: {
            from: new Date(provenance.period.startMs).toISOString(),
            to: new Date(provenance.period.endMs).toISOString(),
          },
        }
      : {}),
  };
  const features = reached.map((isotach) =>
    JSON.stringify({
      type: 'Feature',
      bbox: boundingBox(isotach.polygons),
      properties: isotachAttributes(isotach, context),
      geometry: { type: 'MultiPolygon', coordinates: isotach.polygons },
    }),
  );
  return `${JSON.stringify(head).slice(0, -1)},"features":[\n${features.join(',\n')}\n]}\n`;
}
