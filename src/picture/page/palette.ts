import { hexOf, mix, type Rgb, scaleColour, WIND_SCALE_MPS } from '../colours.js';

/** Colours of the page's map in one of its two dresses. */
export interface Palette {
  readonly dark: boolean;
  readonly sheet: string;
  readonly sea: string;
  readonly land: string;
  readonly shore: string;
  readonly grid: string;
  readonly ink: string;
  readonly quiet: string;
  readonly halo: string;
  readonly own: string;
  readonly accent: string;
}

export const LIGHT: Palette = {
  dark: false,
  sheet: '#ffffff',
  sea: '#d5e1e8',
  land: '#f1f0ea',
  shore: '#71808c',
  grid: '#9fb0bc',
  ink: '#0b1a2a',
  quiet: '#4d5b69',
  halo: '#ffffff',
  own: '#0b1a2a',
  accent: '#7a1f6b',
};

export const DARK: Palette = {
  dark: true,
  sheet: '#131d27',
  sea: '#0d1721',
  land: '#26323d',
  shore: '#7d8d9b',
  grid: '#2d3d4c',
  ink: '#f2f6f9',
  quiet: '#a6b4c1',
  halo: '#0b121a',
  own: '#f2f6f9',
  accent: '#f59a6b',
};

/** A share of the way from weak to strong as a colour: strong stands out from the ground, dark on light, light on dark. */
export function strengthColour(share: number, palette: Palette): Rgb {
  const s = Math.min(1, Math.max(0, share));
  return palette.dark ? scaleColour(0.2 + 0.8 * s) : scaleColour(1 - 0.94 * s);
}

export function strengthOf(windMps: number): number {
  return (windMps - WIND_SCALE_MPS[0]) / (WIND_SCALE_MPS[1] - WIND_SCALE_MPS[0]);
}

/** Winds below these fade out: nothing below the first, all from the second. */
const FADE_MPS = [7, 15] as const;

/** Colour and opacity (0–255) of a wind. */
export function windPaint(windMps: number, palette: Palette): readonly [Rgb, number] {
  const opacity = Math.min(1, Math.max(0, (windMps - FADE_MPS[0]) / (FADE_MPS[1] - FADE_MPS[0])));
  return [strengthColour(strengthOf(windMps), palette), 240 * opacity];
}

/** A colour on the sea at an opacity, as hex: what a legend shows. */
export function overSea([rgb, opacity]: readonly [Rgb, number], palette: Palette): string {
  const sea = Number.parseInt(palette.sea.slice(1), 16);
  return hexOf(mix([sea >> 16, (sea >> 8) & 255, sea & 255], rgb, opacity / 255));
}
