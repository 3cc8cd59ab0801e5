import { toKnots } from '../units.js';

/** An area of wind as the formats write it. */
export interface IsotachShape {
  readonly thresholdMps: number;
  /** upper end of a band, null for an area at or above the threshold */
  readonly upperMps: number | null;
  /** coordinates of a GeoJSON MultiPolygon: degrees, cut at ±180° */
  readonly polygons: readonly (readonly (readonly (readonly number[])[])[])[];
  readonly areaM2: number;
}

/** What the isotachs of one list have in common. */
export interface IsotachContext {
  readonly quantity: 'wind' | 'gust';
  /** averaging period of the wind, or duration of the gust */
  readonly averagingS: number;
  /** class of a published scale that a level begins, null where there is none */
  readonly classOf?: (thresholdMps: number) => string | null;
}

/** The attributes of an isotach, in their order. */
export function isotachAttributes(
  isotach: IsotachShape,
  context: IsotachContext,
): Record<string, number | string | null> {
  const decimals = (value: number, digits: number): number => Number(value.toFixed(digits));
  return {
    threshold_mps: decimals(isotach.thresholdMps, 4),
    threshold_kt: decimals(toKnots(isotach.thresholdMps), 3),
    ...(isotach.upperMps === null ? {} : { upper_mps: decimals(isotach.upperMps, 4) }),
    quantity: context.quantity,
    averaging_s: context.averagingS,
    area_km2: decimals(isotach.areaM2 / 1e6, 3),
    ...(context.classOf ? { class: context.classOf(isotach.thresholdMps) } : {}),
  };
}

/** `34 kt and above`, `34–50 kt`; metres per second where the threshold is no whole number of knots. */
export function isotachLabel(isotach: Pick<IsotachShape, 'thresholdMps' | 'upperMps'>): string {
  const ends = isotach.upperMps === null ? [isotach.thresholdMps] : [isotach.thresholdMps, isotach.upperMps];
  const whole = ends.every((end) => Math.abs(toKnots(end) - Math.round(toKnots(end))) < 0.005);
  const [from, to] = ends.map((end) => (whole ? String(Math.round(toKnots(end))) : String(Number(end.toFixed(1)))));
  const unit = whole ? 'kt' : 'm/s';
  return to === undefined ? `${from} ${unit} and above` : `${from}–${to} ${unit}`;
}
