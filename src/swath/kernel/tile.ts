import { EARTH_RADIUS_M } from '../../earth.js';
import { MOST_POINTS } from './places.js';
import { type Placing, TILE_EDGE } from './tiling.js';
import type { Tracer } from './tracer.js';

/** Points of a tile's lattice along an edge: its cells, and the first of the next tile. */
const EDGE = TILE_EDGE + 1;
/** First spacing of the lattice, cells. */
const WIDEST = 16;
/** A block is left to interpolation only where the storm stays this many spacings away. */
const AWAY_SPACINGS = 1.6;
/** Between points of a block the wind of a parabola must be right to this, m/s: the points checked then stand nearer to each other by half, and are left off by about an eighth of it. */
const CHECK_MPS = 0.03;
/** The same for the direction, degrees, and for hours: a share of them and a floor. */
const CHECK_DEG = 0.8;
const CHECK_HOURS_SHARE = 0.02;
const CHECK_HOURS = 0.015;
/** Times nearer than this are right, s; others are where the wind then is the peak to {@link CHECK_TIME_MPS}. */
const CHECK_TIME_S = 45;
const CHECK_TIME_MPS = 0.028;
/** Peaks below this need not be right, m/s: nothing is promised of them. */
const CALM_MPS = 6.5;
/** A point between others expects this share of the lowest of them, less this, m/s; what comes out lower is looked at again. */
const EXPECTED_SHARE = 0.98;
const EXPECTED_MPS = 0.1;
/** A peak that is known is not looked for again: this much more is expected, m/s. */
const ABOVE_PEAK_MPS = 0.5;
/** Points are asked together while the winds that they expect differ by no more than this factor. */
const ALIKE = 1.25;
/** Less than this is no wind, m/s. */
const LEAST_MPS = 0.01;

/** What is found at the cells of a tile. Index = row * EDGE + column. */
export interface TileFields {
  readonly windMps: Float64Array;
  /** s after the timeline's start */
  readonly timeS: Float64Array;
  readonly fromDeg: Float64Array;
  readonly hours: readonly Float64Array[];
  /** time of the second highest maximum, where every cell is asked; NaN where there is none */
  readonly rivalTimeS: Float64Array;
  /** whether a place has its wind: beside the cells those of the lattice that were asked */
  readonly known: Uint8Array;
}

export interface TileOptions {
  /** without times and directions */
  readonly windOnly?: boolean;
  /** peaks below this need not be right, m/s */
  readonly calmMps?: number;
  /** legs and tiles without a wind of this are left out, m/s */
  readonly leastMps?: number;
  /** nothing is interpolated */
  readonly everyCell?: boolean;
  /** for hours alone: the fields of the tile's last run with other thresholds, whose winds hold */
  readonly given?: TileFields;
  /** cells that are asked for, all by default; index as in the fields */
  readonly wanted?: Uint8Array;
}

export interface TileRunner {
  readonly fields: TileFields;
  /** fills the fields for the cells of a tile; false where the storm never comes near */
  readonly run: (tile: {
    readonly column: number;
    readonly row: number;
    readonly nx: number;
    readonly ny: number;
  }) => boolean;
}

/** A square of cells in a tile, by its first one. */
interface Block {
  readonly column: number;
  readonly row: number;
}

/** A time and direction that a parabola gave a point of a block. */
interface Guess {
  readonly block: Block;
  readonly at: number;
  readonly timeS: number;
  readonly fromDeg: number;
}

/** Points of a block, in units of half the spacing of its 3 × 3 points. */
interface Pattern {
  readonly points: readonly (readonly [number, number])[];
  /** those that the 3 × 3 points are to tell */
  readonly checks: readonly (readonly [number, number])[];
  /** of what a check allows */
  readonly share: number;
}

const FIVE = [0, 1, 2, 3, 4];
const SQUARE = FIVE.flatMap((b) => FIVE.map((a) => [a, b] as const));
/** All points: the cells between are interpolated from these, and what the checks allow is left by about an eighth. */
const ALL: Pattern = { points: SQUARE, checks: SQUARE.filter(([a, b]) => a % 2 === 1 || b % 2 === 1), share: 1 };
/** Those in the middle of four: the cells between are interpolated as the checks were. */
const CENTRES: Pattern = {
  points: SQUARE.filter(([a, b]) => a % 2 === b % 2),
  checks: SQUARE.filter(([a, b]) => a % 2 === 1 && b % 2 === 1),
  share: 0.4,
};

