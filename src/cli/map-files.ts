import { pictureCoast } from '../io/coast-picture.js';
import { svgToPng } from '../io/png.js';
import { RECIPE_ENTRIES, type Recipe, STANDARD_RECIPE } from '../model/recipe.js';
import { type MapInput, mapSvg } from '../picture/map-svg.js';
import { peakOf } from '../write/summary.js';
import type { SwathResult } from './swath-files.js';

/** What the map is drawn from. */
export function mapInput(result: SwathResult): MapInput {
  const { model, swath, provenance } = result;
  const peak = peakOf(swath);
  return {
    storm: { id: provenance.storm, name: provenance.stormName ?? null },
    fixes: model.completed.fixes
      .filter((fix) => fix.timeMs >= result.period.fromMs && fix.timeMs <= result.period.toMs)
      .map((fix) => ({
        timeMs: fix.timeMs,
        latDeg: fix.latDeg,
        lonDeg: fix.lonDeg,
        maxWindMps: fix.maxWindMps.value,
      })),
    isotachs: result.isotachs,
    quantity: result.quantity,
    averagingS: swath.averagingS,
    gustDurationS: swath.gustDurationS,
    peak:
      peak.time === null
        ? null
        : {
            windMps: peak.wind_mps,
            gustMps: peak.gust_mps,
            lonDeg: peak.lon_deg!,
            latDeg: peak.lat_deg!,
            timeMs: Date.parse(peak.time),
          },
    recipe: recipeLine(model.recipe),
    version: provenance.version,
    coast: pictureCoast('50m'),
    centreAt: (timeMs) => model.path.at(timeMs),
  };
}

/** The recipe in one line: its main methods, and whatever differs from the built-in one. */
export function recipeLine(recipe: Recipe): string {
  const main = ['vortex.profile', 'surface.reduction', 'surface.inflow', 'surface.motion'];
  const changed = RECIPE_ENTRIES.filter(
    ({ key }) => recipe[key] !== STANDARD_RECIPE[key] && !main.includes(key) && key !== 'wind.averaging_s',
  );
  return [...main.map((key) => String(recipe[key])), ...changed.map(({ key }) => `${key}=${recipe[key]}`)].join(', ');
}

/** The content of `map.svg`, `map.png` or `map.html`. */
export async function mapFile(name: string, result: SwathResult): Promise<string | Uint8Array> {
  if (name === 'map.html') {
    const { mapPageOf } = await import('./map-page.js');
    return mapPageOf(result);
  }
  const svg = mapSvg(mapInput(result));
  return name === 'map.svg' ? svg : svgToPng(svg);
}
