import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { feature } from 'topojson-client';
import type { Coast } from '../picture/map-svg.js';

const require = createRequire(import.meta.url);

/** Scales of the Natural Earth coast for pictures. */
export type CoastDetail = '10m' | '50m' | '110m';

/** The land of Natural Earth as pictures want it [NaturalEarth]. */
export function pictureCoast(detail: CoastDetail): Coast {
  const topology = JSON.parse(readFileSync(require.resolve(`world-atlas/land-${detail}.json`), 'utf8'));
  return feature(topology, topology.objects.land) as unknown as Coast;
}
