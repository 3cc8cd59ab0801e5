import { wrapLongitude } from '../../earth.js';
import { toKnots } from '../../units.js';
import type { LonLat } from '../extent.js';
import { latitudeLongitudeText, levelTexts, momentText } from '../words.js';
import { pageContent } from './decode.js';
import { parseDegrees } from './degrees.js';
import { cellUnder, layersOf, momentLegend } from './layers.js';
import { directionAt, type Lattice, latticeOf, layField, paintField, paintGround, paintMarks } from './paint.js';
import { DARK, LIGHT, overSea, type Palette, windPaint } from './palette.js';
import { compass, paintCut, paintRuler, rulerTime, sharpCanvas } from './small-charts.js';
import { kilometresFrom, pageStorm } from './storm.js';
import { makeView, type View, type ViewState, ZOOMS } from './view.js';

const byId = <T extends HTMLElement>(id: string): T => document.getElementById(id) as T;
const { facts, fields, coast } = await pageContent();
const storm = pageStorm(facts);
const layers = layersOf(facts, fields);
const map = byId<HTMLCanvasElement>('map');
const cross = byId<HTMLCanvasElement>('cross');
const ruler = byId<HTMLCanvasElement>('ruler');
const places = placesToShow();

const viewState: ViewState = { zoom: 1, x: 0, y: 0 };
const shownIsotachs = new Set(facts.isotachs.map((_, i) => i).filter((i) => facts.isotachs[i]!.polygons.length > 0));
let palette: Palette = LIGHT;
let view: View;
let lattice: Lattice | null = null;
let ground: HTMLCanvasElement | null = null;
let layerId = 'wind';
let timeMs: number | null = null;
let playing = 0;
let ownPlaces = true;
let pinned: LonLat = facts.peak ? [facts.peak.lonDeg, facts.peak.latDeg] : places[0]!;
let hovered: LonLat | null = null;

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

const fieldNow = () => (timeMs === null ? null : storm.fieldAt(timeMs));

// —— drawing ——

let asked = 0;
let fineTimer = 0;

/** Draws soon; `rough` takes large blocks now and fine ones when all is quiet. */
function draw({ rough = false, moved = false }: { rough?: boolean; moved?: boolean } = {}): void {
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
    view = makeView(places, { width, height }, viewState);
    ground = document.createElement('canvas');
    ground.width = map.width;
    ground.height = map.height;
    const g = ground.getContext('2d')!;
    g.setTransform(map.width / width, 0, 0, map.height / height, 0, 0);
    paintGround(g, view, { coast, palette });
  }
  if (!lattice || lattice.block !== block) lattice = latticeOf(view, block);
  c.drawImage(ground, 0, 0, width, height);
  const field = fieldNow();
  const layer = layers.find(({ id }) => id === layerId);
  const now = field && layerId === 'now' ? field : null;
  if (now) layField(c, paintField(lattice, { field: now }, palette), block);
  else if (layer) layField(c, paintField(lattice, { layer }, palette), block);
  const arrows = now || layerId === 'direction' ? directionAt(view, { facts, fields, field: now }) : null;
  paintMarks(c, view, {
    facts,
    coast,
    palette,
    isotachs: shownIsotachs,
    zones: ownPlaces ? facts.zones : [],
    places: ownPlaces ? facts.places : [],
    field,
    arrows,
  });
  paintCross();
}

function paintCross(): void {
  const { c } = sharpCanvas(cross);
  const at = view?.project(hovered ?? pinned);
  if (!at) return;
  const d = new Path2D(`M${at[0]} ${at[1]}m-18 0h11m14 0h11m-18 -18v11m0 14v11`);
  for (const [colour, width] of [
    [palette.halo, 4.5],
    [palette.accent, 2],
  ] as const) {
    c.strokeStyle = colour;
    c.lineWidth = width;
    c.stroke(d);
  }
}

