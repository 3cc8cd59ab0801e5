import { Builder } from 'flatbuffers';
import { UsageError } from '../errors.js';
import { type IsotachContext, type IsotachShape, isotachAttributes } from './isotach-attributes.js';
import { type Box, boxAround, hilbertOrder, NODE_SIZE, packedTree } from './packed-tree.js';
import { type Provenance, provenanceItems } from './provenance.js';

/*
 * Why FlatGeobuf and not GeoPackage: a GeoPackage is an SQLite database, which no library without native or WebAssembly
 * code writes, and it has no form that can be read in part over a network. A FlatGeobuf file is a row of FlatBuffers
 * behind a spatial index: the official FlatBuffers runtime is all it needs, in the browser too. The npm package of the
 * format's own authors writes neither index nor extent nor a layer name and draws in a map library of 15 MB, so the
 * tables are written here.
 */

const MAGIC = new Uint8Array([0x66, 0x67, 0x62, 0x03, 0x66, 0x67, 0x62, 0x00]);
const GEOMETRY = { Point: 1, LineString: 2, Polygon: 3, MultiLineString: 5, MultiPolygon: 6 } as const;
const COLUMN = { boolean: 2, number: 10, string: 11 } as const;

type Position = readonly number[];

/** A geometry as GeoJSON has it: degrees east and north on WGS 84. */
export type FlatGeometry =
  | { readonly type: 'Point'; readonly coordinates: Position }
  | { readonly type: 'LineString'; readonly coordinates: readonly Position[] }
  | { readonly type: 'Polygon' | 'MultiLineString'; readonly coordinates: readonly (readonly Position[])[] }
  | { readonly type: 'MultiPolygon'; readonly coordinates: readonly (readonly (readonly Position[])[])[] };

/** A feature as GeoJSON has it; null and absent attributes have no value. */
export interface FlatFeature {
  readonly properties: Readonly<Record<string, string | number | boolean | null>>;
  readonly geometry: FlatGeometry;
}

export interface FlatGeobufInput {
  /** name of the layer */
  readonly name: string;
  readonly title?: string;
  readonly description?: string;
  readonly metadata?: Readonly<Record<string, string>>;
  readonly features: readonly FlatFeature[];
}

/**
 * A FlatGeobuf file [Harrtell2020] with spatial index, in EPSG:4326. Attributes are text, numbers or truth values; null
 * and absent ones have no value. Up to 16 features keep their order, more are sorted along a Hilbert curve.
 * @throws UsageError `write.attribute` where an attribute is text in one feature and a number in another
 */
