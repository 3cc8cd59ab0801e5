import type { AssetColumns } from './asset-columns.js';
import type { DamageCurve } from './curve.js';
import { type DecimalSum, decimalSum } from './decimal-sum.js';
import type { PointWinds } from './wind-at-points.js';
import { type ZoneShape, zoneTest } from './zones.js';

/** Decimals of winds, of damage ratios and, at least, of losses. Everything is counted as it is written. */
const WIND_DECIMALS = 3;
const RATIO_DECIMALS = 6;
const LOSS_DECIMALS = 2;

/** A number as it is written with some decimals. */
export function written(value: number, decimals: number): number {
  const scale = 10 ** decimals;
  return Math.round(value * scale) / scale;
}

/** What the wind is held against. */
export interface ExposureMeasures {
  /** rising, m/s */
  readonly levelsMps: readonly number[];
  /** which wind the levels are for */
  readonly of: 'wind' | 'gust';
  /** gust over the mean wind */
  readonly gustFactor: number;
  /** lower bounds of classes, rising from 0, for the wind or the gust of an asset; none without a scale that fits */
  readonly classes: { readonly of: 'wind' | 'gust'; readonly boundsMps: readonly number[] } | null;
  readonly damage: {
    readonly curve: DamageCurve;
    /** the curve's own wind from an asset's */
    readonly windOf: (windMps: number, gustMps: number) => number;
    /** columns of values that the curve is applied to */
    readonly columns: readonly number[];
  } | null;
  readonly zones: readonly ZoneShape[];
}

/** What happened to each asset, in columns, as it is written: winds with three decimals, ratios with six. */
export interface AssetOutcomes {
  readonly windMps: Float64Array;
  readonly gustMps: Float64Array;
  readonly windFromDeg: Float32Array;
  readonly peakTimeS: Float32Array;
  readonly originMs: number;
  /** hours at or above each level */
  readonly hours: readonly Float32Array[];
  /** the highest level that was reached; −1 for none */
  readonly level: Int16Array;
  /** index of the class; −1 without classes */
  readonly classIndex: Int16Array;
  /** damage ratio; empty without a curve */
  readonly ratio: Float64Array;
  /** loss by column of values, null where the curve is not applied to it */
  readonly losses: readonly (Float64Array | null)[];
  readonly lossDecimals: readonly number[];
  /** the first zone that holds the asset; −1 for none */
  readonly zone: Int32Array;
  /** further zones of assets that lie in several */
  readonly furtherZones: ReadonlyMap<number, readonly number[]>;
  /** assets whose wind lies below or above what the curve was given for */
  readonly belowCurve: number;
  readonly aboveCurve: number;
}

/** Level, class, damage and zone of each asset. */
export function assetOutcomes(assets: AssetColumns, winds: PointWinds, measures: ExposureMeasures): AssetOutcomes {
  const n = assets.count;
  const { classes, damage } = measures;
  const levels = measures.levelsMps.map((level) => written(level, WIND_DECIMALS));
  const bounds = classes?.boundsMps.map((bound) => written(bound, WIND_DECIMALS)) ?? [];
  const lossDecimals = assets.decimals.map((decimals) => Math.max(LOSS_DECIMALS, decimals));
  const outcomes = {
    windMps: new Float64Array(n),
    gustMps: new Float64Array(n),
    windFromDeg: winds.windFromDeg,
    peakTimeS: winds.peakTimeS,
    originMs: winds.originMs,
    hours: winds.hours,
    level: new Int16Array(n).fill(-1),
    classIndex: new Int16Array(n).fill(-1),
    ratio: new Float64Array(damage ? n : 0),
    losses: assets.values.map((_, c) => (damage?.columns.includes(c) ? new Float64Array(n) : null)),
    lossDecimals,
    zone: new Int32Array(n).fill(-1),
    furtherZones: new Map<number, number[]>(),
    belowCurve: 0,
    aboveCurve: 0,
  };
  const zonesAt = zoneFinder(measures.zones);
  for (let i = 0; i < n; i++) {
    const wind = written(winds.windMps[i]!, WIND_DECIMALS);
    const gust = written(winds.windMps[i]! * measures.gustFactor, WIND_DECIMALS);
    outcomes.windMps[i] = wind;
    outcomes.gustMps[i] = gust;
    outcomes.level[i] = lastReached(levels, measures.of === 'gust' ? gust : wind);
    if (classes) outcomes.classIndex[i] = lastReached(bounds, classes.of === 'gust' ? gust : wind);
    if (damage) {
      const felt = damage.windOf(wind, gust);
      const ratio = written(damage.curve.ratio(felt), RATIO_DECIMALS);
      if (felt > damage.curve.knownToMps) outcomes.aboveCurve++;
      else if (felt > 0 && felt < damage.curve.knownFromMps) outcomes.belowCurve++;
      outcomes.ratio[i] = ratio;
      for (const c of damage.columns) outcomes.losses[c]![i] = written(assets.values[c]![i]! * ratio, lossDecimals[c]!);
    }
    if (measures.zones.length === 0) continue;
    const [first = -1, ...further] = zonesAt(assets.lonDeg[i]!, assets.latDeg[i]!);
    outcomes.zone[i] = first;
    if (further.length > 0) outcomes.furtherZones.set(i, further);
  }
  return outcomes;
}

