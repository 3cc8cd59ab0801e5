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
  /** size over the translation speed */
  readonly fraction: number;
  /** turn from the heading, degrees: anticlockwise in the north, clockwise in the south */
  readonly rotationDeg: number;
  readonly weight: MotionWeight;
}

/** Background 10-m wind 0.55 of the translation, turned 20° cyclonically, the same everywhere   [LinChavas2012]. */
export const LIN_CHAVAS_2012: MotionShare = { fraction: 0.55, rotationDeg: 20, weight: 'uniform' };

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
  const c = share.fraction * Math.cos(turn);
  const s = share.fraction * Math.sin(turn);
  const east = c * storm.motionEastMps - s * storm.motionNorthMps;
  const north = s * storm.motionEastMps + c * storm.motionNorthMps;
  const size = Math.hypot(east, north);
  const limit = Math.max(LEAST_SHARE * storm.maxWindMps, 0.5 * (storm.maxWindMps - WEAK_SIDE_MPS));
  return size > limit ? [(east * limit) / size, (north * limit) / size] : [east, north];
}
