import { decimalsOf } from './decimal-sum.js';
import { type PointRow, plainLongitude, VALUE_DECIMALS } from './point-table.js';

/** Assets in columns: a million of them take some tens of megabytes. */
export interface AssetColumns {
  readonly count: number;
  readonly lonDeg: Float64Array;
  readonly latDeg: Float64Array;
  readonly nameOf: (i: number) => string;
  /** one column for each heading of values */
  readonly values: readonly Float64Array[];
  /** decimals that the values of a column have */
  readonly decimals: readonly number[];
  /** assets whose name another one had before, and the first such name */
  readonly sameNames: { readonly count: number; readonly example: string };
  /** assets at 0° N 0° E, which often stands for a missing place */
  readonly atZero: number;
}

export interface AssetStore {
  readonly add: (row: PointRow) => void;
  readonly columns: () => AssetColumns;
}

/** Gathers assets as they are read. Longitudes come out in −180 … 180, values with six decimals at most. */
export function assetStore(): AssetStore {
  let size = 1024;
  let count = 0;
  let lon = new Float64Array(size);
  let lat = new Float64Array(size);
  let starts = new Uint32Array(size + 1);
  let values: Float64Array[] = [];
  let decimals: number[] = [];
  let names = new Uint8Array(size * 16);
  let hashes = new Float64Array(size);
  let atZero = 0;
  const encoder = new TextEncoder();
  const decoder = new TextDecoder();
  const nameOf = (i: number): string => decoder.decode(names.subarray(starts[i]!, starts[i + 1]!));

  const grow = (): void => {
    size *= 2;
    const larger = <T extends Float64Array | Uint32Array>(old: T, next: T): T => {
      next.set(old);
      return next;
    };
    lon = larger(lon, new Float64Array(size));
    lat = larger(lat, new Float64Array(size));
    hashes = larger(hashes, new Float64Array(size));
    starts = larger(starts, new Uint32Array(size + 1));
    values = values.map((column) => larger(column, new Float64Array(size)));
  };

  return {
    add(row) {
      if (count === 0) {
        values = row.values.map(() => new Float64Array(size));
        decimals = row.values.map(() => 0);
      }
      if (count === size) grow();
      const at = starts[count]!;
      if (names.length < at + 3 * row.name.length) {
        const larger = new Uint8Array(2 * names.length + 3 * row.name.length);
        larger.set(names);
        names = larger;
      }
      starts[count + 1] = at + encoder.encodeInto(row.name, names.subarray(at)).written;
      hashes[count] = hashOf(row.name);
      lon[count] = plainLongitude(row.lonDeg);
      lat[count] = row.latDeg;
      if (row.lonDeg === 0 && row.latDeg === 0) atZero++;
      for (let c = 0; c < values.length; c++) {
        const digits = decimalsOf(row.values[c]!, VALUE_DECIMALS);
        if (digits > decimals[c]!) decimals[c] = digits;
        values[c]![count] = digits < VALUE_DECIMALS ? row.values[c]! : Number(row.values[c]!.toFixed(VALUE_DECIMALS));
      }
      count++;
    },
    columns: () => ({
      count,
      lonDeg: lon.subarray(0, count),
      latDeg: lat.subarray(0, count),
      nameOf,
      values: values.map((column) => column.subarray(0, count)),
      decimals,
      sameNames: sameNames(hashes.subarray(0, count), nameOf),
      atZero,
    }),
  };
}

/** Two multiplicative hashes of 26 bits in one number. */
function hashOf(text: string): number {
  let a = 0x811c9dc5;
  let b = 0x9e3779b9;
  for (let i = 0; i < text.length; i++) {
    const c = text.charCodeAt(i);
    a = Math.imul(a ^ c, 0x01000193);
    b = Math.imul(b + c, 0x85ebca6b) ^ (b >>> 13);
  }
  return (a >>> 6) * 2 ** 26 + (b >>> 6);
}

/** Names that came before: found by equal hashes of 52 bits, the example by its letters. */
function sameNames(hashes: Float64Array, nameOf: (i: number) => string): { count: number; example: string } {
  const sorted = hashes.slice().sort();
  let count = 0;
  let twice = Number.NaN;
  for (let i = 1; i < sorted.length; i++) {
    if (sorted[i] !== sorted[i - 1]) continue;
    if (count === 0) twice = sorted[i]!;
    count++;
  }
  return { count, example: count === 0 ? '' : nameOf(hashes.indexOf(twice)) };
}
