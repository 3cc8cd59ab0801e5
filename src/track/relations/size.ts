/** What the size relation may use. Winds are 1-min means at 10 m. */
export interface SizeInput {
  readonly maxWindMps: number;
  /** geometric means over the day around, weighted by exp(−(Δt/24 h)²) */
  readonly dayMeanWindMps: number;
  readonly dayMeanDeficitPa: number;
  /** highest wind of the track up to now */
  readonly highestWindMps: number;
  readonly latDeg: number;
  readonly translationMps: number;
}

/** A relation for the size of a storm: the radius at which its own wind would be 17.5 m/s (34 kt). */
export interface SizeRelation {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  readonly radiusM: (input: SizeInput) => number;
}

/** e-folding time of the weights of a day's mean, ms: exp(−(Δt/24 h)²). */
const DAY_MS = 86_400_000;

/**
 * Coefficients of the size relation, from `scripts/calibrate.js` (own calibration): ln r₁₇ (km) = c₀ + Σ cᵢ xᵢ.
 */
export const SIZE_2016 = {
  constant: 4.824,
  /** ln(V/35 m/s) */
  wind: -0.326,
  /** ln(V̄/35 m/s) */
  dayMeanWind: -1.154,
  /** ln(Δp̄/25 hPa) */
  dayMeanDeficit: 1.249,
  /** |φ| − 20° */
  latitude: 0.0088,
  /** c − 5 m/s */
  translation: -0.0134,
  /** ln(V_highest/V) */
  pastPeak: 0.314,
} as const;

/** Bounds of the size, m: beyond those of every storm of the calibration. */
export const SIZE_BOUNDS_M = [20_000, 800_000] as const;

/**
 * The size of a storm from what every track tells (own calibration, `scripts/calibrate.js`):
 * ln r₁₇ = c₀ + c₁ ln(V/35) + c₂ ln(V̄/35) + c₃ ln(Δp̄/25 hPa) + c₄(|φ| − 20°) + c₅(c − 5 m/s) + c₆ ln(V_highest/V),
 * r₁₇ in km, V̄ and Δp̄ geometric means over the day around, weighted by exp(−(Δt/24 h)²). A deep low with little wind
 * is a large storm; size has a memory of about a day; a storm past its peak is broader than one that grows.
 * Data: HURDAT2, Atlantic and eastern Pacific 2004–2016, fixes at least 100 km off land. Rises with the deficit and with
 * latitude, falls with the wind at one deficit; kept within 20–800 km.
 */
export function size2016RadiusM(input: SizeInput): number {
  const c = SIZE_2016;
  const ln =
    c.constant +
    c.wind * Math.log(input.maxWindMps / 35) +
    c.dayMeanWind * Math.log(input.dayMeanWindMps / 35) +
    c.dayMeanDeficit * Math.log(input.dayMeanDeficitPa / 2500) +
    c.latitude * (Math.abs(input.latDeg) - 20) +
    c.translation * (Math.min(25, input.translationMps) - 5) +
    c.pastPeak * Math.log(Math.max(1, input.highestWindMps / input.maxWindMps));
  return Math.min(SIZE_BOUNDS_M[1], Math.max(SIZE_BOUNDS_M[0], 1000 * Math.exp(ln)));
}

/** Every size relation that a recipe may name. */
export const SIZE_RELATIONS: readonly SizeRelation[] = [
  {
    id: 'calibrated-size-2016',
    title: 'Own calibration on 2004–2016: wind and deficit of the day, latitude, motion, past peak',
    source: 'own calibration',
    radiusM: size2016RadiusM,
  },
];

/** Geometric mean of positive values around each time, weighted by exp(−(Δt/24 h)²) and the time that each stands for. */
export function dayMeans(timesMs: readonly number[], values: readonly number[]): number[] {
  const share = timesMs.map((t, i) => {
    const before = timesMs[i - 1] ?? t;
    const after = timesMs[i + 1] ?? t;
    // one fix stands for at most six hours to either side, so that a gap does not give its ends all the weight
    return Math.max(1, 0.5 * (Math.min(t - before, 21_600_000) + Math.min(after - t, 21_600_000)));
  });
  return timesMs.map((t) => {
    let sum = 0;
    let weights = 0;
    for (let j = 0; j < timesMs.length; j++) {
      const lag = (timesMs[j]! - t) / DAY_MS;
      if (Math.abs(lag) > 3) continue;
      const weight = share[j]! * Math.exp(-lag * lag);
      sum += weight * Math.log(values[j]!);
      weights += weight;
    }
    return Math.exp(sum / weights);
  });
}
