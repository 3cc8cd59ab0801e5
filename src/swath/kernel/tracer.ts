import { EARTH_RADIUS_M, RADIANS } from '../../earth.js';
import { TAPER_SHARE } from '../../model/field.js';
import type { Engine } from './engine.js';
import * as at from './places.js';
import { builtTables, type Piece, type StormTables, servingTables } from './storm-tables.js';
import { type MomentTable, rowBound, rowRatios, rowsBelow } from './table.js';
import { FRAME, highestOfLeg, momentOf, type Timeline, timeMsOf } from './timeline.js';

/** A step changes a point's wind by at most this where the maximum wind changes, m/s. */
const STEP_CHANGE_MPS = 2;
/** Longest step where a point has the maximum wind, s; longer where it has less. */
const LONGEST_S = 2000;
/** Winds in a taper that are stepped through with care, m/s. */
const CALM_MPS = 6.5;
const LEG_NUMBERS = 8;
/** So many tables of the wind's parts serve a leg, and a straight line between each two. */
const WIND_STEPS = 8;
/** Numbers of a row of a surface; eight sectors each of wind and gust, and their highest. */
const SURFACE_NUMBERS = 18;

/** A storm in an engine's memory, and the points that it is asked about. */
export interface Tracer {
  /** columns of the points, at most {@link at.MOST_POINTS}: unit vectors go in */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
  /** length of the timeline, s */
  readonly durationS: number;
  /** what the points may expect at least goes in, 0 where that is not known; the peak wind comes out, one below that is none, m/s, 0 for none; least distance from the centre, m; hours at or above each threshold */
  readonly windMps: Float64Array;
  readonly leastM: Float64Array;
  readonly hours: readonly Float64Array[];
  /** how often the wind passes any threshold */
  readonly crossings: Float64Array;
  /** Leaves out the legs in which the storm stays farther from a place than its wind reaches, `radiusM` about it; false where none is left. */
  readonly near: (centre: readonly [number, number, number], radiusM: number, leastMps?: number) => boolean;
  /** Leaves out those as well in which no wind of `leastMps` over open sea reaches the last place; 0 takes them back; false where none is left. */
  readonly reaching: (leastMps: number) => boolean;
  /** peaks and hours of the first `count` points */
  readonly trace: (count: number) => void;
  /** the same for winds (1) or gusts (2) over the surfaces that {@link Tracer.setSurface} gave; `windMps` holds what each has at least */
  readonly traceLocal: (count: number, kind: 1 | 2) => void;
  /** a row of the surface's ratios for a point */
  readonly setSurface: (point: number, row: number) => void;
  /** other thresholds, as many as there were */
  readonly setThresholds: (thresholdsMps: ArrayLike<number>) => void;
  /** winds of the first `count` points, each at the time that {@link Tracer.setTime} gave it */
  readonly winds: (count: number) => void;
  readonly setTime: (point: number, timeS: number) => void;
  /** time of the second highest maximum that was looked at, s after the timeline's start; NaN where there is none */
  readonly rivalTimeS: (point: number) => number;
  /** of a point after either: time, s after the timeline's start; where the wind blows from, degrees */
  readonly timeS: (point: number) => number;
  readonly fromDeg: (point: number) => number;
}

