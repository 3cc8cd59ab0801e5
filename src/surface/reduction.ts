/** A rule for the 10-m wind over the gradient-level wind, over open sea. */
export interface ReductionMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** averaging period of the 10-m wind that the ratio gives, s; null where it is the recipe's own */
  readonly averagingS: number | null;
  /** ratio of the 10-m to the gradient-level tangential wind */
  readonly ratio: (input: {
    gradientWindMps: number;
    radiusM: number;
    radiusOfMaxWindM: number;
    numbers: Readonly<Record<string, number>>;
  }) => number;
}

/**
 * The 10-m over the gradient-level wind where the 10-m wind is known: K with K(V/K) = V, by iteration (the ratios fall with
 * the wind by so little that each step cuts the error at least to a third).
 */
export function ratioOfSurfaceWind(
  { ratio }: Pick<ReductionMethod, 'ratio'>,
  {
    surfaceWindMps,
    ...at
  }: { surfaceWindMps: number } & Omit<Parameters<ReductionMethod['ratio']>[0], 'gradientWindMps'>,
): number {
  let found = ratio({ ...at, gradientWindMps: surfaceWindMps });
  for (let i = 0; i < 24; i++) {
    const next = ratio({ ...at, gradientWindMps: surfaceWindMps / found });
    if (next === found) break;
    found = next;
  }
  return found;
}

/** One ratio everywhere; 0.9 is the ratio of the surface to the 700-hPa wind in the eyewall   [Franklin2003]. */
const constant: ReductionMethod = {
  id: 'constant',
  title: 'One ratio everywhere (surface.factor)',
  source: 'Franklin2003',
  averagingS: null,
  ratio: ({ numbers }) => numbers['factor'] ?? 0.9,
};

/**
 * 0.90 in the eyewall, 0.80 in the outer vortex, of the wind at 700 hPa   [Franklin2003: 0.90; 0.80 from memory].
 * The eyewall ends at 1.5 R and the outer vortex begins at 4 R, with a straight line between (own choice).
 */
const franklin2003: ReductionMethod = {
  id: 'franklin-2003',
  title: 'Franklin et al. 2003: 0.90 in the eyewall, 0.80 in the outer vortex',
  source: 'Franklin2003',
  averagingS: null,
  ratio: ({ radiusM, radiusOfMaxWindM }) => ramp(radiusM / radiusOfMaxWindM, { from: 1.5, to: 4, near: 0.9, far: 0.8 }),
};

/** 0.90 within 100 km, then a straight line to 0.75 at 700 km   [KnaffEtAl2011, from memory]. */
const knaff2011: ReductionMethod = {
  id: 'knaff-2011',
  title: 'Knaff et al. 2011: 0.90 within 100 km, 0.75 from 700 km outward',
  source: 'KnaffEtAl2011',
  averagingS: null,
  ratio: ({ radiusM }) => ramp(radiusM, { from: 100_000, to: 700_000, near: 0.9, far: 0.75 }),
};

/**
 * 0.81 below 6 m/s, 0.81 − 0.00296(V − 6) to 19.5, 0.77 − 0.00431(V − 19.5) to 45, 0.66 above, V the gradient wind; the
 * 10-m wind is a 10-minute mean   [Harper2001, from memory]. Continuous to 2·10⁻⁴.
 */
const harper2001: ReductionMethod = {
  id: 'harper-2001',
  title: 'Harper 2001: 0.81 in light winds to 0.66 from 45 m/s, a 10-minute mean',
  source: 'Harper2001',
  averagingS: 600,
  ratio: ({ gradientWindMps: v }) => {
    if (v < 6) return 0.81;
    if (v < 19.5) return 0.81 - 2.96e-3 * (v - 6);
    return v < 45 ? 0.77 - 4.31e-3 * (v - 19.5) : 0.66;
  },
};

/** `near` up to one place, `far` from another, a straight line between. */
function ramp(x: number, { from, to, near, far }: { from: number; to: number; near: number; far: number }): number {
  const t = Math.min(1, Math.max(0, (x - from) / (to - from)));
  return near + t * (far - near);
}

/** Every reduction that a recipe may name. */
export const REDUCTIONS: readonly ReductionMethod[] = [constant, franklin2003, knaff2011, harper2001];