function drawCharts(): void {
  paintRuler(ruler, { facts, storm, palette, timeMs });
  const at = timeMs ?? facts.peak?.timeMs ?? facts.fromMs;
  const bearing = Number(byId<HTMLInputElement>('bearing').value);
  const said = paintCut(byId('cut'), { field: storm.fieldAt(at), bearingDeg: bearing, palette });
  byId('cut').setAttribute('aria-label', `Wind on a line through the centre, ${momentText(at)} UTC: ${said}`);
  byId('bearing-text').textContent = `${compass(bearing + 180)}–${compass(bearing)}`;
}

// —— words ——

function say(list: HTMLElement, rows: readonly (readonly [string, string])[]): void {
  list.replaceChildren(
    ...rows.flatMap(([term, value]) => {
      const dt = document.createElement('dt');
      const dd = document.createElement('dd');
      dt.textContent = term;
      dd.textContent = value;
      return [dt, dd];
    }),
  );
}

const speed = (mps: number): string => `${mps.toFixed(1)} m/s, ${toKnots(mps).toFixed(0)} kt`;
const fromText = (deg: number): string => (Number.isNaN(deg) ? '–' : `${deg.toFixed(0)}° (${compass(deg)})`);

function tellReading(): void {
  const [lon, lat] = hovered ?? pinned;
  const place = { lonDeg: wrapLongitude(lon), latDeg: lat };
  const rows: [string, string][] = [['Place', latitudeLongitudeText(place)]];
  const k = cellUnder(facts, lon, lat);
  if (timeMs !== null) {
    const wind = storm.windAt(place, timeMs);
    rows.push(['Wind now', speed(wind.speedMps)], ['Blows from', fromText(wind.fromDeg)]);
    rows.push(['Centre', `${kilometresFrom(storm.fieldAt(timeMs), place).toFixed(0)} km away`]);
  }
  if (k < 0) rows.push(['Peak', 'outside the cells']);
  else {
    rows.push(['Peak wind', speed(fields.wind[k]!)], ['Peak gust', speed(fields.gust[k]!)]);
    if (timeMs === null) rows.push(['Blew from', fromText(fields.from[k]!)]);
    const seconds = fields.time[k]!;
    rows.push(['Time', Number.isNaN(seconds) ? '–' : `${momentText(facts.originMs + 1000 * seconds)} UTC`]);
    fields.hours.forEach((field, i) => {
      if (timeMs === null || i === 0)
        rows.push([`≥ ${levelTexts(facts.hoursThresholdsMps[i]!).knots} kt`, `${field[k]!.toFixed(1)} h`]);
    });
  }
  say(byId('reading'), rows);
}

function tellMoment(): void {
  const text = timeMs === null ? 'whole storm' : `${momentText(timeMs)} UTC`;
  const state = timeMs === null ? null : storm.model.path.at(timeMs);
  byId('moment').textContent = state
    ? `${text}: maximum wind ${speed(state.maxWindMps)}, pressure ${(state.centralPressurePa / 100).toFixed(0)} hPa, radius of maximum wind ${(state.radiusOfMaxWindM / 1000).toFixed(0)} km`
    : 'The whole storm: the strongest wind of each place. Drag along the ruler to see one moment.';
  ruler.setAttribute('aria-valuetext', text);
  const share = timeMs === null ? 0 : (100 * (timeMs - facts.fromMs)) / Math.max(1, facts.toMs - facts.fromMs);
  ruler.setAttribute('aria-valuenow', share.toFixed(0));
  byId('whole').setAttribute('aria-pressed', String(timeMs === null));
}

function tellLegend(): void {
  const layer = layers.find(({ id }) => id === layerId);
  const entries = (layer?.legend ?? momentLegend(facts))(palette);
  const titleText = layer?.title ?? 'Wind at the moment, m/s; arrows point with it';
  const title = document.createElement('span');
  title.className = 'title';
  title.textContent = titleText;
  const steps = entries.map(({ colour, main, more }) => {
    const step = document.createElement('span');
    const bar = document.createElement('i');
    const strong = document.createElement('b');
    const small = document.createElement('small');
    step.className = 'step';
    bar.style.background = colour;
    strong.textContent = main;
    small.textContent = more;
    step.append(bar, strong, small);
    return step;
  });
  byId('legend').replaceChildren(title, ...steps);
  byId('legend').setAttribute(
    'aria-label',
    `${titleText}: ${entries.map(({ main, more }) => `${main} ${more}`).join(', ')}`,
  );
}

