import fc from 'fast-check';
import { ByteBuffer } from 'flatbuffers';
import type { Feature, LineString, MultiPolygon, Point } from 'geojson';
import { describe, expect, it } from 'vitest';
import { type FlatGeobufInput, flatGeobuf, isotachsFlatGeobuf } from '../../src/write/flatgeobuf.js';
import { type Box, boxAround, hilbertDistance, hilbertOrder, packedTree } from '../../src/write/packed-tree.js';
import { exampleContext, exampleIsotachs } from './example-isotachs.js';
import { exampleProvenance } from './example-swath.js';

/** Reads what the writer made, by the schema of the format: tables by field number, the index as nodes of 40 bytes. */
function readFile(bytes: Uint8Array) {
  expect([...bytes.subarray(0, 8)]).toEqual([0x66, 0x67, 0x62, 0x03, 0x66, 0x67, 0x62, 0x00]);
  const view = new DataView(bytes.buffer, bytes.byteOffset);
  const headerLength = view.getUint32(8, true);
  const b = new ByteBuffer(bytes);
  const root = (at: number): number => at + b.readInt32(at);
  const field = (table: number, number: number): number => {
    const offset = b.__offset(table, 4 + 2 * number);
    return offset === 0 ? 0 : table + offset;
  };
  const vector = (at: number): { start: number; length: number } =>
    at === 0 ? { start: 0, length: 0 } : { start: b.__vector(at), length: b.__vector_len(at) };
  const text = (at: number): string => (at === 0 ? '' : String(b.__string(at)));
  const doubles = (at: number): number[] => {
    const { start, length } = vector(at);
    return Array.from({ length }, (_, i) => b.readFloat64(start + 8 * i));
  };
  const tables = (at: number): number[] => {
    const { start, length } = vector(at);
    return Array.from({ length }, (_, i) => b.__indirect(start + 4 * i));
  };

  const header = root(12);
  const columns = tables(field(header, 7)).map((column) => ({
    name: text(field(column, 0)),
    type: b.readUint8(field(column, 1)),
  }));
  const count = field(header, 8) === 0 ? 0 : Number(b.readUint64(field(header, 8)));
  const nodeSize = field(header, 9) === 0 ? 16 : b.readUint16(field(header, 9));
  const crs = b.__indirect(field(header, 10));
  let nodes = 0;
  for (let n = count; count > 0 && nodeSize > 0; ) {
    nodes += n;
    if (n === 1 && nodes > count) break;
    n = Math.ceil(n / nodeSize);
  }
  const indexStart = 12 + headerLength;
  const featuresStart = indexStart + nodes * 40;

  const geometry = (table: number): { type: number; xy: number[]; ends: number[]; parts: unknown[] } => {
    const ends = vector(field(table, 0));
    return {
      type: b.readUint8(field(table, 6)),
      xy: doubles(field(table, 1)),
      ends: Array.from({ length: ends.length }, (_, i) => b.readUint32(ends.start + 4 * i)),
      parts: tables(field(table, 7)).map(geometry),
    };
  };
  const featureAt = (at: number) => {
    const table = root(at + 4);
    const { start, length } = vector(field(table, 1));
    const properties: Record<string, unknown> = {};
    for (let p = start; p < start + length; ) {
      const column = columns[b.readUint16(p)]!;
      p += 2;
      if (column.type === 10) {
        properties[column.name] = view.getFloat64(p, true);
        p += 8;
      } else if (column.type === 2) properties[column.name] = bytes[p++] === 1;
      else {
        const size = view.getUint32(p, true);
        properties[column.name] = new TextDecoder().decode(bytes.subarray(p + 4, p + 4 + size));
        p += 4 + size;
      }
    }
    return { properties, geometry: geometry(b.__indirect(field(table, 0))), bytes: 4 + view.getUint32(at, true) };
  };
  const features: ReturnType<typeof featureAt>[] = [];
  const starts: number[] = [];
  for (let at = featuresStart; at < bytes.length; ) {
    const feature = featureAt(at);
    features.push(feature);
    starts.push(at - featuresStart);
    at += feature.bytes;
  }
  const node = (i: number) => ({
    box: [0, 8, 16, 24].map((o) => view.getFloat64(indexStart + 40 * i + o, true)) as unknown as Box,
    offset: Number(view.getBigUint64(indexStart + 40 * i + 32, true)),
  });
  /** numbers of the features whose box meets a box, found by the index alone */
  const search = (box: Box): number[] => {
    const meets = (other: Box): boolean =>
      other[0] <= box[2] && other[2] >= box[0] && other[1] <= box[3] && other[3] >= box[1];
    const firstLeaf = nodes - count;
    const levelEnds: number[] = [];
    for (let n = count, end = nodes; ; n = Math.ceil(n / nodeSize)) {
      levelEnds.unshift(end);
      end -= n;
      if (end <= 0) break;
    }
    const found: number[] = [];
    const visit = (i: number): void => {
      const { box: own, offset } = node(i);
      if (!meets(own)) return;
      if (i >= firstLeaf) found.push(starts.indexOf(offset));
      else {
        const end = levelEnds.find((levelEnd) => levelEnd > offset)!;
        for (let child = offset; child < Math.min(offset + nodeSize, end); child++) visit(child);
      }
    };
    if (nodes > 0) visit(0);
    return found.sort((x, y) => x - y);
  };
  return {
    name: text(field(header, 0)),
    envelope: doubles(field(header, 1)),
    type: field(header, 2) === 0 ? 0 : b.readUint8(field(header, 2)),
    epsg: b.readInt32(field(crs, 1)),
    metadata: text(field(header, 13)),
    columns,
    count,
    features,
    search,
  };
}

