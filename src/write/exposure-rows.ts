import type { AssetColumns } from '../exposure/asset-columns.js';
import type { AssetOutcomes } from '../exposure/exposure.js';
import { csvCell } from './csv-cell.js';
import { thresholdName } from './peak-bands.js';
import { placesBox } from './places-box.js';

/** Assets and what happened to them, with the words that rows are written with. */
export interface ExposedAssets {
  readonly assets: AssetColumns;
  readonly outcomes: AssetOutcomes;
  readonly valueNames: readonly string[];
  readonly levelsMps: readonly number[];
  readonly of: 'wind' | 'gust';
  /** codes of the classes; none without a scale */
  readonly classCodes: readonly string[];
  readonly zoneNames: readonly string[];
}

/** Rows that make one piece of text. */
const ROWS_PER_PIECE = 2000;

/** A column: its texts are '' where there is nothing. */
interface Column {
  readonly heading: string;
  /** plain: letters, digits, signs and colons, which no format needs to guard */
  readonly kind: 'number' | 'plain' | 'text';
  readonly text: (i: number) => string;
}

/** The columns of a table of assets, in the order of writing. Values and losses keep the headings of the input. */
function columnsOf(exposed: ExposedAssets): Column[] {
  const { assets, outcomes, levelsMps } = exposed;
  const gust = exposed.of === 'gust' ? 'gust_' : '';
  const levelNames = levelsMps.map(thresholdName);
  const time = timeTexts();
  const own: Column[] = [];
  const number = (heading: string, values: ArrayLike<number>, text: (value: number) => string): void => {
    own.push({ heading, kind: 'number', text: (i) => text(values[i]!) });
  };
  const plain = (heading: string, text: (i: number) => string): void => {
    own.push({ heading, kind: 'plain', text });
  };
  number('peak_wind_mps', outcomes.windMps, thousandths);
  number('peak_gust_mps', outcomes.gustMps, thousandths);
  number('wind_from_deg', outcomes.windFromDeg, bearing);
  plain('peak_time', (i) => time(outcomes.originMs + 1000 * outcomes.peakTimeS[i]!));
  for (const [h, name] of levelNames.entries()) number(`hours_${gust}${name}_h`, outcomes.hours[h]!, thousandths);
  plain('level', (i) => levelNames[outcomes.level[i]!] ?? '');
  if (exposed.classCodes.length > 0) plain('class', (i) => exposed.classCodes[outcomes.classIndex[i]!] ?? '');
  if (outcomes.ratio.length > 0) number('damage_ratio', outcomes.ratio, shortest);
  for (const [c, losses] of outcomes.losses.entries())
    if (losses) number(`loss_${exposed.valueNames[c]}`, losses, shortest);
  if (exposed.zoneNames.length > 0) {
    const zoneOf = (i: number): string =>
      outcomes.zone[i]! < 0
        ? ''
        : [outcomes.zone[i]!, ...(outcomes.furtherZones.get(i) ?? [])].map((k) => exposed.zoneNames[k]).join('; ');
    own.push({ heading: 'zone', kind: 'text', text: zoneOf });
  }
  const taken = new Set(['name', 'lat_deg', 'lon_deg', ...own.map((column) => column.heading)]);
  const values = exposed.valueNames.map((name, c): Column => {
    const column = assets.values[c]!;
    const heading = taken.has(name.toLowerCase()) ? `value_${name}` : name;
    return { heading, kind: 'number', text: (i) => String(column[i]) };
  });
  return [...values, ...own];
}

/** Seven decimals are a centimetre. */
const degrees = (value: number): number => Math.round(value * 1e7) / 1e7;

const shortest = (value: number): string => String(value);

/** `.001` … `.999`, without trailing zeros */
const FRACTIONS = Array.from({ length: 1000 }, (_, i) => String(i / 1000).slice(1));

/** A number of at least 0 with three decimals at most. */
function thousandths(value: number): string {
  if (value === 0) return '0';
  const whole = Math.round(value * 1000);
  const units = Math.floor(whole / 1000);
  return units + FRACTIONS[whole - 1000 * units]!;
}

const bearing = (value: number): string =>
  Number.isNaN(value) ? '' : thousandths((Math.round(value * 10) % 3600) / 10);

/** Texts of times to the second; those of a minute share their beginning. */
function timeTexts(): (ms: number) => string {
  const minutes = new Map<number, string>();
  const ends = Array.from({ length: 60 }, (_, second) => `:${String(second).padStart(2, '0')}Z`);
  return (ms) => {
    if (Number.isNaN(ms)) return '';
    const seconds = Math.floor(ms / 1000);
    const minute = Math.floor(seconds / 60);
    let text = minutes.get(minute);
    if (text === undefined) {
      text = new Date(minute * 60_000).toISOString().slice(0, 16);
      minutes.set(minute, text);
    }
    return text + ends[seconds - 60 * minute]!;
  };
}

/** The assets as CSV, one row each: name, place, values, winds, hours, level, class, damage and zone. */
export function* assetsCsv(exposed: ExposedAssets): Generator<string, void, undefined> {
  const { assets } = exposed;
  const columns = columnsOf(exposed);
  yield `${['name', 'lat_deg', 'lon_deg', ...columns.map((column) => column.heading)].map(csvCell).join(',')}\n`;
  let text = '';
  for (let i = 0; i < assets.count; i++) {
    text += `${csvCell(assets.nameOf(i))},${assets.latDeg[i]},${assets.lonDeg[i]}`;
    for (const { kind, text: textOf } of columns) {
      text += ',';
      text += kind === 'text' ? csvCell(textOf(i)) : textOf(i);
    }
    text += '\n';
    if ((i + 1) % ROWS_PER_PIECE === 0) {
      yield text;
      text = '';
    }
  }
  if (text !== '') yield text;
}

/** The assets as GeoJSON points   [RFC7946] with the columns of {@link assetsCsv} as properties. */
export function* assetsGeojson(
  exposed: ExposedAssets,
  members: Readonly<Record<string, unknown>>,
): Generator<string, void, undefined> {
  const { assets } = exposed;
  const columns = columnsOf(exposed);
  const keys = columns.map((column) => `,${JSON.stringify(column.heading)}:`);
  const bbox = placesBox(assets.lonDeg, assets.latDeg)?.map(degrees);
  yield `${JSON.stringify({ type: 'FeatureCollection', ...(bbox ? { bbox } : {}), ...members }).slice(0, -1)},"features":[\n`;
  let text = '';
  for (let i = 0; i < assets.count; i++) {
    text += `${i > 0 ? ',\n' : ''}{"type":"Feature","geometry":{"type":"Point","coordinates":[${degrees(assets.lonDeg[i]!)},${degrees(assets.latDeg[i]!)}]},"properties":{"name":${JSON.stringify(assets.nameOf(i))}`;
    for (let k = 0; k < columns.length; k++) {
      const value = columns[k]!.text(i);
      text += keys[k];
      const { kind } = columns[k]!;
      if (value === '') text += 'null';
      else text += kind === 'number' ? value : kind === 'plain' ? `"${value}"` : JSON.stringify(value);
    }
    text += '}}';
    if ((i + 1) % ROWS_PER_PIECE === 0) {
      yield text;
      text = '';
    }
  }
  yield `${text}\n]}\n`;
}
