import { coriolisPerS, distanceM } from '../earth.js';
import { InputError } from '../errors.js';
import { averagingFactor } from '../surface/averaging.js';
import { HOUR_MS, knots } from '../units.js';
import { gradientConsistentB, HOLLAND_B_BOUNDS } from '../vortex/holland1980.js';
import { monotoneCubic, piecewiseLinear } from './interpolate.js';
import { ambientPressurePa } from './relations/ambient-pressure.js';
import { HOLLAND_B_RELATIONS } from './relations/holland-b.js';
import type { PressureWindInput } from './relations/pressure-wind.js';
import { PRESSURE_WIND_RELATIONS } from './relations/pressure-wind-relations.js';
import { RADIUS_BOUNDS_M, type RadiusInput } from './relations/radius-of-max-wind.js';
import { RADIUS_RELATIONS } from './relations/radius-relations.js';
import { dayMeans, SIZE_RELATIONS } from './relations/size.js';
import { type Fix, hemisphereOf, type Track } from './track.js';

/** Where a value came from: the source, a neighbour in time, or a relation. */
export type Origin = 'given' | 'interpolated' | 'estimated';

/** A value and where it came from. `by` names the relation, or what was done to a given value. */
export interface Traced {
  readonly value: number;
  readonly origin: Origin;
  readonly by: string | null;
}

/** A fix with everything the model needs. Winds are in the averaging period of the completion. */
export interface CompletedFix {
  readonly fix: Fix;
  readonly timeMs: number;
  readonly latDeg: number;
  readonly lonDeg: number;
  /** maximum sustained 10-m wind, m/s, over `averagingS` */
  readonly maxWindMps: Traced;
  readonly centralPressurePa: Traced;
  readonly ambientPressurePa: Traced;
  readonly radiusOfMaxWindM: Traced;
  /** the radius at which the storm's own 10-m wind would be 17.5 m/s by the size relation, m */
  readonly sizeRadiusM: Traced;
  readonly hollandB: Traced;
}

export interface CompletedTrack {
  readonly track: Track;
  readonly hemisphere: 1 | -1;
  readonly averagingS: number;
  readonly fixes: readonly CompletedFix[];
  readonly cautions: readonly string[];
}

/** Choices of the completion; each has its entry in the recipe. */
export interface CompletionOptions {
  /** averaging period of the completed winds, s */
  readonly averagingS: number;
  readonly pressure: string;
  readonly rmax: string;
  /** name of the size relation, or the size itself, m */
  readonly size: string | number;
  /** whether observed wind radii count: an estimated radius of maximum wind then lies inside them */
  readonly radii: 'fit' | 'ignore';
  readonly ambientHpa: number | 'basin';
  /** B itself, an identity (`gradient-consistent`, `cyclostrophic`) or the name of a relation */
  readonly b: number | string;
  /** temperature of the sea, °C, for relations that ask for it */
  readonly seaTemperatureC: number;
  readonly maxGapH: number;
  readonly interpolation: 'monotone-cubic' | 'linear';
  /** 10-m over gradient-level wind near the maximum */
  readonly surfaceFactor: (surfaceWindMps: number) => number;
  readonly airDensityKgM3: number;
  /** share of the translation speed that is not the vortex's own wind */
  readonly motionMps: (translationMps: number) => number;
}

/** Smallest pressure deficit a wind field is built on, Pa. */
const LEAST_DEFICIT_PA = 100;
/** Smallest maximum wind, m/s: a calm vortex has no shape. */
const LEAST_WIND_MPS = 1;

/** The one for its name; the recipe has checked that it exists. */
function named<T extends { readonly id: string }>(methods: readonly T[], id: string): T {
  const method = methods.find((candidate) => candidate.id === id);
  if (!method)
    throw new InputError(
      'completion.relation',
      `there is no relation '${id}'; known are ${methods.map((m) => m.id).join(', ')}`,
    );
  return method;
}

/**
 * Fills in what a track leaves out. Order at each fix: ambient pressure; wind (given, from the pressure, or between
 * neighbours); pressure from the wind; radius of maximum wind; B. A value that was given is kept.
 * @throws InputError `track.gap`, `track.no-intensity`, `track.on-equator`
 */
