import { knots, toKnots } from '../../units.js';
import type { PressureWindRelation } from './pressure-wind.js';

/** V = 6.7 (1010 − p)^0.644 (kt, hPa), 1-min, western North Pacific   [AtkinsonHolliday1977, from memory]. */
export const atkinsonHolliday1977: PressureWindRelation = {
  id: 'atkinson-holliday-1977',
  title: 'Atkinson & Holliday 1977: western North Pacific',
  source: 'AtkinsonHolliday1977',
  centralPressurePa: (maxWindMps) => (1010 - (toKnots(maxWindMps) / 6.7) ** (1 / 0.644)) * 100,
  maxWindMps: (pressurePa) => knots(6.7 * Math.max(0, 1010 - pressurePa / 100) ** 0.644),
};
