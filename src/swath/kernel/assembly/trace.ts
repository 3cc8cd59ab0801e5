// The wind at points through a storm's life: peak over continuous time, hours above thresholds. The build makes
// `../twin-trace.ts` of this file, with plain JavaScript beneath it: what stands here must mean the same in both.
import { bitsOf, f32At, f64At, i32At, root, setF32, setF64, whole, zeros } from './memory';
import { busy, dips, peaks, sampleQuad, sides } from './lanes';
import {
  AHEAD, COLUMN, CROSSINGS, EAST, EXTREMES, FADE, FRAMES, FRESH, GROUPS, HELD, HOURS, LAST_ROW, LEAST, LEGS, LEVELS, LOOKED, MOMENT, MOMENTS,
  NEAR, NEED, NONE, NORTH, OUTER, PARTS, QUAD, RIVAL, RIVALS, RIVAL_MOMENT, RUNS, RUN_COUNT, STORM, SURFACE, TAPER, THRESHOLDS, TIMES, WIND, WINDS, WIND_HARMONICS, WIND_TABLES, X, Y, Z,
} from './places';

/** A step moves the storm by at most this share of the distance from it (or of its radius of maximum wind). */
const STEP_SHARE: f64 = 0.2;
/** A step keeps so many of its leading bits. */
const ROUND_BITS: i32 = 2;
/** Next to the centre steps follow this share of the radius of maximum wind. */
const CORE_SHARE: f64 = 0.7;
/** Steps are longer by these factors while the wind is below this share of what the points have had or expect: with a threshold near, and below all. */
const IDLE_FACTOR: f64 = 1;
const IDLE_FACTOR_BELOW: f64 = 3;
const IDLE_SHARE: f64 = 0.6;
const IDLE_BELOW: f64 = 0.7;
/** Steps through the taper move the storm by this share of the outer radius. */
const TAPER_STEP: f64 = 0.015;
/** With more wind than this a step ends where a leg does, m/s: there the motion turns at another rate, and the wind with it. */
const LEG_MPS: f64 = 6;
/** A step of which no more is left ends where a leg does. */
const LEAST_BUDGET: f64 = 0.25;
/** What may hide between moments beyond the flanks' slopes, m/s. */
const MARGIN_MPS: f64 = 0.03;
/** The same where corners pass between moments. */
const MARGIN_NEAR_MPS: f64 = 0.35;
/** A peak this near to its parabola is taken from it, m/s; */
const ROUGH_MPS: f64 = 0.015;
/** it is not trusted to rise this far above what was seen, m/s; */
const TRUSTED_MPS: f64 = 0.01;
/** one farther off than this is no parabola, and is looked for among moments between. */
const CORNER_MPS: f64 = 0.15;
/** A vertex is next to the middle moment within this share of the steps beside it. */
const BESIDE: f64 = 0.15;
/** (r/R)² at which the inflow stops turning [Sobey1977]. */
const INFLOW_X: f64 = 1.44;
/** Places beside a corner at which it is checked, as a share of its bracket. */
const CORNER_STEP: f64 = 0.06;
/** Within this (r/R)² the wind has corners: at the radius of maximum wind and where the inflow stops turning. */
const CORNER_X: f64 = 4;
/** A search ends when a peak's neighbours are this near, m/s. */
const SEARCHED_MPS: f64 = 0.006;
/** A second maximum within this of the first is searched too, m/s. */
const RIVAL_MPS: f64 = 0.6;
/** After a turn of the motion a wind that fell before may rise by this, m/s. */
const TURN_MPS: f64 = 0.15;
/** Winds over a surface that stay below this share of what is needed from any side are not looked at, */
const BELOW_NEED: f64 = 0.96;
/** which the highest ratios of the surface's row tell, after its eight of the wind and eight of the gust. */
const HIGHEST_WIND: i32 = 128;
const HIGHEST_GUST: i32 = 136;
/** A bend is found to this share of the wind, across the sector. */
const BEND_SHARE: f64 = 0.0005;
/** Parts of a bracket that a search looks at. */
const LOOKS: i32 = 8;
/** Within this of a level the wind is a straight line in time, m/s. */
const CROSSED_MPS: f64 = 0.01;

/** What is traced: the wind over open sea, over the point's surface, or its gust. */
const SEA: i32 = 0;
const GUST: i32 = 2;
let kind: i32 = SEA;

// what the storm is made of
let frames: i32 = 0;
let lastMoment: i32 = 0;
let legs: i32 = 0;
let runs: i32 = 0;
let runCount: i32 = 0;
let groups: i32 = 0;
let lastRow: i32 = 0;
let outerM: f64 = 0;
let taperM: f64 = 0;
let hoursAt: i32 = 0;
let windTables: i32 = 0;
let windHarmonics: i32 = 0;
let thresholds: i32 = 0;
let parts: boolean = false;
// maxima within this of the highest are looked at too, m/s
let rivals: f64 = 0;
let lowestLevel: f64 = 0;

// what the last search found
let foundMoment: f64 = 0;
let foundMps: f64 = 0;
// where a surface's ratio bends about the middle of three moments, and the wind at the later of two
let bendLow: f64 = 0;
let fBendLow: f64 = 0;
let bendHigh: f64 = 0;
let fBendHigh: f64 = 0;
let laterMps: f64 = 0;
let laterEast: f64 = 0;
let laterNorth: f64 = 0;
// whether the middle moment is near the core, where corners pass
let nearB: boolean = false;
// points with an extreme inside a step, a bit each
let held: i32 = 0;
let fresh: i32 = 0;
let ahead: i32 = 0;
// (r/R)² of the last wind
let squaredRatio: f64 = 0;
// weights of three rows of a table
let weight0: f64 = 0;
let weight1: f64 = 0;
let weight2: f64 = 0;

