import { UsageError } from '../../errors.js';
import { didYouMean, nearest } from '../../nearest.js';
import { HECTOPASCAL_PA, KNOT_MPS, NAUTICAL_MILE_M } from '../../units.js';
import { refusal, type Spot, shown, shownList } from './checks.js';

/** A heading of the documented table, and its unit as a factor to SI. */
export interface UnitKey {
  readonly key: string;
  readonly unit: number;
}

const lengths = (stem: string): readonly UnitKey[] => [
  { key: `${stem}_km`, unit: 1000 },
  { key: `${stem}_nmi`, unit: NAUTICAL_MILE_M },
  { key: `${stem}_m`, unit: 1 },
];
const pressures = (stem: string): readonly UnitKey[] => [
  { key: `${stem}_hpa`, unit: HECTOPASCAL_PA },
  { key: `${stem}_pa`, unit: 1 },
];

/**
 * Quantities of a row and the headings that they may stand under. Of several that a file has, the first counts.
 * Each list holds the SI unit itself, so that any value can be written without loss.
 */
export const QUANTITY_KEYS = {
  maxWindMps: [
    { key: 'vmax_mps', unit: 1 },
    { key: 'vmax_kt', unit: KNOT_MPS },
  ],
  centralPressurePa: pressures('pressure'),
  ambientPressurePa: pressures('ambient'),
  outerIsobarPa: pressures('outer_isobar'),
  outerIsobarRadiusM: lengths('outer_isobar_radius'),
  radiusOfMaxWindM: lengths('rmax'),
} as const satisfies Record<string, readonly UnitKey[]>;

export type QuantityName = keyof typeof QUANTITY_KEYS;

/** Headings without a choice of unit. `averaging_s` holds the averaging period of every wind of the row. */
export const PLAIN_KEYS = [
  'storm',
  'name',
  'basin',
  'kind',
  'time',
  'lat_deg',
  'lon_deg',
  'averaging_s',
  'holland_b',
  'status',
  'record',
] as const;

export type PlainKey = (typeof PLAIN_KEYS)[number];

export const QUADRANT_KEYS = ['ne', 'se', 'sw', 'nw'] as const;

/** `r34_ne_nmi`: the radius of 34 kt in the north-east; `r17.5mps_ne_km` where a threshold is no number of knots. */
const RADIUS_KEY = /^r(\d+(?:\.\d+)?)(mps)?_(ne|se|sw|nw)_(nmi|km|m)$/;

export interface RadiusKey {
  readonly thresholdMps: number;
  readonly quadrant: number;
  readonly unit: number;
}

export function radiusKeyOf(key: string): RadiusKey | null {
  const match = RADIUS_KEY.exec(key);
  if (!match) return null;
  return {
    thresholdMps: Number(match[1]) * (match[2] ? 1 : KNOT_MPS),
    quadrant: (QUADRANT_KEYS as readonly string[]).indexOf(match[3]!),
    unit: match[4] === 'nmi' ? NAUTICAL_MILE_M : match[4] === 'km' ? 1000 : 1,
  };
}

/** Headings that a track table may have, besides those of wind radii. */
export const TRACK_KEYS: readonly string[] = [
  ...PLAIN_KEYS,
  ...Object.values(QUANTITY_KEYS).flatMap((keys) => keys.map(({ key }) => key)),
];
const KNOWN: ReadonlySet<string> = new Set(TRACK_KEYS);
const EXAMPLE_RADII = [34, 50, 64].flatMap((kt) =>
  QUADRANT_KEYS.flatMap((q) => ['nmi', 'km'].map((unit) => `r${kt}_${q}_${unit}`)),
);

export const isTrackKey = (key: string): boolean => KNOWN.has(key) || RADIUS_KEY.test(key);

/**
 * Which column holds which key. The user's own mapping (`key → heading`) goes before the headings of the file.
 * @throws UsageError `track.columns` for a key or a heading that does not exist
 * @throws InputError `track.heading-twice`, `track.heading` when time or position have no column
 */
export function columnsOf(
  headings: readonly string[],
  options: { readonly columns?: Readonly<Record<string, string>> | undefined; readonly spot: Spot },
): ReadonlyMap<string, number> {
  const { spot } = options;
  const lower = headings.map((heading) => heading.trim().toLowerCase());
  const columns = new Map<string, number>();
  const mapped = new Set<number>();

  for (const [key, heading] of Object.entries(options.columns ?? {})) {
    if (!isTrackKey(key)) {
      const guess = didYouMean(key, [...TRACK_KEYS, ...EXAMPLE_RADII]);
      throw new UsageError(
        'track.columns',
        `columns: '${shown(key)}' is no key of a track table${guess}; keys are ${TRACK_KEYS.join(', ')}, r34_ne_nmi …`,
        {
          fields: { key },
        },
      );
    }
    const index = lower.indexOf(heading.trim().toLowerCase());
    if (index === -1) {
      const guess = didYouMean(heading, headings.map(shown));
      throw new UsageError(
        'track.columns',
        `${spot.source}: has no heading '${shown(heading)}' for ${key}${guess}; its headings are ${shownList(headings)}`,
        { fields: { key, heading: shown(heading) } },
      );
    }
    columns.set(key, index);
    mapped.add(index);
  }

  lower.forEach((heading, index) => {
    if (mapped.has(index) || heading === '') return;
    if (!isTrackKey(heading)) {
      const guess = nearest(heading, TRACK_KEYS);
      // heading 'lon' is far from nothing else, but a mistyped optional heading would pass unseen
      if (guess) {
        const odd = `the heading '${shown(heading)}' is none of the documented ones and is not read; was ${guess} meant?`;
        spot.cautions.add(`heading ${heading}`, 0, odd);
      }
      return;
    }
    const first = columns.get(heading);
    if (first === undefined) columns.set(heading, index);
    else if (!mapped.has(first)) {
      throw refusal(
        spot,
        'track.heading-twice',
        `the heading '${heading}' stands twice (columns ${first + 1} and ${index + 1}); remove or rename one`,
        heading,
      );
    }
  });

  const missing = (['time', 'lat_deg', 'lon_deg'] as const).filter((key) => !columns.has(key));
  if (missing.length > 0) {
    const map = missing.map((key) => `${key}=${guessHeading(key, headings) ?? 'HEADING'}`).join(',');
    const found = shownList(headings.filter((heading) => heading.trim() !== '')) || 'none';
    throw refusal(
      spot,
      'track.heading',
      `no heading ${missing.join(', ')}; found ${found}. Name the columns so, or map yours with columns: ${map}`,
      missing.join(','),
    );
  }
  return columns;
}

/** A heading that begins as the key does: `Latitude` for `lat_deg`. */
function guessHeading(key: 'time' | 'lat_deg' | 'lon_deg', headings: readonly string[]): string | undefined {
  const starts = key === 'time' ? ['time', 'iso_time', 'date', 'valid', 'utc'] : [key.slice(0, 3)];
  const found = headings.find((heading) => starts.some((start) => heading.trim().toLowerCase().startsWith(start)));
  return found === undefined ? undefined : shown(found);
}
