import type { RadialProfile } from './profile.js';

/** Abscissae and weights of the five-point Gauss–Legendre rule on (−1, 1) [AbramowitzStegun1964, table 25.4]. */
const GAUSS = [
  [0, 0.568888888888889],
  [0.538469310105683, 0.478628670499366],
  [-0.538469310105683, 0.478628670499366],
  [0.906179845938664, 0.236926885056189],
  [-0.906179845938664, 0.236926885056189],
] as const;

/**
 * Rise of pressure between two radii that the balance implies, Pa: ∫ ρ(V²/r + |f|V) dr.
 * Composite Gauss–Legendre over intervals that grow geometrically, split at `breaks` (kinks of the profile).
 */
export function pressureRise(
  windMps: (radiusM: number) => number,
  options: { fromM: number; toM: number; coriolisPerS: number; airDensityKgM3: number; breaksM?: readonly number[] },
): number {
  const f = Math.abs(options.coriolisPerS);
  const edges = [options.fromM];
  const breaks = [...(options.breaksM ?? [])].filter((r) => r > options.fromM && r < options.toM).sort((a, b) => a - b);
  for (const end of [...breaks, options.toM]) {
    let at = edges[edges.length - 1]!;
    while (at < end) {
      at = Math.min(end, Math.max(at * 1.1, at + 50));
      edges.push(at);
    }
  }
  let sum = 0;
  for (let i = 1; i < edges.length; i++) {
    const a = edges[i - 1]!;
    const b = edges[i]!;
    for (const [x, weight] of GAUSS) {
      const r = 0.5 * (a + b) + 0.5 * (b - a) * x;
      const v = windMps(r);
      sum += 0.5 * (b - a) * weight * ((v * v) / r + f * v);
    }
  }
  return options.airDensityKgM3 * sum;
}

/**
 * Pressure of a vortex at a radius, Pa: the profile's own where it has one, else p_c plus the integrated balance.
 */
export function pressureAt(
  profile: RadialProfile,
  radiusM: number,
  vortex: { centralPressurePa: number; coriolisPerS: number; airDensityKgM3: number; radiusOfMaxWindM: number },
): number {
  if (profile.pressurePa) return profile.pressurePa(radiusM);
  return (
    vortex.centralPressurePa +
    pressureRise(profile.windMps, {
      fromM: 0,
      toM: radiusM,
      coriolisPerS: vortex.coriolisPerS,
      airDensityKgM3: vortex.airDensityKgM3,
      breaksM: profile.kinksM ?? [vortex.radiusOfMaxWindM],
    })
  );
}

/**
 * The pressure deficit that the winds of a profile imply, Pa: the closed form where there is one, else the balance
 * integrated from the centre to `toM`. Profiles that fall slower than r⁻¹ have no limit for toM → ∞.
 */
export function impliedDeficit(
  profile: RadialProfile,
  vortex: { toM: number; coriolisPerS: number; airDensityKgM3: number; radiusOfMaxWindM: number },
): number {
  return (
    profile.impliedDeficitPa ??
    pressureRise(profile.windMps, {
      fromM: 0,
      toM: vortex.toM,
      coriolisPerS: vortex.coriolisPerS,
      airDensityKgM3: vortex.airDensityKgM3,
      breaksM: profile.kinksM ?? [vortex.radiusOfMaxWindM],
    })
  );
}
