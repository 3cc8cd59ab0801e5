import { destination, RADIANS } from '../earth.js';
import type { WindModel } from '../model/wind.js';
import { type Grid, gridOver, projection } from './grid.js';

/** Metres in one degree of a great circle on the mean sphere. */
export const METRES_PER_DEGREE = 111_195.0797;
/** Margin around the area of the lowest level, m. */
const MARGIN_M = 30_000;
/** Around a track whose wind never reaches the lowest level, m. */
const LEAST_RADIUS_M = 50_000;

/**
 * A grid that holds every place where the wind may reach `lowestMps` (a wind, or a gust divided by its factor),
 * with a margin. A geographic grid stays continuous across ±180°: its east may lie beyond 180.
 */
export function fitGrid(
  model: WindModel,
  options: { crs: string; cell: number; lowestMps: number; fromMs: number; toMs: number },
): Grid {
  const { geographic, forward } = projection(options.crs);
  let [west, south, east, north] = [
    Number.POSITIVE_INFINITY,
    Number.POSITIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
    Number.NEGATIVE_INFINITY,
  ];
  const include = (x: number, y: number): void => {
    west = Math.min(west, x);
    east = Math.max(east, x);
    south = Math.min(south, y);
    north = Math.max(north, y);
  };
  let lastLon: number | null = null;
  const stepMs = 1_800_000;
  const steps = Math.max(1, Math.ceil((options.toMs - options.fromMs) / stepMs));
  for (let i = 0; i <= steps; i++) {
    const field = model.fieldAt(options.fromMs + ((options.toMs - options.fromMs) * i) / steps);
    const { latDeg, lonDeg } = field.state;
    // keep longitudes continuous along the track
    const lon: number = lastLon === null ? lonDeg : lonDeg + 360 * Math.round((lastLon - lonDeg) / 360);
    lastLon = lon;
    const radiusM = reach(field, options.lowestMps) + MARGIN_M;
    if (geographic) {
      const dLat = radiusM / METRES_PER_DEGREE;
      const angle = dLat * RADIANS;
      const overPole = Math.abs(latDeg) + dLat >= 90;
      const dLon = overPole ? 180 : Math.asin(Math.min(1, Math.sin(angle) / Math.cos(latDeg * RADIANS))) / RADIANS;
      include(lon - dLon, Math.max(-90, latDeg - dLat));
      include(lon + dLon, Math.min(90, latDeg + dLat));
    } else {
      for (let bearing = 0; bearing < 360; bearing += 15) {
        const place = destination({ latDeg, lonDeg }, { bearingDeg: bearing, distanceM: radiusM * 1.01 });
        const [x, y] = forward(place.lonDeg, place.latDeg);
        if (Number.isFinite(x) && Number.isFinite(y)) include(x, y);
      }
    }
  }
  if (geographic && west < -180) {
    west += 360;
    east += 360;
  } else if (geographic && west >= 180) {
    west -= 360;
    east -= 360;
  }
  const all = geographic && east - west + 2 * options.cell > 360;
  // cells are counted from the first fix in longitude, so that the same storm elsewhere has the same cells
  const first = model.path.at(options.fromMs).lonDeg;
  const anchor = geographic ? first + 360 * Math.round((west - first) / 360) : 0;
  const whole = (value: number, round: (x: number) => number, from = 0): number =>
    Number((from + round((value - from) / options.cell) * options.cell).toFixed(9));
  return gridOver({
    crs: options.crs,
    cell: options.cell,
    bounds: [
      all ? -180 : whole(west, Math.floor, anchor),
      Math.max(geographic ? -90 : Number.NEGATIVE_INFINITY, whole(south, Math.floor)),
      all ? 180 : whole(east, Math.ceil, anchor),
      Math.min(geographic ? 90 : Number.POSITIVE_INFINITY, whole(north, Math.ceil)),
    ],
  });
}

/** The farthest circle on which the wind somewhere reaches the level, m (to 2 %, outward). */
function reach(field: ReturnType<WindModel['fieldAt']>, levelMps: number): number {
  let farthest = LEAST_RADIUS_M;
  for (let radiusM = LEAST_RADIUS_M; radiusM < field.outerRadiusM; radiusM *= 1.02) {
    if (field.strongestOnCircle(radiusM) >= levelMps) farthest = radiusM * 1.02;
  }
  return Math.min(farthest, field.outerRadiusM);
}
