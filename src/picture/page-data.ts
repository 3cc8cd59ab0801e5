import type { Recipe } from '../model/recipe.js';
import { projection } from '../swath/grid.js';
import type { Swath } from '../swath/swath.js';
import type { Track } from '../track/track.js';
import type { PictureIsotach } from './isotach-paths.js';
import type { MapPeak, MapPlace, MapZone } from './map-svg.js';

/** What a page knows besides its fields and its coast: one JSON document in the page. */
export interface PageFacts {
  readonly version: string;
  readonly storm: { readonly id: string; readonly name: string | null };
  readonly track: Track;
  readonly recipe: Recipe;
  readonly recipeText: string;
  readonly lowestLevelMps: number;
  readonly fromMs: number;
  readonly toMs: number;
  readonly peak: MapPeak | null;
  readonly quantity: 'wind' | 'gust';
  readonly averagingS: number;
  readonly gustDurationS: number;
  readonly isotachs: readonly PictureIsotach[];
  readonly places: readonly MapPlace[];
  readonly zones: readonly MapZone[];
  readonly cautions: readonly string[];
  readonly grid: PageGrid;
  readonly hoursThresholdsMps: readonly number[];
  readonly originMs: number;
}

/** The cells of a page: always longitude and latitude, row 0 = north, index = row * nx + column. */
export interface PageGrid {
  readonly west: number;
  readonly north: number;
  readonly cell: number;
  readonly nx: number;
  readonly ny: number;
  /** how the page says where its cells come from */
  readonly note: string;
}

/** Quantised fields of a page, one after the other. */
export interface PageFields {
  /** m/s */
  readonly wind: Float32Array;
  readonly gust: Float32Array;
  /** degrees, NaN where there is no wind */
  readonly from: Float32Array;
  /** seconds after the first fix, NaN where there is no wind */
  readonly time: Float32Array;
  /** hours, one field for each threshold */
  readonly hours: readonly Float32Array[];
}

/** Steps of the quantised fields: m/s, m/s, degrees, s, h. */
const STEP = { wind: 0.01, gust: 0.01, from: 0.5, time: 60, hours: 0.05 } as const;
const NONE = 65535;

/** A swath on cells of longitude and latitude, at most `mostCells`: the strongest cell of each block where it is coarser. */
export function pageFields(swath: Swath, mostCells: number): { readonly grid: PageGrid; readonly fields: PageFields } {
  const { grid } = swath;
  const unit = grid.geographic ? '°' : ' m';
  const computed = `${Number(grid.cell.toPrecision(4))}${unit}${grid.geographic ? '' : ` (${grid.crs})`}`;
  if (grid.geographic) {
    const factor = Math.max(1, Math.ceil(Math.sqrt((grid.nx * grid.ny) / mostCells)));
    const nx = Math.ceil(grid.nx / factor);
    const ny = Math.ceil(grid.ny / factor);
    const cell = grid.cell * factor;
    const fields = blocks(swath, { nx, ny, factor });
    const note =
      factor === 1
        ? `Cells of ${computed}.`
        : `Computed on cells of ${computed}; shown here on cells of ${Number(cell.toPrecision(4))}°, each with the strongest wind inside it.`;
    return { grid: { west: grid.bounds[0], north: grid.bounds[3], cell, nx, ny, note }, fields };
  }
  return projected(swath, mostCells, computed);
}

function emptyFields(n: number, swath: Swath): PageFields {
  return {
    wind: new Float32Array(n),
    gust: new Float32Array(n),
    from: new Float32Array(n).fill(Number.NaN),
    time: new Float32Array(n).fill(Number.NaN),
    hours: swath.hoursAbove.map(() => new Float32Array(n)),
  };
}

function blocks(swath: Swath, to: { readonly nx: number; readonly ny: number; readonly factor: number }): PageFields {
  const { nx, ny } = swath.grid;
  const fields = emptyFields(to.nx * to.ny, swath);
  for (let row = 0; row < ny; row++) {
    const target = Math.floor(row / to.factor) * to.nx;
    for (let column = 0; column < nx; column++)
      take(fields, target + Math.floor(column / to.factor), swath, row * nx + column);
  }
  return fields;
}

/** Puts a cell into a block: the strongest wind brings its direction and time along. */
function take(fields: PageFields, k: number, swath: Swath, source: number): void {
  const wind = swath.windMps[source]!;
  if (wind > fields.wind[k]!) {
    fields.wind[k] = wind;
    fields.from[k] = swath.windFromDeg[source]!;
    fields.time[k] = swath.peakTimeS[source]!;
  }
  fields.gust[k] = Math.max(fields.gust[k]!, swath.gustMps[source]!);
  swath.hoursAbove.forEach(({ hours }, i) => {
    fields.hours[i]![k] = Math.max(fields.hours[i]![k]!, hours[source]!);
  });
}