/** Weights of the parabola through 0, 1, 2 at a place. */
const weightsAt = (t: number): readonly [number, number, number] => [
  0.5 * (t - 1) * (t - 2),
  t * (2 - t),
  0.5 * t * (t - 1),
];
/** At the halves, which a block is checked at. */
const HALVES = [0, 0.5, 1, 1.5, 2].map(weightsAt);
/** At the cells of a piece of 3 × 3 points, by their spacing. */
const CELLS = Array.from({ length: WIDEST / 2 + 1 }, (_, spacing) =>
  Float64Array.from({ length: 6 * spacing }, (_, k) => weightsAt(Math.trunc(k / 3) / spacing)[k % 3]!),
);

/**
 * Peaks of the cells of tiles. A lattice of points is asked first; where the storm stays away and parabolas through 3 × 3
 * points tell the wind, the time, the direction and the hours of the points between, the cells in between are
 * interpolated from all of them; elsewhere the lattice is halved, down to the cells themselves.
 */
export function tileRunner(
  tracer: Tracer,
  placing: Placing,
  thresholdsMps: readonly number[],
  { windOnly = false, calmMps = CALM_MPS, leastMps = 0, everyCell = false, given, wanted }: TileOptions = {},
): TileRunner {
  const size = EDGE * EDGE;
  const windMps = new Float64Array(size);
  const timeS = new Float64Array(size);
  const fromDeg = new Float64Array(size);
  const rivalTimeS = new Float64Array(size);
  const leastM = new Float64Array(size);
  const crossings = new Float64Array(size);
  const hours = thresholdsMps.map(() => new Float64Array(size));
  const known = new Uint8Array(size);
  const asked = new Int32Array(MOST_POINTS);
  const expected = new Float64Array(MOST_POINTS);
  // values of 3 × 3 points
  const winds = new Float64Array(9);
  const times = new Float64Array(9);
  /** from that of the fifth */
  const angles = new Float64Array(9);
  /** three values along a line */
  const line = new Float64Array(3);
  /** squares of hours: toward the edge of where a wind is reached its hours fall as a square root does */
  const counted = thresholdsMps.map(() => new Float64Array(9));
  const { cellM } = placing;
  const lowestMps = (): number => Math.min(...thresholdsMps);
  const isGiven = new Uint8Array(size);
  const { durationS } = tracer;
  let guesses: Guess[] = [];
  let [left, top, width, height] = [0, 0, 0, 0];
  return { fields: { windMps, timeS, fromDeg, hours, rivalTimeS, known }, run };

  function run({ column, row, nx, ny }: Parameters<TileRunner['run']>[0]): boolean {
    [left, top] = [column * TILE_EDGE, row * TILE_EDGE];
    width = Math.min(TILE_EDGE, nx - left);
    height = Math.min(TILE_EDGE, ny - top);
    if (!isNear()) return false;
    known.fill(0);
    if (given) {
      windMps.set(given.windMps);
      isGiven.set(given.known);
      for (let j = 0; j < height; j++) isGiven.fill(1, j * EDGE, j * EDGE + width);
      for (const field of hours) field.fill(0);
    }
    let blocks: Block[] = [];
    for (let j = 0; j < height; j += 2 * WIDEST)
      for (let i = 0; i < width; i += 2 * WIDEST) blocks.push({ column: i, row: j });
    blocks = blocks.filter((block) => isWanted(block, 2 * WIDEST));
    for (let spacing = WIDEST; blocks.length > 0; spacing >>= 1) {
      const near = spacing >> 1;
      const pattern = near > 1 ? ALL : CENTRES;
      ask(blocks, near, pattern);
      guesses = [];
      const smooth = new Set(blocks.filter((block) => isSmooth(block, spacing, pattern)));
      for (const block of wrongGuesses()) smooth.delete(block);
      for (const { column, row } of smooth) {
        if (near === 1) fillPiece(column, row, spacing);
        else for (const b of [0, spacing]) for (const a of [0, spacing]) fillPiece(column + a, row + b, near);
      }
      blocks = blocks.filter((block) => !smooth.has(block));
      if (near === 1) {
        ask(blocks, near, ALL);
        break;
      }
      blocks = blocks.flatMap((block) => quarters(block, spacing)).filter((block) => isWanted(block, spacing));
    }
    return true;
  }

  /** Whether any cell of a block is asked for. */
  function isWanted({ column, row }: Block, edge: number): boolean {
    if (!wanted) return true;
    const right = Math.min(column + edge, width);
    for (let j = row; j < row + edge && j < height; j++)
      for (let at = j * EDGE + column; at < j * EDGE + right; at++) if (wanted[at] !== 0) return true;
    return false;
  }

  /** Whether the storm's wind reaches the tile. */
  function isNear(): boolean {
    const { x, y, z } = tracer;
    let count = 0;
    for (const j of [0, height >> 1, height])
      for (const i of [0, width >> 1, width]) if (placing.place(tracer, count, left + i, top + j)) count++;
    // where the projection has no place its edge is near: then the tile may be anywhere
    if (count < 9) return tracer.near([1, 0, 0], Math.PI * EARTH_RADIUS_M);
    const [cx, cy, cz] = [x[4]!, y[4]!, z[4]!];
    let least = 1;
    for (let k = 0; k < 9; k++) least = Math.min(least, x[k]! * cx + y[k]! * cy + z[k]! * cz);
    return tracer.near([cx, cy, cz], 1.1 * Math.acos(Math.max(-1, least)) * EARTH_RADIUS_M + cellM, leastMps);
  }

  function quarters({ column, row }: Block, size: number): Block[] {
    return [
      { column, row },
      { column: column + size, row },
      { column, row: row + size },
      { column: column + size, row: row + size },
    ].filter((block) => block.column < width && block.row < height);
  }

  /** Asks for the points of blocks that are not known yet. */
  function ask(blocks: readonly Block[], near: number, pattern: Pattern): void {
    // at last the cells themselves, and none beyond them
    const [right, bottom] = near === 1 && pattern === ALL ? [width, height] : [EDGE, EDGE];
    let count = 0;
    let lowest = Number.POSITIVE_INFINITY;
    const answerAll = (): void => {
      tracer.reaching(Math.max(leastMps, Math.min(lowest, lowestMps())));
      answer(count);
      count = 0;
      lowest = Number.POSITIVE_INFINITY;
    };
    for (const { column, row } of blocks) {
      const mps =
        near === WIDEST / 2
          ? 0
          : Math.max(0, EXPECTED_SHARE * expectedMps(row * EDGE + column, 2 * near) - EXPECTED_MPS);
      if (count > 0 && (mps > ALIKE * lowest || lowest > ALIKE * mps)) answerAll();
      for (const [a, b] of pattern.points) {
        const [i, j] = [column + near * a, row + near * b];
        const at = j * EDGE + i;
        if (i >= right || j >= bottom || known[at] !== 0) continue;
        known[at] = 1;
        if (isGiven[at] === 0) windMps[at] = Number.NaN;
        if (!placing.place(tracer, count, left + i, top + j)) continue;
        asked[count] = at;
        // where the peak is known nothing is looked for but what passes a threshold
        expected[count] = isGiven[at] !== 0 ? 0 : mps;
        tracer.windMps[count] = isGiven[at] !== 0 ? windMps[at]! + ABOVE_PEAK_MPS : mps;
        if (isGiven[at] === 0) lowest = Math.min(lowest, mps);
        if (++count === MOST_POINTS) answerAll();
      }
    }
    if (count > 0) answerAll();
  }

  /** A lower bound of what the points between 3 × 3 have, as far as these tell. */
  function expectedMps(first: number, spacing: number): number {
    let least = Number.POSITIVE_INFINITY;
    for (let b = 0; b < 3; b++)
      for (let a = 0; a < 3; a++) least = Math.min(least, windMps[first + spacing * (b * EDGE + a)]!);
    // not a number: a place is missing
    return Number.isNaN(least) ? 0 : least;
  }

  function answer(count: number): void {
    tracer.trace(count);
    let wrong = 0;
    for (let k = 0; k < count; k++) {
      if (tracer.windMps[k]! < expected[k]!) asked[wrong++] = asked[k]!;
      else take(k, asked[k]!);
    }
    if (wrong === 0) return;
    // what was expected is not there: once more, expecting nothing
    tracer.reaching(leastMps);
    for (let k = 0; k < wrong; k++) {
      placing.place(tracer, k, left + (asked[k]! % EDGE), top + Math.trunc(asked[k]! / EDGE));
      tracer.windMps[k] = 0;
    }
    tracer.trace(wrong);
    for (let k = 0; k < wrong; k++) take(k, asked[k]!);
  }

  function take(k: number, at: number): void {
    const wind = isGiven[at] !== 0 ? windMps[at]! : tracer.windMps[k]!;
    windMps[at] = wind;
    leastM[at] = tracer.leastM[k]!;
    crossings[at] = tracer.crossings[k]!;
    if (everyCell) rivalTimeS[at] = tracer.rivalTimeS(k);
    for (let h = 0; h < hours.length; h++) hours[h]![at] = wind >= thresholdsMps[h]! ? tracer.hours[h]![k]! : 0;
    if (windOnly) return;
    timeS[at] = wind > 0 ? tracer.timeS(k) : Number.NaN;
    fromDeg[at] = wind > 0 ? tracer.fromDeg(k) : Number.NaN;
  }

  /** Whether parabolas through 3 × 3 points tell the others of a pattern; times that are off are put among the guesses. */
  function isSmooth(block: Block, spacing: number, { points, checks, share }: Pattern): boolean {
    if (everyCell) return false;
    const near = spacing >> 1;
    const first = block.row * EDGE + block.column;
    let [highest, lowest, least] = [0, Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY];
    for (const [a, b] of points) {
      const at = first + near * (b * EDGE + a);
      // not a number: no place
      if (!(windMps[at]! >= 0)) return false;
      // a threshold that is passed more often at one than at another: in between hours have an edge
      if (crossings[at] !== crossings[first]) return false;
      highest = Math.max(highest, windMps[at]!);
      lowest = Math.min(lowest, windMps[at]!);
      least = Math.min(least, leastM[at]!);
    }
    if (least < AWAY_SPACINGS * spacing * cellM) return false;
    if (highest < (given ? lowestMps() : calmMps)) return true;
    if (lowest === 0) return false;
    const centreDeg = gather(first, spacing);
    if (!windOnly) for (const angle of angles) if (Math.abs(angle) > 60) return false;
    const own: Guess[] = [];
    for (const [a, b] of checks) {
      const [across, down] = [HALVES[a]!, HALVES[b]!];
      const at = first + near * (b * EDGE + a);
      const wind = windMps[at]!;
      const off = Math.abs(ofNine(winds, across, down) - wind);
      if (!given && wind < calmMps) {
        if (off > 10 * CHECK_MPS) return false;
        continue;
      }
      if (!given && off > share * CHECK_MPS) return false;
      for (let h = 0; h < hours.length; h++) {
        const real = hours[h]![at]!;
        if (
          Math.abs(Math.sqrt(Math.max(0, ofNine(counted[h]!, across, down))) - real) >
          share * (CHECK_HOURS + CHECK_HOURS_SHARE * real)
        )
          return false;
      }
      if (windOnly) continue;
      const guess = centreDeg + ofNine(angles, across, down);
      const time = ofNine(times, across, down);
      if (Math.abs(time - timeS[at]!) > CHECK_TIME_S) own.push({ block, at, timeS: time, fromDeg: guess });
      else if (Math.abs(turnDeg(guess, fromDeg[at]!)) > CHECK_DEG) return false;
    }
    guesses.push(...own);
    return true;
  }

  /** Takes the values of 3 × 3 points; gives the direction of the fifth. */
  function gather(first: number, spacing: number): number {
    // a calm has no direction and no time: there those of a neighbour do
    let calm = first;
    for (let k = 0; k < 9; k++) {
      const at = first + spacing * (Math.trunc(k / 3) * EDGE + (k % 3));
      if (windMps[at]! > 0) calm = at;
    }
    const middle = first + spacing * (EDGE + 1);
    const centreDeg = fromDeg[windMps[middle]! > 0 ? middle : calm]!;
    for (let k = 0; k < 9; k++) {
      const at = first + spacing * (Math.trunc(k / 3) * EDGE + (k % 3));
      const from = windMps[at]! > 0 ? at : calm;
      winds[k] = windMps[at]!;
      times[k] = timeS[from]!;
      angles[k] = turnDeg(fromDeg[from]!, centreDeg);
      for (let h = 0; h < hours.length; h++) counted[h]![k] = hours[h]![at]! ** 2;
    }
    return centreDeg;
  }

  /** Blocks with a guess that was wrong. */
  function wrongGuesses(): Set<Block> {
    const wrong = new Set<Block>();
    for (let from = 0; from < guesses.length; from += MOST_POINTS) {
      const some = guesses.slice(from, from + MOST_POINTS);
      for (const [k, { at, timeS: time }] of some.entries()) {
        placing.place(tracer, k, left + (at % EDGE), top + Math.trunc(at / EDGE));
        tracer.setTime(k, time);
      }
      tracer.winds(some.length);
      for (const [k, { block, at, fromDeg: guess }] of some.entries())
        if (
          tracer.windMps[k]! < windMps[at]! - CHECK_TIME_MPS ||
          Math.abs(turnDeg(guess, tracer.fromDeg(k))) > CHECK_DEG
        )
          wrong.add(block);
    }
    return wrong;
  }

  /** Interpolates the cells of a piece that are not known from its 3 × 3 points. */
  function fillPiece(left: number, top: number, near: number): void {
    const weights = CELLS[near]!;
    const first = top * EDGE + left;
    const centreDeg = gather(first, near);
    const right = Math.min(left + 2 * near, width) - left;
    const bottom = Math.min(top + 2 * near, height) - top;
    let calm = false;
    for (let k = 0; k < 9; k++) calm ||= !(winds[k]! > CALM_MPS);
    for (let j = 0; j < bottom; j++) {
      const from = first + j * EDGE;
      if (!given) {
        along(winds, weights, j);
        spread(windMps, from, weights, right);
      }
      if (!windOnly) {
        along(times, weights, j);
        spread(timeS, from, weights, right);
        along(angles, weights, j);
        spread(fromDeg, from, weights, right);
        for (let at = from; at < from + right; at++) {
          if (known[at] !== 0) continue;
          fromDeg[at] = wrapped(centreDeg + fromDeg[at]!);
          // a parabola may run past either end of the storm
          if (timeS[at]! < 0) timeS[at] = 0;
          else if (timeS[at]! > durationS) timeS[at] = durationS;
        }
      }
      for (let h = 0; h < hours.length; h++) {
        along(counted[h]!, weights, j);
        spread(hours[h]!, from, weights, right);
      }
      if (calm || hours.length > 0) settle(from, right);
    }
  }

  /** The parabolas along a line, from those down the columns of 3 × 3 points. */
  function along(v: Float64Array, weights: Float64Array, j: number): void {
    const a = weights[3 * j]!;
    const b = weights[3 * j + 1]!;
    const c = weights[3 * j + 2]!;
    line[0] = a * v[0]! + b * v[3]! + c * v[6]!;
    line[1] = a * v[1]! + b * v[4]! + c * v[7]!;
    line[2] = a * v[2]! + b * v[5]! + c * v[8]!;
  }

  function spread(to: Float64Array, from: number, weights: Float64Array, count: number): void {
    const a = line[0]!;
    const b = line[1]!;
    const c = line[2]!;
    for (let i = 0, w = 0; i < count; i++, w += 3)
      if (known[from + i] === 0) to[from + i] = weights[w]! * a + weights[w + 1]! * b + weights[w + 2]! * c;
  }

  /** What interpolation makes of calms and of hours that are not reached. */
  function settle(from: number, count: number): void {
    for (let at = from; at < from + count; at++) {
      if (known[at] !== 0) continue;
      const wind = windMps[at]!;
      if (!given && !(wind >= LEAST_MPS)) {
        windMps[at] = 0;
        timeS[at] = Number.NaN;
        fromDeg[at] = Number.NaN;
      }
      for (let h = 0; h < hours.length; h++)
        hours[h]![at] = wind >= thresholdsMps[h]! && hours[h]![at]! > 0 ? Math.sqrt(hours[h]![at]!) : 0;
    }
  }
}

/** The value of two crossed parabolas through 3 × 3 points. */
function ofNine(
  v: Float64Array,
  [a, b, c]: readonly [number, number, number],
  [d, e, f]: readonly [number, number, number],
): number {
  return (
    d * (a * v[0]! + b * v[1]! + c * v[2]!) +
    e * (a * v[3]! + b * v[4]! + c * v[5]!) +
    f * (a * v[6]! + b * v[7]! + c * v[8]!)
  );
}

/** The turn from one direction to another, −180 to 180°. */
function turnDeg(toDeg: number, fromDeg: number): number {
  return ((toDeg - fromDeg + 540) % 360) - 180;
}

/** A direction that is off by less than a turn, 0 to 360°. */
function wrapped(deg: number): number {
  return deg < 0 ? deg + 360 : deg >= 360 ? deg - 360 : deg;
}