function storm(index: i32): f64 {
  return f64At(STORM + 8 * index);
}

function begin(): void {
  frames = whole(storm(FRAMES));
  lastMoment = whole(storm(MOMENTS)) - 1;
  legs = whole(storm(LEGS));
  runs = whole(storm(RUNS));
  runCount = whole(storm(RUN_COUNT));
  groups = whole(storm(GROUPS));
  lastRow = whole(storm(LAST_ROW));
  outerM = storm(OUTER);
  taperM = storm(TAPER);
  hoursAt = whole(storm(TIMES));
  windTables = whole(storm(WIND_TABLES));
  windHarmonics = whole(storm(WIND_HARMONICS));
  thresholds = whole(storm(THRESHOLDS));
  parts = storm(PARTS) > 0;
  rivals = storm(RIVALS);
  lowestLevel = 1e30;
  for (let h = 0; h < thresholds; h++) {
    const level = f32At(LEVELS + 4 * h);
    if (level < lowestLevel) lowestLevel = level;
  }
}

/**
 * Peaks and hours of the first `count` points, whole groups of four. The column of winds holds what a point may expect at
 * least, 0 where that is not known: steps are longer while the wind is far below it, and no peak below it is looked for.
 * A peak that comes out below it was none.
 */
export function trace(count: i32): void {
  begin();
  for (let p = 0; p < count; p += 4) traceQuad(p);
}

/**
 * The same for winds (1) or gusts (2) over the points' own surfaces. The column of winds holds what a point has at least:
 * nothing below is looked for.
 */
export function traceLocal(count: i32, which: i32): void {
  begin();
  kind = which;
  if (kind === GUST) {
    // no hours of gusts
    thresholds = 0;
    lowestLevel = 1e30;
  }
  for (let p = 0; p < count; p += 4) traceQuad(p);
  kind = SEA;
}

/** Winds of the first `count` points, each at the moment that its column holds: speed and parts. */
export function winds(count: i32): void {
  begin();
  for (let p = 0; p < count; p++) {
    const moment = f64At(MOMENT + 8 * p);
    setF64(WIND + 8 * p, speedAt(p, moment));
    partsAt(p, moment);
  }
}

/** The first of the three rows about (r/R)² of x, as in `lanes.ts`, and the weights of the parabola through them. */
function rowOf(x: f64): i32 {
  let row: i32 = 0;
  let t: f64 = 0;
  if (x < 0.5) {
    t = x * 64;
    row = whole(t);
    t -= <f64>row;
  } else {
    const w = bitsOf(x);
    row = (w >> 18) - 4000;
    t = <f64>(w & 262143) * (1.0 / 262144.0);
  }
  if (row >= lastRow) {
    row = lastRow;
    t = 0;
  } else if ((row & 31) === 31) {
    row--;
    t += 1;
  }
  weight0 = -0.5 * (t - 1) * (2 - t);
  weight1 = t * (2 - t);
  weight2 = 0.5 * t * (t - 1);
  return row;
}

function column(at: i32, stride: i32): f64 {
  return weight0 * f32At(at) + weight1 * f32At(at + stride) + weight2 * f32At(at + 2 * stride);
}

/** What is traced of a point at a moment or between two, m/s. */
function speedAt(p: i32, moment: f64): f64 {
  return kind === SEA ? seaAt(p, moment) : localAt(p, moment, seaAt(p, moment));
}

/** Wind or gust over the surface of a point that was seen: that over open sea times the ratio of the sectors that it comes from. */
function localAt(p: i32, moment: f64, seaMps: f64): f64 {
  if (!(seaMps > 0)) return 0;
  windSeen(moment);
  turn(p);
  const row = whole(f64At(SURFACE + 8 * p)) + (kind === GUST ? 64 : 0);
  // as the surface map has it: between a cardinal sector and the diagonal one beside it
  const fromEast = -windEast;
  const fromNorth = -windNorth;
  const e = fromEast < 0 ? -fromEast : fromEast;
  const n = fromNorth < 0 ? -fromNorth : fromNorth;
  const diagonal = fromNorth >= 0 ? (fromEast >= 0 ? 1 : 7) : fromEast >= 0 ? 3 : 5;
  const cardinal = n >= e ? (fromNorth >= 0 ? 0 : 4) : fromEast >= 0 ? 2 : 6;
  const most = e > n ? e : n;
  const share = most > 0 ? (e < n ? e : n) / most : 0;
  const ratio = f64At(row + 8 * cardinal);
  return seaMps * (ratio + share * (f64At(row + 8 * diagonal) - ratio));
}

/**
 * Turns the last wind from the frame at the centre to that at the point, as the great circle turns on the way; its size is
 * lost. Carried along from c to p a vector v becomes v − (v·p)/(1 + c·p) (c + p): here all of it times the frame's scale.
 */
function turn(p: i32): void {
  const e0 = inFrame(0);
  const e1 = inFrame(8);
  const n0 = inFrame(16);
  const n1 = inFrame(24);
  const n2 = inFrame(32);
  const x = f64At(X + 8 * p);
  const y = f64At(Y + 8 * p);
  const z = f64At(Z + 8 * p);
  // the centre is square to its east and north
  const cx = e1 * n2;
  const cy = -e0 * n2;
  const cz = e0 * n1 - e1 * n0;
  const vx = windEast * e0 + windNorth * n0;
  const vy = windEast * e1 + windNorth * n1;
  const vz = windNorth * n2;
  const share = (vx * x + vy * y + vz * z) / (e0 * e0 + e1 * e1 + cx * x + cy * y + cz * z);
  const wx = vx - share * cx;
  const wy = vy - share * cy;
  windEast = wy * x - wx * y;
  windNorth = (vz - share * cz) * (x * x + y * y) - z * (wx * x + wy * y);
}