/** Puts a storm into an engine's memory; what was there is given back. */
export function tracerOf(
  engine: Engine,
  timeline: Timeline,
  tables: StormTables,
  options: {
    readonly outerRadiusM: number;
    readonly thresholdsMps: readonly number[];
    /** maxima in time within this of the highest are looked at too, m/s; none by default */
    readonly rivalsMps?: number;
    /** ratios of surfaces over the wind over open sea: rows of eight sectors */
    readonly surface?: { readonly windRatio: Float64Array; readonly gustRatio: Float64Array };
    /** without the time and direction of the peak */
    readonly windOnly?: boolean;
  },
): Tracer {
  const { outerRadiusM, thresholdsMps } = options;
  const { legs, count, frames } = timeline;
  const { layout } = tables;
  const serving = servingTables(tables, timeline);
  const speedBytes = 4 * layout.rows * layout.speedStride;
  const windBytes = 4 * layout.rows * layout.windStride;
  const pieces = tables.legTables.flat();
  const built = builtTables(pieces);
  const windSteps = pieces.map(({ from, to }) => Math.max(2, Math.round(WIND_STEPS * (to - from))));
  const rounded = (bytes: number): number => (bytes + 63) & ~63;
  engine.release();
  engine.reserve(
    (serving.tables.length + built.size) * rounded(speedBytes) +
      (built.size + windSteps.reduce((sum, steps) => sum + steps, 0)) * rounded(windBytes) +
      count * (64 + 24 + 8) +
      legs.length * (64 + 8) +
      SURFACE_NUMBERS * (options.surface?.windRatio.length ?? 0) +
      1024,
  );
  const { f64, f32, i32 } = engine;

  // those that were built stand where the first that they serve is wanted
  const placing = (part: 'speed' | 'wind', bytes: number): ((piece: Piece, share: number) => number) => {
    const placed = new Map<MomentTable, number>();
    const placeOf = (table: MomentTable): number => {
      const known = placed.get(table);
      if (known !== undefined) return known;
      const address = engine.allocate(bytes);
      f32.set(table[part], address >> 2);
      placed.set(table, address);
      return address;
    };
    return ({ a, m, b }, share) => {
      if (share === 0) return placeOf(a);
      if (share === 0.5) return placeOf(m);
      if (share === 1) return placeOf(b);
      const three = [placeOf(a), placeOf(m), placeOf(b)] as const;
      const address = engine.allocate(bytes);
      engine.mix(address, ...three, share, bytes / 4);
      return address;
    };
  };
  const placeSpeed = placing('speed', speedBytes);
  const speedAt = serving.tables.map(({ piece, share }) => placeSpeed(piece, share));
  // parts of the wind, between which a straight line goes
  const placeWind = placing('wind', windBytes);
  const windsAt = new Map(
    pieces.map((piece, i) => {
      const steps = layout.windStride === 0 ? 0 : windSteps[i]!;
      return [piece, Array.from({ length: steps + 1 }, (_, k) => (steps === 0 ? 0 : placeWind(piece, k / steps)))];
    }),
  );
  const framesAt = engine.allocate(64 * count);
  const windTablesAt = engine.allocate(24 * count);
  const hoursAt = engine.allocate(8 * count);
  for (const leg of legs)
    for (let m = leg.first; m <= leg.first + (1 << leg.depth) && m < count; m++)
      f64[(hoursAt >> 3) + m] = (leg.startMs - legs[0]!.startMs + (m - leg.first) * leg.fineMs) / 3_600_000;
  for (let m = 0; m < count; m++) {
    const [from, to] = [m * FRAME, (framesAt >> 3) + 8 * m];
    for (let k = 0; k < 5; k++) f64[to + k] = frames[from + 3 + k]!;
    f64[to + 5] = frames[from + 9]!;
    f64[to + 6] = frames[from + 8]!;
    const slot = serving.slots[m]!;
    f64[to + 7] = speedAt[slot]!;
    const { piece, share } = serving.tables[slot]!;
    const addresses = windsAt.get(piece)!;
    const at = share * (addresses.length - 1);
    const k = Math.max(0, Math.min(addresses.length - 2, Math.floor(at)));
    const winds = (windTablesAt >> 3) + 3 * m;
    f64[winds] = addresses[k]!;
    f64[winds + 1] = addresses[k + 1] ?? 0;
    f64[winds + 2] = at - k;
  }
  const surfaceAt = placeSurface();
  const legsAt = engine.allocate(8 * LEG_NUMBERS * legs.length);
  for (const [number, leg] of legs.entries()) {
    const fineS = leg.fineMs / 1000;
    f64.set(
      [
        leg.first,
        Math.min(count - 1, leg.first + (1 << leg.depth)),
        1 / (leg.speedMps * fineS),
        leg.longestS / fineS,
        STEP_CHANGE_MPS / (leg.changeMps2 * fineS),
        LONGEST_S / fineS,
      ],
      (legsAt >> 3) + LEG_NUMBERS * number,
    );
  }
  const runsAt = engine.allocate(8 * legs.length + 8);
  f64.set(
    [
      framesAt,
      count,
      legsAt,
      runsAt,
      0,
      layout.speedStride / 4,
      layout.rows - 3,
      outerRadiusM,
      windTablesAt,
      layout.windHarmonics,
      thresholdsMps.length,
      hoursAt,
      carefulFromM(timeline, tables, outerRadiusM),
      options.windOnly ? 0 : 1,
      options.rivalsMps ?? 0,
    ],
    at.STORM >> 3,
  );
  const setThresholds = (levels: ArrayLike<number>): void => {
    const first = at.LEVELS >> 2;
    f32.fill(Number.POSITIVE_INFINITY, first, first + at.MOST_THRESHOLDS).set(levels, first);
  };
  setThresholds(thresholdsMps);
  const taperFromM = (1 - TAPER_SHARE) * outerRadiusM;
  const flatM = EARTH_RADIUS_M * Math.sin(Math.min(Math.PI / 2, taperFromM / EARTH_RADIUS_M));
  f32.set([flatM * flatM, outerRadiusM, 1 / (outerRadiusM - taperFromM), 1 / (6 * EARTH_RADIUS_M ** 2)], at.FADE >> 2);
  const reachM = reachOf(timeline, tables, outerRadiusM);
  // of each leg the moment in its middle, and how far the centre is from there at most, m
  const middles = legs.map(({ first, depth }) => FRAME * (first + (depth > 0 ? 1 << (depth - 1) : 0)));
  const halfM = legs.map((leg) => (leg.speedMps * (leg.endMs - leg.startMs)) / 2000);
  /** of each leg how far its middle is from the edge of the last place, less the half of its way, m */
  const apartM = new Float64Array(legs.length);
  const column = (address: number): Float64Array => f64.subarray(address >> 3, (address + at.COLUMN) >> 3);
  const [x, y, z] = [column(at.X), column(at.Y), column(at.Z)];
  const [east, north, moments, windMps] = [at.EAST, at.NORTH, at.MOMENT, at.WIND].map(column) as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  const [rivalMps, rivalMoments, surfaces] = [column(at.RIVAL), column(at.RIVAL_MOMENT), column(at.SURFACE)];
  const originMs = timeMsOf(timeline, 0);
  const quads = (points: number): number => {
    const whole = (points + 3) & ~3;
    // the last ones once more
    for (let i = points; i < whole; i++)
      for (const part of [x, y, z, moments, windMps, surfaces]) part[i] = part[points - 1]!;
    return whole;
  };

  /** eight ratios of the wind, eight of the gust, the highest of each, row after row */
  function placeSurface(): number {
    const { surface } = options;
    if (!surface) return 0;
    const address = engine.allocate(SURFACE_NUMBERS * surface.windRatio.length);
    const { windRatio, gustRatio } = surface;
    for (let i = 0, to = address >> 3; i < windRatio.length; i += 8, to += SURFACE_NUMBERS) {
      let [wind, gust] = [0, 0];
      for (let k = 0; k < 8; k++) {
        wind = Math.max(wind, windRatio[i + k]!);
        gust = Math.max(gust, gustRatio[i + k]!);
        f64[to + k] = windRatio[i + k]!;
        f64[to + 8 + k] = gustRatio[i + k]!;
      }
      f64[to + 16] = wind;
      f64[to + 17] = gust;
    }
    return address;
  }

  return {
    x,
    y,
    z,
    durationS: (timeMsOf(timeline, count - 1) - originMs) / 1000,
    setThresholds,
    traceLocal: (points, kind) => engine.traceLocal(quads(points), kind),
    setSurface: (point, row) => {
      surfaces[point] = surfaceAt + 8 * SURFACE_NUMBERS * row;
    },
    windMps,
    leastM: column(at.LEAST),
    crossings: column(at.CROSSINGS),
    hours: thresholdsMps.map((_, h) => column(at.HOURS + h * at.COLUMN)),
    trace: (points) => engine.trace(quads(points)),
    winds: (points) => engine.winds(quads(points)),
    setTime(point, timeS) {
      moments[point] = momentOf(timeline, originMs + timeS * 1000);
    },
    rivalTimeS: (point) =>
      rivalMps[point]! > 0 ? (timeMsOf(timeline, rivalMoments[point]!) - originMs) / 1000 : Number.NaN,
    timeS: (point) => (timeMsOf(timeline, moments[point]!) - originMs) / 1000,
    fromDeg: (point) => {
      const k = FRAME * Math.min(count - 1, Math.trunc(moments[point]! + 0.5));
      return fromDirection(x[point]!, y[point]!, z[point]!, frames, k, east[point]!, north[point]!);
    },
    near([cx, cy, cz], radiusM, leastMps = 0) {
      for (let number = 0; number < legs.length; number++) {
        const k = middles[number]!;
        const dot = frames[k]! * cx + frames[k + 1]! * cy + frames[k + 2]! * cz;
        apartM[number] = EARTH_RADIUS_M * Math.acos(Math.min(1, Math.max(-1, dot))) - halfM[number]! - radiusM;
      }
      return select(leastMps);
    },
    reaching: select,
  };

  function select(leastMps: number): boolean {
    let runs = 0;
    let last = -1;
    for (let number = 0; number < legs.length; number++) {
      if (apartM[number]! > outerRadiusM || apartM[number]! > reachM(number, leastMps)) continue;
      if (number !== last) {
        i32[(runsAt >> 2) + 2 * runs] = number;
        runs++;
      }
      last = number + 1;
      i32[(runsAt >> 2) + 2 * runs - 1] = last;
    }
    f64[(at.STORM >> 3) + at.RUN_COUNT] = runs;
    return runs > 0;
  }
}

