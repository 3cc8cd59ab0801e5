/** A rule for the 10-m wind over the gradient-level wind, over open sea. */
export interface ReductionMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** ratio of the 10-m to the gradient-level tangential wind */
  readonly ratio: (input: {
    gradientWindMps: number;
    radiusM: number;
    radiusOfMaxWindM: number;
    numbers: Readonly<Record<string, number>>;
  }) => number;
}

/** One ratio everywhere; 0.9 is the ratio of the surface to the 700-hPa wind in the eyewall   [Franklin2003]. */
const constant: ReductionMethod = {
  id: 'constant',
  title: 'One ratio everywhere (surface.factor)',
  source: 'Franklin2003',
  ratio: ({ numbers }) => numbers['factor'] ?? 0.9,
};

/** Every reduction that a recipe may name. */
export const REDUCTIONS: readonly ReductionMethod[] = [constant];
