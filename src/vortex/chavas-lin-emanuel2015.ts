import { InputError } from '../errors.js';
import { coreMomentum, coreProfile } from './emanuel-rotunno2011.js';
import { GAMMA_BOUNDS, outerSolution, outerWindShare } from './emanuel2004.js';
import { type DragOfWind, donelanDrag, outerWindByDrag } from './emanuel2004-drag.js';
import type { ProfileMethod, RadialProfile } from './profile.js';

/** What the merged solution needs besides one of its two radii. */
export interface MergeParameters {
  readonly maxWindMps: number;
  readonly coriolisPerS: number;
  /** C_k/C_d of the core */
  readonly exchangeRatio: number;
  /** C_d of the outer region: constant, or by the wind */
  readonly outerDrag: number | DragOfWind;
  /** W_c, speed of the sinking air of the outer region, m/s */
  readonly subsidenceMps: number;
}

/** The two solutions merged where momentum and its slope agree. */
export interface Merge {
  readonly radiusOfMaxWindM: number;
  /** where the core solution ends and the outer one starts */
  readonly mergeRadiusM: number;
  /** where the wind vanishes */
  readonly outerRadiusM: number;
}

function none(p: MergeParameters, what: string): InputError {
  return new InputError(
    'profile.no-merge',
    `no outer solution meets the core of ${p.maxWindMps.toFixed(1)} m/s ${what}; lower vortex.exchange_ratio, or choose another vortex.profile for this storm`,
    { fields: { maxWindMps: p.maxWindMps } },
  );
}

/**
 * The merge for a radius of maximum wind   [ChavasLinEmanuel2015]. At a merge radius r_a the slope of the core's momentum
 * gives the outer radius, r0² = r_a² + (2C_d/W_c)(r_aV)²/M′; r_a is where the outer solution of that r0 also has the core's
 * momentum. The innermost such radius is taken: there the core's momentum touches the outer one from below.
 * @throws InputError `profile.no-merge` where there is none
 */
export function mergeAt(radiusOfMaxWindM: number, p: MergeParameters): Merge {
  const f = Math.abs(p.coriolisPerS);
  const { outerDrag, subsidenceMps } = p;
  const core = coreMomentum({ ...p, radiusOfMaxWindM });
  let outerRadiusM = Number.NaN;
  /** relative excess of the outer over the core's rV at a trial merge radius; NaN where the core has no wind left */
  const excess = (r: number): number => {
    const rv = core.at(r) - 0.5 * f * r * r;
    if (!(rv > 0)) return Number.NaN;
    const drag = (typeof outerDrag === 'number' ? outerDrag : outerDrag(rv / r)) / subsidenceMps;
    outerRadiusM = Math.sqrt(r * r + (2 * drag * rv * rv) / core.slopeAt(r));
    if (typeof outerDrag !== 'number')
      return (outerWindByDrag({ outerRadiusM, coriolisPerS: f, subsidenceMps, dragOf: outerDrag })(r) * r) / rv - 1;
    const gamma = drag * f * outerRadiusM;
    if (!(gamma > GAMMA_BOUNDS[0] && gamma < GAMMA_BOUNDS[1])) return Number.NaN;
    return (outerWindShare(r / outerRadiusM, gamma) * 0.5 * f * outerRadiusM * outerRadiusM) / rv - 1;
  };
  let low = radiusOfMaxWindM * (1 + 1e-6);
  let atLow = excess(low);
  if (!(atLow < 0)) throw none(p, `at ${(radiusOfMaxWindM / 1000).toFixed(1)} km`);
  let high = low;
  let atHigh = atLow;
  while (atHigh < 0) {
    low = high;
    atLow = atHigh;
    high *= 1.08;
    atHigh = excess(high);
  }
  if (Number.isNaN(atHigh)) throw none(p, `at ${(radiusOfMaxWindM / 1000).toFixed(1)} km`);
  // regula falsi, Illinois variant
  let side = 0;
  for (let i = 0; i < 60 && high - low > 1e-10 * high; i++) {
    const middle = (low * atHigh - high * atLow) / (atHigh - atLow);
    const atMiddle = excess(middle);
    if (Math.abs(atMiddle) < 1e-13) {
      low = middle;
      high = middle;
    } else if (atMiddle < 0) {
      low = middle;
      atLow = atMiddle;
      if (side < 0) atHigh /= 2;
      side = -1;
    } else {
      high = middle;
      atHigh = atMiddle;
      if (side > 0) atLow /= 2;
      side = 1;
    }
  }
  const mergeRadiusM = 0.5 * (low + high);
  excess(mergeRadiusM);
  return { radiusOfMaxWindM, mergeRadiusM, outerRadiusM };
}

/**
 * The merge for an outer radius: the radius of maximum wind between 0.006 and 0.2 of it, by bisection.
 * @throws InputError `profile.no-merge` where there is none
 */