// where a point was seen from last: the two frames about the moment, the share of the way between them, its coordinates
let frameA: i32 = 0;
let frameB: i32 = 0;
let between: f64 = 0;
let seenEast: f64 = 0;
let seenNorth: f64 = 0;

/** Coordinates of a point in units of R as seen from the centre at a moment or between two. */
function see(p: i32, moment: f64): void {
  let m = whole(moment);
  if (m > lastMoment) m = lastMoment;
  between = moment - <f64>m;
  frameA = frames + (m << 6);
  frameB = between > 0 ? frameA + 64 : frameA;
  const x = f64At(X + 8 * p);
  const y = f64At(Y + 8 * p);
  seenEast = x * inFrame(0) + y * inFrame(8);
  seenNorth = x * inFrame(16) + y * inFrame(24) + f64At(Z + 8 * p) * inFrame(32);
}

/** A number of the frame between the two that were seen from last. */
function inFrame(at: i32): f64 {
  const a = f64At(frameA + at);
  return between > 0 ? a + between * (f64At(frameB + at) - a) : a;
}

/** Wind of a point over open sea at a moment or between two. */
function seaAt(p: i32, moment: f64): f64 {
  see(p, moment);
  const east = seenEast;
  const north = seenNorth;
  const maxWind = inFrame(40);
  const s2 = east * east + north * north;
  squaredRatio = s2;
  const offset = rowOf(s2) * (groups << 4);
  const table = f64At(frameA + 56);
  const next = f64At(frameB + 56);
  let value = squaredAt(whole(table) + offset, east, north, s2);
  // where two moments have tables of their own the wind lies between
  if (next !== table) value += between * (squaredAt(whole(next) + offset, east, north, s2) - value);
  if (!(value > 0)) return 0;
  const wind = root(value) * maxWind;
  const radiusM = inFrame(48);
  const squared = s2 * radiusM * radiusM;
  return squared > f32At(FADE) ? wind * faded(root(squared)) : wind;
}

/** The share that the taper leaves at a distance whose sine is given, m: 3t² − 2t³. */
function faded(flatM: f64): f64 {
  const arc = flatM + flatM * flatM * flatM * f32At(FADE + 12);
  const t = (f32At(FADE + 4) - arc) * f32At(FADE + 8);
  if (t >= 1) return 1;
  return t <= 0 ? 0 : t * t * (3 - 2 * t);
}

/** Squared speed over V² from three rows. */
function squaredAt(at: i32, east: f64, north: f64, s2: f64): f64 {
  const stride = groups << 4;
  let value = column(at, stride) + east * column(at + 4, stride) + north * column(at + 8, stride);
  if (groups === 1) return value;
  const inverse = s2 > 0 ? 1 / root(s2) : 0;
  const c = north * inverse;
  const s = east * inverse;
  let e = east;
  let n = north;
  const end = stride - 4;
  for (let k = 12; k < end; k += 8) {
    const nextE = e * c + n * s;
    n = n * c - e * s;
    e = nextE;
    value += e * column(at + k, stride) + n * column(at + k + 4, stride);
  }
  return value;
}

// parts of the last wind, in the frame at the centre
let windEast: f64 = 0;
let windNorth: f64 = 0;

/** Parts east and north of a point's wind at a moment, into its columns. */
function partsAt(p: i32, moment: f64): void {
  see(p, moment);
  windSeen(moment);
  setF64(EAST + 8 * p, windEast);
  setF64(NORTH + 8 * p, windNorth);
}

/** Parts of the wind at the point that was seen, with the table of the nearer moment. */
function windSeen(moment: f64): void {
  const east = seenEast;
  const north = seenNorth;
  const maxWind = inFrame(40);
  const m = whole(moment + 0.5) > lastMoment ? lastMoment : whole(moment + 0.5);
  const s2 = east * east + north * north;
  const row = rowOf(s2);
  const from = windTables + 24 * m;
  const w = f64At(from + 16);
  const part = (1 + 2 * windHarmonics) << 2;
  const stride = 2 * part;
  const a = whole(f64At(from)) + row * stride;
  const b = whole(f64At(from + 8)) + row * stride;
  const inverse = s2 > 0 ? 1 / root(s2) : 0;
  const c = north * inverse;
  const s = east * inverse;
  let e: f64 = 1;
  let n: f64 = 0;
  let u: f64 = 0;
  let v: f64 = 0;
  for (let k = 0; k < part; k += 4) {
    // mean, then the sine and the cosine of each harmonic
    let product = e;
    if (k === 0) product = 1;
    else if (k === 4) {
      e = east;
      n = north;
      product = e;
    } else if ((k & 4) === 0) product = n;
    else {
      const nextE = e * c + n * s;
      n = n * c - e * s;
      e = nextE;
      product = e;
    }
    const ua = column(a + k, stride);
    const va = column(a + part + k, stride);
    u += product * (ua + w * (column(b + k, stride) - ua));
    v += product * (va + w * (column(b + part + k, stride) - va));
  }
  windEast = u * maxWind;
  windNorth = v * maxWind;
}

