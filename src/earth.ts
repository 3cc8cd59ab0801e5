/**
 * The Earth as the model knows it: a sphere of the mean radius, turning at Ω.
 * Against the WGS 84 ellipsoid a distance on this sphere is at most 0.562 % off (along a meridian at the equator).
 */

/** Mean radius R1 = (2a + b)/3 of WGS 84, m [Moritz2000]. */
export const EARTH_RADIUS_M = 6371008.8;
/** Angular velocity of the Earth, rad/s, as WGS 84 defines it [WGS84]. */
export const EARTH_ROTATION_PER_S = 7.292115e-5;

export const RADIANS = Math.PI / 180;

/** Coriolis parameter f = 2Ω sin φ, 1/s: positive in the north, negative in the south. */
export function coriolisPerS(latDeg: number): number {
  return 2 * EARTH_ROTATION_PER_S * Math.sin(latDeg * RADIANS);
}

/** Longitude in −180 ≤ λ < 180. */
export function wrapLongitude(lonDeg: number): number {
  const wrapped = ((((lonDeg + 180) % 360) + 360) % 360) - 180;
  return wrapped;
}

/** Bearing in 0 ≤ β < 360. */
export function wrapBearing(bearingDeg: number): number {
  const wrapped = ((bearingDeg % 360) + 360) % 360;
  return wrapped === 360 ? 0 : wrapped;
}

export interface Place {
  readonly latDeg: number;
  readonly lonDeg: number;
}

/** Great-circle distance on the mean sphere, m (haversine form, accurate for near and far). */
export function distanceM(a: Place, b: Place): number {
  const dLat = (b.latDeg - a.latDeg) * RADIANS;
  const dLon = (b.lonDeg - a.lonDeg) * RADIANS;
  const h =
    Math.sin(dLat / 2) ** 2 + Math.cos(a.latDeg * RADIANS) * Math.cos(b.latDeg * RADIANS) * Math.sin(dLon / 2) ** 2;
  return 2 * EARTH_RADIUS_M * Math.atan2(Math.sqrt(h), Math.sqrt(Math.max(0, 1 - h)));
}

/** Initial great-circle bearing from `a` to `b`, degrees clockwise from north; 0 when they coincide. */
export function bearingDeg(a: Place, b: Place): number {
  const la = a.latDeg * RADIANS;
  const lb = b.latDeg * RADIANS;
  const dLon = (b.lonDeg - a.lonDeg) * RADIANS;
  const east = Math.sin(dLon) * Math.cos(lb);
  // sin(lb − la) + 2 sin(la) cos(lb) sin²(Δλ/2): no cancellation for near places
  const north = Math.sin(lb - la) + 2 * Math.sin(la) * Math.cos(lb) * Math.sin(dLon / 2) ** 2;
  return east === 0 && north === 0 ? 0 : wrapBearing(Math.atan2(east, north) / RADIANS);
}

/** The place `distance` metres from `from` along the great circle that leaves at `bearing` degrees. */
export function destination(from: Place, leg: { readonly bearingDeg: number; readonly distanceM: number }): Place {
  const angle = leg.distanceM / EARTH_RADIUS_M;
  const la = from.latDeg * RADIANS;
  const az = leg.bearingDeg * RADIANS;
  const z = Math.sin(la) * Math.cos(angle) + Math.cos(la) * Math.sin(angle) * Math.cos(az);
  const x = Math.cos(la) * Math.cos(angle) - Math.sin(la) * Math.sin(angle) * Math.cos(az);
  const y = Math.sin(angle) * Math.sin(az);
  return {
    latDeg: Math.atan2(z, Math.hypot(x, y)) / RADIANS,
    lonDeg: wrapLongitude(from.lonDeg + Math.atan2(y, x) / RADIANS),
  };
}
