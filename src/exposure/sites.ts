import { bearingDeg, coriolisPerS, distanceM, type Place, RADIANS } from '../earth.js';
import { type WindModel, windOf } from '../model/wind.js';
import { shareAbove, stepTimes } from '../swath/exact.js';
import { nearestMs } from '../track/path.js';
import { pressureAt } from '../vortex/pressure.js';

/** A named place. */
export interface Site extends Place {
  readonly name: string;
}

/** How long and when a wind was reached. */
export interface SiteLevel {
  readonly thresholdMps: number;
  /** first and last moment at or above it; null where it is never reached */
  readonly firstMs: number | null;
  readonly lastMs: number | null;
  readonly hours: number;
}

/** What a storm did at one place. Winds: 10 m, earth-relative. */
export interface SiteRecord {
  readonly site: Site;
  readonly peakWindMps: number;
  readonly peakGustMps: number;
  /** direction that the wind blows from at the peak; null in a calm */
  readonly windFromDeg: number | null;
  readonly peakTimeMs: number | null;
  readonly levels: readonly SiteLevel[];
  readonly closest: {
    readonly distanceM: number;
    readonly timeMs: number;
    /** on which side of the motion the place lies; null for a storm that stands still or passes over it */
    readonly side: 'left' | 'right' | null;
  };
  readonly series: readonly SiteMoment[];
}

/** One row of the series at a place. */
export interface SiteMoment {
  readonly timeMs: number;
  readonly windMps: number;
  readonly gustMps: number;
  readonly windFromDeg: number | null;
  /** pressure of the vortex at the place; null beyond the model's radius */
  readonly pressurePa: number | null;
}

export interface SiteOptions {
  readonly levelsMps: readonly number[];
  readonly fromMs: number;
  readonly toMs: number;
  /** gust over mean wind */
  readonly gustFactor: number;
  /** interval of the series, s; none without it */
  readonly everyS?: number;
}

/** Step of the search for the peak, s. */
const STEP_S = 60;

/** The wind of the model at each place, at one-minute steps: at the point itself, not read off a grid. */
export function siteRecords(model: WindModel, sites: readonly Site[], options: SiteOptions): SiteRecord[] {
  const times = stepTimes(options.fromMs, options.toMs, STEP_S);
  const tallies = sites.map((site) => tallyOf(site, options.levelsMps));
  let lastMs = times[0]!;
  for (const timeMs of times) {
    const field = model.fieldAt(timeMs);
    for (const tally of tallies) {
      const { speedMps, fromDeg } = windOf(field, tally.site);
      tally.add(timeMs, lastMs, speedMps, fromDeg);
      const distance = distanceM(field.state, tally.site);
      if (distance < tally.nearestM) {
        tally.nearestM = distance;
        tally.nearestMs = timeMs;
      }
    }
    lastMs = timeMs;
  }
  return tallies.map((tally) => ({
    site: tally.site,
    peakWindMps: tally.peak,
    peakGustMps: tally.peak * options.gustFactor,
    windFromDeg: tally.peak > 0 ? tally.fromDeg : null,
    peakTimeMs: tally.peak > 0 ? tally.peakMs : null,
    levels: tally.levels,
    closest: closestApproach(model, tally, options),
    series: options.everyS === undefined ? [] : seriesOf(model, tally.site, { ...options, everyS: options.everyS }),
  }));
}

interface Tally {
  readonly site: Site;
  peak: number;
  peakMs: number;
  fromDeg: number;
  nearestM: number;
  nearestMs: number;
  before: number;
  readonly levels: { thresholdMps: number; firstMs: number | null; lastMs: number | null; hours: number }[];
  add(timeMs: number, lastMs: number, speedMps: number, fromDeg: number): void;
}

function tallyOf(site: Site, levelsMps: readonly number[]): Tally {
  return {
    site,
    peak: 0,
    peakMs: Number.NaN,
    fromDeg: Number.NaN,
    nearestM: Number.POSITIVE_INFINITY,
    nearestMs: 0,
    before: 0,
    levels: levelsMps.map((thresholdMps) => ({ thresholdMps, firstMs: null, lastMs: null, hours: 0 })),
    add(timeMs, lastMs, speedMps, fromDeg) {
      if (speedMps > this.peak) {
        this.peak = speedMps;
        this.peakMs = timeMs;
        this.fromDeg = fromDeg;
      }
      const stepMs = timeMs - lastMs;
      for (const level of this.levels) {
        const { thresholdMps } = level;
        if (stepMs > 0) level.hours += (shareAbove(this.before, speedMps, thresholdMps) * stepMs) / 3_600_000;
        // the wind runs in a straight line between two steps
        const crossing = lastMs + stepMs * ((thresholdMps - this.before) / (speedMps - this.before));
        if (speedMps >= thresholdMps) {
          if (this.before < thresholdMps) level.firstMs ??= stepMs > 0 ? crossing : timeMs;
          level.lastMs = timeMs;
        } else if (this.before >= thresholdMps && stepMs > 0) {
          level.lastMs = crossing;
        }
      }
      this.before = speedMps;
    },
  };
}

/** The nearest point of the path, around the nearest step. */
function closestApproach(model: WindModel, tally: Tally, { fromMs, toMs }: SiteOptions): SiteRecord['closest'] {
  const refined = nearestMs(model.path, tally.site, {
    fromMs: Math.max(fromMs, tally.nearestMs - STEP_S * 1000),
    toMs: Math.min(toMs, tally.nearestMs + STEP_S * 1000),
  });
  const timeMs = distanceM(model.path.at(refined), tally.site) < tally.nearestM ? refined : tally.nearestMs;
  const state = model.path.at(timeMs);
  const distance = distanceM(state, tally.site);
  const toward = bearingDeg(state, tally.site) * RADIANS;
  // positive when the place lies clockwise of the motion
  const cross = Math.sin(toward) * state.motionNorthMps - Math.cos(toward) * state.motionEastMps;
  const side = distance < 100 || Math.abs(cross) < 0.05 ? null : cross > 0 ? 'right' : 'left';
  return { distanceM: distance, timeMs, side };
}

function seriesOf(model: WindModel, site: Site, options: SiteOptions & { everyS: number }): SiteMoment[] {
  const moments: SiteMoment[] = [];
  for (let timeMs = options.fromMs; timeMs <= options.toMs; timeMs += options.everyS * 1000) {
    const field = model.fieldAt(timeMs);
    const { speedMps, fromDeg } = windOf(field, site);
    const radiusM = distanceM(field.state, site);
    moments.push({
      timeMs,
      windMps: speedMps,
      gustMps: speedMps * options.gustFactor,
      windFromDeg: speedMps > 0 ? fromDeg : null,
      pressurePa:
        radiusM > field.outerRadiusM
          ? null
          : pressureAt(field.profile, radiusM, {
              centralPressurePa: field.state.centralPressurePa,
              coriolisPerS: coriolisPerS(field.state.latDeg),
              airDensityKgM3: model.methods.airDensityKgM3,
              radiusOfMaxWindM: field.state.radiusOfMaxWindM,
            }),
    });
  }
  return moments;
}
