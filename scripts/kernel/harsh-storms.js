// Seeded harsh storms, and the judgement of the fast swath on one of them.
import { destination } from '../../dist/earth.js';
import { windOf } from '../../dist/model/wind.js';
import { exactSwath, shareAbove, stepTimes } from '../../dist/swath/exact.js';
import { cellCentre, gridOver, projection } from '../../dist/swath/grid.js';
import { peakSwath } from '../../dist/swath/peak.js';
import { bareFix } from '../../dist/track/track.js';

/** What the fast swath promises. */
export const CONTRACT = {
  leastMps: 8,
  peakMps: 0.05,
  directionDeg: 2,
  timeS: 60,
  hoursShare: 0.01,
  hoursFloor: 1 / 60,
};

const KINDS = ['straight', 'stall', 'loop', 'fast', 'eyewall', 'zigzag'];

/** Uniform numbers in 0–1 from a seed (mulberry32). */
export function generator(seed) {
  let state = Math.imul(seed, 0x9e3779b1) | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

/** A storm of 24 to 48 hours and a window of `edge` × `edge` cells at a random place of its track. */
export function harshStorm(seed, { edge }) {
  const random = generator(seed);
  const kind = KINDS[seed % KINDS.length];
  const place = ['north', 'south', 'antimeridian', 'equator'][Math.floor(random() * 4)];
  const south = place === 'south' || (place === 'antimeridian' && random() < 0.5);
  let lat = place === 'equator' ? 1.5 : 10 + 25 * random();
  if (south) lat = -lat;
  let lon = place === 'antimeridian' ? 179.5 : -180 + 360 * random();
  let bearing = 360 * random();
  let speed = kind === 'fast' ? 22 : 1 + 10 * random();
  let vmax = 20 + 50 * random();
  let rmax = random() < 0.4 ? 8000 : 10_000 + 60_000 * random();
  const count = 5 + Math.floor(random() * 4);
  const fixes = [];
  let timeMs = Date.UTC(2031, 8, 1);
  for (let i = 0; i < count; i++) {
    fixes.push({
      ...bareFix({ timeMs, latDeg: lat, lonDeg: lon, line: i + 2 }),
      maxWindMps: vmax,
      averagingS: 60,
      radiusOfMaxWindM: rmax,
    });
    const hours = random() < 0.15 ? 1 + 4 * random() : 6;
    if (kind === 'stall' && i === 2) speed = 0;
    if (kind === 'stall' && i === 4) speed = 8;
    if (kind === 'loop') bearing += 50 + 60 * random();
    else if (kind === 'zigzag') bearing += 240 * (random() - 0.5);
    else bearing += 40 * (random() - 0.5);
    if (kind !== 'fast' && kind !== 'stall') speed = Math.max(0.3, speed + 4 * (random() - 0.5));
    vmax = Math.min(85, Math.max(15, vmax + 16 * (random() - 0.5)));
    if (kind === 'eyewall') rmax = i % 2 === 0 ? Math.min(80_000, rmax * 3.2) : Math.max(8000, rmax / 3.5);
    else rmax = Math.min(90_000, Math.max(8000, rmax * (0.8 + 0.45 * random())));
    const next = destination({ latDeg: lat, lonDeg: lon }, { bearingDeg: bearing, distanceM: speed * hours * 3600 });
    lat = next.latDeg;
    lon = next.lonDeg;
    timeMs += Math.round(hours * 60) * 60_000;
  }
  const track = { id: `H${seed}`, name: null, basin: null, kind: 'drawn', format: 'csv', cautions: [], fixes };
  const fix = fixes[Math.floor(random() * fixes.length)];
  const degrees = 0.02 * 10 ** random();
  const away = destination(fix, { bearingDeg: 360 * random(), distanceM: 60_000 * random() ** 2 * (degrees / 0.04) });
  const projected = random() < 0.25;
  const cell = projected ? Math.round(degrees * 111_000) : Number(degrees.toFixed(3));
  const crs = projected ? `+proj=laea +lat_0=${away.latDeg.toFixed(1)} +lon_0=${away.lonDeg.toFixed(1)}` : 'EPSG:4326';
  const [x, y] = projection(crs).forward(away.lonDeg, away.latDeg);
  const half = (edge * cell) / 2;
  const grid = gridOver({ crs, bounds: [x - half, y - half, x + half, y + half], cell });
  return { track, grid, kind: `${kind}, ${place}, ${(rmax / 1000).toFixed(0)} km` };
}

/**
 * The largest errors in cells of 8 m/s or more: `below` the exact peak; `above` any wind of the exact model within half a
 * minute; direction against the exact one at the same moment; time, where the exact wind at the time that was found is
 * below the exact peak; hours, in units of what is promised, outside those of winds higher or lower by 0.05 m/s.
 */
export async function judge(model, grid, options = {}) {
  const fast = await peakSwath(model, grid, { jobs: 1, ...options });
  const exact = exactSwath(model, grid);
  const { inverse } = projection(grid.crs);
  const found = { cells: 0, failed: 0, below: 0, above: 0, directionDeg: 0, timeS: 0, hours: 0 };
  const fields = new Map();
  const fieldAt = (timeMs) => {
    const key = Math.round(timeMs / 2000) * 2000;
    if (!fields.has(key)) fields.set(key, model.fieldAt(Math.min(model.path.endMs, Math.max(model.path.startMs, key))));
    return fields.get(key);
  };
  const times = stepTimes(model.path.startMs, model.path.endMs, 60);
  /** how far hours lie outside those that winds higher and lower by what is promised of winds would have */
  const hoursOff = (place, h, counted) => {
    const winds = times.map((time) => windOf(fieldAt(time), place).speedMps);
    const { thresholdMps } = exact.hoursAbove[h];
    const hoursAt = (threshold) => {
      let sum = 0;
      for (let i = 1; i < winds.length; i++)
        sum += shareAbove(winds[i - 1], winds[i], threshold) * ((times[i] - times[i - 1]) / 3_600_000);
      return sum;
    };
    const [least, most] = [hoursAt(thresholdMps + CONTRACT.peakMps), hoursAt(thresholdMps - CONTRACT.peakMps)];
    return Math.max(0, least - counted, counted - most);
  };
  for (let k = 0; k < exact.windMps.length; k++) {
    const peak = exact.windMps[k];
    if (!(peak >= CONTRACT.leastMps)) continue;
    const [lonDeg, latDeg] = inverse(...cellCentre(grid, k % grid.nx, Math.floor(k / grid.nx)));
    const off = fast.windMps[k] - peak;
    const timeMs = fast.originMs + fast.peakTimeS[k] * 1000;
    const then = windOf(model.fieldAt(timeMs), { lonDeg, latDeg });
    let highest = Math.max(peak, then.speedMps);
    for (let s = -30; off > 0.03 && s <= 30; s += 2)
      highest = Math.max(highest, windOf(fieldAt(timeMs + s * 1000), { lonDeg, latDeg }).speedMps);
    const turn = Math.abs(((fast.windFromDeg[k] - then.fromDeg + 540) % 360) - 180);
    const apartS = Math.abs(fast.peakTimeS[k] - exact.peakTimeS[k]);
    const lateS = then.speedMps < peak - CONTRACT.peakMps ? apartS : 0;
    let hours = 0;
    for (const [h, { hours: counted }] of exact.hoursAbove.entries()) {
      const floor = Math.max(CONTRACT.hoursFloor, CONTRACT.hoursShare * counted[k]);
      const apart = Math.abs(fast.hoursAbove[h].hours[k] - counted[k]);
      if (apart > floor) hours = Math.max(hours, hoursOff({ lonDeg, latDeg }, h, fast.hoursAbove[h].hours[k]) / floor);
      else hours = Math.max(hours, apart / floor);
    }
    const errors = { below: -off, above: fast.windMps[k] - highest, directionDeg: turn, timeS: lateS, hours };
    found.cells++;
    const bad =
      errors.below > CONTRACT.peakMps ||
      errors.above > CONTRACT.peakMps ||
      turn > CONTRACT.directionDeg ||
      lateS > CONTRACT.timeS ||
      hours > 1;
    if (bad) found.failed++;
    for (const key of Object.keys(errors)) found[key] = Math.max(found[key], errors[key]);
  }
  return found;
}
