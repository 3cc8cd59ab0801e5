import { RADIANS } from '../earth.js';
import { InputError } from '../errors.js';
import { averagingFactor } from '../surface/averaging.js';
import type { Fix, Quadrants, Track } from '../track/track.js';
import { knots } from '../units.js';
import type { WindField } from './field.js';
import { type Recipe, recipeNumber } from './recipe.js';
import { windModel } from './wind.js';

/** The winds whose radii are verified. */
export const VERIFIED_WINDS = ['34kt', '50kt', '64kt'] as const;
export type VerifiedWind = (typeof VERIFIED_WINDS)[number];
/** What may be hidden from the model. */
export const HIDEABLE = [...VERIFIED_WINDS, 'rmax', 'pressure'] as const;
export type Hideable = (typeof HIDEABLE)[number];
/** What `--without-radii` hides: the three radii and the radius of maximum wind. */
export const WITHOUT_RADII: readonly Hideable[] = [...VERIFIED_WINDS, 'rmax'];

const THRESHOLDS_MPS: Readonly<Record<VerifiedWind, number>> = {
  '34kt': knots(34),
  '50kt': knots(50),
  '64kt': knots(64),
};

/** Observed and modelled radii of one wind, km: NE, SE, SW, NW; 0 = no such wind in the quadrant, null = not observed. */
export interface RadiiPair {
  readonly observed_km: Quadrants<number | null>;
  readonly modelled_km: Quadrants<number | null>;
}

/** One fix with something observed. */
export interface VerificationRow {
  readonly storm: string;
  /** ISO 8601, UTC */
  readonly time: string;
  readonly lat_deg: number;
  readonly lon_deg: number;
  /** winds of which at least one quadrant is observed */
  readonly radii: Partial<Record<VerifiedWind, RadiiPair>>;
  readonly rmax_km: { readonly observed: number | null; readonly modelled: number };
  readonly pressure_hpa: { readonly observed: number | null; readonly modelled: number };
}

/** Score of one quantity: modelled minus observed; null where n is too small for it. */
export interface Score {
  readonly n: number;
  readonly bias: number | null;
  readonly mae: number | null;
  readonly rmse: number | null;
  readonly r: number | null;
}

export type VerificationSummary = Readonly<Record<VerifiedWind | 'rmax_km' | 'pressure_hpa', Score>>;

/**
 * A list as in `--hide 34kt,rmax`.
 * @throws InputError `verify.hide` for a name that cannot be hidden
 */
export function hideableOf(names: readonly string[]): Hideable[] {
  return names.map((name) => {
    const known = HIDEABLE.find((candidate) => candidate === name.trim().toLowerCase());
    if (!known)
      throw new InputError(
        'verify.hide',
        `'${name}' cannot be hidden from the model; write some of ${HIDEABLE.join(', ')}`,
      );
    return known;
  });
}

const isWind = (thresholdMps: number, wind: VerifiedWind): boolean =>
  Math.abs(thresholdMps - THRESHOLDS_MPS[wind]) < 0.1;

/** The track without the values that are hidden from the model. */
export function withHidden(track: Track, hide: readonly Hideable[]): Track {
  const fixes = track.fixes.map(
    (fix): Fix => ({
      ...fix,
      windRadii: fix.windRadii.filter(
        ({ thresholdMps }) => !VERIFIED_WINDS.some((wind) => hide.includes(wind) && isWind(thresholdMps, wind)),
      ),
      radiusOfMaxWindM: hide.includes('rmax') ? null : fix.radiusOfMaxWindM,
      centralPressurePa: hide.includes('pressure') ? null : fix.centralPressurePa,
    }),
  );
  return { ...track, fixes };
}

/**
 * Modelled against observed values, one row a fix with something observed. The thresholds are in the averaging period of the
 * fix and compared with modelled winds of that period.
 */
export function verifyTrack(
  track: Track,
  recipe: Recipe,
  { hide = [] }: { hide?: readonly Hideable[] } = {},
): VerificationRow[] {
  const model = windModel(withHidden(track, hide), recipe);
  const periodS = recipeNumber(recipe, 'wind.averaging_s');
  return track.fixes.flatMap((fix, i): VerificationRow[] => {
    const observed = VERIFIED_WINDS.flatMap((wind) => {
      const row = fix.windRadii.find(({ thresholdMps }) => isWind(thresholdMps, wind));
      return row?.radiiM.some((radius) => radius !== null) ? [{ wind, radiiM: row.radiiM }] : [];
    });
    if (observed.length === 0 && fix.radiusOfMaxWindM === null && fix.centralPressurePa === null) return [];
    const completed = model.completed.fixes.find(({ timeMs }) => timeMs === fix.timeMs) ?? model.completed.fixes[i]!;
    const factor = averagingFactor('at-sea', { fromS: fix.averagingS, toS: periodS });
    const modelled =
      observed.length === 0
        ? []
        : quadrantRadiiM(
            model.fieldAt(fix.timeMs),
            observed.map(({ wind }) => THRESHOLDS_MPS[wind] * factor),
          );
    return [
      {
        storm: track.id,
        time: new Date(fix.timeMs).toISOString(),
        lat_deg: fix.latDeg,
        lon_deg: fix.lonDeg,
        radii: Object.fromEntries(
          observed.map(({ wind, radiiM }, k): [VerifiedWind, RadiiPair] => [
            wind,
            {
              observed_km: radiiM.map((radius) => (radius === null ? null : radius / 1000)) as unknown as Quadrants<
                number | null
              >,
              modelled_km: radiiM.map((radius, j) =>
                radius === null ? null : modelled[k]![j]! / 1000,
              ) as unknown as Quadrants<number | null>,
            },
          ]),
        ),
        rmax_km: {
          observed: fix.radiusOfMaxWindM === null ? null : fix.radiusOfMaxWindM / 1000,
          modelled: completed.radiusOfMaxWindM.value / 1000,
        },
        pressure_hpa: {
          observed: fix.centralPressurePa === null ? null : fix.centralPressurePa / 100,
          modelled: completed.centralPressurePa.value / 100,
        },
      },
    ];
  });
}

