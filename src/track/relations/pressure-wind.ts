import { knots, toKnots } from '../../units.js';
import { deficit2016Hpa } from './pressure2016.js';

/** What a pressure–wind relation may use. Winds are 1-min means at 10 m. */
export interface PressureWindInput {
  readonly latDeg: number;
  readonly translationMps: number;
  /** mean radius of 34 kt over the quadrants that have it, m; null where not known */
  readonly radiusOf34KtM: number | null;
  readonly ambientPressurePa: number;
}

/** A relation between maximum wind and central pressure. */
export interface PressureWindRelation {
  readonly id: string;
  readonly title: string;
  readonly source: string;
  readonly centralPressurePa: (maxWindMps: number, input: PressureWindInput) => number;
  readonly maxWindMps: (centralPressurePa: number, input: PressureWindInput) => number;
}

/** The size S = V500/V500c that is taken where no radius of 34 kt is known; own choice. */
const UNKNOWN_SIZE = 0.5;

/** V500c (kt): the wind 500 km out of a storm of average size   [KnaffZehr2007, from memory]. */
export function climatologicalWindAt500Km(maxWindKt: number, latDeg: number): number {
  const dLat = Math.abs(latDeg) - 25;
  const rc = 66.785 - 0.09102 * maxWindKt + 1.0619 * dLat;
  const x = 0.1147 + 0.0055 * maxWindKt - 0.001 * dLat;
  return maxWindKt * (rc / 500) ** x;
}

/** Storm-relative wind (kt): V − 1.5 c^0.63, c the translation in kt   [SchwerdtHoWatkins1979, from memory]. */
export function stormRelativeWindKt(maxWindKt: number, translationKt: number): number {
  return maxWindKt - 1.5 * translationKt ** 0.63;
}

/** Pressure difference p_c − p_env (hPa) of Knaff & Zehr (2007), their equation for winds in kt   [KnaffZehr2007, from memory]. */
export function knaffZehrDeficitHpa(p: {
  maxWindKt: number;
  translationKt: number;
  latDeg: number;
  size: number;
}): number {
  const v = stormRelativeWindKt(p.maxWindKt, p.translationKt);
  return 23.286 - 0.483 * v - (v / 24.254) ** 2 - 12.587 * p.size - 0.483 * Math.abs(p.latDeg);
}

/** The same south of 18°: Courtney & Knaff's tropical equation   [CourtneyKnaff2009, from memory]. */
export function courtneyKnaffTropicalDeficitHpa(p: { maxWindKt: number; translationKt: number; size: number }): number {
  const v = stormRelativeWindKt(p.maxWindKt, p.translationKt);
  return 5.962 - 0.267 * v - (v / 18.26) ** 2 - 6.8 * p.size;
}

/** S from the mean radius of 34 kt: V500 = R34/9 − 3 (kt, nmi), S ≥ 0.4   [CourtneyKnaff2009, from memory]. */
export function sizeFromRadius(radiusOf34KtNmi: number, maxWindKt: number, latDeg: number): number {
  return Math.max(0.4, (radiusOf34KtNmi / 9 - 3) / climatologicalWindAt500Km(maxWindKt, latDeg));
}

/**
 * Courtney & Knaff (2009): Knaff & Zehr's equation at and poleward of 18°, their own equatorward of it. The two differ by
 * about 3 hPa at 18°, and the relation keeps that step as published.
 */
function courtneyKnaffPressurePa(maxWindMps: number, input: PressureWindInput): number {
  const maxWindKt = toKnots(maxWindMps);
  const translationKt = toKnots(input.translationMps);
  const size =
    input.radiusOf34KtM === null ? UNKNOWN_SIZE : sizeFromRadius(input.radiusOf34KtM / 1852, maxWindKt, input.latDeg);
  const terms = { maxWindKt, translationKt, latDeg: input.latDeg, size };
  const deficitHpa = Math.abs(input.latDeg) >= 18 ? knaffZehrDeficitHpa(terms) : courtneyKnaffTropicalDeficitHpa(terms);
  return input.ambientPressurePa + Math.min(0, deficitHpa) * 100;
}

/** The wind at which a falling relation gives a pressure, by bisection between 0 and 120 m/s. */
export function windOfPressure(pressurePaOf: (maxWindMps: number) => number, centralPressurePa: number): number {
  let low = 0;
  let high = 120;
  for (let i = 0; i < 50; i++) {
    const middle = 0.5 * (low + high);
    if (pressurePaOf(middle) > centralPressurePa) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

const courtneyKnaff2009: PressureWindRelation = {
  id: 'courtney-knaff-2009',
  title: 'Courtney & Knaff 2009: wind, motion, size, latitude',
  source: 'CourtneyKnaff2009',
  centralPressurePa: courtneyKnaffPressurePa,
  maxWindMps: (pressurePa, input) => windOfPressure((wind) => courtneyKnaffPressurePa(wind, input), pressurePa),
};

/** V = 6.7 (1010 − p)^0.644 (kt, hPa), 1-min, western North Pacific   [AtkinsonHolliday1977, from memory]. */
const atkinsonHolliday1977: PressureWindRelation = {
  id: 'atkinson-holliday-1977',
  title: 'Atkinson & Holliday 1977: western North Pacific',
  source: 'AtkinsonHolliday1977',
  centralPressurePa: (maxWindMps) => (1010 - (toKnots(maxWindMps) / 6.7) ** (1 / 0.644)) * 100,
  maxWindMps: (pressurePa) => knots(6.7 * Math.max(0, 1010 - pressurePa / 100) ** 0.644),
};

const pressure2016Pa = (maxWindMps: number, input: PressureWindInput): number =>
  input.ambientPressurePa - 100 * deficit2016Hpa(maxWindMps, input);

const pressure2016: PressureWindRelation = {
  id: 'calibrated-pressure-2016',
  title: 'Own calibration on 2004–2016: wind, latitude, motion, radius of 34 kt',
  source: 'own calibration',
  centralPressurePa: pressure2016Pa,
  maxWindMps: (pressurePa, input) => windOfPressure((wind) => pressure2016Pa(wind, input), pressurePa),
};

/** Every pressure–wind relation that a recipe may name. */
export const PRESSURE_WIND_RELATIONS: readonly PressureWindRelation[] = [
  pressure2016,
  courtneyKnaff2009,
  atkinsonHolliday1977,
];
