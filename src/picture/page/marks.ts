import { geoPath } from 'd3-geo';
import { RADIANS } from '../../earth.js';
import type { WindField } from '../../model/field.js';
import { graticule } from '../graticule.js';
import { openEdges } from '../isotach-paths.js';
import { type Box, boxesMeet, placeLabels } from '../labels.js';
import type { Coast, MapPlace, MapZone } from '../map-input.js';
import type { PageFacts } from '../page-data.js';
import { roundBelow, unitsPerKm } from '../scale-bar.js';
import { textWidth } from '../text.js';
import { momentText } from '../words.js';
import { trace } from './paint.js';
import type { Palette } from './palette.js';
import type { View } from './view.js';

const edges = new WeakMap<object, [number, number][][]>();

/** The edges of polygons, worked out once. */
function edgesOf(polygons: MapZone['polygons']): [number, number][][] {
  let found = edges.get(polygons);
  if (!found) {
    found = openEdges(polygons);
    edges.set(polygons, found);
  }
  return found;
}

const FONT = "'Source Sans 3','Segoe UI',Roboto,'Helvetica Neue',Arial,sans-serif";

export interface Marks {
  readonly facts: PageFacts;
  readonly palette: Palette;
  /** indices of the isotachs that are drawn */
  readonly isotachs: ReadonlySet<number>;
  readonly zones: readonly MapZone[];
  readonly places: readonly MapPlace[];
  /** null: the whole storm */
  readonly field: WindField | null;
  readonly arrows: ((x: number, y: number) => number | null) | null;
}

/** Graticule and shore: what stays as long as the view does. */
export function paintLines(
  c: CanvasRenderingContext2D,
  view: View,
  { coast, palette }: { readonly coast: Coast | null; readonly palette: Palette },
): void {
  c.beginPath();
  for (const line of graticule(view.frame, { size: 13 }).lines) trace(c, line);
  c.strokeStyle = palette.grid;
  c.lineWidth = 0.8;
  c.stroke();
  if (!coast) return;
  c.beginPath();
  geoPath(view.frame.projection, c)(coast);
  c.strokeStyle = palette.shore;
  c.lineWidth = 1;
  c.stroke();
}

/** Everything that is drawn over the field and the shore: isotachs, track, marks, labels, scale. */
export function paintMarks(c: CanvasRenderingContext2D, view: View, marks: Marks): void {
  const { palette, facts } = marks;
  const path = geoPath(view.frame.projection, c);
  const stroke = (colour: string, width: number): void => {
    c.strokeStyle = colour;
    c.lineWidth = width;
    c.stroke();
  };
  const grid = graticule(view.frame, { size: 13 });
  c.lineJoin = 'round';
  for (const i of marks.isotachs) {
    c.beginPath();
    path({ type: 'MultiLineString', coordinates: edgesOf(facts.isotachs[i]!.polygons) });
    c.globalAlpha = marks.field ? 0.45 : 0.75;
    stroke(palette.ink, 1);
    c.globalAlpha = 1;
  }
  for (const { polygons } of marks.zones) {
    c.beginPath();
    path({ type: 'MultiLineString', coordinates: edgesOf(polygons) });
    stroke(palette.halo, 4);
    stroke(palette.own, 1.6);
  }
  if (marks.arrows) paintArrows(c, view, marks.arrows, palette);
  const lines = paintTrack(c, view, marks);
  const taken = marks.places.flatMap(({ lonDeg, latDeg }): Box[] => {
    const at = view.project([lonDeg, latDeg]);
    if (!at) return [];
    c.fillStyle = palette.own;
    c.strokeStyle = palette.halo;
    c.lineWidth = 2;
    c.strokeRect(at[0] - 4, at[1] - 4, 8, 8);
    c.fillRect(at[0] - 4, at[1] - 4, 8, 8);
    return [{ x: at[0] - 5, y: at[1] - 5, width: 10, height: 10 }];
  });
  const bar = paintScale(c, view, palette);
  paintLabels(c, view, {
    marks,
    taken: [...taken, bar],
    lines,
    degrees: grid.labels.map(({ text, x, y, inside, box }) => ({ text, x, y, inside, box })),
  });
}

