import { coriolisPerS, RADIANS, wrapBearing } from '../earth.js';
import { averagingFactor } from '../surface/averaging.js';
import { INFLOWS, type InflowMethod } from '../surface/inflow.js';
import { isInertiallyStable, kepert2001, type LayerInput, stability } from '../surface/kepert2001.js';
import {
  backgroundWind,
  heldTranslation,
  MOTION_WEIGHTS,
  MOTIONS,
  type MotionShare,
  type MotionWeight,
  movingGradientWind,
} from '../surface/motion.js';
import { REDUCTIONS, type ReductionMethod, ratioOfSurfaceWind } from '../surface/reduction.js';
import type { StormState } from '../track/path.js';
import type { ProfileMethod, RadialProfile, VortexInput } from '../vortex/profile.js';
import { profileMethod } from '../vortex/profiles.js';
import { circleDirections } from './circle.js';
import { type Recipe, recipeNumber, recipeWord } from './recipe.js';
import { maximumOf } from './round-trip.js';

/**
 * The 10-m wind of one moment, earth-relative, over open sea, in polar coordinates about the centre.
 * Vectors are [east, north] in the frame at the centre; carried to a cell they turn with the great circle (see wind.ts).
 */
export interface WindField {
  readonly state: StormState;
  /** gradient-level profile whose surface field has the state's maximum */
  readonly profile: RadialProfile;
  /** maximum of the gradient-level wind that the profile was built with, m/s */
  readonly gradientMaxMps: number;
  /** no wind from here outward, m */
  readonly outerRadiusM: number;
  /**
   * Winds on a circle: `directions` holds unit vectors east, north for each place seen from the centre;
   * `out` (same length) gets east, north wind, m/s.
   */
  readonly onCircle: (out: Float64Array, radiusM: number, directions: Float64Array) => void;
  /** highest wind on a circle, m/s */
  readonly strongestOnCircle: (radiusM: number) => number;
  /** whether the wind may have several maxima next to the radius of maximum wind */
  readonly severalMaxima?: boolean;
}

/** The parts of a recipe that make a field, looked up once a storm. */
export interface FieldMethods {
  readonly profile: ProfileMethod;
  readonly reduction: ReductionMethod;
  readonly inflow: InflowMethod;
  readonly motion: MotionShare | null;
  /** whether the gradient wind itself holds the motion's asymmetry */
  readonly movingBalance: boolean;
  /** whether a boundary layer takes the place of reduction, inflow and motion */
  readonly layer: boolean;
  readonly keepMaximum: boolean;
  readonly airDensityKgM3: number;
  readonly maximumIs: VortexInput['maximumIs'];
  readonly numbers: Readonly<Record<string, number>>;
  /** turns the recipe's winds into 1-min means */
  readonly toOneMinute: number;
}

export function fieldMethods(recipe: Recipe): FieldMethods {
  const layer = recipe['surface.layer'] !== 'none';
  const motion = MOTIONS.find((method) => method.id === recipe['surface.motion'])!;
  const fraction = recipeNumber(recipe, 'surface.motion_fraction');
  const own: MotionShare = {
    sizeMps: (translationMps) => fraction * translationMps,
    rotationDeg: recipeNumber(recipe, 'surface.motion_rotation_deg'),
    weight: recipeWord(recipe, 'surface.motion_weight') as MotionWeight,
  };
  const share = motion.kind === 'own' ? own : (motion.share ?? null);
  const reduction = REDUCTIONS.find((method) => method.id === recipe['surface.reduction'])!;
  const averagingS = recipeNumber(recipe, 'wind.averaging_s');
  const convert =
    reduction.averagingS === null || reduction.averagingS === averagingS
      ? 1
      : averagingFactor('at-sea', { fromS: reduction.averagingS, toS: averagingS });
  return {
    profile: profileMethod(recipeWord(recipe, 'vortex.profile'))!,
    reduction: convert === 1 ? reduction : { ...reduction, ratio: (input) => convert * reduction.ratio(input) },
    inflow: INFLOWS.find((method) => method.id === recipe['surface.inflow'])!,
    motion: layer ? null : share,
    movingBalance: !layer && motion.kind === 'balance',
    layer,
    keepMaximum: recipe['surface.maximum'] === 'kept',
    airDensityKgM3: recipeNumber(recipe, 'vortex.density_kgm3'),
    maximumIs: recipeWord(recipe, 'vortex.maximum') as VortexInput['maximumIs'],
    toOneMinute: averagingFactor('at-sea', { fromS: recipeNumber(recipe, 'wind.averaging_s'), toS: 60 }),
    numbers: methodNumbers(recipe),
  };
}