function tellIsotachs(): void {
  const box = byId('isotachs');
  const legend = box.querySelector('legend')!;
  const rows = facts.isotachs.map((isotach, i) => {
    const { knots, mps } = levelTexts(isotach.thresholdMps);
    const empty = isotach.polygons.length === 0;
    const upper = isotach.upperMps == null ? '' : `–${levelTexts(isotach.upperMps).knots}`;
    return choice(`${knots}${upper} kt, ${mps} m/s`, {
      checked: shownIsotachs.has(i),
      disabled: empty,
      swatch: overSea(windPaint(isotach.thresholdMps, palette), palette),
      note: empty
        ? 'nowhere'
        : `${Math.round(isotach.areaM2 / 1e6)
            .toLocaleString('en')
            .replaceAll(',', '\u202f')} km²`,
      onChange: (on) => {
        if (on) shownIsotachs.add(i);
        else shownIsotachs.delete(i);
        draw();
      },
    });
  });
  box.replaceChildren(legend, ...rows);
}

function choice(
  text: string,
  options: { checked: boolean; disabled: boolean; swatch?: string; note?: string; onChange: (on: boolean) => void },
): HTMLElement {
  const label = document.createElement('label');
  const input = document.createElement('input');
  input.type = 'checkbox';
  input.checked = options.checked;
  input.disabled = options.disabled;
  input.addEventListener('change', () => options.onChange(input.checked));
  label.append(input);
  if (options.swatch) {
    const swatch = document.createElement('span');
    swatch.className = 'swatch';
    swatch.style.background = options.swatch;
    label.append(swatch);
  }
  label.append(text);
  if (options.note) {
    const note = document.createElement('span');
    note.className = 'area';
    note.textContent = options.note;
    label.append(note);
  }
  return label;
}

function tellOwn(): void {
  const box = byId<HTMLFieldSetElement>('own');
  if (facts.places.length + facts.zones.length === 0) return;
  box.hidden = false;
  const show = choice('Show them on the map', {
    checked: true,
    disabled: false,
    onChange: (on) => {
      ownPlaces = on;
      draw();
    },
  });
  const list = document.createElement('div');
  list.className = 'own-list';
  for (const place of facts.places.slice(0, 200)) {
    const button = document.createElement('button');
    button.type = 'button';
    button.textContent = place.name;
    button.addEventListener('click', () => pin([place.lonDeg, place.latDeg], { bring: true }));
    list.append(button);
  }
  box.append(show, list);
}

// —— choices ——

function tickLayer(): void {
  const input = document.querySelector<HTMLInputElement>(`input[name=layer][value="${layerId}"]`);
  if (input) input.checked = true;
}

function setLayer(id: string): void {
  layerId = id;
  tickLayer();
  if (id === 'now' && timeMs === null) setTime(facts.peak?.timeMs ?? facts.fromMs);
  tellLegend();
  draw();
}

function setTime(at: number | null, { rough = false }: { rough?: boolean } = {}): void {
  const was = timeMs;
  timeMs = at === null ? null : Math.min(facts.toMs, Math.max(facts.fromMs, at));
  if (timeMs === null ? layerId === 'now' : was === null && layerId !== 'now') {
    layerId = timeMs === null ? 'wind' : 'now';
    tickLayer();
    tellLegend();
  }
  tellMoment();
  tellReading();
  drawCharts();
  draw({ rough });
}

function wholeStorm(): void {
  stop();
  timeMs = null;
  setLayer(layerId === 'now' ? 'wind' : layerId);
  tellMoment();
  tellReading();
  drawCharts();
}