const point = (
  lon: number,
  lat: number,
  properties: Record<string, string | number | boolean | null> = {},
): Feature<Point, typeof properties> => ({
  type: 'Feature',
  properties,
  geometry: { type: 'Point', coordinates: [lon, lat] },
});

describe('a FlatGeobuf file', () => {
  it('of isotachs has geometry, holes and attributes, by rising level', () => {
    const bytes = isotachsFlatGeobuf({
      isotachs: exampleIsotachs,
      context: exampleContext,
      provenance: exampleProvenance,
      colourOf: () => '#3366cc',
    });
    const file = readFile(bytes);
    expect(file).toMatchObject({ name: 'isotachs', type: 6, epsg: 4326, count: 2, envelope: [-180, -20, 180, -10] });
    expect(JSON.parse(file.metadata).storm).toBe('EX012031');
    expect(file.features[0]!.properties).toEqual({
      threshold_mps: 17.4911,
      threshold_kt: 34,
      quantity: 'wind',
      averaging_s: 60,
      area_km2: 1234567.891,
      fill: '#3366cc',
    });
    expect(file.features[1]!.properties['threshold_kt']).toBe(50);
    const [first, second] = file.features[0]!.geometry.parts as { type: number; xy: number[]; ends: number[] }[];
    const rings = (exampleIsotachs[0]!.polygons as unknown as MultiPolygon['coordinates'])[0]!;
    expect(first!.xy).toEqual(rings.flat(2));
    expect(first!.ends).toEqual([5, 10]);
    expect(second).toMatchObject({ type: 3, ends: [] });
  });

  it('keeps text, numbers and truth values, and has none where there is none', () => {
    const features = [
      point(1, 2, { a: 'é "x"', b: 1.5, c: true, d: null }),
      point(3, 4, { a: '', c: false, b: null, e: 7 }),
    ];
    const file = readFile(flatGeobuf({ name: 'places', features }));
    expect(file.features.map((feature) => feature.properties)).toEqual([
      { a: 'é "x"', b: 1.5, c: true },
      { a: '', c: false, e: 7 },
    ]);
    expect(file.columns.map((column) => column.name)).toEqual(['a', 'b', 'c', 'd', 'e']);
    expect(() => flatGeobuf({ name: 'x', features: [point(0, 0, { a: 1 }), point(0, 0, { a: 'one' })] })).toThrow(
      "attribute 'a'",
    );
  });

  it('may hold several kinds of geometry, or nothing', () => {
    const line: Feature<LineString, Record<string, never>> = {
      type: 'Feature',
      properties: {},
      geometry: {
        type: 'LineString',
        coordinates: [
          [0, 0],
          [1, 2],
        ],
      },
    };
    const file = readFile(flatGeobuf({ name: 'mixed', features: [line, point(5, 5)] }));
    expect(file.type).toBe(0);
    expect(file.features.map((feature) => feature.geometry.type)).toEqual([2, 1]);
    expect(readFile(flatGeobuf({ name: 'none', features: [] }))).toMatchObject({ count: 0, features: [] });
  });

  it('is found again through its index, whatever is asked', () => {
    const place = fc.tuple(fc.integer({ min: -180, max: 180 }), fc.integer({ min: -90, max: 90 }));
    fc.assert(
      fc.property(fc.array(place, { minLength: 1, maxLength: 700 }), place, place, (places, a, b) => {
        const features: FlatGeobufInput['features'] = places.map(([lon, lat], n) => point(lon, lat, { n }));
        const file = readFile(flatGeobuf({ name: 'many', features }));
        const box: Box = [Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[0], b[0]), Math.max(a[1], b[1])];
        const found = file.search(box).map((i) => file.features[i]!.properties['n'] as number);
        const expected = places.flatMap(([lon, lat], n) =>
          lon >= box[0] && lon <= box[2] && lat >= box[1] && lat <= box[3] ? [n] : [],
        );
        expect(found.sort((x, y) => x - y)).toEqual(expected);
      }),
      { numRuns: 60 },
    );
  });
});

describe('the Hilbert curve', () => {
  // identity: it visits every cell of a small square once, and steps from neighbour to neighbour
  it('goes from neighbour to neighbour', () => {
    const size = 32;
    const scale = 65536 / size;
    const cells = Array.from({ length: size * size }, (_, i) => [i % size, Math.floor(i / size)] as const);
    const order = cells
      .map(([x, y]) => ({ x, y, d: Math.floor(hilbertDistance(x * scale, y * scale) / (scale * scale)) }))
      .sort((a, b) => a.d - b.d);
    expect(order.map((cell) => cell.d)).toEqual(Array.from({ length: size * size }, (_, i) => i));
    for (let i = 1; i < order.length; i++)
      expect(Math.abs(order[i]!.x - order[i - 1]!.x) + Math.abs(order[i]!.y - order[i - 1]!.y)).toBe(1);
  });

  it('keeps the order of as many as fit one node', () => {
    const boxes = Array.from({ length: 16 }, (_, i): Box => [1 - i, i, 1 - i, i]);
    expect(hilbertOrder(boxes)).toEqual([...boxes.keys()]);
    expect(boxAround(boxes)).toEqual([-14, 0, 1, 15]);
    expect(packedTree(boxes.slice(0, 1), [0]).length).toBe(80);
  });
});
