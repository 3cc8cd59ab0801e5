import { InputError } from '../errors.js';

/** A damage curve: which wind it is for, and the share of an asset's value that is lost at it. */
export interface DamageCurve {
  /** what the curve is, for the record */
  readonly title: string;
  /** whether it takes the gust or the sustained wind */
  readonly of: 'wind' | 'gust';
  /** averaging period of that wind, s */
  readonly averagingS: number;
  /** 0 … 1, never falling */
  readonly ratio: (windMps: number) => number;
  /** lowest and highest wind that the curve was given for, m/s; below it there is no loss, above it the last ratio is held */
  readonly knownFromMps: number;
  readonly knownToMps: number;
}

/** One row of a user's table. */
export interface CurvePoint {
  readonly windMps: number;
  readonly ratio: number;
  /** line of the source */
  readonly line: number;
}

/**
 * A curve through a user's table, straight between rows; 0 below the first row, the last ratio held above the last.
 * @throws InputError `curve.rows`, `curve.order`, `curve.ratio`, `curve.falls`, each with the line
 */
export function tableCurve(
  points: readonly CurvePoint[],
  options: { source: string; of: 'wind' | 'gust'; averagingS: number },
): DamageCurve {
  const { source } = options;
  if (points.length < 2)
    throw new InputError('curve.rows', `${source}: a curve needs at least two rows of wind and damage ratio`);
  for (const [i, point] of points.entries()) {
    const where = `${source}:${point.line}`;
    if (!(point.windMps >= 0))
      throw new InputError('curve.order', `${where}: the wind ${point.windMps.toFixed(2)} m/s is not at least 0`);
    if (!(point.ratio >= 0 && point.ratio <= 1))
      throw new InputError(
        'curve.ratio',
        `${where}: the damage ratio ${point.ratio} is not between 0 and 1; a percentage must be divided by 100`,
      );
    const before = points[i - 1];
    if (!before) continue;
    if (!(point.windMps > before.windMps))
      throw new InputError(
        'curve.order',
        `${where}: the wind ${point.windMps.toFixed(2)} m/s is not above the row before; sort the rows by wind`,
      );
    if (point.ratio < before.ratio)
      throw new InputError(
        'curve.falls',
        `${where}: the damage ratio falls from ${before.ratio} to ${point.ratio}; a curve never goes down`,
      );
  }
  const last = points[points.length - 1]!;
  return {
    title: `table of ${points.length} rows from ${source}`,
    of: options.of,
    averagingS: options.averagingS,
    // a first ratio of 0 says what is below it
    knownFromMps: points[0]!.ratio > 0 ? points[0]!.windMps : 0,
    // everything is lost already: nothing to extrapolate
    knownToMps: last.ratio === 1 ? Number.POSITIVE_INFINITY : last.windMps,
    ratio: (windMps) => {
      if (!(windMps >= points[0]!.windMps)) return 0;
      if (windMps >= last.windMps) return last.ratio;
      let low = 0;
      let high = points.length - 1;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if (points[middle]!.windMps <= windMps) low = middle;
        else high = middle;
      }
      const a = points[low]!;
      const b = points[high]!;
      return a.ratio + ((b.ratio - a.ratio) * (windMps - a.windMps)) / (b.windMps - a.windMps);
    },
  };
}

/**
 * F = v³/(1 + v³), v = max(V − V_t, 0)/(V_h − V_t), V the 1-min sustained wind; half is lost at V_h   [Emanuel2011, from memory].
 * Both speeds are required: published sets differ.
 * @throws InputError `curve.speeds`
 */
export function cubicCurve({ thresholdMps, halfMps }: { thresholdMps: number; halfMps: number }): DamageCurve {
  if (!(thresholdMps >= 0 && halfMps > thresholdMps)) {
    throw new InputError(
      'curve.speeds',
      `the cubic curve needs a threshold of at least 0 and a half-loss speed above it, not ${thresholdMps} and ${halfMps} m/s`,
    );
  }
  return {
    title: `cubic form of Emanuel 2011, threshold ${thresholdMps} m/s, half loss at ${halfMps} m/s`,
    of: 'wind',
    averagingS: 60,
    knownFromMps: 0,
    knownToMps: Number.POSITIVE_INFINITY,
    ratio: (windMps) => {
      const v = Math.max(windMps - thresholdMps, 0) / (halfMps - thresholdMps);
      return v ** 3 / (1 + v ** 3);
    },
  };
}

/**
 * ((V − V_t)/(V_1 − V_t))ⁿ above a threshold, everything lost from V_1 on.
 * @throws InputError `curve.speeds`
 */
export function powerCurve(p: {
  thresholdMps: number;
  totalMps: number;
  exponent: number;
  of: 'wind' | 'gust';
  averagingS: number;
}): DamageCurve {
  if (!(p.thresholdMps >= 0 && p.totalMps > p.thresholdMps && p.exponent > 0)) {
    throw new InputError(
      'curve.speeds',
      `the power curve needs a threshold of at least 0, a total-loss speed above it and a positive exponent, not ${p.thresholdMps}, ${p.totalMps} m/s and ${p.exponent}`,
    );
  }
  return {
    title: `power ${p.exponent} above ${p.thresholdMps} m/s, total loss at ${p.totalMps} m/s`,
    of: p.of,
    averagingS: p.averagingS,
    knownFromMps: 0,
    knownToMps: Number.POSITIVE_INFINITY,
    ratio: (windMps) =>
      Math.min(1, (Math.max(windMps - p.thresholdMps, 0) / (p.totalMps - p.thresholdMps)) ** p.exponent),
  };
}
