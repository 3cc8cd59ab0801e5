// The public interface: what this file exports is kept stable between minor versions.
export { bearingDeg, coriolisPerS, destination, distanceM, EARTH_RADIUS_M, type Place } from './earth.js';
export { GalewakeError, InputError, LimitError, UsageError } from './errors.js';
export { type SiteRecord, siteRecords } from './exposure/sites.js';
export { type Isotach, isotachs } from './isotach/isotachs.js';
export { coastScaleFor, landFromTopology } from './land/coast.js';
export { type Land, landOf } from './land/land.js';
export { landFromGeoJson } from './land/polygons.js';
export type { SurfaceMap } from './land/surface-map.js';
export type { WindField } from './model/field.js';
export { type RadialRow, radialTable } from './model/radial.js';
export {
  makeRecipe,
  RECIPE_ENTRIES,
  type Recipe,
  recipeDocument,
  recipeJsonSchema,
  STANDARD_RECIPE,
} from './model/recipe.js';
export { maximumOf } from './model/round-trip.js';
export { type WindAt, type WindModel, windModel, windOf } from './model/wind.js';
export { averagingFactor, EXPOSURES, type Exposure, gustFactor } from './surface/averaging.js';
export { WIND_SCALES, windClass } from './surface/wind-scale.js';
export { exactSwath } from './swath/exact.js';
export { fitGrid } from './swath/fit.js';
export { cellCentre, type Grid, gridOver } from './swath/grid.js';
export { peakSwath } from './swath/peak.js';
export { surfaceOf } from './swath/surface.js';
export type { Swath } from './swath/swath.js';
export type { CompletedFix, CompletedTrack, Traced } from './track/complete.js';
export type { StormState } from './track/path.js';
export { pickTrack } from './track/pick.js';
export { TRACK_FORMATS } from './track/read/detect.js';
export { readTracks, readTracksFromText } from './track/read/read.js';
export type { Fix, Track, TrackKind, WindRadii } from './track/track.js';
export { KNOT_MPS, knots, parseQuantity, toKnots } from './units.js';
export {
  angularMomentum,
  balanceRegime,
  cyclostrophicWind,
  forceBudget,
  geostrophicWind,
  gradientWind,
  rossbyNumber,
} from './vortex/balance.js';
export type { ProfileMethod, RadialProfile, VortexInput } from './vortex/profile.js';
export { PROFILES } from './vortex/profiles.js';
export { cogBytes } from './write/geotiff.js';
export { isotachsGeojson } from './write/isotachs-geojson.js';
export { tracksToCsv } from './write/track-csv.js';
export { tracksToGeojson } from './write/track-geojson.js';
