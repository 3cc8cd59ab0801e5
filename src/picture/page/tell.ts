import { wrapLongitude } from '../../earth.js';
import { toKnots } from '../../units.js';
import type { LonLat } from '../extent.js';
import { latitudeLongitudeText, levelTexts, momentText } from '../words.js';
import { cellUnder, momentLegend } from './layers.js';
import { overSea, windPaint } from './palette.js';
import { compass } from './small-charts.js';
import { byId, draw, facts, fields, layers, ruler, stage, storm } from './stage.js';
import { kilometresFrom } from './storm.js';

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

/** The cell of the peak is told as the summary states it, not as the cells are rounded. */
const peakCell = facts.peak ? cellUnder(facts, facts.peak.lonDeg, facts.peak.latDeg) : -1;

export function tellReading(): void {
  const [lon, lat] = stage.hovered ?? stage.pinned;
  const place = { lonDeg: wrapLongitude(lon), latDeg: lat };
  const rows: [string, string][] = [['Place', latitudeLongitudeText(place)]];
  const k = cellUnder(facts, lon, lat);
  if (stage.timeMs !== null) {
    const wind = storm.windAt(place, stage.timeMs);
    rows.push(['Wind now', speed(wind.speedMps)], ['Blows from', fromText(wind.fromDeg)]);
    rows.push(['Centre', `${kilometresFrom(storm.fieldAt(stage.timeMs), place).toFixed(0)} km away`]);
  }
  if (k < 0) rows.push(['Peak', 'outside the cells']);
  else {
    rows.push(
      ['Peak wind', speed(k === peakCell ? facts.peak!.windMps : fields.wind[k]!)],
      ['Peak gust', speed(fields.gust[k]!)],
    );
    if (stage.timeMs === null) rows.push(['Blew from', fromText(fields.from[k]!)]);
    const seconds = fields.time[k]!;
    rows.push(['Time', Number.isNaN(seconds) ? '–' : `${momentText(facts.originMs + 1000 * seconds)} UTC`]);
    fields.hours.forEach((field, i) => {
      if (stage.timeMs === null || i === 0)
        rows.push([`≥ ${levelTexts(facts.hoursThresholdsMps[i]!).knots} kt`, `${field[k]!.toFixed(1)} h`]);
    });
  }
  say(byId('reading'), rows);
}

export function tellMoment(): void {
  const text = stage.timeMs === null ? 'whole storm' : `${momentText(stage.timeMs)} UTC`;
  const state = stage.timeMs === null ? null : storm.model.path.at(stage.timeMs);
  byId('moment').textContent = state
    ? `${text}: maximum wind ${speed(state.maxWindMps)}, pressure ${(state.centralPressurePa / 100).toFixed(0)} hPa, radius of maximum wind ${(state.radiusOfMaxWindM / 1000).toFixed(0)} km`
    : 'The whole storm: the strongest wind of each place. Drag along the ruler to see one moment.';
  ruler.setAttribute('aria-valuetext', text);
  const share =
    stage.timeMs === null ? 0 : (100 * (stage.timeMs - facts.fromMs)) / Math.max(1, facts.toMs - facts.fromMs);
  ruler.setAttribute('aria-valuenow', share.toFixed(0));
  byId('whole').setAttribute('aria-pressed', String(stage.timeMs === null));
}

export function tellLegend(): void {
  const layer = layers.find(({ id }) => id === stage.layerId);
  const entries = (layer?.legend ?? momentLegend(facts))(stage.palette);
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

export function tellIsotachs(): void {
  const box = byId('isotachs');
  const legend = box.querySelector('legend')!;
  const rows = facts.isotachs.map((isotach, i) => {
    const { knots, mps } = levelTexts(isotach.thresholdMps);
    const empty = isotach.polygons.length === 0;
    const upper = isotach.upperMps == null ? '' : `–${levelTexts(isotach.upperMps).knots}`;
    return choice(`${knots}${upper} kt, ${mps} m/s`, {
      checked: stage.shownIsotachs.has(i),
      disabled: empty,
      swatch: overSea(windPaint(isotach.thresholdMps, stage.palette), stage.palette),
      note: empty
        ? 'nowhere'
        : `${Math.round(isotach.areaM2 / 1e6)
            .toLocaleString('en')
            .replaceAll(',', '\u202f')} km²`,
      onChange: (on) => {
        if (on) stage.shownIsotachs.add(i);
        else stage.shownIsotachs.delete(i);
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

/** The user's own places; `go` brings one under the cross. */
export function tellOwn(go: (place: LonLat) => void): void {
  const box = byId<HTMLFieldSetElement>('own');
  if (facts.places.length + facts.zones.length === 0) return;
  box.hidden = false;
  const show = choice('Show them on the map', {
    checked: true,
    disabled: false,
    onChange: (on) => {
      stage.ownPlaces = on;
      draw();
    },
  });
  const list = document.createElement('div');
  list.className = 'own-list';
  for (const place of facts.places.slice(0, 200)) {
    const button = document.createElement('button');
    button.type = 'button';
    button.textContent = place.name;
    button.addEventListener('click', () => go([place.lonDeg, place.latDeg]));
    list.append(button);
  }
  box.append(show, list);
}
