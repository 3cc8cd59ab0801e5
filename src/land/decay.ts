import type { Place } from '../earth.js';
import { averagingFactor } from '../surface/averaging.js';
import { type DecaySet, windAfterLandfallMps } from '../surface/inland-decay.js';
import type { CompletedFix, CompletedTrack, Traced } from '../track/complete.js';
import { type Path, pathOf } from '../track/path.js';
import { bareFix, type TrackKind } from '../track/track.js';
import { HOUR_MS, MINUTE_MS, toKnots } from '../units.js';

/** Whether a track's intensities know no land, so that the decay is for it. */
export function decays(setting: 'auto' | 'on' | 'off', kind: TrackKind): boolean {
  return setting === 'on' || (setting === 'auto' && kind !== 'best');
}

export interface DecayOptions {
  readonly isLand: (place: Place) => boolean;
  readonly set: DecaySet;
  readonly interpolation: 'monotone-cubic' | 'linear';
}

/** A track after the decay over land. */
export interface DecayedTrack {
  /** maximum winds as published: over land over land, over water over water */
  readonly completed: CompletedTrack;
  /**
   * The same storm as it would blow over open sea: without the published step R from sea to land. For a model whose cells
   * know their own roughness, which would otherwise be counted twice.
   */
  readonly marine: CompletedTrack;
  /** each stay over land: what was done */
  readonly notes: readonly string[];
}

/** The centre's stay over land. */
export interface Stay {
  readonly inMs: number;
  readonly outMs: number;
  /** the track begins over land */
  readonly fromStart: boolean;
}

/** How often the centre is asked for land; a stay that falls between two questions is not seen. */
const SCAN_MS = 5 * MINUTE_MS;
/** The step at the coast is run through in one minute, because a path has one wind at a time. */
const STEP_MS = MINUTE_MS;

/**
 * The decay of a storm whose intensities know no land   [KaplanDeMaria1995]. From each landfall the wind follows
 * V_b + (R V₀ − V_b) e^(−αt), or the track's own wind where that is lower, and never grows over land. Over water again the
 * step R is taken back and the storm keeps its share of the track's intensity from there on; a second landfall starts anew.
 * The pressure deficit goes with the square of the wind. Knots are put at the coast and every hour over land.
 */
export function decayOverLand(completed: CompletedTrack, options: DecayOptions): DecayedTrack {
  const path = pathOf(completed, options);
  const stays = staysOver(path, options.isLand);
  if (stays.length === 0) return { completed, marine: completed, notes: [] };
  const toOneMinute = averagingFactor('at-sea', { fromS: completed.averagingS, toS: 60 });
  const times = knotTimes(path, stays);
  const winds = { published: new Map<number, number>(), marine: new Map<number, number>() };
  const notes: string[] = [];
  let share = 1;
  let next = 0;
  for (const stay of stays) {
    for (; next < times.length && times[next]! < stay.inMs; next++) put(times[next]!, share * own(times[next]!));
    const { reduction } = options.set;
    const landfall = (share * own(stay.inMs)) / (stay.fromStart ? reduction : 1);
    let lowest = stay.fromStart ? landfall * reduction : landfall;
    const first = Math.max(stay.inMs, path.startMs);
    for (; next < times.length && times[next]! <= stay.outMs; next++) {
      const time = times[next]!;
      lowest = Math.min(lowest, share * own(time));
      const curve = afterLandfall(landfall, (time - stay.inMs) / HOUR_MS);
      // the step is spread over its minute
      const done = stay.fromStart ? 1 : Math.min(1, (time - first) / STEP_MS);
      const published = Math.min(lowest, landfall + done * (curve - landfall));
      winds.published.set(time, published);
      winds.marine.set(time, Math.min(lowest, curve / reduction));
    }
    const leaving = winds.marine.get(stay.outMs) ?? lowest;
    notes.push(
      noteOf(completed, stay, { landfall, leaving: winds.published.get(stay.outMs) ?? lowest, set: options.set }),
    );
    share = Math.min(share, leaving / own(stay.outMs));
  }
  for (; next < times.length; next++) put(times[next]!, share * own(times[next]!));
  return {
    completed: withWinds(completed, path, { times, winds: winds.published, set: options.set }),
    marine: withWinds(completed, path, { times, winds: winds.marine, set: options.set }),
    notes,
  };

  function own(timeMs: number): number {
    return path.at(timeMs).maxWindMps;
  }
  function put(timeMs: number, wind: number): void {
    winds.published.set(timeMs, wind);
    winds.marine.set(timeMs, wind);
  }
  function afterLandfall(landfallMps: number, hours: number): number {
    return windAfterLandfallMps(landfallMps * toOneMinute, { set: options.set, hours }) / toOneMinute;
  }
}

