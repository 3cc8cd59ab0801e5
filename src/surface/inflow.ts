/** What an inflow angle may depend on. */
export interface InflowInput {
  /** r/R */
  readonly radiusRatio: number;
  /** maximum 10-m wind, m/s */
  readonly maxWindMps: number;
  /** translation speed, m/s */
  readonly translationMps: number;
  /** azimuth from the heading, degrees: clockwise in the north, anticlockwise in the south */
  readonly azimuthFromHeadingDeg: number;
}

/** A rule for the angle by which friction turns the wind toward the centre. */
export interface InflowMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** whether the angle varies around the storm */
  readonly asymmetric: boolean;
  /** inflow angle, degrees, positive inward */
  readonly angleDeg: (input: InflowInput) => number;
}

const none: InflowMethod = {
  id: 'none',
  title: 'No inflow: the wind blows along the circles',
  source: 'none',
  asymmetric: false,
  angleDeg: () => 0,
};

/** 10s for s < 1, 10 + 75(s − 1) for 1–1.2, 25 beyond, s = r/R   [Sobey1977, from memory]. Continuous. */
const sobey1977: InflowMethod = {
  id: 'sobey-1977',
  title: 'Sobey et al. 1977: 10° r/R inside R, 25° from 1.2 R outward',
  source: 'Sobey1977',
  asymmetric: false,
  angleDeg: ({ radiusRatio: s }) => (s < 1 ? 10 * s : s < 1.2 ? 10 + 75 * (s - 1) : 25),
};

/** 10(1 + s) for s < 1, 20 + 25(s − 1) for 1–1.2, 25 beyond, s = r/R   [Bretschneider1972, from memory]. Continuous. */
const bretschneider: InflowMethod = {
  id: 'bretschneider-1972',
  title: 'Bretschneider 1972: 10° at the centre, 20° at R, 25° from 1.2 R outward',
  source: 'Bretschneider1972',
  asymmetric: false,
  angleDeg: ({ radiusRatio: s }) => (s < 1 ? 10 * (1 + s) : s < 1.2 ? 20 + 25 * (s - 1) : 25),
};

/** The regression was made from dropsondes within this r/R, m/s of translation, m/s of maximum wind; beyond them the bounds serve. */
const ZHANG_UHLHORN_BOUNDS = { radiusRatio: 12, translationMps: 15, maxWindMps: 80 } as const;

/**
 * Inflow angle −[A₀ + A₁ cos(θ − P)], θ clockwise from the heading in the north, mirrored in the south, s = r/R:
 *   A₀ = −0.90 s − 0.09 V_m − 14.33; A₁ = −A₀ (0.04 s + 0.05 V_t + 0.14); P = 6.88 s − 9.60 V_t + 85.31
 * in m/s and degrees   [ZhangUhlhorn2012, coefficients from memory; their sample mean of 22.6° is met].
 * Beyond s = 12, V_t = 15 and V_m = 80 m/s the values there serve (own choice: the angle then stays below a right one).
 */
const zhangUhlhorn2012: InflowMethod = {
  id: 'zhang-uhlhorn-2012',
  title: 'Zhang & Uhlhorn 2012: by r/R, maximum wind, translation and azimuth',
  source: 'ZhangUhlhorn2012',
  asymmetric: true,
  angleDeg: ({ radiusRatio, maxWindMps, translationMps, azimuthFromHeadingDeg }) => {
    const s = Math.min(radiusRatio, ZHANG_UHLHORN_BOUNDS.radiusRatio);
    const vt = Math.min(translationMps, ZHANG_UHLHORN_BOUNDS.translationMps);
    const vm = Math.min(maxWindMps, ZHANG_UHLHORN_BOUNDS.maxWindMps);
    const a0 = -0.9 * s - 0.09 * vm - 14.33;
    const a1 = -a0 * (0.04 * s + 0.05 * vt + 0.14);
    const phase = 6.88 * s - 9.6 * vt + 85.31;
    return -(a0 + a1 * Math.cos(((azimuthFromHeadingDeg - phase) * Math.PI) / 180));
  },
};

/** Every inflow rule that a recipe may name. */
export const INFLOWS: readonly InflowMethod[] = [none, sobey1977, bretschneider, zhangUhlhorn2012];