/** Four points that lie near each other, through the legs of the runs. */
function traceQuad(p: i32): void {
  const cx = f64At(X + 8 * p);
  const cy = f64At(Y + 8 * p);
  const cz = f64At(Z + 8 * p);
  let expected: f64 = 1e30;
  for (let i = 0; i < 4; i++) {
    const at = 8 * (p + i);
    expected = least(expected, f64At(WIND + at));
    setF32(QUAD + 4 * i, f64At(X + at) - cx);
    setF32(QUAD + 16 + 4 * i, f64At(Y + at) - cy);
    setF32(QUAD + 32 + 4 * i, f64At(Z + at) - cz);
    setF32(NEED + 4 * i, f64At(WIND + at) - rivals);
    setF32(NEAR + 4 * i, 1e30);
    setF32(NONE + 4 * i, -1);
    setF64(WIND + at, 0);
    setF64(MOMENT + at, 0);
    setF64(CROSSINGS + at, 0);
    setF64(RIVAL + at, 0);
    setF64(RIVAL_MOMENT + at, 0);
    for (let h = 0; h < thresholds; h++) setF64(HOURS + h * COLUMN + at, 0);
  }
  held = 0;
  fresh = 0;
  ahead = 0;
  let a = NONE;
  let b = NONE;
  let c = WINDS;
  let ma: f64 = -1;
  let mb: f64 = -1;
  let sidesA = 0;
  let sidesB = 0;
  let strongest: f64 = 0;
  // whether the middle moment starts a leg
  let turns = false;
  for (let r = 0; r < runCount; r++) {
    let number = i32At(runs + 8 * r);
    const lastLeg = i32At(runs + 8 * r + 4) - 1;
    let leg = legs + (number << 6);
    let m = whole(f64At(leg));
    // where the last step began, and how far it went over an idle wind
    let from = m;
    let fromLeg = number;
    let skipped = 0;
    for (;;) {
      const frame = frames + (m << 6);
      const east0 = cx * f64At(frame) + cy * f64At(frame + 8);
      const north0 = cx * f64At(frame + 16) + cy * f64At(frame + 24) + cz * f64At(frame + 32);
      sampleQuad(c, frame, east0, north0, whole(f64At(frame + 56)), groups, lastRow);
      const wind = kind === SEA ? f32At(EXTREMES + 4) : localQuad(p, c, <f64>m);
      if (skipped > 3 && wind >= IDLE_BELOW * lowestLevel) {
        // too far for a wind that a threshold is near to: once more with a step of the usual length
        m = from + (skipped >> 2);
        skipped = 0;
        number = fromLeg;
        while (number < lastLeg && m >= whole(f64At(legs + (number << 6) + 8))) number++;
        leg = legs + (number << 6);
        continue;
      }
      const sidesC = wind >= lowestLevel ? sides(c, thresholds) : 0;
      if (b !== NONE) {
        if (strongest > 0) passed(p, a, b, c, ma, mb, <f64>m, turns);
        if (a !== NONE) step(p, a, b, ma, mb, sidesA, sidesB);
      }
      if (wind > strongest) strongest = wind;
      turns = m === whole(f64At(leg));
      const spare = b === NONE ? WINDS + 16 : a === NONE ? WINDS + 32 : a;
      a = b;
      b = c;
      c = spare;
      ma = mb;
      mb = <f64>m;
      sidesA = sidesB;
      sidesB = sidesC;
      nearB = f32At(EXTREMES) < CORNER_X * f64At(frame + 48) * f64At(frame + 48);
      if (m < whole(f64At(leg))) {
        // the motion jumps: the same time once more, with the wind after it
        m = whole(f64At(leg));
        skipped = 0;
        continue;
      }
      // the next moment: as far as the storm may move and change, over as many legs as that takes
      const distanceM = root(f32At(EXTREMES));
      const outside = distanceM > outerM;
      const coreM = CORE_SHARE * f64At(frame + 48);
      const idle = !busy(b, IDLE_SHARE, expected);
      let moveM = STEP_SHARE * (distanceM > coreM ? distanceM : coreM);
      const factor = idle ? (wind < IDLE_BELOW * lowestLevel ? IDLE_FACTOR_BELOW : IDLE_FACTOR) : 1;
      moveM *= factor;
      if (root(f32At(EXTREMES + 8)) > taperM) moveM = least(moveM, TAPER_STEP * outerM);
      if (outside) moveM = distanceM - outerM + TAPER_STEP * outerM;
      let weight = wind / f64At(frame + 40);
      if (weight < 0.1) weight = 0.1;
      const stops = !idle && wind > LEG_MPS;
      from = m;
      fromLeg = number;
      let budget: f64 = 1;
      let done = false;
      for (;;) {
        let moments = moveM * f64At(leg + 16);
        if (!outside) {
          moments = least(moments, (factor * least(f64At(leg + 32), f64At(leg + 40))) / weight);
          moments = least(moments, f64At(leg + 24));
        }
        const last = whole(f64At(leg + 8));
        const room = <f64>(last - m);
        if (budget * moments < room) {
          const n = whole(budget * moments);
          m += n;
          // round moments, so that neighbours use the same ones: their tables are at hand
          if (n > 7) m -= (m - whole(f64At(leg))) & ((1 << (31 - ROUND_BITS - zeros(n))) - 1);
          if (m <= from) m = from + 1;
          break;
        }
        m = last;
        if (number === lastLeg) {
          done = from === last;
          break;
        }
        number++;
        leg += 64;
        budget -= room / moments;
        if (m > from && (stops || budget < LEAST_BUDGET)) break;
      }
      if (done) break;
      skipped = factor > 1 ? m - from : 0;
    }
  }
  if (b !== NONE) {
    passed(p, a, b, NONE, ma, mb, mb, false);
    if (a !== NONE) step(p, a, b, ma, mb, sidesA, sidesB);
  }
  for (let i = 0; i < 4; i++) {
    setF64(LEAST + 8 * (p + i), root(f32At(NEAR + 4 * i)));
    if (parts && f64At(WIND + 8 * (p + i)) > 0) partsAt(p + i, f64At(MOMENT + 8 * (p + i)));
  }
}

