import type { PolygonCoordinates } from '../isotach/area.js';
import type { SurfaceMap } from '../land/surface-map.js';
import type { WindModel } from '../model/wind.js';
import type { Coast, MapInput } from '../picture/map-input.js';
import type { Swath } from '../swath/swath.js';
import type { Provenance } from '../write/provenance.js';

/** Everything that the files of one run are made from. */
export interface SwathResult {
  readonly model: WindModel;
  readonly swath: Swath;
  readonly isotachs: readonly {
    thresholdMps: number;
    upperMps: number | null;
    polygons: readonly PolygonCoordinates[];
    areaM2: number;
  }[];
  readonly quantity: 'wind' | 'gust';
  readonly bands: boolean;
  readonly levels: readonly number[];
  readonly classOf: (thresholdMps: number) => string | null;
  readonly cautions: readonly string[];
  readonly period: { readonly fromMs: number; readonly toMs: number };
  readonly provenance: Provenance;
  /** what the user wants to see on the map */
  readonly places: NonNullable<MapInput['places']>;
  readonly zones: NonNullable<MapInput['zones']>;
  /** the land that was used; its shape where it is the user's own */
  readonly land: { readonly name: string; readonly text: string; readonly shape: Coast | null } | null;
  /** the surface, where its bands are wanted in the raster */
  readonly surface: SurfaceMap | null;
}
