import { destination } from '../../earth.js';
import type { WindField } from '../../model/field.js';
import { windOf } from '../../model/wind.js';
import { HOUR_MS } from '../../units.js';
import { roundDomain, roundTicks, straightScale } from '../chart.js';
import { hexOf } from '../colours.js';
import type { PageFacts } from '../page-data.js';
import { dayText, momentText } from '../words.js';
import { trace } from './paint.js';
import { type Palette, strengthColour, strengthOf } from './palette.js';
import type { PageStorm } from './storm.js';

const FONT = "13px 'Source Sans 3','Segoe UI',Roboto,'Helvetica Neue',Arial,sans-serif";

/** A canvas as large as its box, sharp on any screen. */
export function sharpCanvas(canvas: HTMLCanvasElement): { c: CanvasRenderingContext2D; width: number; height: number } {
  const { clientWidth: width, clientHeight: height } = canvas;
  const ratio = Math.min(3, globalThis.devicePixelRatio || 1);
  canvas.width = Math.max(1, Math.round(width * ratio));
  canvas.height = Math.max(1, Math.round(height * ratio));
  const c = canvas.getContext('2d')!;
  c.setTransform(ratio, 0, 0, ratio, 0, 0);
  return { c, width, height };
}

const RULER = { left: 8, right: 8, top: 6, foot: 20 } as const;

/** The ruler of time: the storm's intensity as a coloured hill, the chosen moment as a needle. */
export function paintRuler(
  canvas: HTMLCanvasElement,
  options: { facts: PageFacts; storm: PageStorm; palette: Palette; timeMs: number | null },
): void {
  const { facts, storm, palette, timeMs } = options;
  const { c, width, height } = sharpCanvas(canvas);
  c.fillStyle = palette.sheet;
  c.fillRect(0, 0, width, height);
  const x = straightScale([facts.fromMs, Math.max(facts.toMs, facts.fromMs + 1)], [RULER.left, width - RULER.right]);
  const most = Math.max(20, ...storm.intensities.map(({ windMps }) => windMps));
  const base = height - RULER.foot;
  const y = straightScale([0, most * 1.05], [base, RULER.top]);
  const points = storm.intensities;
  for (let i = 0; i + 1 < points.length; i++) {
    const [a, b] = [points[i]!, points[i + 1]!];
    c.fillStyle = hexOf(strengthColour(strengthOf((a.windMps + b.windMps) / 2), palette));
    c.beginPath();
    c.moveTo(x.at(a.timeMs) - 0.3, base);
    c.lineTo(x.at(a.timeMs) - 0.3, y.at(a.windMps));
    c.lineTo(x.at(b.timeMs) + 0.3, y.at(b.windMps));
    c.lineTo(x.at(b.timeMs) + 0.3, base);
    c.fill();
  }
  c.beginPath();
  trace(
    c,
    points.map((point) => [x.at(point.timeMs), y.at(point.windMps)] as const),
  );
  c.strokeStyle = palette.ink;
  c.lineWidth = 1.2;
  c.stroke();
  c.font = FONT;
  c.textAlign = 'center';
  c.fillStyle = palette.quiet;
  const hours = (facts.toMs - facts.fromMs) / HOUR_MS;
  const step = [1, 3, 6, 12, 24, 48, 120, 240].find((size) => hours / size <= Math.max(3, width / 90)) ?? 240;
  let end = Number.NEGATIVE_INFINITY;
  for (let i = Math.ceil(facts.fromMs / (step * HOUR_MS)); i * step * HOUR_MS <= facts.toMs; i++) {
    const at = i * step * HOUR_MS;
    const text = momentText(at).endsWith('00:00') ? dayText(at) : momentText(at).slice(-5);
    const half = c.measureText(text).width / 2;
    const middle = Math.min(width - half - 1, Math.max(half + 1, x.at(at)));
    c.fillRect(x.at(at) - 0.5, base, 1, 4);
    if (middle - half < end + 6) continue;
    c.fillText(text, middle, height - 4);
    end = middle + half;
  }
  c.fillRect(RULER.left, base, width - RULER.left - RULER.right, 1);
  if (timeMs !== null) {
    const at = x.at(timeMs);
    c.fillStyle = palette.halo;
    c.fillRect(at - 2.5, 0, 5, base + 2);
    c.fillStyle = palette.accent;
    c.fillRect(at - 1.25, 0, 2.5, base + 2);
    c.beginPath();
    c.arc(at, y.at(storm.model.path.at(timeMs).maxWindMps), 6, 0, 2 * Math.PI);
    c.fill();
    c.strokeStyle = palette.halo;
    c.lineWidth = 2;
    c.stroke();
  }
}