function stop(): void {
  cancelAnimationFrame(playing);
  playing = 0;
  byId('play').textContent = 'Play';
  byId('play').setAttribute('aria-pressed', 'false');
}

/** The storm from one end to the other in about twelve seconds. */
function play(): void {
  if (playing) {
    stop();
    draw();
    return;
  }
  const span = facts.toMs - facts.fromMs;
  let at = timeMs === null || timeMs >= facts.toMs ? facts.fromMs : timeMs;
  let before = performance.now();
  byId('play').textContent = 'Pause';
  byId('play').setAttribute('aria-pressed', 'true');
  const tick = (now: number): void => {
    at += (Math.min(200, now - before) / 12_000) * span;
    before = now;
    setTime(at, { rough: true });
    if (at >= facts.toMs) stop();
    else playing = requestAnimationFrame(tick);
  };
  playing = requestAnimationFrame(tick);
}

function pin(place: LonLat, { bring = false }: { bring?: boolean } = {}): void {
  pinned = place;
  hovered = null;
  const at = view.project(place);
  const outside = !at || at[0] < 20 || at[1] < 20 || at[0] > view.width - 20 || at[1] > view.height - 20;
  if (bring && at && outside) {
    viewState.x += (at[0] - view.width / 2) / view.width / viewState.zoom;
    viewState.y += (at[1] - view.height / 2) / view.height / viewState.zoom;
    draw({ moved: true });
  }
  tellReading();
  paintCross();
}

function zoomBy(factor: number, [px, py]: readonly [number, number] = [view.width / 2, view.height / 2]): void {
  const zoom = Math.min(ZOOMS[1], Math.max(ZOOMS[0], viewState.zoom * factor));
  viewState.x += ((px - view.width / 2) / view.width) * (1 / viewState.zoom - 1 / zoom);
  viewState.y += ((py - view.height / 2) / view.height) * (1 / viewState.zoom - 1 / zoom);
  viewState.zoom = zoom;
  draw({ rough: true, moved: true });
}

function panBy(dx: number, dy: number): void {
  viewState.x -= dx / view.width / viewState.zoom;
  viewState.y -= dy / view.height / viewState.zoom;
  draw({ rough: true, moved: true });
}

function showAll(): void {
  Object.assign(viewState, { zoom: 1, x: 0, y: 0 });
  draw({ moved: true });
}

// —— hands and keys ——

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
    hovered = view.invert(x, y);
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
  const place = view.invert(...onMap(event));
  if (place) pin(place);
};
map.addEventListener('pointerup', lift);
map.addEventListener('pointercancel', lift);
map.addEventListener('pointerleave', () => {
  if (pointers.size > 0) return;
  hovered = null;
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
    const at = view.project(pinned) ?? [view.width / 2, view.height / 2];
    const place = view.invert(at[0] + 10 * step[0], at[1] + 10 * step[1]);
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
  const at = timeMs ?? facts.fromMs;
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

// —— light and dark ——

function setDark(dark: boolean): void {
  palette = dark ? DARK : LIGHT;
  document.documentElement.dataset['theme'] = dark ? 'dark' : 'light';
  byId('theme').textContent = dark ? 'Light' : 'Dark';
  ground = null;
  tellLegend();
  tellIsotachs();
  drawCharts();
  draw();
}

const system = window.matchMedia('(prefers-color-scheme: dark)');
let chosen = false;
system.addEventListener('change', () => {
  if (!chosen) setDark(system.matches);
});
byId('theme').addEventListener('click', () => {
  chosen = true;
  setDark(!palette.dark);
});

byId('cells').textContent = facts.grid.note;
byId('cautions').replaceChildren(
  ...facts.cautions.slice(0, 30).map((caution) => {
    const item = document.createElement('li');
    item.textContent = caution;
    return item;
  }),
);
tellOwn();
tellMoment();
tellReading();
setDark(system.matches);
new ResizeObserver(() => {
  drawCharts();
  draw({ moved: true });
}).observe(byId('frame-box'));
document.documentElement.dataset['ready'] = 'yes';
