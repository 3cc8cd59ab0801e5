import { UsageError } from '../errors.js';
import type { Fix, Track } from '../track/track.js';
import { toKnots } from '../units.js';
import { type IsotachContext, type IsotachShape, isotachAttributes, isotachLabel } from './isotach-attributes.js';
import { CAUTION, type Provenance } from './provenance.js';
import { tracksToFeatures } from './track-geojson.js';
import { xmlText } from './xml.js';

export interface KmlInput {
  /** by rising threshold: a later one is drawn over an earlier one */
  readonly isotachs: readonly IsotachShape[];
  readonly context: IsotachContext;
  readonly track: Track;
  readonly provenance: Provenance;
  /** colour of a level, `#rrggbb` */
  readonly colourOf: (thresholdMps: number) => string;
  /** colour of the track, `#rrggbb` (black) */
  readonly trackColour?: string;
  /** opacity of the areas, 0–1 (0.6) */
  readonly opacity?: number;
}

/**
 * `swath.kml` [OgcKml2008]: a folder of styled isotachs with typed attributes, and one of the track: its line, cut at ±180°,
 * and the fixes with their times. Areas come cut at ±180°; one that touches the cut is drawn without outline, so that
 * no seam shows. Refers to no other file and to no network address.
 * @throws UsageError `write.colour` for a colour that is not `#rrggbb`
 */
export function swathKml(input: KmlInput): string {
  const { isotachs, context, track, provenance } = input;
  const opacity = input.opacity ?? 0.6;
  const called = track.name === null || track.name === '' ? track.id : `${track.name} (${track.id})`;
  const what =
    context.quantity === 'wind'
      ? `sustained wind, mean over ${context.averagingS} s`
      : `gust, mean over ${context.averagingS} s`;
  const styles = isotachs.map((isotach, index) => {
    const hex = input.colourOf(isotach.thresholdMps);
    const outline = touchesCut(isotach) ? 0 : 1;
    return `<Style id="level-${index}"><LineStyle><color>${colour(hex, 1)}</color><width>1</width></LineStyle><PolyStyle><color>${colour(hex, opacity)}</color><outline>${outline}</outline></PolyStyle></Style>`;
  });
  const ink = input.trackColour ?? '#000000';
  const isotachRows = isotachs.map((isotach) => isotachAttributes(isotach, context));
  const fixRows = track.fixes.map((fix) => fixAttributes(fix));
  return `<?xml version="1.0" encoding="UTF-8"?>
<kml xmlns="http://www.opengis.net/kml/2.2">
<Document>
<name>${xmlText(`Wind of ${called}`)}</name>
<open>1</open>
<description>${xmlText(`Peak ${what}, ${minute(provenance.period.startMs)} to ${minute(provenance.period.endMs)}. Galewake ${provenance.version}. ${CAUTION}`)}</description>
${styles.join('\n')}
<Style id="track"><LineStyle><color>${colour(ink, 1)}</color><width>2</width></LineStyle></Style>
<Style id="fix"><IconStyle><color>${colour(ink, 1)}</color><scale>0.5</scale></IconStyle><LabelStyle><scale>0.7</scale></LabelStyle></Style>
${schema('isotach', isotachRows)}
${schema('fix', fixRows)}
<Folder>
<name>Isotachs</name>
${isotachs.map((isotach, index) => (isotach.polygons.length === 0 ? '' : isotachPlacemark(isotach, { style: `level-${index}`, row: isotachRows[index]! }))).join('\n')}
</Folder>
<Folder>
<name>Track</name>
${trackPlacemark(track, called)}
${track.fixes.map((fix, index) => fixPlacemark(fix, fixRows[index]!)).join('\n')}
</Folder>
</Document>
</kml>
`;
}

/** KML writes a colour as alpha, blue, green, red. */
function colour(hex: string, opacity: number): string {
  const match = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i.exec(hex);
  if (!match)
    throw new UsageError('write.colour', `'${hex}' is not a colour; write #rrggbb`, { fields: { colour: hex } });
  const alpha = Math.round(Math.min(1, Math.max(0, opacity)) * 255)
    .toString(16)
    .padStart(2, '0');
  return `${alpha}${match[3]}${match[2]}${match[1]}`.toLowerCase();
}

const minute = (timeMs: number): string => `${new Date(timeMs).toISOString().slice(0, 16).replace('T', ' ')}Z`;

