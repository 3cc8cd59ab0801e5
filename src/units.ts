import { UsageError } from './errors.js';

/** One knot in m/s: a nautical mile (1852 m) an hour, exact by definition. */
export const KNOT_MPS = 1852 / 3600;
/** The international nautical mile, m (exact). */
export const NAUTICAL_MILE_M = 1852;
/** The international statute mile, m (exact). */
export const STATUTE_MILE_M = 1609.344;
/** One hectopascal (= one millibar), Pa. */
export const HECTOPASCAL_PA = 100;
export const HOUR_S = 3600;
export const HOUR_MS = 3_600_000;
export const MINUTE_MS = 60_000;

/** Units of each kind of quantity, as factors to SI (degrees for angles). */
const UNITS = {
  speed: { 'm/s': 1, mps: 1, kt: KNOT_MPS, kn: KNOT_MPS, 'km/h': 1 / 3.6, kmh: 1 / 3.6, mph: STATUTE_MILE_M / 3600 },
  length: { m: 1, km: 1000, nmi: NAUTICAL_MILE_M, nm: NAUTICAL_MILE_M, mi: STATUTE_MILE_M },
  angle: { deg: 1, '°': 1 },
  duration: { s: 1, min: 60, h: 3600, d: 86400 },
  pressure: { pa: 1, hpa: 100, mb: 100, mbar: 100, kpa: 1000 },
} as const satisfies Record<string, Record<string, number>>;

export type QuantityKind = keyof typeof UNITS;

/** A number with a unit, in SI (or degrees), and which unit was written. */
export interface Quantity {
  readonly value: number;
  readonly kind: QuantityKind;
}

/**
 * Reads `34kt`, `2 km`, `0.02deg`, `10min`, `950hPa`. A bare number takes `bareUnit`.
 * @returns the value in SI units (m/s, m, s, Pa) or degrees, with its kind
 * @throws UsageError `units.quantity` when the number, the unit or the kind is wrong
 */
export function parseQuantity(
  text: string,
  kinds: readonly QuantityKind[],
  options: { bareUnit?: string; name: string },
): Quantity {
  const match = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)\s*([^\d\s].*?)?\s*$/.exec(text);
  const accepted = kinds.flatMap((kind) => Object.keys(UNITS[kind]));
  const fail = (what: string): never => {
    throw new UsageError(
      'units.quantity',
      `${options.name}: ${what}; write a number with one of ${accepted.join(', ')}`,
      {
        fields: { text, name: options.name },
      },
    );
  };
  if (!match) return fail(`'${text}' is not a quantity`);
  const unit = (match[2] ?? options.bareUnit)?.toLowerCase();
  if (unit === undefined) return fail(`'${text}' has no unit`);
  for (const kind of kinds) {
    const factor = (UNITS[kind] as Record<string, number>)[unit];
    if (factor !== undefined) return { value: Number(match[1]) * factor, kind };
  }
  return fail(`'${text}' has the unit '${match[2]}', which does not fit here`);
}

/** Reads a quantity of one kind; see {@link parseQuantity}. */
export function quantityOf(kind: QuantityKind, text: string, options: { bareUnit?: string; name: string }): number {
  return parseQuantity(text, [kind], options).value;
}

export const knots = (speedKt: number): number => speedKt * KNOT_MPS;
export const toKnots = (speedMps: number): number => speedMps / KNOT_MPS;

/** A number with at most `digits` decimals and no trailing zeros. */
export function tidy(value: number, digits: number): string {
  return String(Number(value.toFixed(digits)));
}
