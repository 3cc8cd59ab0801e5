import { wrapLongitude } from '../../earth.js';
import type { Rgb } from '../colours.js';
import type { PageFacts, PageFields } from '../page-data.js';
import { levelTexts, momentText } from '../words.js';
import { overSea, type Palette, strengthColour, windPaint } from './palette.js';

/** What the map is coloured by. */
export interface Layer {
  readonly id: string;
  readonly title: string;
  /** values at places; NaN = nothing there */
  readonly sample: (lonDeg: number, latDeg: number) => number;
  readonly paint: (value: number, palette: Palette) => readonly [Rgb, number];
  readonly legend: (
    palette: Palette,
  ) => readonly { readonly colour: string; readonly main: string; readonly more: string }[];
}

/** Index of the cell under a place, or −1. */
export function cellUnder(facts: PageFacts, lonDeg: number, latDeg: number): number {
  const { grid } = facts;
  const middle = grid.west + (grid.nx * grid.cell) / 2;
  const lon = middle + wrapLongitude(lonDeg - middle);
  const column = Math.floor((lon - grid.west) / grid.cell);
  const row = Math.floor((grid.north - latDeg) / grid.cell);
  return column < 0 || row < 0 || column >= grid.nx || row >= grid.ny ? -1 : row * grid.nx + column;
}

/** A field between its cell centres, straight in both directions. */
function smooth(facts: PageFacts, field: Float32Array): (lonDeg: number, latDeg: number) => number {
  const { grid } = facts;
  const middle = grid.west + (grid.nx * grid.cell) / 2;
  const around = grid.nx * grid.cell > 359.9;
  return (lonDeg, latDeg) => {
    const x = (middle + wrapLongitude(lonDeg - middle) - grid.west) / grid.cell - 0.5;
    const y = (grid.north - latDeg) / grid.cell - 0.5;
    if (x < -0.5 || y < -0.5 || x > grid.nx - 0.5 || y > grid.ny - 0.5) return Number.NaN;
    const row = Math.min(grid.ny - 1, Math.max(0, Math.floor(y)));
    const below = Math.min(grid.ny - 1, row + 1);
    let column = Math.floor(x);
    let right = column + 1;
    if (around) {
      column = (column + grid.nx) % grid.nx;
      right %= grid.nx;
    } else {
      column = Math.min(grid.nx - 1, Math.max(0, column));
      right = Math.min(grid.nx - 1, Math.max(0, right));
    }
    const tx = Math.min(1, Math.max(0, x - Math.floor(x)));
    const ty = Math.min(1, Math.max(0, y - row));
    const a = field[row * grid.nx + column]! * (1 - tx) + field[row * grid.nx + right]! * tx;
    const b = field[below * grid.nx + column]! * (1 - tx) + field[below * grid.nx + right]! * tx;
    return a * (1 - ty) + b * ty;
  };
}

const windLegend = (facts: PageFacts) => (palette: Palette) => {
  const own = facts.isotachs.map(({ thresholdMps }) => thresholdMps);
  const levels = own.length > 0 && own.length <= 9 ? own : [10, 20, 30, 40, 50, 60, 70];
  return levels.map((level) => {
    const { knots, mps } = levelTexts(level);
    return { colour: overSea(windPaint(level, palette), palette), main: `${mps}`, more: `${knots} kt` };
  });
};

export function layersOf(facts: PageFacts, fields: PageFields): Layer[] {
  const legend = windLegend(facts);
  const time = facts.originMs;
  const span = Math.max(1, (facts.toMs - facts.fromMs) / 1000);
  const offset = (facts.fromMs - time) / 1000;
  const timeShare = (seconds: number): number => 0.08 + 0.84 * ((seconds - offset) / span);
  const layers: Layer[] = [
    { id: 'wind', title: 'Peak wind, m/s', sample: smooth(facts, fields.wind), paint: windPaint, legend },
    { id: 'gust', title: 'Peak gust, m/s', sample: smooth(facts, fields.gust), paint: windPaint, legend },
    {
      id: 'direction',
      title: 'Peak wind, m/s; arrows point with it',
      sample: smooth(facts, fields.wind),
      paint: windPaint,
      legend,
    },
    {
      id: 'time',
      title: 'Time of the peak, UTC',
      sample: (lon, lat) => {
        const k = cellUnder(facts, lon, lat);
        return k < 0 || fields.wind[k]! < 8 ? Number.NaN : fields.time[k]!;
      },
      paint: (value, palette) => [strengthColour(timeShare(value), palette), 225],
      legend: (palette) =>
        Array.from({ length: 6 }, (_, i) => {
          const seconds = offset + (span * i) / 5;
          const text = momentText(time + 1000 * seconds);
          return {
            colour: overSea([strengthColour(timeShare(seconds), palette), 225], palette),
            main: text.replace(/ [^ ]*$/, ''),
            more: text.slice(-5),
          };
        }),
    },
  ];
  fields.hours.forEach((field, i) => {
    let most = 0;
    for (const value of field) if (value > most) most = value;
    const threshold = levelTexts(facts.hoursThresholdsMps[i]!).knots;
    const paint = (value: number, palette: Palette): readonly [Rgb, number] => [
      strengthColour(0.06 + (0.86 * value) / (most || 1), palette),
      value > 0.02 ? 235 : 0,
    ];
    layers.push({
      id: `hours${i}`,
      title: `Hours at or above ${threshold} kt`,
      sample: smooth(facts, field),
      paint,
      legend: (palette) =>
        most === 0
          ? [{ colour: palette.sea, main: '0', more: 'nowhere' }]
          : Array.from({ length: 6 }, (_, k) => {
              const value = (most * (k + 0.5)) / 6;
              return {
                colour: overSea(paint(value, palette), palette),
                main: value.toFixed(most < 12 ? 1 : 0),
                more: 'h',
              };
            }),
    });
  });
  return layers;
}

/** The wind at the moment has the legend of the peak wind. */
export function momentLegend(facts: PageFacts): Layer['legend'] {
  return windLegend(facts);
}