/** Numbers of single methods: every `vortex.` and `surface.` entry that is a number, by its name after the dot; 1 for a word. */
function methodNumbers(recipe: Recipe): Record<string, number> {
  const numbers: Record<string, number> = {};
  for (const [key, value] of Object.entries(recipe)) {
    const [group, name] = key.split('.') as [string, string];
    if (group !== 'vortex' && group !== 'surface') continue;
    if (typeof value === 'number') numbers[name] = value;
    else numbers[`${name}=${value}`] = 1;
  }
  return numbers;
}

/** Share of the outer radius over which the wind is tapered to zero. */
export const TAPER_SHARE = 0.1;

/** 1 inside the taper, falling smoothly (3t² − 2t³) to 0 at the outer radius. */
export function taper(radiusM: number, outerRadiusM: number): number {
  const t = (outerRadiusM - radiusM) / (TAPER_SHARE * outerRadiusM);
  if (t >= 1) return 1;
  return t <= 0 ? 0 : t * t * (3 - 2 * t);
}

/** The maximum of the field over the state's wind: by so little more that a wind as high as the maximum itself has a place. */
export const MAXIMUM_LIFT = 1.001;

/**
 * The wind field of a state. With `surface.maximum=kept` the gradient-level maximum is solved so that the maximum of the
 * earth-relative 10-m field is 1.001 of the state's wind (to 10⁻⁴ of it): a storm of 50 kt has somewhere a wind of 50 kt.
 */
export function windField(
  state: StormState,
  methods: FieldMethods,
  { outerRadiusM }: { outerRadiusM: number },
): WindField {
  const translationMps = Math.hypot(state.motionEastMps, state.motionNorthMps);
  const background = methods.motion ? backgroundWind(methods.motion, state) : ([0, 0] as const);
  const backgroundMps = Math.hypot(background[0], background[1]);
  const nominal = surfaceRatio(methods, state);
  const fieldFor = (gradientMaxMps: number): WindField =>
    buildField(state, methods, { gradientMaxMps, ratio: nominal, background, translationMps, outerRadiusM });
  if (!methods.keepMaximum) return fieldFor(state.maxWindMps / nominal);

  // the maximum grows with the gradient wind at about the reduction's ratio: step by it until the maximum is met
  const soughtMps = MAXIMUM_LIFT * state.maxWindMps;
  let gradientMaxMps = (soughtMps - backgroundMps) / nominal;
  let field = fieldFor(gradientMaxMps);
  let [lastMps, lastExcess] = [0, 0];
  for (let i = 0; i < 12; i++) {
    const excess = maximumOf(field) - soughtMps;
    if (Math.abs(excess) <= 1e-4 * state.maxWindMps) break;
    // where the ratio is another one than that at the maximum, what the last step did tells it
    const slope = i > 1 && gradientMaxMps !== lastMps ? (excess - lastExcess) / (gradientMaxMps - lastMps) : nominal;
    [lastMps, lastExcess] = [gradientMaxMps, excess];
    gradientMaxMps = Math.max(0.05, gradientMaxMps - excess / (slope > 0.2 ? slope : nominal));
    field = fieldFor(gradientMaxMps);
  }
  return field;
}

/** 10-m over gradient-level wind at the maximum of a vortex whose 10-m wind is given. */
export function surfaceRatio(
  { reduction, numbers }: FieldMethods,
  { maxWindMps, radiusOfMaxWindM }: { maxWindMps: number; radiusOfMaxWindM: number },
): number {
  return ratioOfSurfaceWind(reduction, {
    surfaceWindMps: maxWindMps,
    radiusM: radiusOfMaxWindM,
    radiusOfMaxWindM,
    numbers,
  });
}

