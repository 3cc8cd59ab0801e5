import { surfaceShape } from '../../vortex/holland2008.js';
import type { PressureWindInput, PressureWindRelation } from './pressure-wind.js';

/** The deepest deficit that the relation is asked for, Pa: beyond it b_s falls faster than Δp rises; own choice. */
const DEEPEST_PA = 17_000;

/**
 * v_m = √(b_s Δp/(ρe)), 10 m, with b_s of Holland (2008): deficit, its trend, latitude and motion   [Holland2008, from memory].
 * ρ is `vortex.density_kgm3`. Taken as a 1-min mean. Deficits up to 170 hPa.
 */
export function hollandWindMps(deficitPa: number, input: PressureWindInput): number {
  const pressureDeficitPa = Math.min(DEEPEST_PA, Math.max(0, deficitPa));
  const shape = surfaceShape({
    pressureDeficitPa,
    pressureTrendPaPerS: input.pressureTrendPaPerS ?? 0,
    latDeg: input.latDeg,
    translationMps: input.translationMps,
  });
  return Math.sqrt((Math.max(0, shape) * pressureDeficitPa) / (input.airDensityKgM3 * Math.E));
}

/** The deficit whose wind is given, Pa, by bisection; at most 170 hPa. */
function deficitPaOf(maxWindMps: number, input: PressureWindInput): number {
  let low = 0;
  let high = DEEPEST_PA;
  for (let i = 0; i < 50; i++) {
    const middle = 0.5 * (low + high);
    if (hollandWindMps(middle, input) < maxWindMps) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

export const hollandPressure2008: PressureWindRelation = {
  id: 'holland-2008',
  title: 'Holland 2008: deficit, its trend, latitude, motion',
  source: 'Holland2008',
  centralPressurePa: (maxWindMps, input) => input.ambientPressurePa - deficitPaOf(maxWindMps, input),
  maxWindMps: (pressurePa, input) => hollandWindMps(input.ambientPressurePa - pressurePa, input),
  note: ({ pressureTrendPaPerS }) =>
    pressureTrendPaPerS === null ? 'pressure trend not known: taken as steady' : null,
};
