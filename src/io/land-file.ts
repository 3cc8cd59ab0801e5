import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { basename } from 'node:path';
import { InputError } from '../errors.js';
import { type CoastScale, landFromTopology } from '../land/coast.js';
import { type Land, landOf } from '../land/land.js';
import { landFromGeoJson } from '../land/polygons.js';
import { type InputRecord, readInputText, sha256Hex } from './input.js';

const require = createRequire(import.meta.url);
const kept = new Map<CoastScale, Land>();

/** The land of the world that comes with the package, by the detail of its coast; read once   [NaturalEarth2018]. */
export function worldLand(scale: CoastScale): Land {
  const known = kept.get(scale);
  if (known) return known;
  let text: string;
  try {
    text = readFileSync(require.resolve(`world-atlas/land-${scale}.json`), 'utf8');
  } catch (cause) {
    throw new InputError(
      'land.missing',
      `the coast of the package world-atlas (land-${scale}.json) is missing; install the dependencies again (npm ci), or give your own land with --land FILE`,
      { cause },
    );
  }
  const land = landOf(landFromTopology(JSON.parse(text), scale));
  kept.set(scale, land);
  return land;
}

/**
 * Land from a file of the user's: GeoJSON polygons, longitude and latitude on WGS 84.
 * @throws InputError `io.missing`, `io.read`, `land.json`, `land.geojson`, `land.coordinates`, `land.crs`, `land.ring`, `land.empty`
 */
export async function readLand(path: string): Promise<{ land: Land; record: InputRecord }> {
  const text = await readInputText(path);
  const name = path === '-' ? 'standard input' : basename(path);
  let document: unknown;
  try {
    document = JSON.parse(text);
  } catch (cause) {
    throw new InputError(
      'land.json',
      `${name}: this is no JSON (${(cause as Error).message}); land is GeoJSON with polygons (RFC 7946)`,
      { cause },
    );
  }
  return { land: landOf(landFromGeoJson(document, { source: name })), record: { name, sha256: sha256Hex(text) } };
}
