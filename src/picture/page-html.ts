import type { Swath } from '../swath/swath.js';
import type { Deflate } from '../write/deflate.js';
import { CAUTION } from '../write/provenance.js';
import { toBase64 } from './base64.js';
import { knownPeak } from './map-input.js';
import { lighterPolygons, type PageFacts, packFields, pageFields } from './page-data.js';
import { escapeXml } from './svg.js';
import { averagingText, latitudeLongitudeText, levelTexts, momentText, periodText, windText } from './words.js';

/** Script and style of the page with their SHA-256 in base64, for the content-security policy. */
export interface PageAssets {
  readonly script: string;
  readonly scriptSha256: string;
  readonly style: string;
  readonly styleSha256: string;
}

export interface PageInput
  extends Omit<PageFacts, 'grid' | 'hoursThresholdsMps' | 'originMs' | 'averagingS' | 'gustDurationS'> {
  readonly swath: Swath;
  /** the map of {@link mapSvg}: what is printed, and what is seen without scripts */
  readonly mapSvg: string;
  /** GeoJSON polygons as a sphere wants them, or a TopoJSON document with the object `land`; null without a coast */
  readonly coast: string | null;
  /** whose coast it is */
  readonly coastCredit: string;
}

/** Characters of a whole page at most. */
const MOST_CHARACTERS = 1_950_000;
/** Bytes that the isotachs may take, packed. */
const MOST_ISOTACH_BYTES = 250_000;
/** Bytes that the fields may always take: what else is in a page leaves room for them. */
const LEAST_FIELD_BYTES = 100_000;
const FIRST_CELLS = 250_000;

/**
 * The whole result as one file that opens from disk: no request leaves it, and its policy forbids any. The wind at a
 * chosen moment is computed in the page by the same engine. Texts from files are data, never markup.
 */
export async function mapPage(
  input: PageInput,
  { deflate, assets }: { readonly deflate: Deflate; readonly assets: PageAssets },
): Promise<string> {
  const { swath, mapSvg, coast: coastDocument, coastCredit: _credit, ...rest } = input;
  const own = { ...rest, peak: knownPeak(rest.peak) };
  const encoder = new TextEncoder();
  const packed = async (cells: number) => {
    const { grid, fields } = pageFields(swath, cells);
    return { grid, bytes: await deflate(packFields(fields, grid.nx)) };
  };
  const factsWith = (grid: PageFacts['grid'], leastDeg: number): Promise<Uint8Array> | Uint8Array => {
    const facts: PageFacts = {
      ...own,
      isotachs: own.isotachs.map((isotach) => ({ ...isotach, polygons: lighterPolygons(isotach.polygons, leastDeg) })),
      averagingS: swath.averagingS,
      gustDurationS: swath.gustDurationS,
      grid,
      hoursThresholdsMps: swath.hoursAbove.map(({ thresholdMps }) => thresholdMps),
      originMs: swath.originMs,
    };
    return deflate(encoder.encode(JSON.stringify(facts)));
  };
  const coast = coastDocument === null ? '' : toBase64(await deflate(encoder.encode(coastDocument)));
  let cells = FIRST_CELLS;
  let small = await packed(cells);
  let least = small.grid.cell * 0.2;
  let facts = await factsWith(small.grid, least);
  while (facts.length > MOST_ISOTACH_BYTES && least < 2) {
    least *= 2;
    facts = await factsWith(small.grid, least);
  }
  // what the rest leaves, four characters for three bytes
  const others = assets.script.length + assets.style.length + coast.length + mapSvg.length + (4 / 3) * facts.length;
  const room = Math.max(LEAST_FIELD_BYTES, 0.75 * (MOST_CHARACTERS - others - 12_000));
  while (small.bytes.length > room && cells > 1000) {
    cells = Math.min(cells, small.grid.nx * small.grid.ny) * Math.min(0.8, room / small.bytes.length);
    small = await packed(cells);
  }
  facts = await factsWith(small.grid, least);
  return htmlOf({ ...input, peak: own.peak }, assets, {
    facts: toBase64(facts),
    fields: toBase64(small.bytes),
    coast,
    mapSvg,
  });
}

