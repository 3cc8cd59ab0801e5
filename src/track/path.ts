import { bearingDeg, destination, distanceM, type Place, RADIANS } from '../earth.js';
import type { CompletedTrack } from './complete.js';
import { type Curve, monotoneCubic, piecewiseLinear, segmentOf } from './interpolate.js';

/** Everything that is known of a storm at one time. */
export interface StormState {
  readonly timeMs: number;
  readonly latDeg: number;
  readonly lonDeg: number;
  readonly hemisphere: 1 | -1;
  /** motion of the centre, m/s, in the frame at the centre */
  readonly motionEastMps: number;
  readonly motionNorthMps: number;
  /** maximum sustained 10-m wind, m/s, in the completion's averaging period */
  readonly maxWindMps: number;
  readonly centralPressurePa: number;
  readonly ambientPressurePa: number;
  readonly radiusOfMaxWindM: number;
  /** the radius at which the storm's own 10-m wind would be 17.5 m/s by the size relation, m */
  readonly sizeRadiusM: number;
  readonly hollandB: number;
}

/** A storm at any time of its track. */
export interface Path {
  readonly startMs: number;
  readonly endMs: number;
  /** times of the fixes */
  readonly knotsMs: readonly number[];
  /** state at a time; before the first and after the last fix that fix's */
  readonly at: (timeMs: number) => StormState;
}

/** When the centre is nearest to a place between two times about that moment: golden section, to half a second. */
export function nearestMs({ at }: Path, place: Place, { fromMs, toMs }: { fromMs: number; toMs: number }): number {
  const distanceAt = (timeMs: number): number => distanceM(at(timeMs), place);
  const golden = (Math.sqrt(5) - 1) / 2;
  let [a, b] = [fromMs, toMs];
  while (b - a > 500) {
    const left = b - golden * (b - a);
    const right = a + golden * (b - a);
    if (distanceAt(left) <= distanceAt(right)) b = right;
    else a = left;
  }
  return 0.5 * (a + b);
}

/**
 * The path of a completed track: the centre on the great circle between fixes, with smooth speed; intensity and size by
 * monotone cubics in time, exact at every fix. The motion vector turns steadily from the middle of one leg to the middle
 * of the next (with `linear` it is constant on each leg).
 */
export function pathOf(
  completed: CompletedTrack,
  { interpolation }: { interpolation: 'monotone-cubic' | 'linear' },
): Path {
  const { fixes } = completed;
  const knotsMs = fixes.map((fix) => fix.timeMs);
  const startMs = knotsMs[0]!;
  const endMs = knotsMs[knotsMs.length - 1]!;
  const seconds = knotsMs.map((time) => (time - startMs) / 1000);
  const curveThrough = (values: readonly number[]): Curve =>
    (interpolation === 'linear' ? piecewiseLinear : monotoneCubic)(seconds, values);

  const legs = fixes.slice(1).map((to, i) => {
    const from = fixes[i]!;
    return { from, lengthM: distanceM(from, to), bearing: bearingDeg(from, to) };
  });
  const travelled = [0];
  for (const leg of legs) travelled.push(travelled[travelled.length - 1]! + leg.lengthM);
  const progress = curveThrough(travelled);
  const wind = curveThrough(fixes.map((fix) => fix.maxWindMps.value));
  const pressure = curveThrough(fixes.map((fix) => fix.centralPressurePa.value));
  const ambient = curveThrough(fixes.map((fix) => fix.ambientPressurePa.value));
  const radius = curveThrough(fixes.map((fix) => fix.radiusOfMaxWindM.value));
  const size = curveThrough(fixes.map((fix) => fix.sizeRadiusM.value));
  const shape = curveThrough(fixes.map((fix) => fix.hollandB.value));
  const motion = motionOf();

  return { startMs, endMs, knotsMs, at };

  function at(timeMs: number): StormState {
    const s = Math.min(seconds[seconds.length - 1]!, Math.max(0, (timeMs - startMs) / 1000));
    const [motionEastMps, motionNorthMps] = motion(s);
    const centre = centreAt(s);
    return {
      timeMs,
      latDeg: centre.latDeg,
      lonDeg: centre.lonDeg,
      hemisphere: completed.hemisphere,
      motionEastMps,
      motionNorthMps,
      maxWindMps: wind(s),
      centralPressurePa: pressure(s),
      ambientPressurePa: ambient(s),
      radiusOfMaxWindM: radius(s),
      sizeRadiusM: size(s),
      hollandB: shape(s),
    };
  }

  function centreAt(s: number): { latDeg: number; lonDeg: number } {
    if (legs.length === 0) return fixes[0]!;
    const i = segmentOf(seconds, s);
    if (s === seconds[i]) return fixes[i]!;
    if (s === seconds[i + 1]) return fixes[i + 1]!;
    const { from, bearing } = legs[i]!;
    return destination(from, { bearingDeg: bearing, distanceM: progress(s) - travelled[i]! });
  }

  /** The motion as a function of seconds: mean vectors of the legs at mid-leg, the mean of both legs at a fix. */
  function motionOf(): (s: number) => readonly [number, number] {
    if (legs.length === 0) return () => [0, 0];
    const mean = legs.map((leg, i) => {
      const speed = leg.lengthM / (seconds[i + 1]! - seconds[i]!);
      const middle = destination(leg.from, { bearingDeg: leg.bearing, distanceM: leg.lengthM / 2 });
      const heading = bearingDeg(middle, fixes[i + 1]!) * RADIANS;
      return [speed * Math.sin(heading), speed * Math.cos(heading)] as const;
    });
    if (interpolation === 'linear') return (s) => mean[segmentOf(seconds, s)]!;
    const times = [0, ...legs.map((_, i) => 0.5 * (seconds[i]! + seconds[i + 1]!)), seconds[seconds.length - 1]!];
    const vectors = [mean[0]!, ...mean, mean[mean.length - 1]!];
    const east = piecewiseLinear(
      times,
      vectors.map((v) => v[0]),
    );
    const north = piecewiseLinear(
      times,
      vectors.map((v) => v[1]),
    );
    return (s) => [east(s), north(s)];
  }
}