/** Puts what is traced over the points' surfaces in the place of their winds over open sea; gives the highest. */
function localQuad(p: i32, winds: i32, moment: f64): f64 {
  let most: f64 = 0;
  for (let i = 0; i < 4; i++) {
    const sea = f32At(winds + 4 * i);
    // what cannot matter from any side is not asked for its direction
    const bound = sea * f64At(whole(f64At(SURFACE + 8 * (p + i))) + (kind === GUST ? HIGHEST_GUST : HIGHEST_WIND));
    let local = bound;
    if (bound >= BELOW_NEED * least(f32At(NEED + 4 * i), lowestLevel)) {
      see(p + i, moment);
      local = localAt(p + i, moment, sea);
    }
    setF32(winds + 4 * i, local);
    if (local > most) most = local;
  }
  return most;
}

function least(a: f64, b: f64): f64 {
  return a < b ? a : b;
}

/** Looks for extremes about a moment whose neighbours are known. */
function passed(p: i32, a: i32, b: i32, c: i32, ma: f64, mb: f64, mc: f64, turns: boolean): void {
  const low = a === NONE ? mb : ma;
  const ratio = a === NONE || c === NONE ? 1 : (mc - mb) / (mb - ma);
  const margin = nearB ? MARGIN_NEAR_MPS : MARGIN_MPS;
  const high = peaks(a, b, c, ratio, margin, thresholds);
  const hollow = thresholds > 0 && a !== NONE && c !== NONE ? dips(a, b, c, ratio, margin, thresholds) : 0;
  if (turns && c !== NONE) {
    // a wind that falls up to a turn may rise after it, and fall again before the next moment
    for (let i = 0; i < 4; i++) {
      const wind = f32At(b + 4 * i);
      if ((high & (1 << i)) !== 0 || wind < f32At(c + 4 * i) || wind < f32At(NEED + 4 * i) - TURN_MPS) continue;
      if (speedAt(p + i, mb + CORNER_STEP * (mc - mb)) <= wind) continue;
      extreme(p + i, mb, wind, mb, wind, mc, f32At(c + 4 * i), 1, false);
      raise(p, i);
    }
  }
  if ((high | hollow) === 0) return;
  for (let i = 0; i < 4; i++) {
    const bit = 1 << i;
    if (((high | hollow) & bit) === 0) continue;
    // a bound is no peak
    if (kind !== SEA && f32At(b + 4 * i) < BELOW_NEED * least(f32At(NEED + 4 * i), lowestLevel)) continue;
    const sign: f64 = (high & bit) !== 0 ? 1 : -1;
    extreme(p + i, low, sign * f32At(a + 4 * i), mb, sign * f32At(b + 4 * i), mc, sign * f32At(c + 4 * i), sign, turns);
    const moment = foundMoment;
    const wind = sign * foundMps;
    if (sign > 0) raise(p, i);
    if (thresholds === 0 || moment === mb) continue;
    const to = (moment < mb ? FRESH : AHEAD) + 16 * i;
    setF64(to, moment);
    setF64(to + 8, wind);
    if (moment < mb) fresh |= bit;
    else ahead |= bit;
  }
}

/** Keeps what was found for a point if it is its highest wind so far. */
function raise(p: i32, i: i32): void {
  const at = 8 * (p + i);
  if (foundMps > f64At(WIND + at)) {
    setF64(RIVAL + at, f64At(WIND + at));
    setF64(RIVAL_MOMENT + at, f64At(MOMENT + at));
    setF64(WIND + at, foundMps);
    setF64(MOMENT + at, foundMoment);
    if (foundMps - rivals > f32At(NEED + 4 * i)) setF32(NEED + 4 * i, foundMps - rivals);
  } else if (foundMps > f64At(RIVAL + at)) {
    setF64(RIVAL + at, foundMps);
    setF64(RIVAL_MOMENT + at, foundMoment);
  }
}

/** The highest value of `sign` times the wind about the middle of three moments; one beside it may be missing, then `first` or `last` is `middle`. */
function extreme(p: i32, first: f64, fFirst: f64, middle: f64, fMiddle: f64, last: f64, fLast: f64, sign: f64, turns: boolean): void {
  let low = first;
  let fLow = fFirst;
  let high = last;
  let fHigh = fLast;
  if (kind !== SEA && low < high) {
    if (atBend(p, low, middle, fMiddle, high, sign)) return;
    low = bendLow;
    fLow = fBendLow;
    high = bendHigh;
    fHigh = fBendHigh;
  }
  if (low < middle && middle < high) {
    let l = low;
    let fl = fLow;
    let m = middle;
    let fm = fMiddle;
    let h = high;
    let fh = fHigh;
    let tried = false;
    for (let n = 0; n < 3; n++) {
      const vertex = vertexOf(l, fl, m, fm, h, fh);
      const estimate = foundMps;
      if (vertex === m) {
        foundMoment = m;
        return;
      }
      const value = sign * speedAt(p, vertex);
      if (value >= fm) {
        if (vertex > m) {
          l = m;
          fl = fm;
        } else {
          h = m;
          fh = fm;
        }
        m = vertex;
        fm = value;
      } else if (vertex > m) {
        h = vertex;
        fh = value;
      } else {
        l = vertex;
        fl = value;
      }
      const off = value - estimate;
      if (off < ROUGH_MPS && off > -ROUGH_MPS) {
        const cornered = turns || squaredRatio < CORNER_X;
        // the parabola passes through the middle moment: next to it any wind agrees
        const near = vertex - middle < BESIDE * (high - middle) && middle - vertex < BESIDE * (middle - low);
        // the parabola through the nearest three is nearer still
        foundMoment = vertexOf(l, fl, m, fm, h, fh);
        if (foundMps > fm + TRUSTED_MPS) continue;
        if (!cornered && !near) return;
        // by chance it may pass through a flank of a corner
        tried = cornered;
        const vertexAt = foundMoment;
        const height = foundMps;
        if (cornered && atCorner(p, low, fLow, middle, fMiddle, high, fHigh, m, fm, sign, turns)) return;
        foundMoment = vertexAt;
        foundMps = height;
        if (agrees(p, 0.5 * (h - m > m - l ? m + h : l + m), l, fl, m, fm, h, fh, sign)) return;
        break;
      }
      if (off > CORNER_MPS || off < -CORNER_MPS) break;
    }
    if (!tried && atCorner(p, low, fLow, middle, fMiddle, high, fHigh, m, fm, sign, turns)) return;
  }
  // corners and close pairs: look at moments between, then around the two highest
  if (!(low < high)) {
    foundMoment = middle;
    foundMps = fMiddle;
    return;
  }
  for (let k = 0; k <= LOOKS; k++) {
    let moment = low + (<f64>k * (high - low)) / <f64>LOOKS;
    if (low < middle && middle < high)
      moment = 2 * k < LOOKS ? low + (<f64>(2 * k) * (middle - low)) / <f64>LOOKS : middle + (<f64>(2 * k - LOOKS) * (high - middle)) / <f64>LOOKS;
    setF64(LOOKED + 16 * k, moment);
    setF64(LOOKED + 16 * k + 8, sign * speedAt(p, moment));
  }
  let one = -1;
  let two = -1;
  for (let k = 0; k <= LOOKS; k++) {
    const value = looked(k);
    if (k > 0 && looked(k - 1) > value) continue;
    if (k < LOOKS && looked(k + 1) >= value) continue;
    if (one < 0 || value > looked(one)) {
      two = one;
      one = k;
    } else if (two < 0 || value > looked(two)) two = k;
  }
  if (one < 0) one = LOOKS;
  around(p, one, sign);
  if (two < 0 || looked(two) < looked(one) - RIVAL_MPS) return;
  const moment = foundMoment;
  const value = foundMps;
  around(p, two, sign);
  if (foundMps > value) return;
  foundMoment = moment;
  foundMps = value;
}

