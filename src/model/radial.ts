import { coriolisPerS, RADIANS } from '../earth.js';
import {
  angularMomentum,
  type BalanceRegime,
  balanceRegime,
  cyclostrophicWind,
  forceBudget,
  geostrophicWind,
  rossbyNumber,
} from '../vortex/balance.js';
import { pressureAt } from '../vortex/pressure.js';
import type { WindField } from './field.js';

/** One row of the radial table of a vortex. */
export interface RadialRow {
  readonly radiusM: number;
  /** tangential wind at gradient level, storm-relative */
  readonly gradientWindMps: number;
  /** wind that the centrifugal force alone would need for the same pressure gradient */
  readonly cyclostrophicWindMps: number;
  /** wind that the Coriolis force alone would need; null on the equator */
  readonly geostrophicWindMps: number | null;
  /** 10-m wind of the vortex, mean around the circle (what the motion adds on one side it takes on the other) */
  readonly surfaceWindMps: number;
  /** angle of that wind toward the centre */
  readonly inflowDeg: number;
  readonly pressurePa: number;
  /** local Rossby number; null on the equator */
  readonly rossby: number | null;
  readonly balance: BalanceRegime;
  readonly angularMomentumM2ps: number;
  readonly pressureGradientMps2: number;
  readonly coriolisMps2: number;
  readonly centrifugalMps2: number;
}

const AZIMUTHS = 36;
const CIRCLE = Float64Array.from({ length: 2 * AZIMUTHS }, (_, i) =>
  (i % 2 === 0 ? Math.sin : Math.cos)((i >> 1) * (360 / AZIMUTHS) * RADIANS),
);

/** The radial table of a field: winds, pressure and balance at each radius. */
export function radialTable(
  field: WindField,
  options: { radiiM: readonly number[]; airDensityKgM3: number; regimeBounds?: { above: number; below: number } },
): RadialRow[] {
  const f = Math.abs(coriolisPerS(field.state.latDeg));
  const winds = new Float64Array(CIRCLE.length);
  return options.radiiM.map((radiusM) => {
    const v = field.profile.windMps(radiusM);
    const budget = forceBudget(v, { radiusM, coriolisPerS: f });
    const driving = { radiusM, pressureGradientMps2: budget.pressureGradientMps2, coriolisPerS: f };
    const rossby = rossbyNumber(v, { radiusM, coriolisPerS: f });
    field.onCircle(winds, radiusM, CIRCLE);
    let around = 0;
    let inward = 0;
    for (let i = 0; i < winds.length; i += 2) {
      around += (field.state.hemisphere * (winds[i + 1]! * CIRCLE[i]! - winds[i]! * CIRCLE[i + 1]!)) / AZIMUTHS;
      inward -= (winds[i]! * CIRCLE[i]! + winds[i + 1]! * CIRCLE[i + 1]!) / AZIMUTHS;
    }
    return {
      radiusM,
      gradientWindMps: v,
      cyclostrophicWindMps: cyclostrophicWind(driving),
      geostrophicWindMps: f === 0 ? null : geostrophicWind(driving),
      surfaceWindMps: Math.hypot(around, inward),
      inflowDeg: around === 0 && inward === 0 ? 0 : Math.atan2(inward, around) / RADIANS,
      pressurePa: pressureAt(field.profile, radiusM, {
        centralPressurePa: field.state.centralPressurePa,
        coriolisPerS: f,
        airDensityKgM3: options.airDensityKgM3,
        radiusOfMaxWindM: field.state.radiusOfMaxWindM,
      }),
      rossby: f === 0 ? null : rossby,
      balance: balanceRegime(rossby, options.regimeBounds),
      angularMomentumM2ps: angularMomentum(v, { radiusM, coriolisPerS: f }),
      pressureGradientMps2: budget.pressureGradientMps2,
      coriolisMps2: budget.coriolisMps2,
      centrifugalMps2: budget.centrifugalMps2,
    };
  });
}