export function flatGeobuf(input: FlatGeobufInput): Uint8Array {
  const columns = columnsOf(input.features);
  const boxes = input.features.map((feature) => boxOf(feature.geometry));
  const order = hilbertOrder(boxes);
  const encoded = order.map((index) => featureBytes(input.features[index]!, columns));
  const offsets: number[] = [];
  let length = 0;
  for (const bytes of encoded) {
    offsets.push(length);
    length += bytes.length;
  }
  const header = headerBytes(input, { columns, boxes });
  // an empty file has no index, and its header says so
  const sorted = order.map((index) => boxes[index]!);
  const index = encoded.length === 0 ? new Uint8Array(0) : packedTree(sorted, offsets);
  const out = new Uint8Array(MAGIC.length + header.length + index.length + length);
  let at = 0;
  for (const part of [MAGIC, header, index, ...encoded]) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

/** `isotachs.fgb`: one multipolygon a level, with the attributes of `isotachs.geojson`, by rising threshold. */
export function isotachsFlatGeobuf(input: {
  isotachs: readonly IsotachShape[];
  context: IsotachContext;
  provenance: Provenance;
  /** colour of a level, `#rrggbb`, as the attribute `fill` */
  colourOf?: (thresholdMps: number) => string;
}): Uint8Array {
  const { isotachs, context, provenance, colourOf } = input;
  const items = provenanceItems(provenance);
  return flatGeobuf({
    name: 'isotachs',
    title: `Isotachs of ${provenance.stormName ?? provenance.storm}`,
    description: items['caution'] ?? '',
    metadata: items,
    features: isotachs
      .filter((isotach) => isotach.polygons.length > 0)
      .map((isotach) => ({
        properties: {
          ...isotachAttributes(isotach, context),
          ...(colourOf && { fill: colourOf(isotach.thresholdMps) }),
        },
        geometry: { type: 'MultiPolygon', coordinates: isotach.polygons },
      })),
  });
}

interface Column {
  readonly name: string;
  readonly type: keyof typeof COLUMN;
}

function columnsOf(features: FlatGeobufInput['features']): Column[] {
  const types = new Map<string, keyof typeof COLUMN | null>();
  for (const feature of features) {
    for (const [name, value] of Object.entries(feature.properties)) {
      const before = types.get(name) ?? null;
      const type = value === null ? before : (typeof value as keyof typeof COLUMN);
      if (before !== null && type !== before)
        throw new UsageError(
          'write.attribute',
          `the attribute '${name}' is a ${before} in one feature and a ${type} in another`,
        );
      types.set(name, type);
    }
  }
  return [...types].map(([name, type]) => ({ name, type: type ?? 'string' }));
}

function boxOf(geometry: FlatGeometry): Box {
  const positions = (nested: readonly unknown[]): Position[] =>
    typeof nested[0] === 'number'
      ? [nested as Position]
      : (nested as readonly (readonly unknown[])[]).flatMap(positions);
  return boxAround(positions(geometry.coordinates).map((at) => [at[0]!, at[1]!, at[0]!, at[1]!] as const));
}

/** Table Header of the format's schema, by the number of each field. */
function headerBytes(
  input: FlatGeobufInput,
  { columns, boxes }: { columns: readonly Column[]; boxes: readonly Box[] },
): Uint8Array {
  const b = new Builder(1024);
  const text = (value: string | undefined): number => (value === undefined ? 0 : b.createString(value));
  const name = text(input.name);
  const title = text(input.title);
  const description = text(input.description);
  const metadata = text(input.metadata && JSON.stringify(input.metadata));
  const columnTables = columns.map((column) => {
    const columnName = text(column.name);
    b.startObject(11);
    b.addFieldOffset(0, columnName, 0);
    b.addFieldInt8(1, COLUMN[column.type], 0);
    return b.endObject();
  });
  const columnVector = offsetVector(b, columnTables);
  const organization = text('EPSG');
  const crsName = text('WGS 84');
  b.startObject(6);
  b.addFieldOffset(0, organization, 0);
  b.addFieldInt32(1, 4326, 0);
  b.addFieldOffset(2, crsName, 0);
  const crs = b.endObject();
  const envelope = boxes.length === 0 ? 0 : doubleVector(b, boxAround(boxes));
  const kinds = new Set(input.features.map((feature) => feature.geometry.type));
  const [only] = kinds;
  b.startObject(14);
  b.addFieldOffset(0, name, 0);
  b.addFieldOffset(1, envelope, 0);
  b.addFieldInt8(2, kinds.size === 1 ? GEOMETRY[only!] : 0, 0);
  b.addFieldOffset(7, columnVector, 0);
  b.addFieldInt64(8, BigInt(input.features.length), 0n);
  b.addFieldInt16(9, input.features.length === 0 ? 0 : NODE_SIZE, 16);
  b.addFieldOffset(10, crs, 0);
  b.addFieldOffset(11, title, 0);
  b.addFieldOffset(12, description, 0);
  b.addFieldOffset(13, metadata, 0);
  b.finishSizePrefixed(b.endObject());
  return b.asUint8Array();
}

function featureBytes(feature: FlatFeature, columns: readonly Column[]): Uint8Array {
  const b = new Builder(4096);
  const bytes = attributeBytes(feature.properties, columns);
  b.startVector(1, bytes.length, 1);
  for (let i = bytes.length - 1; i >= 0; i--) b.addInt8(bytes[i]!);
  const properties = b.endVector();
  const geometry = geometryTable(b, feature.geometry);
  b.startObject(3);
  b.addFieldOffset(0, geometry, 0);
  b.addFieldOffset(1, properties, 0);
  b.finishSizePrefixed(b.endObject());
  return b.asUint8Array();
}

/** Attributes one after another: number of the column (16 bits), then its value; text with its length before it. */
function attributeBytes(properties: FlatFeature['properties'], columns: readonly Column[]): Uint8Array {
  const encoder = new TextEncoder();
  const parts: Uint8Array[] = [];
  columns.forEach((column, index) => {
    const value = properties[column.name] ?? null;
    if (value === null) return;
    const body = typeof value === 'string' ? encoder.encode(value) : new Uint8Array(typeof value === 'number' ? 8 : 1);
    const head = new Uint8Array(typeof value === 'string' ? 6 : 2);
    new DataView(head.buffer).setUint16(0, index, true);
    if (typeof value === 'string') new DataView(head.buffer).setUint32(2, body.length, true);
    if (typeof value === 'number') new DataView(body.buffer).setFloat64(0, value, true);
    if (typeof value === 'boolean') body[0] = value ? 1 : 0;
    parts.push(head, body);
  });
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

function geometryTable(b: Builder, geometry: FlatGeometry): number {
  if (geometry.type === 'MultiPolygon') {
    const parts = offsetVector(
      b,
      geometry.coordinates.map((rings) => simpleTable(b, { lines: rings, type: GEOMETRY.Polygon })),
    );
    b.startObject(8);
    b.addFieldInt8(6, GEOMETRY.MultiPolygon, 0);
    b.addFieldOffset(7, parts, 0);
    return b.endObject();
  }
  return simpleTable(b, { lines: linesOf(geometry), type: GEOMETRY[geometry.type] });
}

function linesOf(geometry: Exclude<FlatGeometry, { type: 'MultiPolygon' }>): readonly (readonly Position[])[] {
  if (geometry.type === 'Point') return [[geometry.coordinates]];
  return geometry.type === 'LineString' ? [geometry.coordinates] : geometry.coordinates;
}

/** Lines or rings as one row of coordinates with the place where each ends. */
function simpleTable(b: Builder, { lines, type }: { lines: readonly (readonly Position[])[]; type: number }): number {
  const xy = doubleVector(
    b,
    lines.flatMap((line) => line.flatMap((at) => [at[0]!, at[1]!])),
  );
  let ends = 0;
  if (lines.length > 1) {
    let end = 0;
    const places = lines.map((line) => (end += line.length));
    b.startVector(4, places.length, 4);
    for (let i = places.length - 1; i >= 0; i--) b.addInt32(places[i]!);
    ends = b.endVector();
  }
  b.startObject(8);
  b.addFieldOffset(0, ends, 0);
  b.addFieldOffset(1, xy, 0);
  b.addFieldInt8(6, type, 0);
  return b.endObject();
}

function doubleVector(b: Builder, values: readonly number[]): number {
  b.startVector(8, values.length, 8);
  for (let i = values.length - 1; i >= 0; i--) b.addFloat64(values[i]!);
  return b.endVector();
}

function offsetVector(b: Builder, offsets: readonly number[]): number {
  b.startVector(4, offsets.length, 4);
  for (let i = offsets.length - 1; i >= 0; i--) b.addOffset(offsets[i]!);
  return b.endVector();
}
