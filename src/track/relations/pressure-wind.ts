/** What a pressure–wind relation may use. Winds are 1-min means at 10 m. */
export interface PressureWindInput {
  readonly latDeg: number;
  readonly lonDeg: number;
  /** two-letter code of the basin; null where not known */
  readonly basin: string | null;
  readonly translationMps: number;
  /** mean radius of 34 kt over the quadrants that have it, m; null where not known */
  readonly radiusOf34KtM: number | null;
  readonly ambientPressurePa: number;
  /** change of the central pressure, Pa/s, positive when filling; null where not known */
  readonly pressureTrendPaPerS: number | null;
  readonly airDensityKgM3: number;
}

/** A relation between maximum wind and central pressure. */
export interface PressureWindRelation {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  readonly centralPressurePa: (maxWindMps: number, input: PressureWindInput) => number;
  readonly maxWindMps: (centralPressurePa: number, input: PressureWindInput) => number;
  /** what it had to assume because the track does not say it; null for nothing */
  readonly note?: (input: PressureWindInput) => string | null;
}

/** The wind at which a falling relation gives a pressure, by bisection between 0 and 120 m/s. */
export function windOfPressure(pressurePaOf: (maxWindMps: number) => number, centralPressurePa: number): number {
  let low = 0;
  let high = 120;
  for (let i = 0; i < 50; i++) {
    const middle = 0.5 * (low + high);
    if (pressurePaOf(middle) > centralPressurePa) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}
