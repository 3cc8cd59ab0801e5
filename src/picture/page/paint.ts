import { geoPath } from 'd3-geo';
import type { WindField } from '../../model/field.js';
import { windOf } from '../../model/wind.js';
import type { Coast } from '../map-input.js';
import type { PageFacts, PageFields } from '../page-data.js';
import { cellUnder, type Layer } from './layers.js';
import { type Palette, windPaint } from './palette.js';
import { speedsOf } from './storm.js';
import type { View } from './view.js';

/** Places of the picture's blocks, kept as long as the view is. */
export interface Lattice {
  readonly block: number;
  readonly nx: number;
  readonly ny: number;
  readonly lon: Float32Array;
  readonly lat: Float32Array;
}

export function latticeOf(view: View, block: number): Lattice {
  const nx = Math.ceil(view.width / block) + 1;
  const ny = Math.ceil(view.height / block) + 1;
  const lon = new Float32Array(nx * ny).fill(Number.NaN);
  const lat = new Float32Array(nx * ny).fill(Number.NaN);
  for (let row = 0, k = 0; row < ny; row++) {
    for (let column = 0; column < nx; column++, k++) {
      const place = view.invert(column * block, row * block);
      if (!place) continue;
      lon[k] = place[0];
      lat[k] = place[1];
    }
  }
  return { block, nx, ny, lon, lat };
}

/** A path through points. */
export function trace(c: CanvasRenderingContext2D, points: readonly (readonly [number, number])[]): void {
  points.forEach(([x, y], i) => {
    if (i === 0) c.moveTo(x, y);
    else c.lineTo(x, y);
  });
}

/** Sea and land of a view. */
export function paintGround(
  c: CanvasRenderingContext2D,
  view: View,
  options: { coast: Coast | null; palette: Palette },
): void {
  const { coast, palette } = options;
  c.fillStyle = palette.sea;
  c.fillRect(0, 0, view.width, view.height);
  if (!coast) return;
  c.beginPath();
  geoPath(view.frame.projection, c)(coast);
  c.fillStyle = palette.land;
  c.fill();
}

/** The coloured field of a view, as a picture one pixel a block. */
export function paintField(
  lattice: Lattice,
  source: { layer: Layer } | { field: WindField },
  palette: Palette,
): HTMLCanvasElement {
  const { nx, ny, lon, lat } = lattice;
  const canvas = document.createElement('canvas');
  canvas.width = nx;
  canvas.height = ny;
  const c = canvas.getContext('2d')!;
  const image = c.createImageData(nx, ny);
  const values = new Float32Array(nx * ny);
  if ('field' in source) speedsOf(source.field, lon, lat, values);
  else for (let k = 0; k < values.length; k++) values[k] = source.layer.sample(lon[k]!, lat[k]!);
  const paint = 'field' in source ? windPaint : source.layer.paint;
  for (let k = 0; k < values.length; k++) {
    const value = values[k]!;
    if (!(value > 0)) continue;
    const [rgb, opacity] = paint(value, palette);
    image.data[4 * k] = rgb[0];
    image.data[4 * k + 1] = rgb[1];
    image.data[4 * k + 2] = rgb[2];
    image.data[4 * k + 3] = opacity;
  }
  c.putImageData(image, 0, 0);
  return canvas;
}

/** Lays a field over the map. */
export function layField(c: CanvasRenderingContext2D, field: HTMLCanvasElement, block: number): void {
  c.imageSmoothingEnabled = true;
  c.imageSmoothingQuality = 'high';
  c.drawImage(field, -block / 2, -block / 2, field.width * block, field.height * block);
}

/** Where the wind blows from at a point of the picture: at the moment, or at the peak. */
export function directionAt(
  view: View,
  source: { facts: PageFacts; fields: PageFields; field: WindField | null },
): (x: number, y: number) => number | null {
  return (x, y) => {
    const place = view.invert(x, y);
    if (!place) return null;
    if (source.field) {
      const wind = windOf(source.field, { lonDeg: place[0], latDeg: place[1] });
      return wind.speedMps >= 8 ? wind.fromDeg : null;
    }
    const k = cellUnder(source.facts, place[0], place[1]);
    return k < 0 || source.fields.wind[k]! < 8 || Number.isNaN(source.fields.from[k]!) ? null : source.fields.from[k]!;
  };
}
