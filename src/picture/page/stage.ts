import { coastNear } from '../coast-near.js';
import type { LonLat } from '../extent.js';
import { momentText } from '../words.js';
import { pageContent } from './decode.js';
import { layersOf } from './layers.js';
import { paintLines, paintMarks } from './marks.js';
import { directionAt, type Lattice, latticeOf, layField, paintField, paintGround } from './paint.js';
import { LIGHT, type Palette } from './palette.js';
import { compass, paintCut, paintRuler, sharpCanvas } from './small-charts.js';
import { pageStorm } from './storm.js';
import { makeView, type View, type ViewState } from './view.js';

export const byId = <T extends HTMLElement>(id: string): T => document.getElementById(id) as T;

export const { facts, fields, coast } = await pageContent();
export const storm = pageStorm(facts);
export const layers = layersOf(facts, fields);
export const map = byId<HTMLCanvasElement>('map');
export const ruler = byId<HTMLCanvasElement>('ruler');
const cross = byId<HTMLCanvasElement>('cross');
const places = placesToShow();

/** What the reader has chosen; everything drawn follows from it. */
export const stage: {
  readonly viewState: ViewState;
  readonly shownIsotachs: Set<number>;
  palette: Palette;
  view: View;
  layerId: string;
  /** null: the whole storm */
  timeMs: number | null;
  /** the animation frame that is asked for while the storm plays, 0 otherwise */
  playing: number;
  ownPlaces: boolean;
  pinned: LonLat;
  hovered: LonLat | null;
} = {
  viewState: { zoom: 1, x: 0, y: 0 },
  shownIsotachs: new Set(facts.isotachs.map((_, i) => i).filter((i) => facts.isotachs[i]!.polygons.length > 0)),
  palette: LIGHT,
  view: makeView(places, { width: 600, height: 400 }, { zoom: 1, x: 0, y: 0 }),
  layerId: 'wind',
  timeMs: null,
  playing: 0,
  ownPlaces: true,
  pinned: facts.peak ? [facts.peak.lonDeg, facts.peak.latDeg] : places[0]!,
  hovered: null,
};
let lattice: Lattice | null = null;
let ground: HTMLCanvasElement | null = null;
let lines: HTMLCanvasElement | null = null;

function placesToShow(): LonLat[] {
  const all: LonLat[] = facts.track.fixes.map((fix) => [fix.lonDeg, fix.latDeg]);
  for (const { polygons } of facts.isotachs) {
    for (const [shell] of polygons) {
      const every = Math.max(1, Math.floor((shell?.length ?? 0) / 300));
      for (let i = 0; i < (shell?.length ?? 0); i += every) all.push([shell![i]![0]!, shell![i]![1]!]);
    }
  }
  return all;
}

export const fieldNow = () => (stage.timeMs === null ? null : storm.fieldAt(stage.timeMs));

let asked = 0;
let fineTimer = 0;

/** Draws soon; `rough` takes large blocks now and fine ones when all is quiet. */
export function draw({ rough = false, moved = false }: { rough?: boolean; moved?: boolean } = {}): void {
  if (moved) {
    lattice = null;
    ground = null;
  }
  cancelAnimationFrame(asked);
  asked = requestAnimationFrame(() => paint(rough ? 7 : 3));
  clearTimeout(fineTimer);
  if (rough) fineTimer = window.setTimeout(() => draw({}), 140);
}

function paint(block: number): void {
  const { c, width, height } = sharpCanvas(map);
  if (!ground) {
    stage.view = makeView(places, { width, height }, stage.viewState);
    const { view, palette } = stage;
    const near = coast && coastNear(coast, view.frame);
    ground = sheetOf(width, height, (g) => paintGround(g, view, { coast: near, palette }));
    lines = sheetOf(width, height, (g) => paintLines(g, view, { coast: near, palette }));
  }
  if (!lattice || lattice.block !== block) lattice = latticeOf(stage.view, block);
  c.drawImage(ground, 0, 0, width, height);
  const field = fieldNow();
  const layer = layers.find(({ id }) => id === stage.layerId);
  const now = field && stage.layerId === 'now' ? field : null;
  if (now) layField(c, paintField(lattice, { field: now }, stage.palette), block);
  else if (layer) layField(c, paintField(lattice, { layer }, stage.palette), block);
  if (lines) c.drawImage(lines, 0, 0, width, height);
  const arrows = now || stage.layerId === 'direction' ? directionAt(stage.view, { facts, fields, field: now }) : null;
  paintMarks(c, stage.view, {
    facts,
    palette: stage.palette,
    isotachs: stage.shownIsotachs,
    zones: stage.ownPlaces ? facts.zones : [],
    places: stage.ownPlaces ? facts.places : [],
    field,
    arrows,
  });
  paintCross();
}

/** A sheet as large as the map, drawn once and kept. */
function sheetOf(width: number, height: number, paintOn: (c: CanvasRenderingContext2D) => void): HTMLCanvasElement {
  const sheet = document.createElement('canvas');
  sheet.width = map.width;
  sheet.height = map.height;
  const c = sheet.getContext('2d')!;
  c.setTransform(map.width / width, 0, 0, map.height / height, 0, 0);
  paintOn(c);
  return sheet;
}

export function paintCross(): void {
  const { c } = sharpCanvas(cross);
  const at = stage.view.project(stage.hovered ?? stage.pinned);
  if (!at) return;
  const d = new Path2D(`M${at[0]} ${at[1]}m-18 0h11m14 0h11m-18 -18v11m0 14v11`);
  for (const [colour, width] of [
    [stage.palette.halo, 4.5],
    [stage.palette.accent, 2],
  ] as const) {
    c.strokeStyle = colour;
    c.lineWidth = width;
    c.stroke(d);
  }
}

export function drawCharts(): void {
  paintRuler(ruler, { facts, storm, palette: stage.palette, timeMs: stage.timeMs });
  const at = stage.timeMs ?? facts.peak?.timeMs ?? facts.fromMs;
  const bearing = Number(byId<HTMLInputElement>('bearing').value);
  const said = paintCut(byId('cut'), { field: storm.fieldAt(at), bearingDeg: bearing, palette: stage.palette });
  byId('cut').setAttribute('aria-label', `Wind on a line through the centre, ${momentText(at)} UTC: ${said}`);
  byId('cut-time').textContent = momentText(at);
  byId('bearing-text').textContent = `${compass(bearing + 180)}–${compass(bearing)}`;
}
