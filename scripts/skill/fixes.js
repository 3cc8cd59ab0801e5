// The fixes that the calibration and the skill table count: over water at least 100 km off land, status HU or TS, synoptic
// hours, translation below 25 m/s.
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { feature } from 'topojson-client';
import { distanceM } from '../../dist/earth.js';
import { makeRecipe } from '../../dist/model/recipe.js';
import { windModel } from '../../dist/model/wind.js';
import { readTracksFromText } from '../../dist/track/read/read.js';
import { dayMeans } from '../../dist/track/relations/size.js';

const require = createRequire(import.meta.url);
const OFFSHORE_M = 100_000;
/** points of the coast are this far apart, degrees */
const SPACING_DEG = 0.05;
const BIN_DEG = 2;

let coast = null;
function coastBins() {
  if (coast) return coast;
  const world = JSON.parse(readFileSync(require.resolve('world-atlas/land-50m.json'), 'utf8'));
  const rings = feature(world, world.objects.land).features.flatMap(({ geometry }) =>
    (geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates).flat(),
  );
  const bins = new Map();
  for (const ring of rings)
    for (let i = 1; i < ring.length; i++) {
      const [a, b] = [ring[i - 1], ring[i]];
      const n = Math.max(1, Math.ceil(Math.hypot(b[0] - a[0], b[1] - a[1]) / SPACING_DEG));
      for (let k = 0; k < n; k++) {
        const lonDeg = a[0] + ((b[0] - a[0]) * k) / n;
        const latDeg = a[1] + ((b[1] - a[1]) * k) / n;
        const key = `${Math.floor(lonDeg / BIN_DEG)},${Math.floor(latDeg / BIN_DEG)}`;
        if (!bins.has(key)) bins.set(key, []);
        bins.get(key).push({ lonDeg, latDeg });
      }
    }
  coast = { bins, rings };
  return coast;
}

function onLand({ lonDeg, latDeg }) {
  let inside = false;
  for (const ring of coastBins().rings)
    for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
      const [xi, yi] = ring[i];
      const [xj, yj] = ring[j];
      if (yi > latDeg !== yj > latDeg && lonDeg < ((xj - xi) * (latDeg - yi)) / (yj - yi) + xi) inside = !inside;
    }
  return inside;
}

/** Whether a place is over water and at least 100 km from the coast (Natural Earth 1:50 million). */
export function offshore(place) {
  const { bins } = coastBins();
  const i0 = Math.floor(place.lonDeg / BIN_DEG);
  const j0 = Math.floor(place.latDeg / BIN_DEG);
  const wide = Math.ceil(1 / Math.cos((place.latDeg * Math.PI) / 180)) + 1;
  for (let i = -wide; i <= wide; i++)
    for (let j = -1; j <= 1; j++) {
      const column = ((((i0 + i + 90) % 180) + 180) % 180) - 90;
      for (const point of bins.get(`${column},${j0 + j}`) ?? []) if (distanceM(place, point) < OFFSHORE_M) return false;
    }
  return !onLand(place);
}

export const isCounted = (fix, translationMps) => {
  const date = new Date(fix.timeMs);
  return (
    (fix.status === 'HU' || fix.status === 'TS') &&
    date.getUTCHours() % 6 === 0 &&
    date.getUTCMinutes() === 0 &&
    translationMps < 25 &&
    offshore(fix)
  );
};

const meanKm = (row, all) => {
  const radii = row?.radiiM ?? [];
  const known = radii.filter((radius) => radius > 0);
  return known.length === 0 || (all && known.length < 4)
    ? null
    : known.reduce((sum, r) => sum + r, 0) / known.length / 1000;
};

/** The counted fixes of a file with what the relations use. */
export function offshoreFixes(text, source) {
  const recipe = makeRecipe(undefined, ['vortex.radii=ignore', 'completion.max_gap_h=240']);
  return readTracksFromText(text, { source }).flatMap((track) => {
    const { completed, path } = windModel(track, recipe);
    const winds = completed.fixes.map((fix) => fix.maxWindMps.value);
    const deficits = completed.fixes.map((fix) => fix.ambientPressurePa.value - fix.centralPressurePa.value);
    const times = completed.fixes.map((fix) => fix.timeMs);
    const dayWind = dayMeans(times, winds);
    const dayDeficit = dayMeans(times, deficits);
    let highest = 0;
    return completed.fixes.flatMap(({ fix }, i) => {
      highest = Math.max(highest, winds[i]);
      const state = path.at(fix.timeMs);
      const translationMps = Math.hypot(state.motionEastMps, state.motionNorthMps);
      if (!isCounted(fix, translationMps)) return [];
      const rows = [34, 50, 64].map((kt) =>
        fix.windRadii.find(({ thresholdMps }) => Math.abs(thresholdMps - (kt * 1852) / 3600) < 0.1),
      );
      return [
        {
          storm: track.id,
          timeMs: fix.timeMs,
          latDeg: Math.abs(fix.latDeg),
          windMps: winds[i],
          state,
          translationMps,
          deficitHpa: fix.centralPressurePa === null ? null : deficits[i] / 100,
          dayWindMps: dayWind[i],
          dayDeficitPa: dayDeficit[i],
          highestMps: highest,
          meanOf34Km: meanKm(rows[0], false),
          means: rows.map((row) => meanKm(row, true)),
          radiiKm: rows.map((row) => [0, 1, 2, 3].map((j) => (row?.radiiM[j] ?? 0) / 1000)),
        },
      ];
    });
  });
}

/** The inputs of the size relation as a row. */
export function averagesOf(fixes) {
  return new Map(
    fixes.map((fix) => [
      fix,
      [
        1,
        Math.log(fix.windMps / 35),
        Math.log(fix.dayWindMps / 35),
        Math.log(fix.dayDeficitPa / 2500),
        fix.latDeg - 20,
        fix.translationMps - 5,
        Math.log(Math.max(1, fix.highestMps / fix.windMps)),
      ],
    ]),
  );
}