export function completeTrack(track: Track, options: CompletionOptions): CompletedTrack {
  const hemisphere = hemisphereOf(track);
  const cautions: string[] = [...track.cautions];
  refuseGaps(track, options.maxGapH);
  const { fixes } = track;
  const times = fixes.map((fix) => fix.timeMs);
  const translation = translationSpeeds(fixes);
  const pressureWind = named(PRESSURE_WIND_RELATIONS, options.pressure);
  const radius = named(RADIUS_RELATIONS, options.rmax);
  const sizeRelation = typeof options.size === 'string' ? named(SIZE_RELATIONS, options.size) : null;

  const ambient = fixes.map((fix): Traced => {
    if (fix.ambientPressurePa !== null) return { value: fix.ambientPressurePa, origin: 'given', by: null };
    if (options.ambientHpa !== 'basin') return { value: options.ambientHpa * 100, origin: 'estimated', by: 'recipe' };
    const found = ambientPressurePa(fix, track.basin);
    return { value: found.valuePa, origin: 'estimated', by: found.by };
  });
  const meanOf34Kt = (fix: Fix): number | null => (options.radii === 'fit' ? meanRadiusM(fix, knots(34)) : null);
  const relationInput = (i: number): PressureWindInput => ({
    latDeg: fixes[i]!.latDeg,
    lonDeg: fixes[i]!.lonDeg,
    basin: track.basin,
    translationMps: translation[i]!,
    radiusOf34KtM: meanOf34Kt(fixes[i]!),
    ambientPressurePa: ambient[i]!.value,
    pressureTrendPaPerS: pressureTrendPaPerS(fixes, i),
    airDensityKgM3: options.airDensityKgM3,
  });
  const byPressureWind = (i: number, from: 'wind' | 'pressure'): string => {
    const note = pressureWind.note?.(relationInput(i)) ?? null;
    return `${pressureWind.id} from ${from}${note === null ? '' : `; ${note}`}`;
  };
  // relations are for 1-min winds
  const toOneMinute = averagingFactor('at-sea', { fromS: options.averagingS, toS: 60 });

  const estimatedRadius = (input: RadiusInput): Traced => {
    const raw = radius.radiusM(input);
    const value = Math.min(RADIUS_BOUNDS_M[1], Math.max(RADIUS_BOUNDS_M[0], raw));
    const note = radius.note?.(input) ?? null;
    const limit = value === raw ? '' : `, limited to ${RADIUS_BOUNDS_M[0] / 1000}–${RADIUS_BOUNDS_M[1] / 1000} km`;
    return { value, origin: 'estimated', by: `${radius.id}${note === null ? '' : `; ${note}`}${limit}` };
  };

  const stated = fixes.map((fix, i): Traced | null => {
    if (fix.maxWindMps !== null) {
      const factor = averagingFactor('at-sea', { fromS: fix.averagingS, toS: options.averagingS });
      const by = factor === 1 ? null : `from ${fix.averagingS} s to ${options.averagingS} s, WMO 2010 at sea`;
      return { value: fix.maxWindMps * factor, origin: 'given', by };
    }
    if (fix.centralPressurePa === null) return null;
    const wind = pressureWind.maxWindMps(fix.centralPressurePa, relationInput(i)) / toOneMinute;
    return { value: wind, origin: 'estimated', by: byPressureWind(i, 'pressure') };
  });
  const wind = between(stated, times, options.interpolation);
  if (!wind) {
    throw new InputError(
      'track.no-intensity',
      `storm ${track.id}: no fix has a maximum wind or a central pressure; give at least one`,
    );
  }

  const intensities = fixes.map((fix, i) => {
    const maxWind = { ...wind[i]!, value: Math.max(LEAST_WIND_MPS, wind[i]!.value) };
    const oneMinute = maxWind.value * toOneMinute;
    let pressure: Traced =
      fix.centralPressurePa !== null
        ? { value: fix.centralPressurePa, origin: 'given', by: null }
        : {
            value: pressureWind.centralPressurePa(oneMinute, relationInput(i)),
            origin: 'estimated',
            by: byPressureWind(i, 'wind'),
          };
    let around = ambient[i]!;
    if (pressure.value > around.value - LEAST_DEFICIT_PA) {
      if (fix.centralPressurePa === null)
        pressure = {
          ...pressure,
          value: around.value - LEAST_DEFICIT_PA,
          by: `${pressure.by}, limited to 1 hPa below the ambient pressure`,
        };
      else
        around = {
          value: pressure.value + LEAST_DEFICIT_PA,
          origin: 'estimated',
          by: 'central pressure + 1 hPa (the usual ambient pressure is below it)',
        };
    }
    return { maxWind, oneMinute, pressure, around, deficit: around.value - pressure.value };
  });
  const dayMeanWind = dayMeans(
    times,
    intensities.map(({ oneMinute }) => oneMinute),
  );
  const dayMeanDeficit = dayMeans(
    times,
    intensities.map(({ deficit }) => deficit),
  );
  let highestWindMps = 0;
  const completed = fixes.map((fix, i): CompletedFix => {
    const { maxWind, oneMinute, pressure, around, deficit } = intensities[i]!;
    highestWindMps = Math.max(highestWindMps, oneMinute);
    const size: Traced = sizeRelation
      ? {
          value: sizeRelation.radiusM({
            maxWindMps: oneMinute,
            dayMeanWindMps: dayMeanWind[i]!,
            dayMeanDeficitPa: dayMeanDeficit[i]!,
            highestWindMps,
            latDeg: fix.latDeg,
            translationMps: translation[i]!,
          }),
          origin: 'estimated',
          by: sizeRelation.id,
        }
      : { value: options.size as number, origin: 'estimated', by: 'recipe' };
    let rmax: Traced =
      fix.radiusOfMaxWindM !== null
        ? { value: fix.radiusOfMaxWindM, origin: 'given', by: null }
        : estimatedRadius({
            maxWindMps: oneMinute,
            surfaceFactor: options.surfaceFactor(oneMinute),
            latDeg: fix.latDeg,
            pressureDeficitPa: deficit,
            translationMps: translation[i]!,
            radiusOf34KtM: meanOf34Kt(fix),
            sizeRadiusM: size.value,
          });
    const innermostM = options.radii === 'fit' ? innermostRadiusM(fix) : null;
    if (rmax.origin === 'estimated' && innermostM !== null && rmax.value > SHARE_OF_INNERMOST * innermostM)
      rmax = { value: SHARE_OF_INNERMOST * innermostM, origin: 'estimated', by: `${rmax.by}, inside the wind radii` };
    return {
      fix,
      timeMs: fix.timeMs,
      latDeg: fix.latDeg,
      lonDeg: fix.lonDeg,
      maxWindMps: maxWind,
      centralPressurePa: pressure,
      ambientPressurePa: around,
      radiusOfMaxWindM: rmax,
      sizeRadiusM: size,
      hollandB: hollandB(fix, options, {
        maxWindMps: maxWind.value,
        translationMps: translation[i]!,
        oneMinuteFactor: toOneMinute,
        centralPressurePa: pressure.value,
        deficitPa: deficit,
        rmaxM: rmax.value,
      }),
    };
  });
  const filled = completed.filter((fix) => fix.maxWindMps.origin === 'interpolated').length;
  if (filled > 0)
    cautions.push(
      `storm ${track.id}: ${filled} of ${fixes.length} fixes have neither wind nor pressure; their wind was taken from their neighbours`,
    );
  return { track, hemisphere, averagingS: options.averagingS, fixes: completed, cautions };
}

