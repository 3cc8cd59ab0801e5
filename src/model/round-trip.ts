/** What the search for the maximum needs of a field. */
interface Searchable {
  readonly state: { readonly radiusOfMaxWindM: number };
  readonly outerRadiusM: number;
  readonly strongestOnCircle: (radiusM: number) => number;
  readonly severalMaxima?: boolean;
}

/** Radii at which the search starts, as multiples of the radius of maximum wind. */
const RATIOS = [0.4, 0.6, 0.8, 0.9, 1, 1.1, 1.25, 1.5, 2, 3, 5];
/** The same for a field that may have several maxima: close together about R, where a boundary layer makes them. */
const DENSE_RATIOS = [
  ...[0.2, 0.3, 0.4, 0.5, 0.6, 0.7],
  ...Array.from({ length: 26 }, (_, i) => 0.75 + 0.02 * i),
  ...[1.3, 1.4, 1.5, 1.7, 2, 2.4, 3, 4, 5],
];
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/** The radius of the strongest 10-m wind of a field, m: bracketed on a few circles, then golden section. */
export function radiusOfStrongest(field: Searchable): number {
  const radii = (field.severalMaxima ? DENSE_RATIOS : RATIOS)
    .map((ratio) => ratio * field.state.radiusOfMaxWindM)
    .filter((radius) => radius < field.outerRadiusM);
  const speeds = radii.map(field.strongestOnCircle);
  let best = 0;
  for (let i = 1; i < radii.length; i++) if (speeds[i]! > speeds[best]!) best = i;
  let a = radii[Math.max(0, best - 1)] ?? 0;
  let b = radii[Math.min(radii.length - 1, best + 1)] ?? field.outerRadiusM;
  let left = b - GOLDEN * (b - a);
  let right = a + GOLDEN * (b - a);
  let atLeft = field.strongestOnCircle(left);
  let atRight = field.strongestOnCircle(right);
  while (b - a > 0.002 * field.state.radiusOfMaxWindM) {
    if (atLeft >= atRight) {
      b = right;
      right = left;
      atRight = atLeft;
      left = b - GOLDEN * (b - a);
      atLeft = field.strongestOnCircle(left);
    } else {
      a = left;
      left = right;
      atLeft = atRight;
      right = a + GOLDEN * (b - a);
      atRight = field.strongestOnCircle(right);
    }
  }
  // a kink of the profile may sit on a starting circle exactly
  return speeds[best]! >= Math.max(atLeft, atRight) ? radii[best]! : 0.5 * (a + b);
}

/** The strongest 10-m wind of a field, m/s. */
export function maximumOf(field: Searchable): number {
  return field.strongestOnCircle(radiusOfStrongest(field));
}