/** Rows beyond the last one with a wind, within which a parabola may still show some of it. */
const SPARE_ROWS = 2;

/** How far from the centre a wind of `leastMps` reaches in a leg at most, m: V and R are the highest of the leg. */
function reachOf(
  timeline: Timeline,
  { layout, legTables }: StormTables,
  outerRadiusM: number,
): (leg: number, leastMps: number) => number {
  const { rows } = layout;
  const ratio = rowRatios(rows);
  // of each table the highest bound of a row and those beyond it
  const known = new Map<MomentTable, Float64Array>();
  const boundsOf = (table: MomentTable): Float64Array => {
    let bounds = known.get(table);
    if (bounds) return bounds;
    bounds = new Float64Array(rows);
    let beyond = 0;
    for (let row = rows - 1; row >= 0; row--) {
      beyond = Math.max(beyond, rowBound(table, layout, row));
      bounds[row] = beyond;
    }
    known.set(table, bounds);
    return bounds;
  };
  const envelopes = legTables.map((pieces) => {
    const most = new Float64Array(rows);
    for (const table of builtTables(pieces))
      for (const [row, bound] of boundsOf(table).entries()) most[row] = Math.max(most[row]!, bound);
    return most;
  });
  const radii = timeline.legs.map((leg) => highestOfLeg(timeline, leg, 8));
  const winds = timeline.legs.map((leg) => highestOfLeg(timeline, leg, 9));
  return (number, leastMps) => {
    if (!(leastMps > 0)) return outerRadiusM;
    const envelope = envelopes[number]!;
    const least = (leastMps / winds[number]!) ** 2;
    let [low, high] = [-1, rows];
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (envelope[middle]! >= least) low = middle;
      else high = middle;
    }
    if (low < 0) return 0;
    const sine = ((ratio[Math.min(rows - 1, low + SPARE_ROWS)] ?? 0) * radii[number]!) / EARTH_RADIUS_M;
    return sine >= 1 ? outerRadiusM : Math.min(outerRadiusM, EARTH_RADIUS_M * Math.asin(sine));
  };
}