function hollandB(
  fix: Fix,
  options: CompletionOptions,
  storm: {
    maxWindMps: number;
    /** turns winds of the completion into 1-min means */
    oneMinuteFactor: number;
    translationMps: number;
    centralPressurePa: number;
    deficitPa: number;
    rmaxM: number;
  },
): Traced {
  if (fix.hollandB !== null) return { value: fix.hollandB, origin: 'given', by: null };
  if (typeof options.b === 'number') return { value: options.b, origin: 'estimated', by: 'recipe' };
  const own = storm.maxWindMps - Math.min(options.motionMps(storm.translationMps), 0.5 * storm.maxWindMps);
  const raw =
    options.b === 'gradient-consistent' || options.b === 'cyclostrophic'
      ? gradientConsistentB({
          maxWindMps: own / options.surfaceFactor(own),
          pressureDeficitPa: storm.deficitPa,
          airDensityKgM3: options.airDensityKgM3,
          coriolisPerS: options.b === 'cyclostrophic' ? 0 : coriolisPerS(fix.latDeg),
          radiusOfMaxWindM: storm.rmaxM,
        })
      : named(HOLLAND_B_RELATIONS, options.b).hollandB({
          gradientWindMps: (storm.oneMinuteFactor * own) / options.surfaceFactor(own),
          radiusOfMaxWindM: storm.rmaxM,
          pressureDeficitPa: storm.deficitPa,
          centralPressurePa: storm.centralPressurePa,
          latDeg: fix.latDeg,
          seaTemperatureK: options.seaTemperatureC + 273.15,
        });
  const value = Math.min(HOLLAND_B_BOUNDS[1], Math.max(HOLLAND_B_BOUNDS[0], raw));
  return {
    value,
    origin: 'estimated',
    by: value === raw ? options.b : `${options.b}, limited to ${HOLLAND_B_BOUNDS[0]}–${HOLLAND_B_BOUNDS[1]}`,
  };
}

