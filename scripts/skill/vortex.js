// The default vortex with free coefficients, and the mean of its quadrants' radii: what `galewake verify` finds for the
// default recipe without observed radii, fast enough to be fitted.
import { MAXIMUM_LIFT } from '../../dist/model/field.js';
import { backgroundWind, LIN_CHAVAS_2012 } from '../../dist/surface/motion.js';
import { radius2016M } from '../../dist/track/relations/radius2016.js';
import { SIZE_BOUNDS_M } from '../../dist/track/relations/size.js';
import { PROFILE_2016, stretchedExponential } from '../../dist/vortex/calibrated2016.js';

const WINDS_MPS = [34, 50, 64].map((kt) => (kt * 1852) / 3600);
const AZIMUTHS = 24;
const INFLOW = (25 * Math.PI) / 180;
const STEPS = 64;
const FARTHEST_M = 2_500_000;

/** (fix, coefficients, radius of 34 kt where it is known) → its vortex; the coefficients are seven of the size, then p's two and k. */
export function profileStorm(inputs) {
  return (fix, c, radiusOf34KtM = null) => {
    const size = inputs.get(fix).reduce((sum, x, i) => sum + x * c[i], 0);
    const sizeRadiusM = Math.min(SIZE_BOUNDS_M[1], Math.max(SIZE_BOUNDS_M[0], 1000 * Math.exp(size)));
    const radiusOfMaxWindM = radius2016M({
      maxWindMps: fix.windMps,
      surfaceFactor: 0.9,
      latDeg: fix.latDeg,
      pressureDeficitPa: 100 * (fix.deficitHpa ?? 1),
      translationMps: fix.translationMps,
      radiusOf34KtM,
      sizeRadiusM,
    });
    const [low, high] = PROFILE_2016.outerBounds;
    const outer = Math.min(high, Math.max(low, c[7] + c[8] * Math.log(fix.windMps / 35)));
    const background = backgroundWind(LIN_CHAVAS_2012, fix.state);
    const maxWindMps = MAXIMUM_LIFT * fix.windMps - Math.hypot(...background);
    const shape = stretchedExponential({
      maxWindMps,
      radiusOfMaxWindM,
      sizeRadiusM: Math.max(1.05 * radiusOfMaxWindM, sizeRadiusM),
      outer,
      stretch: c[9],
    });
    return { shape, maxWindMps, radiusOfMaxWindM, sizeRadiusM, background, hemisphere: fix.state.hemisphere };
  };
}

/** wind of the vortex alone → the radius outside R at which it blows, m; 0 where it does not */
function radiusOfWind({ shape, maxWindMps, radiusOfMaxWindM }) {
  const step = Math.log(FARTHEST_M / radiusOfMaxWindM) / STEPS;
  const logs = new Float64Array(STEPS + 1);
  for (let i = 0; i <= STEPS; i++) logs[i] = Math.log(maxWindMps * shape(radiusOfMaxWindM * Math.exp(i * step)));
  return (windMps) => {
    const sought = Math.log(windMps);
    if (logs[0] < sought) return 0;
    let low = 0;
    let high = STEPS;
    if (logs[high] > sought) return FARTHEST_M;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (logs[middle] >= sought) low = middle;
      else high = middle;
    }
    return radiusOfMaxWindM * Math.exp((low + (logs[low] - sought) / (logs[low] - logs[high])) * step);
  };
}

/** The radius of 34 kt on the strongest azimuth, m. */
export function strongestOf34Kt(storm) {
  return radiusOfWind(storm)(WINDS_MPS[0] - Math.hypot(...storm.background));
}

/** Mean over the quadrants of the farthest radius of 34, 50 and 64 kt, km. */
export function meanRadii(storm) {
  const { background, hemisphere: h } = storm;
  const radiusOf = radiusOfWind(storm);
  const squared = background[0] ** 2 + background[1] ** 2;
  return WINDS_MPS.map((wind) => {
    const farthest = [0, 0, 0, 0];
    for (let i = 0; i < AZIMUTHS; i++) {
      const e = Math.sin((2 * Math.PI * i) / AZIMUTHS);
      const n = Math.cos((2 * Math.PI * i) / AZIMUTHS);
      const along =
        background[0] * (-h * n * Math.cos(INFLOW) - e * Math.sin(INFLOW)) +
        background[1] * (h * e * Math.cos(INFLOW) - n * Math.sin(INFLOW));
      const own = -along + Math.sqrt(Math.max(1, wind * wind - squared + along * along));
      const radius = radiusOf(own);
      for (let j = 0; j < 4; j++) {
        const from = (j * AZIMUTHS) / 4;
        const at = i === 0 && j === 3 ? AZIMUTHS : i;
        if (at >= from && at <= from + AZIMUTHS / 4) farthest[j] = Math.max(farthest[j], radius);
      }
    }
    return farthest.reduce((sum, r) => sum + r, 0) / 4000;
  });
}