/** Azimuths at which radii are sought, every 3°, boundaries of the quadrants included. */
const AZIMUTHS = 120;
const CIRCLE = Float64Array.from({ length: 2 * AZIMUTHS }, (_, i) =>
  (i % 2 === 0 ? Math.sin : Math.cos)(((i >> 1) * 360 * RADIANS) / AZIMUTHS),
);
/** Neighbouring circles are at most this factor apart; between them the wind is taken as a power of the radius. */
const RATIO = 1.04;

/**
 * The farthest place with each wind in each quadrant, as a distance from the centre, m; 0 where there is none. A place on the
 * boundary of two quadrants belongs to both.
 */
export function quadrantRadiiM(field: WindField, windsMps: readonly number[]): Quadrants<number>[] {
  const farthest = windsMps.map(() => new Float64Array(AZIMUTHS));
  const winds = new Float64Array(CIRCLE.length);
  const outer = new Float64Array(AZIMUTHS);
  let outerRadiusM = field.outerRadiusM;
  const least = 0.3 * field.state.radiusOfMaxWindM;
  const radiiM = [field.state.radiusOfMaxWindM];
  for (let radiusM = outerRadiusM; radiusM > least; radiusM /= RATIO) radiiM.push(radiusM);
  for (const radiusM of radiiM.sort((a, b) => b - a)) {
    field.onCircle(winds, radiusM, CIRCLE);
    for (let i = 0; i < AZIMUTHS; i++) {
      const speed = Math.hypot(winds[2 * i]!, winds[2 * i + 1]!);
      for (let k = 0; k < windsMps.length; k++) {
        const wind = windsMps[k]!;
        if (farthest[k]![i]! > 0 || speed < wind) continue;
        const beyond = outer[i]!;
        const share =
          beyond > 0 && speed > wind && speed > beyond ? Math.log(speed / wind) / Math.log(speed / beyond) : 0;
        farthest[k]![i] = radiusM * (outerRadiusM / radiusM) ** share;
      }
      outer[i] = speed;
    }
    outerRadiusM = radiusM;
  }
  return farthest.map(
    (radii) =>
      [0, 1, 2, 3].map((j) => {
        let most = 0;
        for (let i = (j * AZIMUTHS) / 4; i <= ((j + 1) * AZIMUTHS) / 4; i++)
          most = Math.max(most, radii[i % AZIMUTHS]!);
        return most;
      }) as unknown as Quadrants<number>,
  );
}

/** Mean of the four quadrants where all four are observed above zero; else null. */
export function meanOfQuadrants(pair: RadiiPair | undefined): { observed: number; modelled: number } | null {
  if (!pair?.observed_km.every((radius) => radius !== null && radius > 0)) return null;
  const mean = (values: Quadrants<number | null>): number => values.reduce<number>((sum, v) => sum + (v ?? 0), 0) / 4;
  return { observed: mean(pair.observed_km), modelled: mean(pair.modelled_km) };
}

/** Observed and modelled values of one quantity, as the summary counts them. */
export function pairsOf(
  rows: readonly VerificationRow[],
  quantity: keyof VerificationSummary,
): { observed: number; modelled: number }[] {
  return rows.flatMap((row) => {
    if (quantity === 'rmax_km' || quantity === 'pressure_hpa') {
      const { observed, modelled } = row[quantity];
      return observed === null ? [] : [{ observed, modelled }];
    }
    const pair = meanOfQuadrants(row.radii[quantity]);
    return pair ? [pair] : [];
  });
}

/** Scores of all rows: n, mean of the differences, of their sizes, root of the mean square, correlation. */
export function summarize(rows: readonly VerificationRow[]): VerificationSummary {
  return {
    '34kt': scoreOf(pairsOf(rows, '34kt')),
    '50kt': scoreOf(pairsOf(rows, '50kt')),
    '64kt': scoreOf(pairsOf(rows, '64kt')),
    rmax_km: scoreOf(pairsOf(rows, 'rmax_km')),
    pressure_hpa: scoreOf(pairsOf(rows, 'pressure_hpa')),
  };
}

/** Score of pairs; differences are modelled minus observed. */
export function scoreOf(pairs: readonly { observed: number; modelled: number }[]): Score {
  const n = pairs.length;
  if (n === 0) return { n, bias: null, mae: null, rmse: null, r: null };
  const mean = (of: (pair: { observed: number; modelled: number }) => number): number =>
    pairs.reduce((sum, pair) => sum + of(pair), 0) / n;
  const mo = mean(({ observed }) => observed);
  const mm = mean(({ modelled }) => modelled);
  const so = mean(({ observed }) => (observed - mo) ** 2);
  const sm = mean(({ modelled }) => (modelled - mm) ** 2);
  return {
    n,
    bias: mm - mo,
    mae: mean(({ observed, modelled }) => Math.abs(modelled - observed)),
    rmse: Math.sqrt(mean(({ observed, modelled }) => (modelled - observed) ** 2)),
    r:
      so > 0 && sm > 0
        ? mean(({ observed, modelled }) => (observed - mo) * (modelled - mm)) / Math.sqrt(so * sm)
        : null,
  };
}