export function mergeWithin(outerRadiusM: number, p: MergeParameters): Merge {
  let low = 0.006 * outerRadiusM;
  let high = 0.2 * outerRadiusM;
  const what = `inside an outer radius of ${(outerRadiusM / 1000).toFixed(0)} km`;
  const reach = (radiusM: number): number => {
    try {
      return mergeAt(radiusM, p).outerRadiusM;
    } catch (error) {
      // a core too wide for its wind: it would need an outer radius beyond every one
      if (error instanceof InputError && error.code === 'profile.no-merge') return Number.POSITIVE_INFINITY;
      throw error;
    }
  };
  if (!(reach(low) <= outerRadiusM && reach(high) >= outerRadiusM)) throw none(p, what);
  for (let i = 0; i < 48; i++) {
    const middle = 0.5 * (low + high);
    if (reach(middle) < outerRadiusM) low = middle;
    else high = middle;
  }
  const merge = mergeAt(low, p);
  if (Math.abs(merge.outerRadiusM / outerRadiusM - 1) > 1e-6) throw none(p, what);
  return merge;
}

/** The outer wind with a constant drag, from the kept solutions. */
function constantDragWind(
  outerRadiusM: number,
  p: MergeParameters & { readonly outerDrag: number },
): (radiusM: number) => number {
  const f = Math.abs(p.coriolisPerS);
  const share = outerSolution((p.outerDrag * f * outerRadiusM) / p.subsidenceMps);
  return (radiusM) => Math.max(0, (share(radiusM / outerRadiusM) * 0.5 * f * outerRadiusM * outerRadiusM) / radiusM);
}

/** The profile of a merge: the core to r_a, the outer solution to r0, calm beyond. */
export function mergedProfile(merge: Merge, p: MergeParameters): RadialProfile {
  const f = Math.abs(p.coriolisPerS);
  const core = coreMomentum({ ...p, radiusOfMaxWindM: merge.radiusOfMaxWindM });
  const r0 = merge.outerRadiusM;
  const outerWind =
    typeof p.outerDrag === 'number'
      ? constantDragWind(r0, { ...p, outerDrag: p.outerDrag })
      : outerWindByDrag({
          outerRadiusM: r0,
          coriolisPerS: f,
          subsidenceMps: p.subsidenceMps,
          dragOf: p.outerDrag,
        });
  return {
    windMps: (radiusM) => {
      if (radiusM <= 0 || radiusM >= r0) return 0;
      if (radiusM <= merge.mergeRadiusM) return core.at(radiusM) / radiusM - 0.5 * f * radiusM;
      return outerWind(radiusM);
    },
    radiusOfMaxWindM: merge.radiusOfMaxWindM,
    kinksM: [merge.mergeRadiusM, r0],
  };
}

/** Smallest f that the outer solution is used with, 1/s (4° of latitude): without rotation it has no edge; own choice. */
const LEAST_CORIOLIS_PER_S = 1e-5;

const NO_MERGE_NOTE =
  'chavas-lin-emanuel-2015: no outer solution meets the core of a vortex as weak and wide as this one; the core stands alone';

/**
 * Core of Emanuel & Rotunno (2011), outside of Emanuel (2004), merged   [ChavasLinEmanuel2015; W_c = 2 mm/s, C_d = 0.0015
 * and C_k/C_d = 0.9 from memory; with `vortex.outer_drag=donelan-2004` the drag follows the wind   [DonelanEtAl2004]]. By default from the radius of maximum wind; with `vortex.r0_km` from the outer radius,
 * and the radius of maximum wind follows. Equatorward of 4° the f of 4° is used. A vortex so weak and wide (V below about
 * 0.7|f|R) that no outer solution meets its core keeps the core alone, with a note.
 * @throws InputError `profile.no-merge` where `vortex.r0_km` allows no merge
 */
export const chavasLinEmanuel2015: ProfileMethod = {
  id: 'chavas-lin-emanuel-2015',
  title: 'Chavas, Lin & Emanuel 2015: core and outer solution merged',
  source: 'ChavasLinEmanuel2015',
  kinematic: true,
  build: ({ maxWindMps, radiusOfMaxWindM, coriolisPerS, numbers }) => {
    const p: MergeParameters = {
      maxWindMps,
      coriolisPerS: Math.max(LEAST_CORIOLIS_PER_S, Math.abs(coriolisPerS)),
      exchangeRatio: numbers['exchange_ratio'] ?? 0.9,
      outerDrag: numbers['outer_drag=donelan-2004'] === 1 ? donelanDrag : (numbers['outer_drag'] ?? 0.0015),
      subsidenceMps: numbers['subsidence_mps'] ?? 0.002,
    };
    const r0Km = numbers['r0_km'];
    if (r0Km !== undefined) return mergedProfile(mergeWithin(r0Km * 1000, p), p);
    try {
      return mergedProfile(mergeAt(radiusOfMaxWindM, p), p);
    } catch (error) {
      if (!(error instanceof InputError && error.code === 'profile.no-merge')) throw error;
      return { ...coreProfile({ ...p, radiusOfMaxWindM }), note: NO_MERGE_NOTE };
    }
  },
};