function buildField(
  state: StormState,
  methods: FieldMethods,
  parts: {
    gradientMaxMps: number;
    /** 10-m over gradient-level wind at the maximum */
    ratio: number;
    background: readonly [number, number];
    translationMps: number;
    outerRadiusM: number;
  },
): WindField {
  const { gradientMaxMps, background, translationMps, outerRadiusM } = parts;
  const radiusOfMaxWindM = state.radiusOfMaxWindM;
  const profile = methods.profile.build({
    maxWindMps: gradientMaxMps,
    radiusOfMaxWindM,
    coriolisPerS: Math.abs(coriolisPerS(state.latDeg)),
    latDeg: state.latDeg,
    hollandB: state.hollandB,
    centralPressurePa: state.centralPressurePa,
    ambientPressurePa: state.ambientPressurePa,
    airDensityKgM3: methods.airDensityKgM3,
    translationMps,
    maximumIs: methods.maximumIs,
    size: {
      radiusM: state.sizeRadiusM,
      ownMaxMps: methods.toOneMinute * parts.ratio * gradientMaxMps,
      fieldMaxMps: methods.toOneMinute * state.maxWindMps,
    },
    // the reduction in force, whichever it is
    numbers: { ...methods.numbers, factor: parts.ratio },
  });
  const coriolis = Math.abs(coriolisPerS(state.latDeg));
  const weightOf = methods.motion ? MOTION_WEIGHTS[methods.motion.weight] : () => 0;
  const backgroundMps = Math.hypot(background[0], background[1]);
  const h = state.hemisphere;

  /** tangential 10-m wind of the vortex, weight of the background and the reduction at a radius, all tapered */
  function vortexAndWeight(radiusM: number): readonly [speed: number, weight: number, reduction: number] {
    const fade = taper(radiusM, outerRadiusM);
    if (fade === 0) return [0, 0, 0];
    const gradient = Math.max(0, profile.windMps(radiusM));
    const ratio = methods.reduction.ratio({
      gradientWindMps: gradient,
      radiusM,
      radiusOfMaxWindM,
      numbers: methods.numbers,
    });
    const weight = weightOf({
      radiusM,
      radiusOfMaxWindM,
      relativeWind: gradientMaxMps > 0 ? gradient / gradientMaxMps : 0,
    });
    return [fade * ratio * gradient, fade * weight, fade * ratio];
  }

  const angleAt = (radiusM: number, azimuthFromHeadingDeg: number): number =>
    methods.inflow.angleDeg({
      radiusRatio: radiusM / radiusOfMaxWindM,
      maxWindMps: state.maxWindMps,
      translationMps,
      azimuthFromHeadingDeg,
    }) * RADIANS;

  // a storm at rest heads poleward; the azimuth by its sine and cosine keeps the mirror exact
  const headingEast = translationMps > 0 ? state.motionEastMps / translationMps : 0;
  const headingNorth = translationMps > 0 ? state.motionNorthMps / translationMps : h;
  const cosineOf = (east: number, north: number): number => east * headingEast + north * headingNorth;
  const sineOf = (east: number, north: number): number => h * (east * headingNorth - north * headingEast);
  const heldMps = heldTranslation(translationMps, state.maxWindMps);

  /** gradient wind of a balance that holds the motion */
  const movingWind = (gradient: number, radiusM: number, azimuthFromHeadingDeg: number): number =>
    movingGradientWind(gradient, {
      radiusM,
      coriolisPerS: coriolis,
      translationMps: heldMps,
      azimuthFromHeadingDeg,
    });

  function vortexOnCircle(out: Float64Array, radiusM: number, directions: Float64Array): void {
    const [speed, weight, reduction] = vortexAndWeight(radiusM);
    const gradient = methods.movingBalance ? Math.max(0, profile.windMps(radiusM)) : 0;
    const around = methods.inflow.asymmetric || methods.movingBalance;
    const east0 = weight * background[0];
    const north0 = weight * background[1];
    let angle = around ? 0 : angleAt(radiusM, 0);
    let along = speed * Math.cos(angle);
    let inward = speed * Math.sin(angle);
    for (let i = 0; i < directions.length; i += 2) {
      const e = directions[i]!;
      const n = directions[i + 1]!;
      if (around) {
        const azimuthDeg = wrapBearing(Math.atan2(sineOf(e, n), cosineOf(e, n)) / RADIANS);
        angle = angleAt(radiusM, azimuthDeg);
        const own = methods.movingBalance ? reduction * movingWind(gradient, radiusM, azimuthDeg) : speed;
        along = own * Math.cos(angle);
        inward = own * Math.sin(angle);
      }
      // cyclonic direction: h·(−n, e); inward: −(e, n)
      out[i] = -h * n * along - e * inward + east0;
      out[i + 1] = h * e * along - n * inward + north0;
    }
  }

  /** the boundary layer's wind, and that of the constant reduction as far as the vortex is not stable */
  function layerOnCircle(out: Float64Array, radiusM: number, directions: Float64Array): void {
    const input = layerInput(profile, { radiusM, coriolisPerS: coriolis, translationMps: heldMps }, methods.numbers);
    const share = radiusM > 0 ? stability(input) : 0;
    const fade = share * taper(radiusM, outerRadiusM);
    if (share < 1) vortexOnCircle(out, radiusM, directions);
    else out.fill(0);
    const wind = fade > 0 ? kepert2001(input) : null;
    if (!wind) return;
    const [o0, oc, os] = wind.outward;
    const [a0, ac, as] = wind.along;
    for (let i = 0; i < directions.length; i += 2) {
      const e = directions[i]!;
      const n = directions[i + 1]!;
      const cosine = cosineOf(e, n);
      const sine = sineOf(e, n);
      const outward = o0 + oc * cosine + os * sine;
      const along = a0 + ac * cosine + as * sine;
      out[i] = (1 - share) * out[i]! + fade * (e * outward - h * n * along);
      out[i + 1] = (1 - share) * out[i + 1]! + fade * (n * outward + h * e * along);
    }
  }

  const onCircle = methods.layer ? layerOnCircle : vortexOnCircle;

  /** the vortex wind keeps its speed around the circle, so somewhere it is parallel to the background */
  function strongestOnCircle(radiusM: number): number {
    const [speed, weight] = vortexAndWeight(radiusM);
    if (!methods.inflow.asymmetric && !methods.movingBalance && !methods.layer) return speed + weight * backgroundMps;
    onCircle(circleWinds, radiusM, CIRCLE);
    let most = 0;
    for (let i = 0; i < circleWinds.length; i += 2)
      most = Math.max(most, circleWinds[i]! ** 2 + circleWinds[i + 1]! ** 2);
    return Math.sqrt(most);
  }

  return {
    state,
    profile,
    gradientMaxMps,
    outerRadiusM,
    onCircle,
    strongestOnCircle,
    severalMaxima: methods.layer,
  };
}

