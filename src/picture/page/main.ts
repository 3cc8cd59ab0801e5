// The page's script: what hands and keys do. It starts when the page has been read.
import { wrapLongitude } from '../../earth.js';
import { panBy, pin, play, setDark, setLayer, setTime, showAll, stop, wholeStorm, zoomBy } from './choices.js';
import { parseDegrees } from './degrees.js';
import { rulerTime } from './small-charts.js';
import { byId, draw, drawCharts, facts, map, paintCross, ruler, stage } from './stage.js';
import { tellMoment, tellOwn, tellReading } from './tell.js';

const pointers = new Map<number, { x: number; y: number }>();
let travelled = 0;

function onMap(event: PointerEvent | WheelEvent): [number, number] {
  const box = map.getBoundingClientRect();
  return [event.clientX - box.left, event.clientY - box.top];
}

map.addEventListener('pointerdown', (event) => {
  map.setPointerCapture(event.pointerId);
  const [x, y] = onMap(event);
  pointers.set(event.pointerId, { x, y });
  if (pointers.size === 1) travelled = 0;
});
map.addEventListener('pointermove', (event) => {
  const [x, y] = onMap(event);
  const before = pointers.get(event.pointerId);
  if (!before) {
    stage.hovered = stage.view.invert(x, y);
    tellReading();
    paintCross();
    return;
  }
  const others = [...pointers.entries()].filter(([id]) => id !== event.pointerId).map(([, point]) => point);
  pointers.set(event.pointerId, { x, y });
  travelled += Math.hypot(x - before.x, y - before.y);
  const [other] = others;
  if (other) {
    const factor =
      Math.hypot(x - other.x, y - other.y) / Math.max(1, Math.hypot(before.x - other.x, before.y - other.y));
    zoomBy(factor, [(x + other.x) / 2, (y + other.y) / 2]);
  } else if (travelled > 5) panBy(x - before.x, y - before.y);
});
const lift = (event: PointerEvent): void => {
  const was = pointers.delete(event.pointerId);
  if (!was || travelled > 5 || event.type !== 'pointerup') return;
  const place = stage.view.invert(...onMap(event));
  if (place) pin(place);
};
map.addEventListener('pointerup', lift);
map.addEventListener('pointercancel', lift);
map.addEventListener('pointerleave', () => {
  if (pointers.size > 0) return;
  stage.hovered = null;
  tellReading();
  paintCross();
});
map.addEventListener(
  'wheel',
  (event) => {
    event.preventDefault();
    zoomBy(Math.exp(-event.deltaY * (event.deltaMode === 1 ? 0.05 : 0.0016)), onMap(event));
  },
  { passive: false },
);
map.addEventListener('keydown', (event) => {
  const arrows: Record<string, readonly [number, number]> = {
    ArrowLeft: [-1, 0],
    ArrowRight: [1, 0],
    ArrowUp: [0, -1],
    ArrowDown: [0, 1],
  };
  const step = arrows[event.key];
  if (step && event.shiftKey) panBy(-60 * step[0], -60 * step[1]);
  else if (step) {
    const at = stage.view.project(stage.pinned) ?? [stage.view.width / 2, stage.view.height / 2];
    const place = stage.view.invert(at[0] + 10 * step[0], at[1] + 10 * step[1]);
    if (place) pin(place, { bring: true });
  } else if (event.key === '+' || event.key === '=') zoomBy(1.5);
  else if (event.key === '-') zoomBy(1 / 1.5);
  else if (event.key === '0') showAll();
  else return;
  event.preventDefault();
});

let dragging = false;
ruler.addEventListener('pointerdown', (event) => {
  dragging = true;
  ruler.setPointerCapture(event.pointerId);
  stop();
  setTime(rulerTime(ruler, event.clientX, facts), { rough: true });
});
ruler.addEventListener('pointermove', (event) => {
  if (dragging) setTime(rulerTime(ruler, event.clientX, facts), { rough: true });
});
ruler.addEventListener('pointerup', () => {
  dragging = false;
});
ruler.addEventListener('keydown', (event) => {
  const hour = 3_600_000;
  const at = stage.timeMs ?? facts.fromMs;
  const moves: Record<string, number> = {
    ArrowRight: at + hour,
    ArrowUp: at + hour,
    ArrowLeft: at - hour,
    ArrowDown: at - hour,
    PageUp: at + 6 * hour,
    PageDown: at - 6 * hour,
    Home: facts.fromMs,
    End: facts.toMs,
  };
  const to = moves[event.key];
  if (event.key === ' ') play();
  else if (event.key === 'Escape') wholeStorm();
  else if (to !== undefined) {
    stop();
    setTime(to);
  } else return;
  event.preventDefault();
});

byId('play').addEventListener('click', play);
byId('whole').addEventListener('click', wholeStorm);
byId('zoom-in').addEventListener('click', () => zoomBy(1.6));
byId('zoom-out').addEventListener('click', () => zoomBy(1 / 1.6));
byId('zoom-all').addEventListener('click', showAll);
byId('print').addEventListener('click', () => window.print());
byId('to-peak')?.addEventListener('click', () => {
  if (facts.peak) pin([facts.peak.lonDeg, facts.peak.latDeg], { bring: true });
});
byId('bearing').addEventListener('input', drawCharts);
byId('layers').addEventListener('change', (event) => setLayer((event.target as HTMLInputElement).value));
byId('place-form').addEventListener('submit', (event) => {
  event.preventDefault();
  const lat = parseDegrees(byId<HTMLInputElement>('lat').value, 'NS');
  const lon = parseDegrees(byId<HTMLInputElement>('lon').value, 'EW');
  const wrong =
    lat === null || Math.abs(lat) > 90 ? 'latitude' : lon === null || Math.abs(lon) > 360 ? 'longitude' : null;
  byId('place-error').textContent = wrong
    ? `Give the ${wrong} in degrees, such as ${wrong === 'latitude' ? '27.9 or 27.9N' : '-45.2 or 45.2W'}.`
    : '';
  if (!wrong) pin([wrapLongitude(lon!), lat!], { bring: true });
});

const system = window.matchMedia('(prefers-color-scheme: dark)');
let chosen = false;
system.addEventListener('change', () => {
  if (!chosen) setDark(system.matches);
});
byId('theme').addEventListener('click', () => {
  chosen = true;
  setDark(!stage.palette.dark);
});

byId('cells').textContent = facts.grid.note;
byId('cautions').replaceChildren(
  ...facts.cautions.slice(0, 30).map((caution) => {
    const item = document.createElement('li');
    item.textContent = caution;
    return item;
  }),
);
tellOwn((place) => pin(place, { bring: true }));
tellMoment();
tellReading();
setDark(system.matches);
new ResizeObserver(() => {
  drawCharts();
  draw({ moved: true });
}).observe(byId('frame-box'));
document.documentElement.dataset['ready'] = 'yes';