/** Index of the last bound at or below a value; −1 for none. */
function lastReached(bounds: readonly number[], value: number): number {
  let k = bounds.length - 1;
  while (k >= 0 && !(value >= bounds[k]!)) k--;
  return k;
}

/** The zones that hold a place; those that cannot are passed over by their latitude. */
function zoneFinder(zones: readonly ZoneShape[]): (lonDeg: number, latDeg: number) => number[] {
  const tests = zones.map(zoneTest);
  const belts: number[][] = Array.from({ length: 180 }, () => []);
  const beltOf = (lat: number): number => Math.max(0, Math.min(179, Math.floor(lat + 90)));
  for (const [k, { bounds }] of zones.entries())
    for (let belt = beltOf(bounds[1]); belt <= beltOf(bounds[3]); belt++) belts[belt]!.push(k);
  return (lonDeg, latDeg) => belts[beltOf(latDeg)]!.filter((k) => tests[k]!(lonDeg, latDeg));
}

/** Assets, their values and their losses, added up. */
export interface Tally {
  readonly assets: number;
  /** by column of values */
  readonly values: readonly DecimalSum[];
  /** by column of values, null where there is no loss */
  readonly losses: readonly (DecimalSum | null)[];
}

/** The sums of an exposure. */
export interface ExposureTotals {
  readonly all: Tally;
  /** by highest level reached: below the lowest, then each level up to the next */
  readonly bands: readonly Tally[];
  /** at or above each level: bands added up from the top */
  readonly levels: readonly Tally[];
  readonly classes: readonly Tally[];
  readonly zones: readonly { readonly all: Tally; readonly levels: readonly Tally[] }[];
}

/** Adds assets up by level, class and zone, as they are written. */
export function exposureTotals(
  assets: AssetColumns,
  outcomes: AssetOutcomes,
  counts: { readonly levels: number; readonly classes: number; readonly zones: number },
): ExposureTotals {
  const newTally = () => ({
    assets: 0,
    values: assets.decimals.map(decimalSum),
    losses: outcomes.losses.map((loss, c) => (loss ? decimalSum(outcomes.lossDecimals[c]!) : null)),
  });
  type Growing = ReturnType<typeof newTally>;
  const some = (n: number): Growing[] => Array.from({ length: n }, newTally);
  const add = (tally: Growing, i: number): void => {
    tally.assets++;
    for (let c = 0; c < tally.values.length; c++) {
      tally.values[c]!.add(assets.values[c]![i]!);
      tally.losses[c]?.add(outcomes.losses[c]![i]!);
    }
  };
  const sumOf = (tallies: readonly Growing[]): Growing => {
    const sum = newTally();
    for (const tally of tallies) {
      sum.assets += tally.assets;
      for (let c = 0; c < sum.values.length; c++) {
        sum.values[c]!.addSum(tally.values[c]!, 1);
        if (tally.losses[c]) sum.losses[c]!.addSum(tally.losses[c]!, 1);
      }
    }
    return sum;
  };
  const bands = some(counts.levels + 1);
  const classes = some(counts.classes);
  const zoneBands = Array.from({ length: counts.zones }, () => some(counts.levels + 1));
  for (let i = 0; i < assets.count; i++) {
    const band = outcomes.level[i]! + 1;
    add(bands[band]!, i);
    if (outcomes.classIndex[i]! >= 0) add(classes[outcomes.classIndex[i]!]!, i);
    if (outcomes.zone[i]! < 0) continue;
    add(zoneBands[outcomes.zone[i]!]![band]!, i);
    for (const zone of outcomes.furtherZones.get(i) ?? []) add(zoneBands[zone]![band]!, i);
  }
  const levelsOf = (all: readonly Growing[]): Growing[] => all.slice(1).map((_, k) => sumOf(all.slice(k + 1)));
  return {
    all: sumOf(bands),
    bands,
    levels: levelsOf(bands),
    classes,
    zones: zoneBands.map((all) => ({ all: sumOf(all), levels: levelsOf(all) })),
  };
}