/** Mean radius of one wind over the quadrants that have it, m; null where no quadrant has. */
export function meanRadiusM(fix: Fix, thresholdMps: number): number | null {
  const radii = fix.windRadii.find((entry) => Math.abs(entry.thresholdMps - thresholdMps) < 0.1);
  const known = radii?.radiiM.filter((radius): radius is number => radius !== null && radius > 0) ?? [];
  return known.length === 0 ? null : known.reduce((sum, radius) => sum + radius, 0) / known.length;
}

/** An estimated radius of maximum wind is at most this share of the farthest radius of the highest wind observed; own choice. */
const SHARE_OF_INNERMOST = 0.8;

/** The farthest radius of the highest wind below the maximum that has one, m. */
function innermostRadiusM(fix: Fix): number | null {
  for (const { thresholdMps, radiiM } of [...fix.windRadii].sort((a, b) => b.thresholdMps - a.thresholdMps)) {
    const farthest = Math.max(...radiiM.map((radius) => radius ?? 0));
    if (farthest > 0 && (fix.maxWindMps === null || thresholdMps < fix.maxWindMps)) return farthest;
  }
  return null;
}

/** Fills gaps from the neighbours in time; beyond the first and last stated value that value is held. */
function between(
  values: readonly (Traced | null)[],
  times: readonly number[],
  interpolation: 'monotone-cubic' | 'linear',
): Traced[] | null {
  const known = values.flatMap((value, i) => (value ? [{ at: times[i]!, value: value.value }] : []));
  if (known.length === 0) return null;
  const interpolate = interpolation === 'linear' ? piecewiseLinear : monotoneCubic;
  const curve = interpolate(
    known.map((k) => k.at),
    known.map((k) => k.value),
  );
  const first = known[0]!.at;
  const last = known[known.length - 1]!.at;
  return values.map((value, i) => {
    if (value) return value;
    const at = times[i]!;
    return {
      value: curve(at),
      origin: 'interpolated',
      by: at < first || at > last ? 'held from the nearest fix with a wind' : 'between fixes',
    };
  });
}

/** Fixes farther apart say nothing of the trend, ms. */
const TREND_SPAN_MS = 24 * HOUR_MS;

/** Trend of the central pressure at a fix from the given pressures next to it (and its own), Pa/s; null where there are not two. */
function pressureTrendPaPerS(fixes: readonly Fix[], i: number): number | null {
  const near = [i - 1, i, i + 1].flatMap((k) => {
    const fix = fixes[k];
    return fix === undefined || fix.centralPressurePa === null
      ? []
      : [{ atMs: fix.timeMs, pressurePa: fix.centralPressurePa }];
  });
  const first = near[0];
  const last = near[near.length - 1];
  if (!first || !last || first === last || last.atMs - first.atMs > TREND_SPAN_MS) return null;
  return ((last.pressurePa - first.pressurePa) / (last.atMs - first.atMs)) * 1000;
}

/** Translation speed at each fix, m/s: the mean over the legs that meet there. */
function translationSpeeds(fixes: readonly Fix[]): number[] {
  const legs = fixes
    .slice(1)
    .map((fix, i) => ({ m: distanceM(fixes[i]!, fix), s: (fix.timeMs - fixes[i]!.timeMs) / 1000 }));
  return fixes.map((_, i) => {
    const near = [legs[i - 1], legs[i]].filter((leg) => leg !== undefined);
    const seconds = near.reduce((sum, leg) => sum + leg.s, 0);
    return seconds === 0 ? 0 : near.reduce((sum, leg) => sum + leg.m, 0) / seconds;
  });
}

function refuseGaps(track: Track, maxGapH: number): void {
  for (let i = 1; i < track.fixes.length; i++) {
    const before = track.fixes[i - 1]!;
    const after = track.fixes[i]!;
    const gapH = (after.timeMs - before.timeMs) / HOUR_MS;
    if (gapH > maxGapH) {
      throw new InputError(
        'track.gap',
        `storm ${track.id}: ${gapH.toFixed(1)} h pass between line ${before.line} (${new Date(before.timeMs).toISOString()}) and line ${after.line}; more than ${maxGapH} h. Add fixes, or allow it with --set completion.max_gap_h=${Math.ceil(gapH)}`,
        { fields: { line: after.line, gapH } },
      );
    }
  }
}