function looked(k: i32): f64 {
  return f64At(LOOKED + 16 * k + 8);
}

function lookedAt(k: i32): f64 {
  return f64At(LOOKED + 16 * k);
}

/** (r/R)² of a point at a moment or between two. */
function ratioAt(p: i32, moment: f64): f64 {
  see(p, moment);
  return seenEast * seenEast + seenNorth * seenNorth;
}

/**
 * The peak between three moments where a corner of the wind passes between them: at the corner, or on the smooth flank
 * that the highest moment `m` known lies on. False where no corner passes, or where what is found is not higher than that.
 */
function atCorner(
  p: i32, low: f64, fLow: f64, middle: f64, fMiddle: f64, high: f64, fHigh: f64, m: f64, fm: f64, sign: f64, turns: boolean,
): boolean {
  let corner: f64 = -1;
  let top: f64 = -1e30;
  let left = low;
  let fLeft = fLow;
  let right = high;
  let fRight = fHigh;
  if (turns) {
    corner = middle;
    top = fMiddle;
    if (middle < m) {
      left = middle;
      fLeft = fMiddle;
    } else if (middle > m) {
      right = middle;
      fRight = fMiddle;
    }
  }
  const a = ratioAt(p, low);
  const b = ratioAt(p, middle);
  const c = ratioAt(p, high);
  for (let k = 0; k < 4; k++) {
    const x: f64 = k < 2 ? 1 : INFLOW_X;
    const after = (k & 1) !== 0;
    const xa = (after ? b : a) - x;
    const xb = (after ? c : b) - x;
    if ((xa < 0) === (xb < 0)) continue;
    const from = after ? middle : low;
    const to = after ? high : middle;
    let t = from + ((to - from) * xa) / (xa - xb);
    const off = ratioAt(p, t) - x;
    // one more step of the secant
    if ((off < 0) === (xa < 0)) t += ((to - t) * off) / (off - xb);
    else t = from + ((t - from) * xa) / (xa - off);
    const value = sign * speedAt(p, t);
    if (value > top) {
      corner = t;
      top = value;
    }
    if (t < m && t > left) {
      left = t;
      fLeft = value;
    } else if (t > m && t < right) {
      right = t;
      fRight = value;
    }
  }
  if (corner < 0) return false;
  if (top < fm) {
    narrow(p, left, fLeft, m, fm, right, fRight, sign);
    return true;
  }
  const beside = CORNER_STEP * (high - low);
  const before = sign * speedAt(p, corner - beside > low ? corner - beside : low);
  const behind = sign * speedAt(p, corner + beside < high ? corner + beside : high);
  foundMoment = corner;
  foundMps = top;
  return before <= top && behind <= top;
}

/** One of four lines that part the sectors' pairs: what tells on which side of it a wind blows from. */
function sideOf(line: i32, east: f64, north: f64): f64 {
  if (line === 0) return -east;
  if (line === 1) return -north;
  return line === 2 ? north - east : -north - east;
}

/**
 * Moment between two at which a point's wind turns across a sector where the ratio bends; −1 for none. Its value is
 * `foundMps`. The wind at the earlier one is given; that at the later one is left behind.
 */
