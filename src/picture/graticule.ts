import { wrapLongitude } from '../earth.js';
import type { MapFrame } from './extent.js';
import { type Box, boxesMeet } from './labels.js';
import { textWidth } from './text.js';

export interface GraticuleLabel {
  readonly text: string;
  readonly x: number;
  readonly y: number;
  readonly anchor: 'start' | 'middle' | 'end';
  /** inside the map, so that it needs a halo */
  readonly inside: boolean;
  readonly box: Box;
}

export interface Graticule {
  readonly stepDeg: number;
  /** each line as points on the picture */
  readonly lines: readonly (readonly (readonly [number, number])[])[];
  readonly labels: readonly GraticuleLabel[];
}

const STEPS_DEG = [0.25, 0.5, 1, 2, 5, 10, 15, 30, 45];

/** `75°W`, `180°`, `0°`, `12.5°N`. */
export function longitudeText(lonDeg: number): string {
  const lon = wrapLongitude(lonDeg);
  if (Math.abs(lon) === 180) return '180°';
  return lon === 0 ? '0°' : `${Math.abs(lon)}°${lon < 0 ? 'W' : 'E'}`;
}

export function latitudeText(latDeg: number): string {
  return latDeg === 0 ? '0°' : `${Math.abs(latDeg)}°${latDeg < 0 ? 'S' : 'N'}`;
}

/** Meridians and parallels of a map with their labels: outside along the left and lower edge, inside where none meets it. */
export function graticule(frame: MapFrame, { size }: { readonly size: number }): Graticule {
  const { seen, box } = frame;
  const polar = seen.east - seen.west > 200 && (seen.north > 80 || seen.south < -80);
  const latStep = stepFor(seen.north - seen.south, 5);
  const lonStep = polar ? 30 : Math.max(latStep, stepFor(seen.east - seen.west, 6));
  const lines: (readonly [number, number])[][] = [];
  const labels: GraticuleLabel[] = [];
  const taken: Box[] = [];
  const add = (label: Omit<GraticuleLabel, 'box'>): void => {
    const width = textWidth(label.text, { size }) + 6;
    const shift = label.anchor === 'start' ? 0 : label.anchor === 'end' ? width : width / 2;
    const place: Box = { x: label.x - shift, y: label.y - size * 0.8, width, height: size };
    if (taken.some((other) => boxesMeet(other, place))) return;
    taken.push(place);
    labels.push({ ...label, box: place });
  };

  const reach = polar ? 0 : lonStep;
  const meridians: number[] = [];
  const first = Math.ceil((seen.middleLon + seen.west - reach) / lonStep);
  const last = Math.floor((seen.middleLon + seen.east + reach) / lonStep);
  for (let i = first; i <= last && i - first < 360 / lonStep; i++) meridians.push(i * lonStep);
  const [south, north] = [Math.max(-89.99, seen.south - latStep), Math.min(89.99, seen.north + latStep)];
  for (const lon of meridians) {
    const points = sampled(south, north, (lat) => frame.project([lon, lat]));
    lines.push(...points);
    const atFoot = crossing(points, 1, box.y + box.height, [box.x, box.x + box.width]);
    if (atFoot !== null)
      add({
        text: longitudeText(lon),
        x: atFoot,
        y: box.y + box.height + size * 1.15,
        anchor: 'middle',
        inside: false,
      });
    else if (polar) {
      const atTop = crossing(points, 1, box.y, [box.x, box.x + box.width]);
      if (atTop !== null)
        add({ text: longitudeText(lon), x: atTop, y: box.y + size * 1.1, anchor: 'middle', inside: true });
      const atLeft = crossing(points, 0, box.x, [box.y, box.y + box.height]);
      if (atLeft !== null)
        add({ text: longitudeText(lon), x: box.x - 6, y: atLeft + size * 0.35, anchor: 'end', inside: false });
    }
  }
  for (let k = Math.ceil(south / latStep); k * latStep <= north; k++) {
    const lat = k * latStep;
    if (Math.abs(lat) >= 90) continue;
    const points = sampled(seen.middleLon + seen.west - reach, seen.middleLon + seen.east + reach, (lon) =>
      frame.project([lon, lat]),
    );
    lines.push(...points);
    const atLeft = polar ? null : crossing(points, 0, box.x, [box.y + size * 0.5, box.y + box.height]);
    if (atLeft !== null) {
      add({ text: latitudeText(lat), x: box.x - 6, y: atLeft + size * 0.35, anchor: 'end', inside: false });
      continue;
    }
    const at = frame.project([seen.middleLon, lat]);
    if (polar && at && at[1] > box.y + size && at[1] < box.y + box.height - size)
      add({ text: latitudeText(lat), x: at[0] + 4, y: at[1] - 3, anchor: 'start', inside: true });
  }
  return { stepDeg: lonStep, lines, labels };
}

function stepFor(spanDeg: number, wanted: number): number {
  return STEPS_DEG.find((step) => spanDeg / step <= wanted) ?? 45;
}

/** A line as pieces of points; a piece ends where the place is not on the map. */
function sampled(from: number, to: number, project: (at: number) => readonly [number, number] | null) {
  const count = Math.max(2, Math.min(90, Math.ceil((to - from) * 2)));
  const pieces: (readonly [number, number])[][] = [];
  let piece: (readonly [number, number])[] = [];
  for (let i = 0; i <= count; i++) {
    const point = project(from + ((to - from) * i) / count);
    if (point && Number.isFinite(point[0]) && Number.isFinite(point[1])) piece.push(point);
    else if (piece.length > 0) {
      pieces.push(piece);
      piece = [];
    }
  }
  if (piece.length > 1) pieces.push(piece);
  return pieces;
}

/** Where a line first meets an edge: the other coordinate there, when it lies within the edge. */
function crossing(
  pieces: readonly (readonly (readonly [number, number])[])[],
  axis: 0 | 1,
  edge: number,
  [from, to]: readonly [number, number],
): number | null {
  for (const piece of pieces) {
    for (let i = 1; i < piece.length; i++) {
      const [a, b] = [piece[i - 1]!, piece[i]!];
      if (a[axis] < edge === b[axis] < edge) continue;
      const t = (edge - a[axis]) / (b[axis] - a[axis]);
      const other = a[1 - axis]! + t * (b[1 - axis]! - a[1 - axis]!);
      if (other >= from && other <= to) return other;
    }
  }
  return null;
}