function htmlOf(
  input: PageInput,
  assets: PageAssets,
  data: { readonly facts: string; readonly fields: string; readonly coast: string; readonly mapSvg: string },
): string {
  const name = escapeXml(input.storm.name ?? input.storm.id);
  const { swath } = input;
  const policy = `default-src 'none'; script-src 'sha256-${assets.scriptSha256}'; style-src 'sha256-${assets.styleSha256}'; img-src data: blob:; base-uri 'none'; form-action 'none'`;
  const hours = swath.hoursAbove
    .map(({ thresholdMps }, i) => radio(`hours${i}`, `Hours at or above ${levelTexts(thresholdMps).knots} kt`))
    .join('');
  const peak = input.peak
    ? `<p class="figure"><strong id="peak-wind" data-mps="${input.peak.windMps}">${input.peak.windMps.toFixed(1)} m/s</strong> <span>${escapeXml(windText(input.peak.windMps).replace(/^.*\(|\)$/g, ''))}, ${averagingText(swath.averagingS)}</span></p>
<p>${escapeXml(latitudeLongitudeText(input.peak))}, ${momentText(input.peak.timeMs)} UTC<br>Highest gust ${escapeXml(windText(input.peak.gustMps))}</p>
<button type="button" id="to-peak">Go there</button>`
    : '<p id="peak-wind">No wind on these cells.</p>';
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light dark">
<meta name="generator" content="Galewake ${escapeXml(input.version)}">
<title>${name}: peak wind</title>
<style>${assets.style}</style>
</head>
<body>
<div id="app">
<header>
<div>
<h1>${name}</h1>
<p>${escapeXml(periodText(input.fromMs, input.toMs))}${input.storm.name && input.storm.name !== input.storm.id ? ` · ${escapeXml(input.storm.id)}` : ''}</p>
</div>
<div class="tools">
<button type="button" id="theme" aria-label="Switch between light and dark">Dark</button>
<button type="button" id="print">Print the map</button>
</div>
</header>
<p class="caution">${escapeXml(CAUTION)}</p>
<main>
<section class="sheet" aria-label="Map and time">
<div class="frame" id="frame-box">
<canvas id="map" tabindex="0" role="application" aria-describedby="map-keys" aria-label="Map of the storm"></canvas>
<canvas id="cross" aria-hidden="true"></canvas>
<div class="zoom">
<button type="button" id="zoom-in" aria-label="Larger">+</button>
<button type="button" id="zoom-out" aria-label="Smaller">−</button>
<button type="button" id="zoom-all" aria-label="Whole storm in view">◻</button>
</div>
</div>
<p id="map-keys" class="keys">On the map: arrows move the cross, with Shift the map; + and − change the scale; 0 shows all.</p>
<div class="ruler">
<button type="button" id="play" aria-pressed="false">Play</button>
<div class="lane"><canvas id="ruler" tabindex="0" role="slider" aria-label="Moment of the storm" aria-valuemin="0" aria-valuemax="100" aria-valuenow="0" aria-valuetext="whole storm"></canvas></div>
<button type="button" id="whole" aria-pressed="true">Whole storm</button>
</div>
<p id="moment" class="moment" role="status"></p>
<div id="legend" class="legend" role="img" aria-label="Colours"></div>
</section>
<aside aria-label="Readings and choices">
<section class="strongest"><h2>Strongest</h2>${peak}</section>
<section><h2>Under the cross</h2>
<dl id="reading" aria-live="polite"></dl>
<form id="place-form" class="place">
<label>Latitude <input id="lat" inputmode="decimal" autocomplete="off" placeholder="27.9N"></label>
<label>Longitude <input id="lon" inputmode="decimal" autocomplete="off" placeholder="45.2W"></label>
<button type="submit" id="read">Read here</button>
</form>
<p id="place-error" role="alert" class="error"></p>
</section>
<fieldset id="layers"><legend>Coloured by</legend>
${radio('wind', 'Peak wind', true)}${radio('gust', 'Peak gust')}${radio('direction', 'Peak wind with its direction')}${radio('time', 'Time of the peak')}${hours}${radio('now', 'Wind at the moment')}
</fieldset>
</aside>
<div class="bench">
<section><h2>Cut through the centre, <span id="cut-time"></span></h2>
<canvas id="cut" role="img" aria-label="Wind along a line through the centre"></canvas>
<label class="range">Bearing <input type="range" id="bearing" min="0" max="175" step="5" value="90"> <output id="bearing-text" for="bearing"></output></label>
</section>
<fieldset id="isotachs"><legend>Isotachs, peak ${input.quantity === 'wind' ? 'wind' : 'gust'}</legend></fieldset>
<fieldset id="own" hidden><legend>Places and zones</legend></fieldset>
<section class="about"><h2>How this was made</h2><p id="cells"></p><p>${escapeXml(input.recipeText)}</p><ul id="cautions"></ul>
<p>Galewake ${escapeXml(input.version)}. Coast: ${escapeXml(input.coastCredit)}. Times in UTC. 10 m, ${averagingText(swath.averagingS)}, ${averagingText(swath.gustDurationS, 'gust')}.</p></section>
</div>
</main>
</div>
<div class="print-map">${data.mapSvg.replace(/^<svg /, '<svg preserveAspectRatio="xMidYMin meet" ')}</div>
<script type="text/plain" id="facts">${data.facts}</script>
<script type="text/plain" id="fields">${data.fields}</script>
<script type="text/plain" id="coast">${data.coast}</script>
<script>${assets.script}</script>
</body>
</html>
`;
}

function radio(value: string, label: string, checked = false): string {
  return `<label><input type="radio" name="layer" value="${value}"${checked ? ' checked' : ''}> ${label}</label>\n`;
}