function bendBetween(p: i32, from: f64, east0: f64, north0: f64, to: f64): f64 {
  laterMps = speedAt(p, to);
  laterEast = windEast;
  laterNorth = windNorth;
  let line: i32 = 0;
  let before: f64 = 0;
  let after: f64 = 0;
  for (; line < 4; line++) {
    before = sideOf(line, east0, north0);
    after = sideOf(line, windEast, windNorth);
    if ((before < 0) !== (after < 0)) break;
  }
  if (line === 4) return -1;
  const fromEast = -east0 - windEast;
  const fromNorth = -north0 - windNorth;
  const sector: i32 =
    line === 0 ? (fromNorth > 0 ? 0 : 4) : line === 1 ? (fromEast > 0 ? 2 : 6) : line === 2 ? (fromNorth > 0 ? 1 : 5) : fromEast > 0 ? 3 : 7;
  const row = whole(f64At(SURFACE + 8 * p)) + (kind === GUST ? 64 : 0);
  const ratio = f64At(row + 8 * sector);
  if (f64At(row + 8 * ((sector + 7) & 7)) === ratio && f64At(row + 8 * ((sector + 1) & 7)) === ratio) return -1;
  let low = from;
  let high = to;
  let at = low;
  // regula falsi; an end that stays counts half
  let stayed: i32 = 0;
  for (let n = 0; n < 12; n++) {
    at = low - (before * (high - low)) / (after - before);
    foundMps = speedAt(p, at);
    const value = sideOf(line, windEast, windNorth);
    const size = (windEast < 0 ? -windEast : windEast) + (windNorth < 0 ? -windNorth : windNorth);
    if (value < BEND_SHARE * size && value > -BEND_SHARE * size) break;
    if ((value < 0) === (before < 0)) {
      low = at;
      before = value;
      if (stayed === 1) after *= 0.5;
      stayed = 1;
    } else {
      high = at;
      after = value;
      if (stayed === -1) before *= 0.5;
      stayed = -1;
    }
  }
  return at;
}

/**
 * Looks for bends of the surface's ratio between three moments. True where the peak stands at one; otherwise
 * `bendLow` and `bendHigh` are the moments between which the ratio is smooth about the middle.
 */
function atBend(p: i32, low: f64, middle: f64, fMiddle: f64, high: f64, sign: f64): boolean {
  bendLow = low;
  bendHigh = high;
  // those beside the middle may have been bounds
  const fLow = sign * speedAt(p, low);
  let fHigh = fMiddle;
  fBendLow = fLow;
  laterEast = windEast;
  laterNorth = windNorth;
  if (low < middle) {
    const bend = bendBetween(p, low, laterEast, laterNorth, middle);
    if (bend >= 0) {
      bendLow = bend;
      fBendLow = sign * foundMps;
    }
  }
  if (middle < high) {
    const bend = bendBetween(p, middle, laterEast, laterNorth, high);
    fHigh = sign * laterMps;
    if (bend >= 0) {
      bendHigh = bend;
      fBendHigh = sign * foundMps;
    } else fBendHigh = fHigh;
  } else fBendHigh = fMiddle;
  const first = bendLow > low && fBendLow >= fMiddle && (bendHigh === high || fBendLow >= fBendHigh);
  if (!first && !(bendHigh < high && fBendHigh >= fMiddle)) return false;
  const at = first ? bendLow : bendHigh;
  const top = first ? fBendLow : fBendHigh;
  const left = first ? low : middle;
  const right = first ? middle : high;
  const fLeft = first ? fLow : fMiddle;
  const fRight = first ? fMiddle : fHigh;
  const before = at - CORNER_STEP * (at - left);
  const behind = at + CORNER_STEP * (right - at);
  const fBefore = sign * speedAt(p, before);
  const fBehind = sign * speedAt(p, behind);
  if (fBefore > top && fBefore >= fBehind) narrow(p, left, fLeft, before, fBefore, at, top, sign);
  else if (fBehind > top) narrow(p, at, top, behind, fBehind, right, fRight, sign);
  else {
    foundMoment = at;
    foundMps = top;
  }
  return true;
}

/** Whether the parabola through three moments tells the wind at another one. */
function agrees(p: i32, moment: f64, l: f64, fl: f64, m: f64, fm: f64, h: f64, fh: f64, sign: f64): boolean {
  const a = (moment - m) * (moment - h) / ((l - m) * (l - h));
  const b = (moment - l) * (moment - h) / ((m - l) * (m - h));
  const c = (moment - l) * (moment - m) / ((h - l) * (h - m));
  const off = sign * speedAt(p, moment) - (a * fl + b * fm + c * fh);
  return off < ROUGH_MPS && off > -ROUGH_MPS;
}

/** The peak about a place of the search. */
function around(p: i32, k: i32, sign: f64): void {
  const top = looked(k);
  const at = lookedAt(k);
  if (k > 1 && k < LOOKS - 1) {
    // where two straight flanks meet, one of which ends at the top
    const before = looked(k - 1);
    const after = looked(k + 1);
    const t0 = lookedAt(k - 1) - at;
    const t2 = lookedAt(k + 1) - at;
    let meet: f64 = 0;
    let height: f64 = 0;
    if ((top - before) * t2 < (after - top) * t0) {
      const rise = (top - before) / -t0;
      const fall = (looked(k + 2) - after) / (lookedAt(k + 2) - lookedAt(k + 1));
      meet = (after - fall * t2 - top) / (rise - fall);
      height = top + rise * meet;
    } else {
      const fall = (after - top) / t2;
      const rise = (before - looked(k - 2)) / (lookedAt(k - 1) - lookedAt(k - 2));
      meet = (top - before + rise * t0) / (rise - fall);
      height = top + fall * meet;
    }
    if (meet > t0 && meet < t2) {
      const value = sign * speedAt(p, at + meet);
      const off = value - height;
      if (value >= top && off < ROUGH_MPS && off > -ROUGH_MPS) {
        foundMoment = at + meet;
        foundMps = value;
        return;
      }
    }
  }
  const from = k > 0 ? k - 1 : 0;
  const to = k < LOOKS ? k + 1 : LOOKS;
  narrow(p, lookedAt(from), looked(from), at, top, lookedAt(to), looked(to), sign);
}