/** Whether an edge runs along the antimeridian. */
function touchesCut(isotach: IsotachShape): boolean {
  return isotach.polygons.some((polygon) =>
    polygon.some((ring) => ring.some((at, i) => i > 0 && Math.abs(at[0]!) === 180 && ring[i - 1]![0] === at[0])),
  );
}

type Row = Readonly<Record<string, string | number | null>>;

/** Declares the attributes, so that a reader knows numbers from text. */
function schema(id: string, rows: readonly Row[]): string {
  const types = new Map<string, string>();
  for (const row of rows) {
    for (const [name, value] of Object.entries(row))
      if (value !== null) types.set(name, typeof value === 'number' ? 'double' : 'string');
  }
  const fields = [...types].map(([name, type]) => `<SimpleField name="${xmlText(name)}" type="${type}"/>`);
  return `<Schema name="${id}" id="${id}">${fields.join('')}</Schema>`;
}

function schemaData(id: string, row: Row): string {
  const cells = Object.entries(row).filter(([, value]) => value !== null);
  return `<ExtendedData><SchemaData schemaUrl="#${id}">${cells.map(([name, value]) => `<SimpleData name="${xmlText(name)}">${xmlText(String(value))}</SimpleData>`).join('')}</SchemaData></ExtendedData>`;
}

const coordinates = (line: readonly (readonly number[])[]): string =>
  line.map((at) => `${Number(at[0]!.toFixed(6))},${Number(at[1]!.toFixed(6))}`).join(' ');

function isotachPlacemark(isotach: IsotachShape, { style, row }: { style: string; row: Row }): string {
  const ring = (tag: string, line: readonly (readonly number[])[]): string =>
    `<${tag}><LinearRing><coordinates>${coordinates(line)}</coordinates></LinearRing></${tag}>`;
  const polygons = isotach.polygons.map(
    (rings) =>
      `<Polygon><tessellate>1</tessellate><altitudeMode>clampToGround</altitudeMode>${rings.map((line, i) => ring(i === 0 ? 'outerBoundaryIs' : 'innerBoundaryIs', line)).join('')}</Polygon>`,
  );
  return `<Placemark><name>${xmlText(isotachLabel(isotach))}</name><styleUrl>#${style}</styleUrl>${schemaData('isotach', row)}<MultiGeometry>${polygons.join('')}</MultiGeometry></Placemark>`;
}

function trackPlacemark(track: Track, called: string): string {
  const line = tracksToFeatures([track]).features.find((feature) => feature.geometry.type !== 'Point')?.geometry;
  if (!line || line.type === 'Point') return '';
  const parts = line.type === 'LineString' ? [line.coordinates] : line.coordinates;
  const lines = parts.map(
    (part) => `<LineString><tessellate>1</tessellate><coordinates>${coordinates(part)}</coordinates></LineString>`,
  );
  return `<Placemark><name>${xmlText(`Track of ${called}`)}</name><styleUrl>#track</styleUrl><MultiGeometry>${lines.join('')}</MultiGeometry></Placemark>`;
}

function fixAttributes(fix: Fix): Row {
  return {
    time: new Date(fix.timeMs).toISOString(),
    max_wind_mps: fix.maxWindMps === null ? null : Number(fix.maxWindMps.toFixed(3)),
    averaging_s: fix.averagingS,
    central_pressure_hpa: fix.centralPressurePa === null ? null : Number((fix.centralPressurePa / 100).toFixed(2)),
    status: fix.status,
  };
}

function fixPlacemark(fix: Fix, row: Row): string {
  const parts = [
    ...(fix.maxWindMps === null ? [] : [`${toKnots(fix.maxWindMps).toFixed(0)} kt (${fix.maxWindMps.toFixed(1)} m/s)`]),
    ...(fix.centralPressurePa === null ? [] : [`${(fix.centralPressurePa / 100).toFixed(0)} hPa`]),
  ];
  const text = parts.length === 0 ? '' : `<description>${xmlText(parts.join(', '))}</description>`;
  return `<Placemark><name>${minute(fix.timeMs)}</name>${text}<TimeStamp><when>${new Date(fix.timeMs).toISOString()}</when></TimeStamp><styleUrl>#fix</styleUrl>${schemaData('fix', row)}<Point><coordinates>${coordinates([[fix.lonDeg, fix.latDeg]])}</coordinates></Point></Placemark>`;
}
