import { coastDetailFor, pictureCoast } from '../io/coast-picture.js';
import type { MapInput } from '../picture/map-input.js';
import { recipeText } from '../picture/words.js';
import { peakOf } from '../write/summary.js';
import type { SwathResult } from './swath-result.js';

/** What the map of a swath is drawn from. */
export function mapInput(result: SwathResult): MapInput {
  const { model, swath, provenance, period } = result;
  const peak = peakOf(swath);
  const fixes = model.completed.fixes
    .filter((fix) => fix.timeMs >= period.fromMs && fix.timeMs <= period.toMs)
    .map(({ timeMs, latDeg, lonDeg, maxWindMps }) => ({ timeMs, latDeg, lonDeg, maxWindMps: maxWindMps.value }));
  return {
    storm: { id: provenance.storm, name: provenance.stormName ?? null },
    fixes,
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
    recipe: [recipeText(model.recipe), ...(result.land ? [result.land.text] : [])].join('; '),
    version: provenance.version,
    coast: result.land?.shape ?? pictureCoast(coastDetailFor(fixes.map((fix) => [fix.lonDeg, fix.latDeg]))),
    ...(result.land?.shape ? { coastCredit: result.land.name } : {}),
    places: result.places,
    zones: result.zones,
    centreAt: (timeMs) => model.path.at(timeMs),
  };
}