/** The vertex of the parabola through three moments, within them; its height is `foundMps`. */
function vertexOf(low: f64, fLow: f64, middle: f64, fMiddle: f64, high: f64, fHigh: f64): f64 {
  foundMps = fMiddle;
  const t0 = low - middle;
  const t2 = high - middle;
  const bend = ((fLow - fMiddle) * t2 - (fHigh - fMiddle) * t0) / (t0 * t2 * (t0 - t2));
  if (!(bend < 0)) return middle;
  const slope = (fLow - fMiddle - bend * t0 * t0) / t0;
  let vertex = (-0.5 * slope) / bend;
  if (vertex < t0) vertex = t0;
  if (vertex > t2) vertex = t2;
  foundMps = fMiddle + slope * vertex + bend * vertex * vertex;
  return middle + vertex;
}

/** Narrows a bracket until the neighbours of its highest moment are as high, by parabolas and by halves in turn. */
function narrow(p: i32, fromLow: f64, atLow: f64, fromMiddle: f64, atMiddle: f64, fromHigh: f64, atHigh: f64, sign: f64): void {
  let low = fromLow;
  let fLow = atLow;
  let middle = fromMiddle;
  let fMiddle = atMiddle;
  let high = fromHigh;
  let fHigh = atHigh;
  let agreed = false;
  for (let n = 0; n < 50; n++) {
    const lowest = least(fLow, fHigh);
    const width = high - low;
    if (fMiddle - lowest < SEARCHED_MPS || width < 1e-3) break;
    let probe = middle;
    if ((n & 1) === 0 && low < middle && middle < high) probe = vertexOf(low, fLow, middle, fMiddle, high, fHigh);
    const parabola = probe !== middle && probe > low && probe < high;
    const estimate = foundMps;
    if (!parabola) probe = high - middle > middle - low ? 0.5 * (middle + high) : 0.5 * (low + middle);
    const value = sign * speedAt(p, probe);
    if (value > fMiddle) {
      if (probe > middle) {
        low = middle;
        fLow = fMiddle;
      } else {
        high = middle;
        fHigh = fMiddle;
      }
      middle = probe;
      fMiddle = value;
    } else if (probe > middle) {
      high = probe;
      fHigh = value;
    } else {
      low = probe;
      fLow = value;
    }
    if (!parabola) continue;
    // twice: once may be by chance
    const agrees = value - estimate < SEARCHED_MPS && estimate - value < SEARCHED_MPS;
    if (agrees && agreed) break;
    agreed = agrees;
  }
  foundMoment = middle;
  foundMps = fMiddle;
}

/** Adds the hours of the step between two moments, and moves the extremes on. */
function step(p: i32, a: i32, b: i32, ma: f64, mb: f64, sidesA: i32, sidesB: i32): void {
  const any = held | fresh;
  if ((sidesA | sidesB | any) !== 0) {
    for (let i = 0; i < 4; i++) {
      const bit = 1 << i;
      for (let h = 0; h < thresholds; h++) {
        const sideA = (sidesA >> (4 * h)) & bit;
        const sideB = (sidesB >> (4 * h)) & bit;
        let hours: f64 = 0;
        if ((any & bit) === 0 && sideA === sideB) {
          if (sideA === 0) continue;
          hours = timeOf(mb) - timeOf(ma);
        } else {
          const level = f32At(LEVELS + 4 * h);
          let from = ma;
          let wind = f32At(a + 4 * i);
          if ((held & bit) !== 0) {
            hours += above(p + i, from, wind, f64At(HELD + 16 * i), f64At(HELD + 16 * i + 8), level);
            from = f64At(HELD + 16 * i);
            wind = f64At(HELD + 16 * i + 8);
          }
          if ((fresh & bit) !== 0 && f64At(FRESH + 16 * i) > from) {
            hours += above(p + i, from, wind, f64At(FRESH + 16 * i), f64At(FRESH + 16 * i + 8), level);
            from = f64At(FRESH + 16 * i);
            wind = f64At(FRESH + 16 * i + 8);
          }
          hours += above(p + i, from, wind, mb, f32At(b + 4 * i), level);
        }
        const to = HOURS + h * COLUMN + 8 * (p + i);
        setF64(to, f64At(to) + hours);
      }
    }
  }
  if (ahead !== 0) for (let k = 0; k < 64; k += 8) setF64(HELD + k, f64At(AHEAD + k));
  held = ahead;
  fresh = 0;
  ahead = 0;
}

/** Time of a moment or of one between two, hours. */
function timeOf(moment: f64): f64 {
  const m = whole(moment);
  const at = hoursAt + (m << 3);
  const w = moment - <f64>m;
  return w > 0 ? f64At(at) + w * (f64At(at + 8) - f64At(at)) : f64At(at);
}

/** Hours between two moments during which the wind is at or above a level; it passes the level at most once. */
function above(p: i32, from: f64, fFrom: f64, to: f64, fTo: f64, level: f64): f64 {
  if (fFrom >= level && fTo >= level) return timeOf(to) - timeOf(from);
  if (fFrom < level && fTo < level) return 0;
  setF64(CROSSINGS + 8 * p, f64At(CROSSINGS + 8 * p) + 1);
  let low = from;
  let fLow = fFrom - level;
  let high = to;
  let fHigh = fTo - level;
  let at = low - (fLow * (high - low)) / (fHigh - fLow);
  // regula falsi; an end that stays counts half
  let stayed = 0;
  for (let n = 0; n < 30 && high - low > 0.02; n++) {
    const value = speedAt(p, at) - level;
    if ((value < 0) === (fLow < 0)) {
      low = at;
      fLow = value;
      if (stayed === 1) fHigh *= 0.5;
      stayed = 1;
    } else {
      high = at;
      fHigh = value;
      if (stayed === -1) fLow *= 0.5;
      stayed = -1;
    }
    at = low - (fLow * (high - low)) / (fHigh - fLow);
    // what is left is a straight line
    if (value < CROSSED_MPS && value > -CROSSED_MPS) break;
  }
  return fTo >= level ? timeOf(to) - timeOf(at) : timeOf(at) - timeOf(from);
}
