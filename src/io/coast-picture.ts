import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { feature } from 'topojson-client';
import type { CoastDetail } from '../picture/coast-near.js';
import type { Coast } from '../picture/map-svg.js';

export { coastDetailFor } from '../picture/coast-near.js';

const require = createRequire(import.meta.url);

/** The land of Natural Earth as pictures want it [NaturalEarth]. */
export function pictureCoast(detail: CoastDetail): Coast {
  const topology = JSON.parse(readFileSync(require.resolve(`world-atlas/land-${detail}.json`), 'utf8'));
  return feature(topology, topology.objects.land) as unknown as Coast;
}