/** A grid in another projection, read at the nearest cell from a lattice of longitude and latitude around it. */
function projected(swath: Swath, mostCells: number, computed: string): { grid: PageGrid; fields: PageFields } {
  const { grid } = swath;
  const { inverse, forward } = projection(grid.crs);
  const [gridWest, gridSouth, gridEast, gridNorth] = grid.bounds;
  const middle = inverse((gridWest + gridEast) / 2, (gridSouth + gridNorth) / 2);
  let [west, east, south, north] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY, 90, -90];
  const SAMPLES = 64;
  for (let i = 0; i <= SAMPLES; i++) {
    for (let j = 0; j <= SAMPLES; j++) {
      const [lon, lat] = inverse(
        gridWest + ((gridEast - gridWest) * i) / SAMPLES,
        gridSouth + ((gridNorth - gridSouth) * j) / SAMPLES,
      );
      if (!Number.isFinite(lon) || !Number.isFinite(lat)) continue;
      const near = middle[0] + (((((lon - middle[0] + 180) % 360) + 360) % 360) - 180);
      west = Math.min(west, near);
      east = Math.max(east, near);
      south = Math.min(south, lat);
      north = Math.max(north, lat);
    }
  }
  const cell = Math.max(Math.sqrt(((east - west) * (north - south)) / mostCells), 1e-4);
  const nx = Math.max(1, Math.ceil((east - west) / cell));
  const ny = Math.max(1, Math.ceil((north - south) / cell));
  const fields = emptyFields(nx * ny, swath);
  for (let row = 0; row < ny; row++) {
    for (let column = 0; column < nx; column++) {
      const [x, y] = forward(west + (column + 0.5) * cell, north - (row + 0.5) * cell);
      const sourceColumn = Math.floor((x - gridWest) / grid.cell);
      const sourceRow = Math.floor((gridNorth - y) / grid.cell);
      if (sourceColumn < 0 || sourceRow < 0 || sourceColumn >= grid.nx || sourceRow >= grid.ny) continue;
      take(fields, row * nx + column, swath, sourceRow * grid.nx + sourceColumn);
    }
  }
  const note = `Computed on cells of ${computed}; shown here on cells of ${Number(cell.toPrecision(3))}°, each with the value of the nearest computed cell.`;
  return { grid: { west, north, cell, nx, ny, note }, fields };
}

/** Fields as bytes: whole steps, differences along rows, low bytes before high ones; made to be deflated. */
export function packFields(fields: PageFields, nx: number): Uint8Array {
  const { wind, gust, from, time, hours } = fields;
  const parts: (readonly [Float32Array, number])[] = [
    [wind, STEP.wind],
    [gust, STEP.gust],
    [from, STEP.from],
    [time, STEP.time],
    ...hours.map((field) => [field, STEP.hours] as const),
  ];
  const n = wind.length;
  const out = new Uint8Array(parts.length * n * 2);
  parts.forEach(([field, step], part) => {
    let before = 0;
    for (let k = 0; k < n; k++) {
      if (k % nx === 0) before = 0;
      const value = field[k]!;
      const whole = Number.isNaN(value) ? NONE : Math.min(NONE - 1, Math.max(0, Math.round(value / step)));
      const difference = (whole - before) & 0xffff;
      out[part * 2 * n + k] = difference & 0xff;
      out[part * 2 * n + n + k] = difference >> 8;
      before = whole;
    }
  });
  return out;
}

/** The opposite of {@link packFields}. */
export function unpackFields(bytes: Uint8Array, grid: { readonly nx: number; readonly ny: number }): PageFields {
  const n = grid.nx * grid.ny;
  const fields = Array.from({ length: bytes.length / (2 * n) }, (_, part) => {
    const step = [STEP.wind, STEP.gust, STEP.from, STEP.time][part] ?? STEP.hours;
    const out = new Float32Array(n);
    let whole = 0;
    for (let k = 0; k < n; k++) {
      if (k % grid.nx === 0) whole = 0;
      whole = (whole + bytes[part * 2 * n + k]! + (bytes[part * 2 * n + n + k]! << 8)) & 0xffff;
      out[k] = whole === NONE ? Number.NaN : whole * step;
    }
    return out;
  });
  const [wind, gust, from, time, ...hours] = fields;
  return { wind: wind!, gust: gust!, from: from!, time: time!, hours };
}

/** Polygons with fewer digits and without vertices nearer than `leastDeg` to the one before. */
export function lighterPolygons(polygons: PictureIsotach['polygons'], leastDeg: number): PictureIsotach['polygons'] {
  const round = (value: number): number => Math.round(value * 1e4) / 1e4;
  return polygons.map((polygon) =>
    polygon.flatMap((ring) => {
      const out: number[][] = [];
      ring.forEach((position, i) => {
        const [x, y] = [position[0]!, position[1]!];
        const before = out[out.length - 1];
        const border = Math.abs(x) === 180 || Math.abs(y) === 90;
        if (before && !border && i < ring.length - 1 && Math.hypot(x - before[0]!, y - before[1]!) < leastDeg) return;
        out.push([round(x), round(y)]);
      });
      return out.length >= 4 ? [out] : [];
    }),
  );
}
