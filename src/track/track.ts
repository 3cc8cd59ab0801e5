import { InputError } from '../errors.js';

/** Where a track comes from. An observed track's intensities already hold what land did to the storm. */
export type TrackKind = 'best' | 'forecast' | 'drawn' | 'synthetic';

/** North-east, south-east, south-west, north-west. */
export type Quadrants<T> = readonly [T, T, T, T];

/**
 * Observed radii of one wind: the farthest distance from the centre, in each quadrant, with a sustained wind
 * at or above the threshold. 0 = there is no such wind in this quadrant; null = not observed.
 */
export interface WindRadii {
  readonly thresholdMps: number;
  readonly radiiM: Quadrants<number | null>;
}

/** One row of a track: what somebody said of the storm at one time. Only time and centre are certain. */
export interface Fix {
  readonly timeMs: number;
  readonly latDeg: number;
  /** −180 ≤ longitude < 180 */
  readonly lonDeg: number;
  /** maximum sustained wind at 10 m, earth-relative, over `averagingS` */
  readonly maxWindMps: number | null;
  /** averaging period of every wind of this fix, radii thresholds included */
  readonly averagingS: number;
  readonly centralPressurePa: number | null;
  readonly ambientPressurePa: number | null;
  /** pressure and mean radius of the outermost closed isobar */
  readonly outerIsobarPa: number | null;
  readonly outerIsobarRadiusM: number | null;
  readonly radiusOfMaxWindM: number | null;
  readonly hollandB: number | null;
  /** by rising threshold */
  readonly windRadii: readonly WindRadii[];
  /** the agency's status code: TD TS HU EX … */
  readonly status: string | null;
  /** the agency's record identifier: L = landfall … */
  readonly record: string | null;
  /** 1-based line (or record) of the source */
  readonly line: number;
}

export interface Track {
  readonly id: string;
  readonly name: string | null;
  /** two-letter basin code where known: NA EP CP WP NI SI SP SA */
  readonly basin: string | null;
  readonly kind: TrackKind;
  /** format that it was read from: hurdat2, ibtracs, b-deck, a-deck, csv, geojson */
  readonly format: string;
  /** at least one; times strictly rising */
  readonly fixes: readonly Fix[];
  /** what was odd in the source and how it was taken */
  readonly cautions: readonly string[];
}

/** A fix with nothing known but time and centre: readers fill in the rest. */
export function bareFix(at: { timeMs: number; latDeg: number; lonDeg: number; line: number }): Fix {
  return {
    ...at,
    maxWindMps: null,
    averagingS: 60,
    centralPressurePa: null,
    ambientPressurePa: null,
    outerIsobarPa: null,
    outerIsobarRadiusM: null,
    radiusOfMaxWindM: null,
    hollandB: null,
    windRadii: [],
    status: null,
    record: null,
  };
}

/** What a reader may be told. */
export interface ReadOptions {
  /** name of the source for messages: a path, or `standard input` */
  readonly source: string;
  /** IBTrACS: which agency's columns, in order of preference */
  readonly agencies?: readonly string[];
  /** a-deck: which technique */
  readonly technique?: string;
  /** CSV: `key → heading` for files with headings of their own */
  readonly columns?: Readonly<Record<string, string>>;
  /** rows may stand in any order of time: they are sorted instead of refused */
  readonly sortTimes?: boolean;
  /** IBTrACS: also the spur tracks, each as a storm of its own */
  readonly spurs?: boolean;
  /** a-deck: the initial time of the forecast (`2031090306`), instead of the newest */
  readonly initialTime?: string;
  /** CSV and GeoJSON: averaging period of the winds where the file does not say it, s */
  readonly averagingS?: number;
}

/** +1 north, −1 south of the equator, by the first fix off it; taken once per storm. */
export function hemisphereOf(track: Pick<Track, 'id' | 'fixes'>): 1 | -1 {
  const off = track.fixes.find((fix) => fix.latDeg !== 0);
  if (!off) {
    throw new InputError(
      'track.on-equator',
      `storm ${track.id} never leaves the equator: the sense of its rotation is undefined; move one fix off it`,
    );
  }
  return off.latDeg > 0 ? 1 : -1;
}
