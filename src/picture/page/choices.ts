import type { LonLat } from '../extent.js';
import { DARK, LIGHT } from './palette.js';
import { byId, draw, drawCharts, facts, paintCross, stage } from './stage.js';
import { tellIsotachs, tellLegend, tellMoment, tellReading } from './tell.js';
import { ZOOMS } from './view.js';

function tickLayer(): void {
  const input = document.querySelector<HTMLInputElement>(`input[name=layer][value="${stage.layerId}"]`);
  if (input) input.checked = true;
}

export function setLayer(id: string): void {
  stage.layerId = id;
  tickLayer();
  if (id === 'now' && stage.timeMs === null) setTime(facts.peak?.timeMs ?? facts.fromMs);
  tellLegend();
  draw();
}

export function setTime(at: number | null, { rough = false }: { rough?: boolean } = {}): void {
  const was = stage.timeMs;
  stage.timeMs = at === null ? null : Math.min(facts.toMs, Math.max(facts.fromMs, at));
  if (stage.timeMs === null ? stage.layerId === 'now' : was === null && stage.layerId !== 'now') {
    stage.layerId = stage.timeMs === null ? 'wind' : 'now';
    tickLayer();
    tellLegend();
  }
  tellMoment();
  tellReading();
  drawCharts();
  draw({ rough });
}

export function wholeStorm(): void {
  stop();
  stage.timeMs = null;
  setLayer(stage.layerId === 'now' ? 'wind' : stage.layerId);
  tellMoment();
  tellReading();
  drawCharts();
}

export function stop(): void {
  cancelAnimationFrame(stage.playing);
  stage.playing = 0;
  byId('play').textContent = 'Play';
  byId('play').setAttribute('aria-pressed', 'false');
}

/** The storm from one end to the other in about twelve seconds. */
export function play(): void {
  if (stage.playing) {
    stop();
    draw();
    return;
  }
  const span = facts.toMs - facts.fromMs;
  let at = stage.timeMs === null || stage.timeMs >= facts.toMs ? facts.fromMs : stage.timeMs;
  let before = performance.now();
  byId('play').textContent = 'Pause';
  byId('play').setAttribute('aria-pressed', 'true');
  const tick = (now: number): void => {
    at += (Math.min(200, now - before) / 12_000) * span;
    before = now;
    setTime(at, { rough: true });
    if (at >= facts.toMs) stop();
    else stage.playing = requestAnimationFrame(tick);
  };
  stage.playing = requestAnimationFrame(tick);
}

export function pin(place: LonLat, { bring = false }: { bring?: boolean } = {}): void {
  stage.pinned = place;
  stage.hovered = null;
  const at = stage.view.project(place);
  const outside = !at || at[0] < 20 || at[1] < 20 || at[0] > stage.view.width - 20 || at[1] > stage.view.height - 20;
  if (bring && at && outside) {
    stage.viewState.x += (at[0] - stage.view.width / 2) / stage.view.width / stage.viewState.zoom;
    stage.viewState.y += (at[1] - stage.view.height / 2) / stage.view.height / stage.viewState.zoom;
    draw({ moved: true });
  }
  tellReading();
  paintCross();
}

/** The point that stays where it is when the scale changes: the cross where it is in view, else the middle. */
function zoomMiddle(): readonly [number, number] {
  const { view } = stage;
  const at = view.project(stage.pinned);
  const inside = at && at[0] > 0 && at[1] > 0 && at[0] < view.width && at[1] < view.height;
  return inside ? at : [view.width / 2, view.height / 2];
}

export function zoomBy(factor: number, [px, py]: readonly [number, number] = zoomMiddle()): void {
  const zoom = Math.min(ZOOMS[1], Math.max(ZOOMS[0], stage.viewState.zoom * factor));
  stage.viewState.x += ((px - stage.view.width / 2) / stage.view.width) * (1 / stage.viewState.zoom - 1 / zoom);
  stage.viewState.y += ((py - stage.view.height / 2) / stage.view.height) * (1 / stage.viewState.zoom - 1 / zoom);
  stage.viewState.zoom = zoom;
  draw({ rough: true, moved: true });
}

export function panBy(dx: number, dy: number): void {
  stage.viewState.x -= dx / stage.view.width / stage.viewState.zoom;
  stage.viewState.y -= dy / stage.view.height / stage.viewState.zoom;
  draw({ rough: true, moved: true });
}

export function showAll(): void {
  Object.assign(stage.viewState, { zoom: 1, x: 0, y: 0 });
  draw({ moved: true });
}

export function setDark(dark: boolean): void {
  stage.palette = dark ? DARK : LIGHT;
  document.documentElement.dataset['theme'] = dark ? 'dark' : 'light';
  byId('theme').textContent = dark ? 'Light' : 'Dark';
  tellLegend();
  tellIsotachs();
  drawCharts();
  draw({ moved: true });
}
