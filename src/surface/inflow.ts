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

/** Every inflow rule that a recipe may name. */
export const INFLOWS: readonly InflowMethod[] = [none, sobey1977];