function paintArrows(
  c: CanvasRenderingContext2D,
  view: View,
  from: (x: number, y: number) => number | null,
  palette: Palette,
): void {
  const every = view.width < 520 ? 30 : 38;
  c.strokeStyle = palette.ink;
  c.lineWidth = 1.3;
  c.globalAlpha = 0.8;
  c.beginPath();
  for (let y = every / 2; y < view.height; y += every) {
    for (let x = every / 2; x < view.width; x += every) {
      const fromDeg = from(x, y);
      if (fromDeg === null) continue;
      const place = view.invert(x, y)!;
      const north = view.project([place[0], Math.min(89.999, place[1] + 0.01)])!;
      const up = Math.atan2(north[0] - x, y - north[1]);
      const to = up + (fromDeg + 180) * RADIANS;
      const [dx, dy] = [Math.sin(to), -Math.cos(to)];
      const [tipX, tipY] = [x + 9 * dx, y + 9 * dy];
      c.moveTo(x - 9 * dx, y - 9 * dy);
      c.lineTo(tipX, tipY);
      c.moveTo(tipX - 5 * dx - 3.4 * dy, tipY - 5 * dy + 3.4 * dx);
      c.lineTo(tipX, tipY);
      c.lineTo(tipX - 5 * dx + 3.4 * dy, tipY - 5 * dy - 3.4 * dx);
    }
  }
  c.stroke();
  c.globalAlpha = 1;
}

function paintTrack(
  c: CanvasRenderingContext2D,
  view: View,
  { facts, palette, field }: Marks,
): (readonly [number, number])[][] {
  const { fixes } = facts.track;
  const path = geoPath(view.frame.projection, c);
  const line = fixes.map((fix) => view.project([fix.lonDeg, fix.latDeg])).filter((point) => point !== null);
  const course = { type: 'LineString' as const, coordinates: fixes.map((fix) => [fix.lonDeg, fix.latDeg]) };
  for (const [colour, width] of [
    [palette.halo, 4],
    [palette.ink, 1.8],
  ] as const) {
    c.beginPath();
    if (fixes.length > 1) path(course);
    c.strokeStyle = colour;
    c.lineWidth = width;
    c.stroke();
  }
  for (const [x, y] of line) ring(c, x, y, { r: 2.6, fill: palette.ink, stroke: palette.halo, width: 1 });
  if (facts.peak && !field) {
    const at = view.project([facts.peak.lonDeg, facts.peak.latDeg]);
    if (at) {
      ring(c, at[0], at[1], { r: 8, fill: null, stroke: palette.halo, width: 5 });
      ring(c, at[0], at[1], { r: 8, fill: null, stroke: palette.ink, width: 2.4 });
      ring(c, at[0], at[1], { r: 2.8, fill: palette.ink, stroke: palette.halo, width: 1 });
    }
  }
  if (field) {
    const at = view.project([field.state.lonDeg, field.state.latDeg]);
    if (at) {
      ring(c, at[0], at[1], { r: 6, fill: palette.halo, stroke: palette.halo, width: 4 });
      ring(c, at[0], at[1], { r: 6, fill: palette.accent, stroke: palette.ink, width: 2 });
    }
  }
  return [line];
}

function ring(
  c: CanvasRenderingContext2D,
  x: number,
  y: number,
  look: { r: number; fill: string | null; stroke: string; width: number },
): void {
  c.beginPath();
  c.arc(x, y, look.r, 0, 2 * Math.PI);
  c.strokeStyle = look.stroke;
  c.lineWidth = look.width;
  c.stroke();
  if (look.fill) {
    c.fillStyle = look.fill;
    c.fill();
  }
}

function paintScale(c: CanvasRenderingContext2D, view: View, palette: Palette): Box {
  const middle = view.invert(view.width / 2, view.height / 2) ?? [0, 0];
  const perKm = unitsPerKm(view.frame, { lonDeg: middle[0], latDeg: Math.max(-89, Math.min(89, middle[1])) });
  const km = roundBelow((0.24 * view.width) / perKm);
  const width = km * perKm;
  const [x, y] = [14, view.height - 16];
  c.lineWidth = 4;
  for (const [colour, wide] of [
    [palette.halo, 5],
    [palette.ink, 1.6],
  ] as const) {
    c.beginPath();
    c.moveTo(x, y - 6);
    c.lineTo(x, y);
    c.lineTo(x + width, y);
    c.lineTo(x + width, y - 6);
    c.strokeStyle = colour;
    c.lineWidth = wide;
    c.stroke();
  }
  text(c, `${km} km`, { x: x + width + 8, y: y + 1, palette, size: 13 });
  return { x: x - 4, y: y - 16, width: width + 80, height: 24 };
}