/** From here on steps follow the taper, m: nowhere, where the wind that is tapered is one of which nothing is promised. */
function carefulFromM({ legs, frames }: Timeline, { layout, legTables }: StormTables, outerRadiusM: number): number {
  for (const [number, { first }] of legs.entries()) {
    const [radiusM, maxWindMps] = [frames[first * FRAME + 8]!, frames[first * FRAME + 9]!];
    const row = Math.min(layout.rows - 1, rowsBelow(((1 - TAPER_SHARE) * outerRadiusM) / radiusM));
    for (const table of builtTables(legTables[number]!))
      if (Math.sqrt(table.speed[row * layout.speedStride]!) * maxWindMps > CALM_MPS)
        return (1 - 1.3 * TAPER_SHARE) * outerRadiusM;
  }
  return 1e30;
}

/** Nearer to the centre than this, squared and in units of the earth's radius, the way back to it has no direction: there nothing has turned yet. */
const NEAR_SQUARED = 1e-14;

/** Where the wind blows from at a place: the wind of the frame at the centre, turned as the great circle turns on the way. */
function fromDirection(
  x: number,
  y: number,
  z: number,
  frames: Float64Array,
  k: number,
  eastMps: number,
  northMps: number,
): number {
  const cx = frames[k]!;
  const cy = frames[k + 1]!;
  const cz = frames[k + 2]!;
  const flat = Math.sqrt(x * x + y * y);
  const centreFlat = Math.sqrt(cx * cx + cy * cy);
  let real = -northMps;
  let imaginary = -eastMps;
  // sides of the triangle of the two places and the pole, as far as their bearings need them
  const side = cx * y - cy * x;
  const along = cx * x + cy * y;
  const outEast = side / centreFlat;
  const outNorth = z * centreFlat - (cz * along) / centreFlat;
  if (flat > 1e-9 && centreFlat > 1e-9 && outEast * outEast + outNorth * outNorth > NEAR_SQUARED) {
    // bearings as complex numbers, north real: times the way's direction at the place, divided by that at the centre
    const onEast = side / flat;
    const onNorth = (z * along) / flat - cz * flat;
    const turned = real * onNorth - imaginary * onEast;
    const across = real * onEast + imaginary * onNorth;
    real = turned * outNorth + across * outEast;
    imaginary = across * outNorth - turned * outEast;
  }
  const degrees = Math.atan2(imaginary, real) / RADIANS;
  return degrees < 0 ? degrees + 360 : degrees;
}
