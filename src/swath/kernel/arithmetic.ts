/** Views of one tile's arrays in the kernel's memory; each holds `MOST_CELLS_OF_TILE` floats. */
export interface KernelArrays {
  readonly x: Float32Array;
  readonly y: Float32Array;
  readonly z: Float32Array;
  /** winds of three moments in turn */
  readonly winds: readonly [Float32Array, Float32Array, Float32Array];
  /** first estimate, its moment, second estimate, its moment */
  readonly state: readonly [Float32Array, Float32Array, Float32Array, Float32Array];
  readonly hours: readonly Float32Array[];
  /** eight places where the walk wants to know the wind: x, y, z; and the wind there */
  readonly probe: readonly [Float32Array, Float32Array, Float32Array, Float32Array];
  /** per cell, where its frame and its tables stand in the kernel's memory, bytes */
  readonly frameAt: Int32Array;
  readonly speedAt: Int32Array;
  readonly windAt: Int32Array;
  /** what `settle` gives: speed, east and north part, m/s; (r/R)² */
  readonly settled: readonly [Float32Array, Float32Array, Float32Array, Float32Array];
}

/** The hot loops: WebAssembly, or its twin in plain JavaScript with the same bits. */
export interface Arithmetic {
  readonly name: 'webassembly' | 'javascript';
  readonly arrays: KernelArrays;
  /** floats in the kernel's memory, 16-byte aligned; all are given back by {@link Arithmetic.release} */
  readonly allocate: (length: number) => Float32Array;
  readonly release: () => void;
  /** makes room for tables before any is allocated: floats in all */
  readonly reserve: (floats: number) => void;
  /** winds of the first `quads` × 4 cells at a moment into `winds[to]` */
  readonly sample: (
    quads: number,
    table: Float32Array,
    groups: number,
    lastRow: number,
    frame: Float64Array,
    to: number,
  ) => void;
  /** the same for the eight places of `probe` */
  readonly probe: (table: Float32Array, groups: number, lastRow: number, frame: Float64Array) => void;
  /** wind of each cell at the moment that `frameAt`, `speedAt` and `windAt` point to */
  readonly settle: (count: number, groups: number, lastRow: number, windHarmonics: number) => void;
  /** see `maxima` in assembly/kernel.ts; first, middle and last are indices of `winds`, −1 where there is none */
  readonly maxima: (
    quads: number,
    first: number,
    middle: number,
    last: number,
    moment: number,
    t0: number,
    t2: number,
  ) => void;
  /** hours of the step from `middle` to `last`; `first` (−1 where there is none) tells how the wind bends */
  readonly addHours: (quads: number, first: number, middle: number, last: number, step: HoursStep) => void;
}

/** A step whose hours are added. */
export interface HoursStep {
  /** which of `hours` */
  readonly slot: number;
  readonly thresholdMps: number;
  readonly stepHours: number;
  /** length of the step before over that of this one */
  readonly ratio: number;
}