/** When the centre is over land; the coast is found to a second. A stay between two questions is not seen. */
export function staysOver(path: Path, isLand: DecayOptions['isLand']): Stay[] {
  const over = (timeMs: number): boolean => isLand(path.at(timeMs));
  const coast = (a: number, b: number): number => {
    const before = over(a);
    let [from, to] = [a, b];
    while (to - from > 1000) {
      const middle = 0.5 * (from + to);
      if (over(middle) === before) from = middle;
      else to = middle;
    }
    return Math.round(to);
  };
  const stays: Stay[] = [];
  let inMs = over(path.startMs) ? path.startMs : null;
  let fromStart = inMs !== null;
  const steps = Math.ceil((path.endMs - path.startMs) / SCAN_MS);
  for (let i = 1; i <= steps; i++) {
    const time = Math.min(path.endMs, path.startMs + i * SCAN_MS);
    if (over(time) === (inMs !== null)) continue;
    const crossing = coast(path.startMs + (i - 1) * SCAN_MS, time);
    if (inMs === null) inMs = crossing;
    else {
      stays.push({ inMs, outMs: crossing, fromStart });
      inMs = null;
      fromStart = false;
    }
  }
  if (inMs !== null) stays.push({ inMs, outMs: path.endMs, fromStart });
  return stays;
}

/** Times of the fixes, of the coasts with their steps, and every hour over land. */
function knotTimes(path: Path, stays: readonly Stay[]): number[] {
  const times = new Set(path.knotsMs);
  const add = (timeMs: number): void => {
    if (timeMs > path.startMs && timeMs < path.endMs) times.add(timeMs);
  };
  for (const { inMs, outMs } of stays) {
    add(inMs);
    if (inMs + STEP_MS < outMs) add(inMs + STEP_MS);
    for (let time = inMs + HOUR_MS; time < outMs - STEP_MS; time += HOUR_MS) add(time);
    add(outMs);
    add(outMs + STEP_MS);
  }
  return [...times].sort((a, b) => a - b);
}

function withWinds(
  completed: CompletedTrack,
  path: Path,
  { times, winds, set }: { times: readonly number[]; winds: ReadonlyMap<number, number>; set: DecaySet },
): CompletedTrack {
  let at = 0;
  const fixes = times.map((timeMs): CompletedFix => {
    while (at + 1 < completed.fixes.length && completed.fixes[at + 1]!.timeMs <= timeMs) at++;
    const before = completed.fixes[at]!;
    const state = path.at(timeMs);
    const wind = winds.get(timeMs)!;
    const own = before.timeMs === timeMs ? before : between(before, state);
    const share = wind / state.maxWindMps;
    if (share === 1) return own;
    const by = `${set.id}, over or after land`;
    const deficit = (state.ambientPressurePa - state.centralPressurePa) * share * share;
    return {
      ...own,
      maxWindMps: { value: wind, origin: 'estimated', by },
      centralPressurePa: { value: state.ambientPressurePa - Math.max(100, deficit), origin: 'estimated', by },
    };
  });
  return { ...completed, fixes };
}

/** A knot that no fix stands for: the path's own values. */
function between(before: CompletedFix, state: ReturnType<Path['at']>): CompletedFix {
  const traced = (value: number): Traced => ({ value, origin: 'interpolated', by: 'between fixes' });
  const { timeMs, latDeg, lonDeg } = state;
  return {
    fix: { ...bareFix({ timeMs, latDeg, lonDeg, line: before.fix.line }), averagingS: before.fix.averagingS },
    timeMs,
    latDeg,
    lonDeg,
    maxWindMps: traced(state.maxWindMps),
    centralPressurePa: traced(state.centralPressurePa),
    ambientPressurePa: traced(state.ambientPressurePa),
    radiusOfMaxWindM: traced(state.radiusOfMaxWindM),
    sizeRadiusM: traced(state.sizeRadiusM),
    hollandB: traced(state.hollandB),
  };
}

function noteOf(
  completed: CompletedTrack,
  { inMs, outMs, fromStart }: Stay,
  { landfall, leaving, set }: { landfall: number; leaving: number; set: DecaySet },
): string {
  const hour = (timeMs: number): string => `${new Date(timeMs).toISOString().slice(0, 16)}Z`;
  const entry = fromStart
    ? `over land from its start ${hour(inMs)}`
    : `landfall ${hour(inMs)} with ${toKnots(landfall).toFixed(0)} kt`;
  return `storm ${completed.track.id}: ${entry}, decayed by ${set.id} to ${toKnots(leaving).toFixed(0)} kt at ${hour(outMs)}`;
}
