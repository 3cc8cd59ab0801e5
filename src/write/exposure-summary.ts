import type { DamageCurve } from '../exposure/curve.js';
import type { ExposureTotals, Tally } from '../exposure/exposure.js';
import type { SkippedRow } from '../exposure/point-table.js';
import { type Ring, ringAreaM2, unwrapped, type Zone, type ZoneShape } from '../exposure/zones.js';
import type { WindScale } from '../surface/wind-scale.js';
import { toKnots } from '../units.js';
import { csvLine } from './csv-cell.js';
import { thresholdName } from './peak-bands.js';
import { boxOfBoxes } from './places-box.js';
import { CAUTION, type Provenance } from './provenance.js';

export const EXPOSURE_SCHEMA = 'galewake-exposure/1';

/** Stands beside every damage figure. */
export const DAMAGE_CAUTION =
  'Damage ratios and losses are indicative only: they say nothing about a single building and defer to licensed engineers and local codes.';

/** A zone with what was found in it. */
export interface ExposedZone {
  readonly zone: Zone;
  readonly shape: ZoneShape;
  /** share of the area at or above each level */
  readonly shares: readonly number[];
}

/** Everything that the summary of an exposure tells. */
export interface ExposureSummary {
  readonly provenance: Provenance;
  readonly averagingS: number;
  readonly gustDurationS: number;
  readonly of: 'wind' | 'gust';
  readonly levelsMps: readonly number[];
  readonly valueNames: readonly string[];
  readonly currency?: string;
  readonly totals: ExposureTotals;
  readonly scale: WindScale | null;
  readonly curve: { readonly curve: DamageCurve; readonly conversion: string } | null;
  readonly zones: readonly ExposedZone[];
  readonly zoneSampleRows: number;
  readonly skipped: { readonly count: number; readonly unit: 'line' | 'feature'; readonly rows: readonly SkippedRow[] };
  readonly zonesSkipped: readonly SkippedRow[];
  readonly cautions: readonly string[];
  readonly files: readonly string[];
  readonly timings: Readonly<Record<string, number>>;
}

const round = (value: number, digits: number): number => Number(value.toFixed(digits));

/** Levels are compared and written with three decimals, as the winds of the rows. */
const level = (thresholdMps: number) => ({
  threshold_mps: round(thresholdMps, 3),
  threshold_kt: round(toKnots(thresholdMps), 2),
});

/** The summary of an exposure: totals are the sums of the rows as written, bands the differences of the levels. */
export function exposureDocument(parts: ExposureSummary): Record<string, unknown> {
  const { provenance, totals, valueNames, levelsMps } = parts;
  const sums = (tally: Tally): Record<string, unknown> => {
    const pairs = (sumOf: (c: number) => number | undefined): [string, number][] =>
      valueNames.flatMap((name, c): [string, number][] => {
        const sum = sumOf(c);
        return sum === undefined ? [] : [[name, sum]];
      });
    return {
      assets: tally.assets,
      values: Object.fromEntries(pairs((c) => tally.values[c]?.value())),
      ...(parts.curve ? { losses: Object.fromEntries(pairs((c) => tally.losses[c]?.value())) } : {}),
    };
  };
  return {
    schema: EXPOSURE_SCHEMA,
    version: provenance.version,
    storm: {
      id: provenance.storm,
      name: provenance.stormName ?? null,
      first: new Date(provenance.period.startMs).toISOString(),
      last: new Date(provenance.period.endMs).toISOString(),
    },
    inputs: provenance.inputs,
    recipe: provenance.recipe,
    averaging_s: parts.averagingS,
    gust_duration_s: parts.gustDurationS,
    of: parts.of,
    currency: parts.currency ?? null,
    curve: parts.curve && {
      title: parts.curve.curve.title,
      of: parts.curve.curve.of,
      averaging_s: parts.curve.curve.averagingS,
      conversion: parts.curve.conversion,
      known_from_mps: round(parts.curve.curve.knownFromMps, 3),
      known_to_mps: Number.isFinite(parts.curve.curve.knownToMps) ? round(parts.curve.curve.knownToMps, 3) : null,
    },
    totals: sums(totals.all),
    levels: levelsMps.map((threshold, k) => ({ ...level(threshold), ...sums(totals.levels[k]!) })),
    bands: totals.bands.map((tally, k) => ({
      from_mps: k === 0 ? 0 : round(levelsMps[k - 1]!, 3),
      below_mps: k === levelsMps.length ? null : round(levelsMps[k]!, 3),
      ...sums(tally),
    })),
    classes: parts.scale && {
      scale: parts.scale.id,
      averaging_s: parts.scale.averagingS,
      rows: parts.scale.classes.map(({ code, name }, k) => ({ code, name, ...sums(totals.classes[k]!) })),
    },
    zones: parts.zones.map((zone, k) => zoneDocument(zone, { k, parts, sums })),
    ...(parts.zones.length > 0 ? { zone_sample_rows: parts.zoneSampleRows } : {}),
    skipped: { assets: parts.skipped, zones: { count: parts.zonesSkipped.length, rows: parts.zonesSkipped } },
    cautions: parts.cautions,
    caution: CAUTION,
    ...(parts.curve ? { damage_caution: DAMAGE_CAUTION } : {}),
    files: parts.files,
    timings: parts.timings,
  };
}

