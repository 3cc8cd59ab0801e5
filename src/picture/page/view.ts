import type { LonLat, MapFrame } from '../extent.js';
import { mapFrame, seenThrough } from '../extent.js';

/** The map's window: a projection that suits the storm, made larger and moved. */
export interface View {
  readonly frame: MapFrame;
  readonly width: number;
  readonly height: number;
  /** size against the first view */
  readonly zoom: number;
  readonly project: (place: LonLat) => readonly [number, number] | null;
  readonly invert: (x: number, y: number) => LonLat | null;
}

export interface ViewState {
  zoom: number;
  /** the picture point that is in the middle, in units of the first view from its middle */
  x: number;
  y: number;
}

export const ZOOMS = [0.25, 80] as const;

export function makeView(places: readonly LonLat[], size: { width: number; height: number }, state: ViewState): View {
  const { width, height } = size;
  const frame = mapFrame(places, { x: 0, y: 0, width, heights: [height, height], margin: 0.06 });
  const { projection } = frame;
  const [tx, ty] = projection.translate();
  projection.scale(projection.scale() * state.zoom);
  projection.translate([
    width / 2 + (tx - width / 2 - state.x * width) * state.zoom,
    height / 2 + (ty - height / 2 - state.y * width) * state.zoom,
  ]);
  projection.precision(0.6);
  const invert = (x: number, y: number): LonLat | null => {
    const place = projection.invert?.([x, y]);
    return place && Number.isFinite(place[0]) && Number.isFinite(place[1]) && Math.abs(place[1]) <= 90 ? place : null;
  };
  const seen = seenThrough(projection, frame.box, frame.seen.middleLon);
  return { frame: { ...frame, seen }, width, height, zoom: state.zoom, project: frame.project, invert };
}
