import { poolDeflate } from '../io/deflate.js';
import { pageAssets, pageCoast } from '../io/page-assets.js';
import { mapSvg } from '../picture/map-svg.js';
import { mapPage } from '../picture/page-html.js';
import { mapInput } from './map-input.js';
import type { SwathResult } from './swath-result.js';

/** The content of `map.html`. */
export async function mapPageOf(result: SwathResult): Promise<string> {
  const { model, swath, provenance, period } = result;
  const map = mapInput(result);
  return mapPage(
    {
      version: provenance.version,
      storm: map.storm,
      track: model.completed.track,
      recipe: model.recipe,
      recipeText: map.recipe,
      lowestLevelMps: result.levels[0] ?? 0,
      fromMs: period.fromMs,
      toMs: period.toMs,
      peak: map.peak,
      quantity: result.quantity,
      isotachs: result.isotachs,
      places: map.places ?? [],
      zones: map.zones ?? [],
      cautions: result.cautions,
      swath,
      mapSvg: mapSvg(map),
      coast: result.land?.shape ? JSON.stringify(result.land.shape) : pageCoast(),
      coastCredit: map.coastCredit ?? 'Natural Earth',
    },
    { deflate: poolDeflate, assets: pageAssets() },
  );
}
