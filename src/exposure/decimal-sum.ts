/** A sum of decimal numbers without rounding, so that totals equal the sum of the rows as they are written. */
export interface DecimalSum {
  /** adds a number, rounded to the sum's decimals */
  readonly add: (value: number) => void;
  /** adds another sum of the same decimals, `times` being 1 or −1 */
  readonly addSum: (other: DecimalSum, times: 1 | -1) => void;
  /** in units of the last decimal */
  readonly units: () => bigint;
  /** the number nearest to the sum */
  readonly value: () => number;
}

/** Largest whole numbers that are added as they are. */
const SAFE = 2 ** 52;

export function decimalSum(decimals: number): DecimalSum {
  const scale = 10 ** decimals;
  let whole = 0n;
  let rest = 0;
  const units = (): bigint => whole + BigInt(rest);
  return {
    add(value) {
      const scaled = Math.round(value * scale);
      if (scaled >= SAFE) {
        whole += BigInt(scaled);
        return;
      }
      rest += scaled;
      if (rest >= SAFE) {
        whole += BigInt(rest);
        rest = 0;
      }
    },
    addSum(other, times) {
      whole += BigInt(times) * other.units();
    },
    units,
    value() {
      const digits = String(units())
        .replace('-', '')
        .padStart(decimals + 1, '0');
      const at = digits.length - decimals;
      return Number(`${units() < 0n ? '-' : ''}${digits.slice(0, at)}.${digits.slice(at)}`);
    },
  };
}

/** Decimals that a number has, at most `most`. */
export function decimalsOf(value: number, most: number): number {
  for (let decimals = 0, scale = 1; decimals < most; decimals++, scale *= 10)
    if (Math.round(value * scale) / scale === value) return decimals;
  return most;
}