/** The time under a point of the ruler. */
export function rulerTime(canvas: HTMLCanvasElement, clientX: number, facts: PageFacts): number {
  const box = canvas.getBoundingClientRect();
  const share = (clientX - box.left - RULER.left) / (box.width - RULER.left - RULER.right);
  return facts.fromMs + Math.min(1, Math.max(0, share)) * (facts.toMs - facts.fromMs);
}

/** Wind on a line through the centre, from one side to the other. */
export function paintCut(
  canvas: HTMLCanvasElement,
  options: { field: WindField; bearingDeg: number; palette: Palette },
): string {
  const { field, bearingDeg, palette } = options;
  const { c, width, height } = sharpCanvas(canvas);
  const reachM = Math.min(0.9 * field.outerRadiusM, Math.max(8 * field.state.radiusOfMaxWindM, 200_000));
  const COUNT = 240;
  const points = Array.from({ length: COUNT + 1 }, (_, i) => {
    // closer together near the centre, where the wind changes fast
    const t = (2 * i) / COUNT - 1;
    const distance = reachM * Math.sign(t) * t * t;
    const place = destination(field.state, {
      bearingDeg: distance < 0 ? bearingDeg + 180 : bearingDeg,
      distanceM: Math.abs(distance),
    });
    return { km: distance / 1000, windMps: windOf(field, place).speedMps };
  });
  const most = Math.max(10, ...points.map(({ windMps }) => windMps));
  const yDomain = roundDomain([0, most], 5);
  const x = straightScale([-reachM / 1000, reachM / 1000], [34, width - 6]);
  const y = straightScale(yDomain, [height - 36, 8]);
  c.fillStyle = palette.sheet;
  c.fillRect(0, 0, width, height);
  c.font = FONT;
  c.fillStyle = palette.quiet;
  c.textAlign = 'right';
  for (const tick of roundTicks(yDomain, 5)) {
    c.fillText(String(tick), 28, y.at(tick) + 4);
    c.globalAlpha = 0.25;
    c.fillRect(34, y.at(tick), width - 40, 1);
    c.globalAlpha = 1;
  }
  c.textAlign = 'center';
  for (const tick of roundTicks([-reachM / 1000, reachM / 1000], 5)) {
    const half = c.measureText(String(Math.abs(tick))).width / 2;
    if (x.at(tick) - half >= 34 && x.at(tick) + half <= width)
      c.fillText(String(Math.abs(tick)), x.at(tick), height - 20);
  }
  c.textAlign = 'left';
  c.fillText(compass(bearingDeg + 180), 34, height - 4);
  c.textAlign = 'right';
  c.fillText(compass(bearingDeg), width - 6, height - 4);
  c.textAlign = 'center';
  c.fillText('km from the centre; m/s', (width + 34) / 2, height - 4);
  for (let i = 0; i < COUNT; i++) {
    const [a, b] = [points[i]!, points[i + 1]!];
    c.fillStyle = hexOf(strengthColour(strengthOf((a.windMps + b.windMps) / 2), palette));
    c.beginPath();
    c.moveTo(x.at(a.km), y.at(0));
    c.lineTo(x.at(a.km), y.at(a.windMps));
    c.lineTo(x.at(b.km) + 0.4, y.at(b.windMps));
    c.lineTo(x.at(b.km) + 0.4, y.at(0));
    c.fill();
  }
  c.beginPath();
  trace(
    c,
    points.map((point) => [x.at(point.km), y.at(point.windMps)] as const),
  );
  c.strokeStyle = palette.ink;
  c.lineWidth = 1.4;
  c.stroke();
  const sides = [points.filter(({ km }) => km < 0), points.filter(({ km }) => km > 0)].map((side) =>
    side.reduce((best, point) => (point.windMps > best.windMps ? point : best), side[0]!),
  );
  return `${compass(bearingDeg + 180)} at most ${sides[0]!.windMps.toFixed(1)} m/s, ${compass(bearingDeg)} at most ${sides[1]!.windMps.toFixed(1)} m/s`;
}

const POINTS = ['N', 'NNE', 'NE', 'ENE', 'E', 'ESE', 'SE', 'SSE', 'S', 'SSW', 'SW', 'WSW', 'W', 'WNW', 'NW', 'NNW'];

/** The point of the compass nearest to a bearing. */
export function compass(bearingDeg: number): string {
  return POINTS[Math.round((((bearingDeg % 360) + 360) % 360) / 22.5) % 16]!;
}
