import type { Recipe } from '../model/recipe.js';
import { tidy, toKnots } from '../units.js';

const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const two = (value: number): string => String(value).padStart(2, '0');

/** `14 Sep` */
export function dayText(timeMs: number): string {
  const time = new Date(timeMs);
  return `${time.getUTCDate()} ${MONTHS[time.getUTCMonth()]}`;
}

/** `14 Sep 06:00`; midnight is the day alone with `short`. */
export function momentText(timeMs: number, { short = false }: { readonly short?: boolean } = {}): string {
  const time = new Date(Math.round(timeMs / 60_000) * 60_000);
  const clock = `${two(time.getUTCHours())}:${two(time.getUTCMinutes())}`;
  return short && clock === '00:00' ? dayText(time.getTime()) : `${dayText(time.getTime())} ${clock}`;
}

/** `12 Sep 2031 06:00 – 16 Sep 2031 18:00 UTC` */
export function periodText(fromMs: number, toMs: number): string {
  const [from, to] = [new Date(fromMs), new Date(toMs)];
  const year = (time: Date): number => time.getUTCFullYear();
  const full = (ms: number, time: Date): string => momentText(ms).replace(/ (?=\d\d:)/, ` ${year(time)} `);
  if (fromMs === toMs) return `${full(fromMs, from)} UTC`;
  const start = year(from) === year(to) ? momentText(fromMs) : full(fromMs, from);
  return `${start} – ${full(toMs, to)} UTC`;
}

/** `1-minute mean`, `10-minute mean`, `3-second gust`. */
export function averagingText(averagingS: number, kind: 'mean' | 'gust' = 'mean'): string {
  return averagingS % 60 === 0 ? `${averagingS / 60}-minute ${kind}` : `${averagingS}-second ${kind}`;
}

/** Whether all levels are whole knots: then knots are named first. */
export function wholeKnots(levelsMps: readonly number[]): boolean {
  return levelsMps.every((level) => Math.abs(toKnots(level) - Math.round(toKnots(level))) < 1e-4);
}

/** `58 m/s (113 kt)` */
export function windText(windMps: number): string {
  return `${windMps.toFixed(1)} m/s (${toKnots(windMps).toFixed(0)} kt)`;
}

/** A level in knots and in m/s, short. */
export function levelTexts(levelMps: number): { readonly knots: string; readonly mps: string } {
  const inKnots = toKnots(levelMps);
  const whole = Math.round(inKnots);
  return {
    knots: Math.abs(inKnots - whole) < 0.05 ? String(whole) : inKnots.toFixed(1),
    mps: tidy(levelMps, 1),
  };
}

/** `27.86°N 65.20°W` */
export function latitudeLongitudeText({
  latDeg,
  lonDeg,
}: {
  readonly latDeg: number;
  readonly lonDeg: number;
}): string {
  const lon = ((((lonDeg + 180) % 360) + 360) % 360) - 180;
  return `${Math.abs(latDeg).toFixed(2)}°${latDeg < 0 ? 'S' : 'N'} ${Math.abs(lon).toFixed(2)}°${lon < 0 ? 'W' : 'E'}`;
}

/** `constant 0.9`, `harper-2001`, or the boundary layer that takes its place. */
export function reductionText(recipe: Recipe): string {
  if (recipe['surface.layer'] !== 'none') return String(recipe['surface.layer']);
  return `${recipe['surface.reduction']}${recipe['surface.reduction'] === 'constant' ? ` ${recipe['surface.factor']}` : ''}`;
}

/** The choices of a recipe that shape the wind, in one line. */
export function recipeText(recipe: Recipe): string {
  const motion = recipe['surface.motion'];
  const surface =
    recipe['surface.layer'] === 'none'
      ? [
          `reduction ${reductionText(recipe)}`,
          `inflow ${recipe['surface.inflow']}`,
          `motion ${motion}${motion === 'none' ? '' : `, maximum ${recipe['surface.maximum']}`}`,
        ]
      : [`boundary layer ${recipe['surface.layer']}`];
  return [
    `profile ${recipe['vortex.profile']}`,
    ...surface,
    `missing pressure ${recipe['completion.pressure']}`,
    `missing radius ${recipe['completion.rmax']}`,
  ].join('; ');
}
