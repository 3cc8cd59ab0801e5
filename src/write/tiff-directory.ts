/** Types of a TIFF field that are used here, with the bytes that one value takes [Adobe1992]. */
const SIZE = { ascii: 1, short: 2, long: 4, double: 8, long8: 8 } as const;
const CODE = { ascii: 2, short: 3, long: 4, double: 12, long8: 16 } as const;

export interface TiffField {
  readonly tag: number;
  readonly type: keyof typeof SIZE;
  readonly values: readonly number[] | Uint8Array;
}

/** An ASCII field, its closing NUL included; characters above U+007E are dropped to `?`. */
export function asciiField(tag: number, text: string): TiffField {
  return {
    tag,
    type: 'ascii',
    values: new TextEncoder().encode(`${text.replace(/[^\x09\x0A\x0D\x20-\x7E]/g, '?')}\0`),
  };
}

const even = (offset: number): number => offset + (offset % 2);

function directoryBytes(fields: readonly TiffField[], big: boolean): number {
  const inline = big ? 8 : 4;
  let bytes = big ? 8 + fields.length * 20 + 8 : 2 + fields.length * 12 + 4;
  for (const field of fields) {
    const size = SIZE[field.type] * field.values.length;
    if (size > inline) bytes = even(bytes) + size;
  }
  return even(bytes);
}

/** Bytes of the header and of the directories, one after another. */
export function headerBytes(directories: readonly (readonly TiffField[])[], { big }: { big: boolean }): number {
  return directories.reduce((sum, fields) => sum + directoryBytes(fields, big), big ? 16 : 8);
}

/**
 * Header and directories of a little-endian TIFF or BigTIFF, each directory followed by its values; the first one
 * starts right after the header.
 */
export function tiffHeader(directories: readonly (readonly TiffField[])[], { big }: { big: boolean }): Uint8Array {
  const out = new Uint8Array(headerBytes(directories, { big }));
  const view = new DataView(out.buffer);
  const word = (at: number, value: number): void =>
    big ? view.setBigUint64(at, BigInt(value), true) : view.setUint32(at, value, true);
  view.setUint16(0, 0x4949, true);
  view.setUint16(2, big ? 43 : 42, true);
  if (big) view.setUint16(4, 8, true);
  let start = big ? 16 : 8;
  word(big ? 8 : 4, start);
  directories.forEach((unsorted, index) => {
    const fields = [...unsorted].sort((a, b) => a.tag - b.tag);
    const end = start + directoryBytes(fields, big);
    let at = start;
    if (big) view.setBigUint64(at, BigInt(fields.length), true);
    else view.setUint16(at, fields.length, true);
    at += big ? 8 : 2;
    let values = start + (big ? 8 + fields.length * 20 + 8 : 2 + fields.length * 12 + 4);
    for (const field of fields) {
      const size = SIZE[field.type] * field.values.length;
      view.setUint16(at, field.tag, true);
      view.setUint16(at + 2, CODE[field.type], true);
      word(at + 4, field.values.length);
      const place = at + (big ? 12 : 8);
      if (size <= (big ? 8 : 4)) putValues(view, place, field);
      else {
        values = even(values);
        word(place, values);
        putValues(view, values, field);
        values += size;
      }
      at += big ? 20 : 12;
    }
    word(at, index === directories.length - 1 ? 0 : end);
    start = end;
  });
  return out;
}

function putValues(view: DataView, start: number, field: TiffField): void {
  const size = SIZE[field.type];
  for (let i = 0, at = start; i < field.values.length; i++, at += size) {
    const value = field.values[i]!;
    if (field.type === 'ascii') view.setUint8(at, value);
    else if (field.type === 'short') view.setUint16(at, value, true);
    else if (field.type === 'long') view.setUint32(at, value, true);
    else if (field.type === 'long8') view.setBigUint64(at, BigInt(value), true);
    else view.setFloat64(at, value, true);
  }
}
