import type { AssetColumns } from '../exposure/asset-columns.js';
import type { AssetOutcomes } from '../exposure/exposure.js';
import { csvCell } from './csv-cell.js';
import { thresholdName } from './peak-bands.js';

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

type Cell = string | number | null;
interface Column {
  readonly heading: string;
  readonly cell: (i: number) => Cell;
}

/** The columns of a table of assets, in the order of writing. Values and losses keep the headings of the input. */
function columnsOf(exposed: ExposedAssets): Column[] {
  const { assets, outcomes, levelsMps } = exposed;
  const gust = exposed.of === 'gust' ? 'gust_' : '';
  const levelNames = levelsMps.map(thresholdName);
  const own: Column[] = [
    { heading: 'peak_wind_mps', cell: (i) => outcomes.windMps[i]! },
    { heading: 'peak_gust_mps', cell: (i) => outcomes.gustMps[i]! },
    { heading: 'wind_from_deg', cell: (i) => tenths(outcomes.windFromDeg[i]!) },
    { heading: 'peak_time', cell: (i) => timeText(outcomes.originMs + 1000 * outcomes.peakTimeS[i]!) },
    ...levelNames.map((name, h) => ({
      heading: `hours_${gust}${name}_h`,
      cell: (i: number) => Math.round(outcomes.hours[h]![i]! * 1000) / 1000,
    })),
    { heading: 'level', cell: (i) => levelNames[outcomes.level[i]!] ?? null },
  ];
  if (exposed.classCodes.length > 0)
    own.push({ heading: 'class', cell: (i) => exposed.classCodes[outcomes.classIndex[i]!] ?? null });
  if (outcomes.ratio.length > 0) own.push({ heading: 'damage_ratio', cell: (i) => outcomes.ratio[i]! });
  for (const [c, losses] of outcomes.losses.entries())
    if (losses) own.push({ heading: `loss_${exposed.valueNames[c]}`, cell: (i) => losses[i]! });
  if (exposed.zoneNames.length > 0)
    own.push({
      heading: 'zone',
      cell: (i) =>
        outcomes.zone[i]! < 0
          ? null
          : [outcomes.zone[i]!, ...(outcomes.furtherZones.get(i) ?? [])].map((k) => exposed.zoneNames[k]).join('; '),
    });
  const taken = new Set(['name', 'lat_deg', 'lon_deg', ...own.map((column) => column.heading)]);
  const values = exposed.valueNames.map((name, c) => ({
    heading: taken.has(name.toLowerCase()) ? `value_${name}` : name,
    cell: (i: number) => assets.values[c]![i]!,
  }));
  return [...values, ...own];
}

const tenths = (value: number): number | null => (Number.isNaN(value) ? null : (Math.round(value * 10) % 3600) / 10);
const timeText = (ms: number): string | null =>
  Number.isNaN(ms) ? null : `${new Date(ms).toISOString().slice(0, 19)}Z`;

/** The assets as CSV, one row each: name, place, values, winds, hours, level, class, damage and zone. */
export function* assetsCsv(exposed: ExposedAssets): Generator<string, void, undefined> {
  const { assets } = exposed;
  const columns = columnsOf(exposed);
  yield `${['name', 'lat_deg', 'lon_deg', ...columns.map((column) => column.heading)].map(csvCell).join(',')}\n`;
  let text = '';
  for (let i = 0; i < assets.count; i++) {
    text += `${csvCell(assets.nameOf(i))},${assets.latDeg[i]},${assets.lonDeg[i]}`;
    for (const { cell } of columns) {
      const value = cell(i);
      text += value === null ? ',' : typeof value === 'number' ? `,${value}` : `,${csvCell(value)}`;
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
  yield `${JSON.stringify({ type: 'FeatureCollection', ...members }).slice(0, -1)},"features":[\n`;
  let text = '';
  for (let i = 0; i < assets.count; i++) {
    text += `${i > 0 ? ',\n' : ''}{"type":"Feature","geometry":{"type":"Point","coordinates":[${assets.lonDeg[i]},${assets.latDeg[i]}]},"properties":{"name":${JSON.stringify(assets.nameOf(i))}`;
    for (const [k, { cell }] of columns.entries()) {
      const value = cell(i);
      text += `${keys[k]}${typeof value === 'string' ? JSON.stringify(value) : value}`;
    }
    text += '}}';
    if ((i + 1) % ROWS_PER_PIECE === 0) {
      yield text;
      text = '';
    }
  }
  yield `${text}\n]}\n`;
}
