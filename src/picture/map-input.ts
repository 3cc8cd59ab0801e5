import type { GeoJSON } from 'geojson';
import type { PictureIsotach } from './isotach-paths.js';

/** One moment of the track. */
export interface MapFix {
  readonly timeMs: number;
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly maxWindMps: number;
}

/** Where and when the strongest wind blew. */
export interface MapPeak {
  readonly windMps: number;
  readonly gustMps: number;
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly timeMs: number;
}

/** Polygons of land as a sphere wants them: as `topojson-client` gives the land of world-atlas. */
export type Coast = GeoJSON;

/** An area of the user's own, as RFC 7946 has it [RFC7946]. */
export interface MapZone {
  readonly name: string;
  readonly polygons: PictureIsotach['polygons'];
}

export interface MapPlace {
  readonly name: string;
  readonly lonDeg: number;
  readonly latDeg: number;
}

export interface MapInput {
  /** the storm's name and identifier as the file has them */
  readonly storm: { readonly id: string; readonly name: string | null };
  readonly fixes: readonly MapFix[];
  /** by rising threshold */
  readonly isotachs: readonly PictureIsotach[];
  readonly quantity: 'wind' | 'gust';
  /** averaging period of the sustained wind and of the gust */
  readonly averagingS: number;
  readonly gustDurationS: number;
  /** null where there is no wind at all */
  readonly peak: MapPeak | null;
  /** the recipe in one line */
  readonly recipe: string;
  readonly version: string;
  readonly coast: Coast | null;
  /** whose coast it is; Natural Earth by default */
  readonly coastCredit?: string;
  /** the user's own places and zones, in this order of drawing: zones, places */
  readonly zones?: readonly MapZone[];
  readonly places?: readonly MapPlace[];
  /** the centre at any time, for marks between fixes; the fixes alone without it */
  readonly centreAt?: (timeMs: number) => { readonly lonDeg: number; readonly latDeg: number };
}

/** A peak that is one: a wind, a place and a time. A swath without wind has none. */
export function knownPeak(peak: MapPeak | null): MapPeak | null {
  if (!peak || !(peak.windMps > 0)) return null;
  return [peak.lonDeg, peak.latDeg, peak.timeMs].every(Number.isFinite) ? peak : null;
}
