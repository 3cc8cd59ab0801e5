const POWERS = [1, 10, 100, 1e3, 1e4, 1e5, 1e6, 1e7];
const MINUS = 45;
const POINT = 46;
const ZERO = 48;
const COMMA = 44;
const LINE_END = 10;
/** Room for one number with its comma, bytes. */
export const LONGEST_NUMBER = 24;

/** Numbers with a fixed number of decimals as ASCII digits, several times faster than by way of strings. */
export class DecimalText {
  private readonly buffer: Uint8Array;
  private at = 0;

  constructor(capacity: number) {
    this.buffer = new Uint8Array(capacity);
  }

  get length(): number {
    return this.at;
  }

  bytes(): Uint8Array {
    return this.buffer.subarray(0, this.at);
  }

  /** A number, rounded half up to `decimals` places, without trailing zeros, and a comma; nothing for NaN or infinity. */
  number(value: number, decimals: number): void {
    const { buffer } = this;
    if (Number.isFinite(value)) {
      let scaled = Math.round(Math.abs(value) * POWERS[decimals]!);
      let places = decimals;
      if (scaled === 0) places = 0;
      while (places > 0 && scaled % 10 === 0) {
        scaled /= 10;
        places--;
      }
      if (value < 0 && scaled > 0) buffer[this.at++] = MINUS;
      let digits = 1;
      for (let limit = 10; scaled >= limit; limit *= 10) digits++;
      if (digits <= places) digits = places + 1;
      const end = this.at + digits + (places > 0 ? 1 : 0);
      for (let place = end - 1; place >= this.at; place--) {
        if (places > 0 && end - 1 - place === places) {
          buffer[place] = POINT;
          continue;
        }
        const rest = Math.floor(scaled / 10);
        buffer[place] = ZERO + (scaled - rest * 10);
        scaled = rest;
      }
      this.at = end;
    }
    buffer[this.at++] = COMMA;
  }

  /** Turns the last comma into the end of the line. */
  endRow(): void {
    this.buffer[this.at - 1] = LINE_END;
  }
}
