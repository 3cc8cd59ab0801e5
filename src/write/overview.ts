/**
 * What a coarser cell takes from the four cells below it:
 * `max` the greatest value, `like-first` the value of the cell where the first band is greatest (a direction or a time
 * that goes with a wind), `nearest` the north-western one. NaN counts as no value.
 */
export type OverviewRule = 'max' | 'like-first' | 'nearest';

/** A field on one level: row 0 = north, index = row * nx + column. */
export interface Level {
  readonly nx: number;
  readonly ny: number;
  readonly bands: readonly Float32Array[];
}

/** The next level, half as wide and as high (rounded up): cell (column, row) covers columns 2c, 2c+1 and rows 2r, 2r+1. */
export function halved(level: Level, rules: readonly OverviewRule[]): Level {
  const nx = Math.ceil(level.nx / 2);
  const ny = Math.ceil(level.ny / 2);
  const chosen = rules.includes('like-first') ? placeOfMaximum(level, { nx, ny }) : undefined;
  const bands = level.bands.map((values, band) => {
    switch (rules[band]) {
      case 'max':
        return maximum(values, level, { nx, ny });
      case 'like-first': {
        const out = new Float32Array(nx * ny);
        for (let k = 0; k < out.length; k++) out[k] = values[chosen![k]!]!;
        return out;
      }
      default: {
        const out = new Float32Array(nx * ny);
        for (let row = 0, k = 0; row < ny; row++)
          for (let column = 0; column < nx; column++, k++) out[k] = values[2 * row * level.nx + 2 * column]!;
        return out;
      }
    }
  });
  return { nx, ny, bands };
}

function maximum(values: Float32Array, from: { nx: number; ny: number }, to: { nx: number; ny: number }): Float32Array {
  const out = new Float32Array(to.nx * to.ny);
  for (let row = 0, k = 0; row < to.ny; row++) {
    const north = 2 * row * from.nx;
    const south = 2 * row + 1 < from.ny ? north + from.nx : north;
    for (let column = 0; column < to.nx; column++, k++) {
      const west = 2 * column;
      const east = west + 1 < from.nx ? west + 1 : west;
      const a = values[north + west]!;
      const b = values[north + east]!;
      const c = values[south + west]!;
      const d = values[south + east]!;
      // Math.max would let one NaN win over three winds
      let best = a;
      if (b > best || Number.isNaN(best)) best = b;
      if (c > best || Number.isNaN(best)) best = c;
      if (d > best || Number.isNaN(best)) best = d;
      out[k] = best;
    }
  }
  return out;
}

function placeOfMaximum(level: Level, to: { nx: number; ny: number }): Uint32Array {
  const first = level.bands[0]!;
  const out = new Uint32Array(to.nx * to.ny);
  for (let row = 0, k = 0; row < to.ny; row++) {
    const north = 2 * row * level.nx;
    const south = 2 * row + 1 < level.ny ? north + level.nx : north;
    for (let column = 0; column < to.nx; column++, k++) {
      const west = 2 * column;
      const east = west + 1 < level.nx ? west + 1 : west;
      let place = north + west;
      for (const other of [north + east, south + west, south + east]) {
        if (first[other]! > first[place]! || Number.isNaN(first[place]!)) place = other;
      }
      out[k] = place;
    }
  }
  return out;
}
