import { RADIANS } from '../earth.js';
import { type RadiiState, type Stretch, stretchAround } from '../vortex/radii.js';
import { circleDirections } from './circle.js';
import { taper, type WindField } from './field.js';

/** How far out the base vortex is tabulated, m, and in how many steps of the logarithm. */
const FARTHEST_M = 3_000_000;
const STEPS = 256;
/** By how much a wind that is observed must lie below the maximum of the field. */
const LIFT = 1.004;

/** 72 unit vectors around a circle. */
const CIRCLE = circleDirections(72);

/**
 * A field stretched so that its winds reach as far as a set of radii says. Along each azimuth the speed is that of the base
 * field's strongest azimuth at a stretched radius; the direction is the base field's own. Inside the ridge the base wind is
 * scaled so that the two meet at the ridge.
 * @param base the same state's field with an outer radius beyond 3000 km, so that nothing of it is tapered
 */
export function fieldWithRadii(
  base: WindField,
  radii: RadiiState,
  { outerRadiusM }: { outerRadiusM: number },
): WindField {
  const { radiusOfMaxWindM } = base.state;
  const step = Math.log(FARTHEST_M / radiusOfMaxWindM) / STEPS;
  const logWind = new Float64Array(STEPS + 1);
  for (let i = 0; i <= STEPS; i++) {
    const wind = Math.log(Math.max(1e-3, base.strongestOnCircle(radiusOfMaxWindM * Math.exp(i * step))));
    logWind[i] = i === 0 ? wind : Math.min(wind, logWind[i - 1]!);
  }
  // a wind as high as the maximum itself has a radius, too: the ridge is lifted by less than the model's tolerance
  const top = radii.levels.find(({ logRatio }) => logRatio.some((ratio, j) => ratio > radii.ridge[j]!));
  if (top) logWind[0] = Math.max(logWind[0]!, Math.log(LIFT * Math.min(top.windMps, base.state.maxWindMps)));
  const windAtLog = (q: number): number => {
    const at = Math.min(STEPS, Math.max(0, q / step));
    const i = Math.min(STEPS - 1, Math.floor(at));
    return Math.exp(logWind[i]! + (logWind[i + 1]! - logWind[i]!) * (at - i));
  };
  const baseLogRadius = (windMps: number): number => {
    const sought = Math.log(windMps);
    let low = 0;
    let high = STEPS;
    if (logWind[0]! <= sought) return 0;
    if (logWind[STEPS]! > sought) return STEPS * step;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (logWind[middle]! > sought) low = middle;
      else high = middle;
    }
    const drop = logWind[low]! - logWind[high]!;
    return (low + (drop > 0 ? (logWind[low]! - sought) / drop : 0)) * step;
  };
  const stretchAt = stretchAround(radii, { maxWindMps: Math.exp(logWind[0]!), baseLogRadius });

  /** one azimuth: the stretch and by how much the base wind is scaled at the ridge */
  interface Azimuth {
    readonly stretch: Stretch;
    readonly ridgeM: number;
    readonly scale: number;
  }
  const one = new Float64Array(2);
  const oneWind = new Float64Array(2);
  function azimuthOf(east: number, north: number): Azimuth {
    const stretch = stretchAt((Math.atan2(east, north) / RADIANS + 360) / 45);
    const ridgeM = radiusOfMaxWindM * Math.exp(stretch.ridge);
    one[0] = east;
    one[1] = north;
    base.onCircle(oneWind, ridgeM, one);
    const own = Math.hypot(oneWind[0]!, oneWind[1]!);
    return { stretch, ridgeM, scale: own > 0 ? windAtLog(stretch.at(0)) / own : 1 };
  }
  // circle after circle is asked for along the same directions
  let cachedFor = new Float64Array(0);
  let cached: Azimuth[] = [];
  function azimuthsOf(directions: Float64Array): Azimuth[] {
    if (cachedFor.length === directions.length && cachedFor.every((value, i) => value === directions[i])) return cached;
    cachedFor = directions.slice();
    cached = [];
    for (let i = 0; i < directions.length; i += 2) cached.push(azimuthOf(directions[i]!, directions[i + 1]!));
    return cached;
  }

  function onCircle(out: Float64Array, radiusM: number, directions: Float64Array): void {
    const fade = taper(radiusM, outerRadiusM);
    if (fade === 0) {
      out.fill(0);
      return;
    }
    const azimuths = azimuthsOf(directions);
    base.onCircle(out, radiusM, directions);
    for (let i = 0; i < azimuths.length; i++) {
      const { stretch, ridgeM, scale } = azimuths[i]!;
      const east = out[2 * i]!;
      const north = out[2 * i + 1]!;
      let factor: number;
      if (radiusM <= ridgeM) {
        const s = radiusM / ridgeM;
        factor = 1 + (scale - 1) * s * s;
      } else {
        const speed = Math.hypot(east, north);
        factor = speed > 0 ? windAtLog(stretch.at(Math.log(radiusM / ridgeM))) / speed : 0;
      }
      out[2 * i] = fade * factor * east;
      out[2 * i + 1] = fade * factor * north;
    }
  }

  const circleWinds = new Float64Array(CIRCLE.length);
  function strongestOnCircle(radiusM: number): number {
    onCircle(circleWinds, radiusM, CIRCLE);
    let most = 0;
    for (let i = 0; i < circleWinds.length; i += 2)
      most = Math.max(most, circleWinds[i]! ** 2 + circleWinds[i + 1]! ** 2);
    return Math.sqrt(most);
  }

  return { ...base, outerRadiusM, onCircle, strongestOnCircle };
}