/** Step of a profile's slope, as a share of the radius. */
const SLOPE_STEP = 1e-3;

/** What the boundary layer takes from a vortex at a radius. */
function layerInput(
  profile: RadialProfile,
  at: { radiusM: number; coriolisPerS: number; translationMps: number },
  numbers: Readonly<Record<string, number>>,
): LayerInput {
  const { radiusM } = at;
  const step = SLOPE_STEP * radiusM;
  return {
    ...at,
    windMps: Math.max(0, profile.windMps(radiusM)),
    slopePerS: (profile.windMps(radiusM + step) - profile.windMps(radiusM - step)) / (2 * step),
    diffusivityM2ps: numbers['layer_diffusivity_m2ps']!,
    dragCoefficient: numbers['layer_drag']!,
  };
}

/** Radii at which a vortex is looked at for its stability, as multiples of the radius of maximum wind. */
const STABILITY_RATIOS = [0.3, 0.6, 0.9, 1.02, 1.1, 1.3, 1.6, 2, 3, 5, 8, 12, 20] as const;

/** Radii of a field, m, at which its vortex is inertially unstable, so that the boundary layer has no solution there. */
export function unstableRadiiM({ state, profile, outerRadiusM }: WindField, methods: FieldMethods): readonly number[] {
  const coriolis = Math.abs(coriolisPerS(state.latDeg));
  return STABILITY_RATIOS.map((ratio) => ratio * state.radiusOfMaxWindM).filter((radiusM) => {
    const at = { radiusM, coriolisPerS: coriolis, translationMps: 0 };
    return radiusM < outerRadiusM && !isInertiallyStable(layerInput(profile, at, methods.numbers));
  });
}

/** What the motion adds to the maximum of the vortex, for a translation speed, m/s. */
export function motionSize({ motion, movingBalance }: FieldMethods): (translationMps: number) => number {
  if (motion) return motion.sizeMps;
  return movingBalance ? (translationMps) => 0.5 * translationMps : () => 0;
}

/** 72 unit vectors around a circle: the maximum between two of them is at most 0.1 % above (cos 2.5°). */
const CIRCLE = circleDirections(72);
const circleWinds = new Float64Array(CIRCLE.length);