function zoneDocument(
  { zone, shape, shares }: ExposedZone,
  { k, parts, sums }: { k: number; parts: ExposureSummary; sums: (tally: Tally) => Record<string, unknown> },
): Record<string, unknown> {
  const found = parts.totals.zones[k]!;
  const areaKm2 = round(shape.areaM2 / 1e6, 3);
  return {
    name: zone.name,
    area_km2: areaKm2,
    values: zone.values,
    assets_within: sums(found.all),
    levels: parts.levelsMps.map((threshold, h) => {
      const share = round(shares[h]!, 6);
      return {
        ...level(threshold),
        area_share: share,
        area_km2: round(areaKm2 * share, 3),
        values: Object.fromEntries(Object.entries(zone.values).map(([key, value]) => [key, round(value * share, 3)])),
        assets_within: sums(found.levels[h]!),
      };
    }),
  };
}

/** One row for each zone and level: share, area, the zone's own values, and the assets in it. */
export function zonesCsv(parts: ExposureSummary): string {
  const keys = [...new Set(parts.zones.flatMap(({ zone }) => Object.keys(zone.values)))];
  const losses = parts.valueNames.flatMap((name, c) => (parts.totals.all.losses[c] ? [{ name, c }] : []));
  const heading = [
    'zone',
    'level',
    'threshold_mps',
    'area_share',
    'area_km2',
    ...keys.map((key) => `zone_${key}`),
    'assets',
    ...parts.valueNames.map((name) => `assets_${name}`),
    ...losses.map(({ name }) => `assets_loss_${name}`),
  ];
  const rows = parts.zones.flatMap(({ zone, shape, shares }, k) => {
    const found = parts.totals.zones[k]!;
    const row = (name: string, threshold: number | null, share: number, tally: Tally): (string | number | null)[] => [
      zone.name,
      name,
      threshold,
      share,
      round(round(shape.areaM2 / 1e6, 3) * share, 3),
      ...keys.map((key) => (zone.values[key] === undefined ? null : round(zone.values[key] * share, 3))),
      tally.assets,
      ...tally.values.map((sum) => sum.value()),
      ...losses.map(({ c }) => tally.losses[c]!.value()),
    ];
    return [
      row('all', 0, 1, found.all),
      ...parts.levelsMps.map((threshold, h) =>
        row(thresholdName(threshold), round(threshold, 3), round(shares[h]!, 6), found.levels[h]!),
      ),
    ];
  });
  return [heading, ...rows].map(csvLine).join('');
}

/** The zones as GeoJSON   [RFC7946] with what was found in them. */
export function zonesGeojson(parts: ExposureSummary): string {
  const { zones } = exposureDocument(parts) as { zones: Record<string, unknown>[] };
  const features = parts.zones.map(({ zone }, k) => ({
    type: 'Feature',
    geometry: {
      type: 'MultiPolygon',
      coordinates: zone.polygons.map((rings) => rings.map((ring, r) => turnedRight(ring, r === 0))),
    },
    properties: zones[k],
  }));
  const bbox = boxOfBoxes(parts.zones.map(({ shape }) => shape.bounds));
  return `${JSON.stringify({ type: 'FeatureCollection', bbox, caution: CAUTION, features })}\n`;
}

/** A shell anticlockwise, a hole clockwise   [RFC7946]. */
function turnedRight(ring: Ring, shell: boolean): Ring {
  return ringAreaM2(unwrapped(ring, ring[0]?.[0] ?? 0)) > 0 === shell ? ring : [...ring].reverse();
}
