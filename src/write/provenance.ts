/** Stands in every output that has room for words. */
export const CAUTION =
  'Galewake is no warning service. This is the output of a wind model: it does not replace official warnings. Follow your national meteorological service and your local emergency authorities.';

/** Where a result comes from: what every output carries. */
export interface Provenance {
  /** id of the storm in its file */
  readonly storm: string;
  readonly stormName?: string;
  /** version of Galewake */
  readonly version: string;
  /** the recipe in force, a JSON document */
  readonly recipe: unknown;
  readonly inputs: readonly { readonly name: string; readonly sha256: string }[];
  /** first and last moment that was modelled */
  readonly period: { readonly startMs: number; readonly endMs: number };
  /** papers and data that the result rests on, one a line */
  readonly references?: readonly string[];
  /** time of writing; without it the same input gives the same bytes */
  readonly createdMs?: number;
}

/** The provenance as named texts, for formats that carry items. */
export function provenanceItems(provenance: Provenance): Record<string, string> {
  const { storm, stormName, version, recipe, inputs, period, references, createdMs } = provenance;
  return {
    storm,
    ...(stormName === undefined ? {} : { storm_name: stormName }),
    software: `Galewake ${version}`,
    period_start: new Date(period.startMs).toISOString(),
    period_end: new Date(period.endMs).toISOString(),
    recipe: JSON.stringify(recipe),
    input_sha256: inputs.map((input) => `${input.sha256}  ${input.name}`).join('\n'),
    ...(references?.length ? { references: references.join('\n') } : {}),
    ...(createdMs === undefined ? {} : { created: new Date(createdMs).toISOString() }),
    caution: CAUTION,
  };
}
