// Where things stand in the kernel's memory, bytes. Shared by AssemblyScript, its twin and the loaders.

/** Points that one call takes at most; whole groups of four. */
export const MOST_POINTS: i32 = 1024;
/** Winds whose hours are counted at most. */
export const MOST_THRESHOLDS: i32 = 8;

/** offsets of four points from the first of them, in units of the earth's radius: x, y, z; f32 × 4 each */
export const QUAD: i32 = 4096;
/** winds of three moments in turn, m/s; f32 × 4 each */
export const WINDS: i32 = 4144;
/** the wind that a moment must have to matter, m/s; f32 × 4 */
export const NEED: i32 = 4192;
/** least distance from the centre so far, m², f32 × 4 */
export const NEAR: i32 = 4208;
/** of the moment sampled last: the least distance, m², the highest wind, m/s, and the greatest distance, m²; f32 each */
export const EXTREMES: i32 = 4224;
/** −1 for each point: no moment; f32 × 4 */
export const NONE: i32 = 4240;
/** thresholds, m/s, f32 × 8, infinite where there is none */
export const LEVELS: i32 = 4256;
/** the taper: distance from which it fades, m²; outer radius, m; one over its width, 1/m; a sixth over the earth's radius squared, 1/m²; f32 each */
export const FADE: i32 = 4288;
/** extremes inside a step, moment and wind for each of four points, f64 × 8 each: one that was found at the step's start */
export const HELD: i32 = 4352;
/** one that was found at its end */
export const FRESH: i32 = 4416;
/** one inside the next step */
export const AHEAD: i32 = 4480;
/** moments that a search looked at and their winds, f64 × 2 × 9 */
export const LOOKED: i32 = 4544;
/** room for the products s·cos kφ and s·sin kφ of four points, f32 × 4 × 48 */
export const BASIS: i32 = 4704;
/** what the storm is made of, f64 × 32: see `Storm` in `trace.ts` */
export const STORM: i32 = 5504;
/** columns of points, f64 × MOST_POINTS each */
export const POINTS: i32 = 8192;
export const COLUMN: i32 = MOST_POINTS * 8;
/** columns: unit vector */
export const X: i32 = POINTS;
export const Y: i32 = POINTS + COLUMN;
export const Z: i32 = POINTS + 2 * COLUMN;
/** columns: peak wind, its moment, its parts east and north in the frame at the centre, least distance from the centre, m */
export const WIND: i32 = POINTS + 3 * COLUMN;
export const MOMENT: i32 = POINTS + 4 * COLUMN;
export const EAST: i32 = POINTS + 5 * COLUMN;
export const NORTH: i32 = POINTS + 6 * COLUMN;
export const LEAST: i32 = POINTS + 7 * COLUMN;
/** columns: hours at or above each threshold */
export const HOURS: i32 = POINTS + 8 * COLUMN;
/** column: how often the wind passes any threshold */
export const CROSSINGS: i32 = POINTS + 16 * COLUMN;
/** columns: the second highest maximum in time that was looked at, and its moment */
export const RIVAL: i32 = POINTS + 17 * COLUMN;
export const RIVAL_MOMENT: i32 = POINTS + 18 * COLUMN;
/** column: where the ratios of the point's surface stand: 8 of the wind, 8 of the gust, the highest of each, f64 each */
export const SURFACE: i32 = POINTS + 19 * COLUMN;
/** from here on: what a storm needs */
export const HEAP: i32 = POINTS + 20 * COLUMN;

/** numbers of {@link STORM} */
export const FRAMES: i32 = 0;
export const MOMENTS: i32 = 1;
export const LEGS: i32 = 2;
export const RUNS: i32 = 3;
export const RUN_COUNT: i32 = 4;
export const GROUPS: i32 = 5;
export const LAST_ROW: i32 = 6;
export const OUTER: i32 = 7;
export const WIND_TABLES: i32 = 8;
export const WIND_HARMONICS: i32 = 9;
export const THRESHOLDS: i32 = 10;
export const TIMES: i32 = 11;
export const TAPER: i32 = 12;
export const PARTS: i32 = 13;
export const RIVALS: i32 = 14;
