import { pageCoast } from '../../src/io/page-assets.js';
import { mapSvg } from '../../src/picture/map-svg.js';
import type { PageInput } from '../../src/picture/page-html.js';
import { recipeText } from '../../src/picture/words.js';
import { knots } from '../../src/units.js';
import type { Made } from './invented.js';

/** The page of an invented storm with a place and a zone of one's own. */
export function pageInputOf({ track, model, swath, input }: Made): PageInput {
  const [first] = track.fixes;
  const [x, y] = [first!.lonDeg, first!.latDeg];
  return {
    version: '0.0.0',
    storm: input.storm,
    track,
    recipe: model.recipe,
    recipeText: recipeText(model.recipe),
    lowestLevelMps: knots(34),
    fromMs: model.path.startMs,
    toMs: model.path.endMs,
    peak: input.peak,
    quantity: 'wind',
    isotachs: input.isotachs,
    places: [{ name: 'Halse <b>bold</b>', lonDeg: x, latDeg: y }],
    zones: [
      {
        name: 'Merrow',
        polygons: [
          [
            [
              [x, y],
              [x + 1, y],
              [x + 1, y + 1],
              [x, y],
            ],
          ],
        ],
      },
    ],
    cautions: ['a caution with <i>markup</i>'],
    swath,
    mapSvg: mapSvg(input),
    coast: pageCoast(),
    coastCredit: 'Natural Earth',
  };
}
