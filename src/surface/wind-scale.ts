import { InputError } from '../errors.js';
import { knots } from '../units.js';
import { averagingFactor } from './averaging.js';

/** A class of a wind scale; it reaches up to the next one's lower bound. */
export interface WindClass {
  /** short name: `3`, `TS`, `VSCS` */
  readonly code: string;
  readonly name: string;
  /** lower bound, m/s, in the scale's averaging period; 0 for the lowest class */
  readonly fromMps: number;
}

/** A published scale of winds. */
export interface WindScale {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  /** averaging period of the winds that it classifies, s */
  readonly averagingS: number;
  /** by rising lower bound; the first starts at 0 */
  readonly classes: readonly WindClass[];
}

const kmh = (speed: number): number => speed / 3.6;
const byKnots = (bounds: readonly (readonly [number, string, string])[]): WindClass[] =>
  bounds.map(([kt, code, name]) => ({ code, name, fromMps: knots(kt) }));

const saffirSimpson = (lowest4Kt: number, lowest5Kt: number): WindClass[] =>
  byKnots([
    [0, 'TD', 'tropical depression'],
    [34, 'TS', 'tropical storm'],
    [64, '1', 'category 1'],
    [83, '2', 'category 2'],
    [96, '3', 'category 3'],
    [lowest4Kt, '4', 'category 4'],
    [lowest5Kt, '5', 'category 5'],
  ]);

const BEAUFORT_NAMES = [
  'calm',
  'light air',
  'light breeze',
  'gentle breeze',
  'moderate breeze',
  'fresh breeze',
  'strong breeze',
  'near gale',
  'gale',
  'strong gale',
  'storm',
  'violent storm',
  'hurricane force',
] as const;
/** Lower bounds of Beaufort 0–12, m/s   [WMO2018]. */
const BEAUFORT_MPS = [0, 0.3, 1.6, 3.4, 5.5, 8, 10.8, 13.9, 17.2, 20.8, 24.5, 28.5, 32.7] as const;

const australian = (bounds: readonly [number, number, number, number, number]): WindClass[] => [
  { code: 'low', name: 'below category 1', fromMps: 0 },
  ...bounds.map((fromMps, i) => ({ code: String(i + 1), name: `category ${i + 1}`, fromMps })),
];

/** Every wind scale, each in its own unit and averaging period; none of its bounds went through a rounded conversion. */
export const WIND_SCALES: readonly WindScale[] = [
  {
    id: 'saffir-simpson',
    title: 'Saffir–Simpson hurricane wind scale, bounds since 2012 (knots, 1-min mean)',
    source: 'SchottEtAl2012',
    averagingS: 60,
    classes: saffirSimpson(113, 137),
  },
  {
    id: 'saffir-simpson-1973',
    title: 'Saffir–Simpson scale, bounds until 2011 (knots, 1-min mean)',
    source: 'SchottEtAl2012',
    averagingS: 60,
    classes: saffirSimpson(114, 136),
  },
  {
    id: 'beaufort',
    title: 'Beaufort scale (m/s, 10-min mean)',
    source: 'WMO2018',
    averagingS: 600,
    classes: BEAUFORT_MPS.map((fromMps, force) => ({ code: String(force), name: BEAUFORT_NAMES[force]!, fromMps })),
  },
  {
    // The scale is published in km/h (63, 89, 118, 160, above 200) and in knots (34, 48, 64, 86, 108; from memory). The
    // lower of the two bounds counts, so that every wind printed in either unit falls into its printed class.
    id: 'australian',
    title: 'Australian tropical cyclone categories by mean wind (10-min mean)',
    source: 'BoM2023',
    averagingS: 600,
    classes: australian([knots(34), knots(48), kmh(118), knots(86), knots(108)]),
  },
  {
    // km/h; the bound of 90 km/h below category 1 is from memory
    id: 'australian-gust',
    title: 'Australian tropical cyclone categories by strongest gust over flat land (km/h, 3-s gust)',
    source: 'BoM2023',
    averagingS: 3,
    classes: australian([kmh(90), kmh(125), kmh(165), kmh(225), kmh(280)]),
  },
  {
    // the split of the very severe class at 90 kt, in force since 2015, is from memory
    id: 'india',
    title: 'India Meteorological Department, since 2015 (knots, 3-min mean)',
    source: 'IMD2021',
    averagingS: 180,
    classes: byKnots([
      [0, 'L', 'low'],
      [17, 'D', 'depression'],
      [28, 'DD', 'deep depression'],
      [34, 'CS', 'cyclonic storm'],
      [48, 'SCS', 'severe cyclonic storm'],
      [64, 'VSCS', 'very severe cyclonic storm'],
      [90, 'ESCS', 'extremely severe cyclonic storm'],
      [120, 'SuCS', 'super cyclonic storm'],
    ]),
  },
  {
    id: 'japan',
    title: 'Japan Meteorological Agency, domestic classes of typhoons included (knots, 10-min mean)',
    source: 'JMA2023',
    averagingS: 600,
    classes: byKnots([
      [0, 'TD', 'tropical depression'],
      [34, 'TS', 'tropical storm'],
      [48, 'STS', 'severe tropical storm'],
      [64, 'TY', 'typhoon (strong)'],
      [85, 'TY+', 'very strong typhoon'],
      [105, 'TY++', 'violent typhoon'],
    ]),
  },
];

/** A wind a billionth below a bound is at it: conversions round. */
const ROUNDING = 1 - 1e-9;

/**
 * The class of a wind, m/s, on a scale of {@link WIND_SCALES}. A lower bound belongs to its class; a wind between two
 * printed whole numbers belongs to the lower class.
 * @param averagingS averaging period of the wind where it is not the scale's: it is converted as over the sea
 *   [HarperKepertGinger2010]
 * @throws InputError `scale.unknown`, `scale.wind`, `averaging.period`
 */
export function windClass(
  windMps: number,
  { scale: id, averagingS }: { scale: string; averagingS?: number },
): WindClass {
  const scale = WIND_SCALES.find((candidate) => candidate.id === id);
  if (!scale) {
    throw new InputError(
      'scale.unknown',
      `there is no wind scale '${id}'; known are ${WIND_SCALES.map((candidate) => candidate.id).join(', ')}`,
    );
  }
  if (!(windMps >= 0)) throw new InputError('scale.wind', `${windMps} m/s has no class: a wind is a number from 0 up`);
  const native =
    averagingS === undefined
      ? windMps
      : windMps * averagingFactor('at-sea', { fromS: averagingS, toS: scale.averagingS });
  let found = scale.classes[0]!;
  for (const next of scale.classes) if (native >= next.fromMps * ROUNDING) found = next;
  return found;
}
