import { RADIANS } from '../earth.js';

/** How the motion's share fades with radius: weight 0…1 of the background wind. */
export interface WeightInput {
  readonly radiusM: number;
  readonly radiusOfMaxWindM: number;
  /** V(r)/V_max of the profile */
  readonly relativeWind: number;
}

export const MOTION_WEIGHTS = {
  /** the same everywhere */
  uniform: () => 1,
  /** in proportion to the profile's wind */
  relative: ({ relativeWind }: WeightInput) => relativeWind,
  /** exp(−πr/500 km)   [Miyazaki1961, from memory] */
  'miyazaki-1961': ({ radiusM }: WeightInput) => Math.exp((-Math.PI * radiusM) / 500_000),
  /** rR/(r² + R²): one half at R   [Jelesnianski1966, from memory] */
  'jelesnianski-1966': ({ radiusM, radiusOfMaxWindM: r0 }: WeightInput) =>
    (radiusM * r0) / (radiusM * radiusM + r0 * r0),
} as const satisfies Record<string, (input: WeightInput) => number>;

export type MotionWeight = keyof typeof MOTION_WEIGHTS;

/** A share of the storm's motion that is added to the vortex as a background wind. */
export interface MotionShare {
  /** its size for a translation speed, m/s */
  readonly sizeMps: (translationMps: number) => number;
  /** turn from the heading, degrees: anticlockwise in the north, clockwise in the south */
  readonly rotationDeg: number;
  readonly weight: MotionWeight;
}

/** How the motion makes one side of the storm the stronger one. */
export interface MotionMethod {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** `share`: added to the vortex; `balance`: already in the gradient wind; `own`: by the recipe's entries; `none` */
  readonly kind: 'share' | 'balance' | 'own' | 'none';
  readonly share?: MotionShare;
}

/** Background 10-m wind 0.55 of the translation, turned 20° cyclonically, the same everywhere   [LinChavas2012, from memory]. */
export const LIN_CHAVAS_2012: MotionShare = {
  sizeMps: (translationMps) => 0.55 * translationMps,
  rotationDeg: 20,
  weight: 'uniform',
};

/** One knot, m/s: the unit speed of the formula of NWS 23. */
const KNOT_MPS = 1852 / 3600;

/**
 * 1.5 T^0.63 T₀^0.37 along the heading, T₀ = 1 kt: the power makes the formula depend on its unit, so that the speed in
 * m/s must not be put in plainly   [SchwerdtHoWatkins1979, from memory].
 */
const SCHWERDT_1979: MotionShare = {
  sizeMps: (translationMps) => 1.5 * translationMps ** 0.63 * KNOT_MPS ** 0.37,
  rotationDeg: 0,
  weight: 'uniform',
};

/**
 * The whole translation, its largest part along the circles 65° right of the heading in the north, 65° left in the south
 * [Harper2001, from memory]. That is a vector turned 25° cyclonically, weighted by the relative wind so that the centre
 * moves with the storm and the far field does not (own choice); inflow turns the strongest side on.
 */
const HARPER_2001: MotionShare = {
  sizeMps: (translationMps) => translationMps,
  rotationDeg: 25,
  weight: 'relative',
};

/** Every motion asymmetry that a recipe may name. */
export const MOTIONS: readonly MotionMethod[] = [
  { id: 'none', title: 'The vortex alone', source: 'none', kind: 'none' },
  {
    id: 'lin-chavas-2012',
    title: 'Lin & Chavas 2012: 0.55 of the translation, turned 20° cyclonically',
    source: 'LinChavas2012',
    kind: 'share',
    share: LIN_CHAVAS_2012,
  },
  {
    id: 'schwerdt-1979',
    title: 'Schwerdt, Ho & Watkins 1979: 1.5 T^0.63 kt along the heading',
    source: 'SchwerdtHoWatkins1979',
    kind: 'share',
    share: SCHWERDT_1979,
  },
  {
    id: 'harper-2001',
    title: 'Harper 2001: the translation, largest 65° right (left) of the heading',
    source: 'Harper2001',
    kind: 'share',
    share: HARPER_2001,
  },
  {
    id: 'georgiou-1985',
    title: 'Blaton / Georgiou 1985: the translation within the gradient balance',
    source: 'Georgiou1985',
    kind: 'balance',
  },
  { id: 'vector', title: 'A share of the translation by the three entries below', source: 'own choice', kind: 'own' },
];

/**
 * Gradient wind of a vortex that moves, at an azimuth: V' = ½(c sin α − |f|r) + √(¼(c sin α − |f|r)² + G), α clockwise from
 * the heading in the north, mirrored in the south, and G = V² + |f|rV the balance's driving term, which the wind of the
 * resting vortex gives back   [Georgiou1985, after Blaton; from memory]. It holds the asymmetry of the motion.
 */
export function movingGradientWind(
  windMps: number,
  {
    radiusM,
    coriolisPerS,
    translationMps,
    azimuthFromHeadingDeg,
  }: { radiusM: number; coriolisPerS: number; translationMps: number; azimuthFromHeadingDeg: number },
): number {
  const fr = Math.abs(coriolisPerS) * radiusM;
  const driving = windMps * (windMps + fr);
  const half = 0.5 * (translationMps * Math.sin(azimuthFromHeadingDeg * RADIANS) - fr);
  if (driving === 0) return Math.max(0, 2 * half);
  // of the two forms of the root the one in which nothing cancels
  const root = Math.sqrt(half * half + driving);
  return half >= 0 ? half + root : driving / (root - half);
}

/** Translation that a wind field can hold within it, as a share of its maximum. */
const HELD_SHARE = 0.8;

/**
 * The translation that a moving balance or a boundary layer is given, m/s: at most 0.8 of the maximum wind. Their wind at the
 * centre is the translation itself, so that beyond it no vortex could have that maximum (own choice).
 */
export function heldTranslation(translationMps: number, maxWindMps: number): number {
  return Math.min(translationMps, HELD_SHARE * maxWindMps);
}

/** Wind that the motion leaves on the weak side, m/s, and least share of the maximum that it may have; own calibration. */
const WEAK_SIDE_MPS = 17;
const LEAST_SHARE = 0.03;

/**
 * The background wind of a share, m/s [east, north].
 * Its size is limited to half of what `maxWindMps` has above 17 m/s, or to 0.03 of it: in a fast, weak storm the weak side is
 * not taken below gale force by the motion alone (own calibration on HURDAT2 2004–2016: quadrants of 34 kt that are missed
 * become rarer, false ones about as many more frequent, the quadrants' shares and the mean better).
 */
export function backgroundWind(
  share: MotionShare,
  storm: { motionEastMps: number; motionNorthMps: number; hemisphere: 1 | -1; maxWindMps: number },
): readonly [number, number] {
  const turn = storm.hemisphere * share.rotationDeg * RADIANS;
  const speed = Math.hypot(storm.motionEastMps, storm.motionNorthMps);
  const fraction = speed > 0 ? share.sizeMps(speed) / speed : 0;
  const c = fraction * Math.cos(turn);
  const s = fraction * Math.sin(turn);
  const east = c * storm.motionEastMps - s * storm.motionNorthMps;
  const north = s * storm.motionEastMps + c * storm.motionNorthMps;
  const size = Math.hypot(east, north);
  const limit = Math.max(LEAST_SHARE * storm.maxWindMps, 0.5 * (storm.maxWindMps - WEAK_SIDE_MPS));
  return size > limit ? [(east * limit) / size, (north * limit) / size] : [east, north];
}
