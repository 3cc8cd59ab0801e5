import { zonesOfGeojson } from '../exposure/zone-geojson.js';
import { readInputText } from '../io/input.js';
import { sourceName } from '../io/lines.js';
import { readPoints } from '../io/points.js';
import type { MapInput } from '../picture/map-input.js';

/** What the user wants to see on the map, and what was odd in it. */
export interface Drawn {
  readonly places: NonNullable<MapInput['places']>;
  readonly zones: NonNullable<MapInput['zones']>;
  readonly cautions: readonly string[];
}

/** Reads the places and zones that go onto the map. */
export async function drawnOf(options: { places?: string; zones?: string }): Promise<Drawn> {
  const places: { name: string; latDeg: number; lonDeg: number }[] = [];
  const cautions: string[] = [];
  if (options.places !== undefined) {
    const read = await readPoints(options.places, {
      values: [],
      onPoint: ({ name, latDeg, lonDeg }) => places.push({ name, latDeg, lonDeg }),
    });
    if (read.skippedCount > 0) {
      const [first] = read.skipped;
      cautions.push(
        `${options.places}: ${read.skippedCount} rows were skipped, the first at line ${first?.line}: ${first?.reason}`,
      );
    }
  }
  if (options.zones === undefined) return { places, zones: [], cautions };
  const file = zonesOfGeojson(await readInputText(options.zones), { source: sourceName(options.zones) });
  for (const row of file.skipped) cautions.push(`${options.zones}: feature ${row.line} was skipped: ${row.reason}`);
  return {
    places,
    zones: file.zones.map(({ name, polygons }) => ({
      name,
      polygons: polygons.map((rings) => rings.map((ring) => ring.map(([lon, lat]) => [lon, lat]))),
    })),
    cautions: [...cautions, ...file.cautions],
  };
}
