/** North-east, south-east, south-west, north-west. */
export type Quadrants<T> = readonly [T, T, T, T];

/**
 * A field's radii at one moment. Everything is a natural logarithm of a radius over the radius of maximum wind, by quadrant
 * (north-east, south-east, south-west, north-west); a negative value says that this wind is not reached there.
 */
export interface RadiiState {
  /** by falling wind; m/s */
  readonly levels: readonly { readonly windMps: number; readonly logRatio: Quadrants<number> }[];
  /** where the ridge of the wind lies: 0 at R, negative where an observed radius forces it inward */
  readonly ridge: Quadrants<number>;
}

/** Least distance of two radii of different winds, as a logarithm. */
export const LEAST_GAP = 0.02;
/** Least distance of a radius from the ridge. */
export const LEAST_FROM_RIDGE = 0.04;

/** A curve around the circle, periodic, through the middles of the quadrants; argument in eighths of a turn, 0 = north. */
export type AroundCircle = (eighths: number) => number;

/**
 * The curve around the circle whose highest value in each closed quadrant is the given one: it passes through it in the
 * middle of the quadrant and through the lower of two neighbours on the boundary between them, by monotone cubics (slopes:
 * harmonic mean, 0 at a turn). Continuous with its first derivative; never above the given values.
 */
export function aroundCircle(values: Quadrants<number>): AroundCircle {
  const nodes = new Float64Array(8);
  for (let j = 0; j < 4; j++) {
    nodes[2 * j + 1] = values[j]!;
    nodes[(2 * j + 2) % 8] = Math.min(values[j]!, values[(j + 1) % 4]!);
  }
  const slopes = new Float64Array(8);
  for (let i = 0; i < 8; i++) {
    const before = nodes[i]! - nodes[(i + 7) % 8]!;
    const after = nodes[(i + 1) % 8]! - nodes[i]!;
    slopes[i] = before * after > 0 ? (2 * before * after) / (before + after) : 0;
  }
  return (eighths) => {
    const floor = Math.floor(eighths);
    const t = eighths - floor;
    const i = ((floor % 8) + 8) % 8;
    const next = (i + 1) % 8;
    const u = 1 - t;
    return (
      nodes[i]! * (1 + 2 * t) * u * u +
      nodes[next]! * t * t * (3 - 2 * t) +
      slopes[i]! * t * u * u -
      slopes[next]! * t * t * u
    );
  };
}

/** The stretch along one azimuth: from the logarithm of r over the ridge's radius to that of the base vortex. */
export interface Stretch {
  /** logarithm of the ridge's radius over R */
  readonly ridge: number;
  readonly at: (logRatio: number) => number;
}

/**
 * The stretch through (xₖ, Qₖ), both rising: where the wind of a level is to be (xₖ, from the ridge) and where the base vortex
 * has it (Qₖ). Monotone cubic between, slope `inner` inside the first, slope 1 (a plain stretch) outside the last.
 */
export function stretchThrough(
  x: readonly number[],
  q: readonly number[],
  inner: number,
): (logRatio: number) => number {
  const n = x.length;
  const secants: number[] = [];
  for (let i = 0; i + 1 < n; i++) secants.push((q[i + 1]! - q[i]!) / (x[i + 1]! - x[i]!));
  const slopes = x.map((_, i) => {
    const before = i === 0 ? inner : secants[i - 1]!;
    const after = i === n - 1 ? 1 : secants[i]!;
    const mean = before * after > 0 ? (2 * before * after) / (before + after) : 0;
    const limit = 3 * Math.min(secants[i - 1] ?? Number.POSITIVE_INFINITY, secants[i] ?? Number.POSITIVE_INFINITY);
    return Math.min(i === 0 ? before : i === n - 1 ? after : mean, limit);
  });
  return (at) => {
    if (at <= x[0]!) return q[0]! + inner * (at - x[0]!);
    if (at >= x[n - 1]!) return q[n - 1]! + (at - x[n - 1]!);
    let i = 0;
    while (at > x[i + 1]!) i++;
    const h = x[i + 1]! - x[i]!;
    const t = (at - x[i]!) / h;
    const u = 1 - t;
    return (
      q[i]! * (1 + 2 * t) * u * u +
      q[i + 1]! * t * t * (3 - 2 * t) +
      h * (slopes[i]! * t * u * u - slopes[i + 1]! * t * t * u)
    );
  };
}

/**
 * The stretch along every azimuth of a moment. `baseLogRadius` gives ln(r/R) at which the base vortex (its strongest
 * azimuth) has a wind at or below its maximum. The innermost level sets the ridge: where it reaches farthest the ridge has the
 * maximum itself, elsewhere the less the nearer it is; so the maximum is kept and a level that is 0 in a quadrant is not
 * reached in it. A level above the maximum is one that fades in or out between two fixes: it stands for the maximum itself.
 */
export function stretchAround(
  state: RadiiState,
  { maxWindMps, baseLogRadius }: { maxWindMps: number; baseLogRadius: (windMps: number) => number },
): (eighths: number) => Stretch {
  const { levels } = state;
  const ridge = aroundCircle(state.ridge);
  const curves = levels.map(({ logRatio }) => aroundCircle(logRatio));
  const base: number[] = [];
  for (const { windMps } of levels)
    base.push(Math.max(baseLogRadius(Math.min(windMps, maxWindMps)), (base[base.length - 1] ?? 0) + 1e-4));
  // the first level that is reached anywhere; what lies above it would be inside the ridge
  let first = levels.findIndex(({ logRatio }) => logRatio.some((ratio, j) => ratio > state.ridge[j]!));
  if (first < 0) first = levels.findIndex(({ windMps }) => windMps < maxWindMps);
  if (first < 0) return (eighths) => ({ ridge: ridge(eighths), at: (logRatio) => logRatio });
  const farthest = Math.max(LEAST_GAP, ...levels[first]!.logRatio.map((ratio, j) => ratio - state.ridge[j]!));
  const inner = base[first]! / farthest;
  return (eighths) => {
    const y = ridge(eighths);
    const x: number[] = [];
    for (let k = first; k < levels.length; k++) {
      const own = curves[k]!(eighths) - y;
      x.push(k === first ? Math.min(own, farthest) : Math.max(own, x[x.length - 1]! + 0.5 * LEAST_GAP));
    }
    return { ridge: y, at: stretchThrough(x, base.slice(first), inner) };
  };
}
