import { basename } from 'node:path';
import { UsageError } from '../errors.js';
import { cubicCurve, type DamageCurve, powerCurve } from '../exposure/curve.js';
import { curveFromTable } from '../exposure/curve-table.js';
import { type InputRecord, readInputBytes, sha256Hex } from '../io/input.js';
import { sourceName } from '../io/lines.js';
import type { WindModel } from '../model/wind.js';
import { averagingFactor } from '../surface/averaging.js';
import { gustMethod } from '../surface/gust-method.js';
import { SEA_Z0_M } from '../surface/roughness.js';
import { quantityOf } from '../units.js';
import { list } from './choices.js';

export interface DamageOptions {
  readonly curve?: string;
  readonly curveOf?: 'wind' | 'gust';
  readonly curveAveraging?: string;
  readonly cubic?: string;
  readonly power?: string;
}

/** The damage curve that is asked for; null for none. */
export async function curveOf(
  options: DamageOptions,
  model: { readonly averagingS: number; readonly gustDurationS: number },
): Promise<{ curve: DamageCurve; input: InputRecord | null } | null> {
  const asked = (['curve', 'cubic', 'power'] as const).filter((name) => options[name] !== undefined);
  if (asked.length > 1)
    throw new UsageError('curve.several', `--${asked.join(' and --')} exclude each other: one run has one curve`);
  const averagingS =
    options.curveAveraging === undefined
      ? undefined
      : quantityOf('duration', options.curveAveraging, { bareUnit: 's', name: '--curve-averaging' });
  const stated = {
    ...(options.curveOf === undefined ? {} : { of: options.curveOf }),
    ...(averagingS === undefined ? {} : { averagingS }),
  };
  if (asked.length === 0) {
    if (Object.keys(stated).length > 0)
      throw new UsageError('curve.none', '--curve-of and --curve-averaging go with --curve or --power');
    return null;
  }
  if (options.curve !== undefined) {
    const bytes = await readInputBytes(options.curve);
    const text = new TextDecoder().decode(bytes);
    return {
      curve: curveFromTable(text, { source: sourceName(options.curve), ...stated }),
      input: { name: basename(options.curve), sha256: sha256Hex(bytes) },
    };
  }
  if (options.cubic !== undefined) {
    if (stated.of === 'gust' || (averagingS !== undefined && averagingS !== 60))
      throw new UsageError(
        'curve.cubic',
        '--cubic is a curve of the 1-min sustained wind; leave out --curve-of and --curve-averaging',
      );
    const parts = list(options.cubic);
    if (parts.length !== 2)
      throw new UsageError(
        'curve.speeds',
        `--cubic ${options.cubic}: give two speeds, THRESHOLD,HALF, such as 25.7,74.7 (m/s); there is no built-in pair`,
      );
    const [thresholdMps, halfMps] = parts.map((part) =>
      quantityOf('speed', part, { bareUnit: 'm/s', name: '--cubic' }),
    );
    return { curve: cubicCurve({ thresholdMps: thresholdMps!, halfMps: halfMps! }), input: null };
  }
  const parts = list(options.power);
  if (parts.length !== 3)
    throw new UsageError(
      'curve.speeds',
      `--power ${options.power}: give THRESHOLD,TOTAL,EXPONENT, such as 25m/s,80m/s,3`,
    );
  const speed = (text: string): number => quantityOf('speed', text, { bareUnit: 'm/s', name: '--power' });
  const of = options.curveOf ?? 'wind';
  return {
    curve: powerCurve({
      thresholdMps: speed(parts[0]!),
      totalMps: speed(parts[1]!),
      exponent: parts[2] === '' ? Number.NaN : Number(parts[2]),
      of,
      averagingS: averagingS ?? (of === 'gust' ? model.gustDurationS : model.averagingS),
    }),
    input: null,
  };
}

/**
 * The curve's own wind from the wind and gust of an asset, and how it is made; mean winds are converted as over the sea
 * [HarperKepertGinger2010].
 */
export function curveWind(
  curve: DamageCurve,
  model: Pick<WindModel, 'averagingS' | 'recipe'>,
): { windOf: (windMps: number, gustMps: number) => number; conversion: string } {
  const gustDurationS = model.recipe['gust.duration_s'] as number;
  if (curve.of === 'wind') {
    const factor = averagingFactor('at-sea', { fromS: model.averagingS, toS: curve.averagingS });
    return {
      windOf: (windMps) => windMps * factor,
      conversion:
        factor === 1
          ? 'none: the sustained wind as it is'
          : `sustained wind × ${factor.toFixed(4)}: mean of ${model.averagingS} s to mean of ${curve.averagingS} s, at sea`,
    };
  }
  if (curve.averagingS === gustDurationS)
    return { windOf: (_, gustMps) => gustMps, conversion: 'none: the gust as it is' };
  const factor = gustMethod(model.recipe['gust.method']).factor({
    exposure: 'at-sea',
    z0M: SEA_Z0_M,
    durationS: curve.averagingS,
    periodS: model.averagingS,
  });
  return {
    windOf: (windMps) => windMps * factor,
    conversion: `sustained wind × ${factor.toFixed(4)}: gust of ${curve.averagingS} s within ${model.averagingS} s, at sea`,
  };
}