function text(
  c: CanvasRenderingContext2D,
  words: string,
  at: {
    x: number;
    y: number;
    palette: Palette;
    size: number;
    bold?: boolean;
    quiet?: boolean;
    align?: CanvasTextAlign;
  },
): void {
  c.font = `${at.bold ? 600 : 400} ${at.size}px ${FONT}`;
  c.textAlign = at.align ?? 'left';
  c.lineJoin = 'round';
  c.lineWidth = 3.4;
  c.strokeStyle = at.palette.halo;
  c.strokeText(words, at.x, at.y);
  c.fillStyle = at.quiet ? at.palette.quiet : at.palette.ink;
  c.fillText(words, at.x, at.y);
  c.textAlign = 'left';
}

function paintLabels(
  c: CanvasRenderingContext2D,
  view: View,
  options: {
    marks: Marks;
    taken: readonly Box[];
    lines: readonly (readonly (readonly [number, number])[])[];
    degrees: readonly { text: string; x: number; y: number; inside: boolean; box: Box }[];
  },
): void {
  const { marks } = options;
  const { palette, facts } = marks;
  const size = 13;
  const taken = [...options.taken, { x: view.width - 58, y: 0, width: 58, height: 150 }];
  // the map has no margin: degrees stand inside along the lower and left edge
  for (const label of options.degrees) {
    const width = textWidth(label.text, { size }) + 4;
    const vertical = label.y > view.height - 1;
    const x = label.inside ? label.x : vertical ? label.x - width / 2 : 6;
    const y = label.inside ? label.y : vertical ? view.height - 6 : label.y;
    const box: Box = { x, y: y - size, width, height: size + 3 };
    if (x < 2 || x + width > view.width - 2 || taken.some((other) => boxesMeet(other, box))) continue;
    taken.push(box);
    text(c, label.text, { x, y, palette, size, quiet: true });
  }
  const wishes: { text: string; point: readonly [number, number]; gap: number; bold: boolean }[] = [];
  const wish = (words: string, lonDeg: number, latDeg: number, bold = false, gap = 9): void => {
    const point = view.project([lonDeg, latDeg]);
    if (point && point[0] > 0 && point[1] > 0 && point[0] < view.width && point[1] < view.height)
      wishes.push({ text: words, point, gap, bold });
  };
  if (facts.peak && !marks.field) {
    const value = facts.quantity === 'wind' ? facts.peak.windMps : facts.peak.gustMps;
    wish(`${value.toFixed(1)} m/s`, facts.peak.lonDeg, facts.peak.latDeg, true, 14);
  }
  for (const { name, lonDeg, latDeg } of marks.places) wish(name, lonDeg, latDeg);
  for (const { name, polygons } of marks.zones) {
    const shell = polygons[0]?.[0];
    if (!shell) continue;
    const n = shell.length;
    const x0 = shell[0]![0]!;
    const lon =
      shell.reduce((sum, position) => sum + x0 + ((((position[0]! - x0 + 180) % 360) + 360) % 360) - 180, 0) / n;
    wish(name, lon, shell.reduce((sum, position) => sum + position[1]!, 0) / n, false, 2);
  }
  const { fixes } = facts.track;
  const every = Math.max(1, Math.ceil(fixes.length / (view.width < 520 ? 5 : 9)));
  fixes.forEach((fix, i) => {
    if (i % every === 0) wish(momentText(fix.timeMs, { short: true }), fix.lonDeg, fix.latDeg);
  });
  const spots = placeLabels(
    wishes.map((one) => ({
      point: one.point,
      gap: one.gap,
      width: textWidth(one.text, { size, bold: one.bold }) + 6,
      height: 17,
    })),
    { frame: { x: 3, y: 3, width: view.width - 6, height: view.height - 6 }, taken, lines: options.lines },
  );
  spots.forEach((spot, i) => {
    if (spot) text(c, wishes[i]!.text, { x: spot.x + 3, y: spot.y + 13, palette, size, bold: wishes[i]!.bold });
  });
}
