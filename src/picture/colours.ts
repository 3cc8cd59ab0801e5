/** Red, green and blue, 0–255. */
export type Rgb = readonly [number, number, number];

/**
 * The scale “magma”: lightness rises evenly and monotonically from 0 to 98, so order survives grey printing and every
 * kind of colour blindness [SmithVanDerWalt2015]. Every eighth of its 256 colours, and the last.
 */
const MAGMA =
  '000004 030312 0a0822 130d34 1d1147 29115a 36106b 440f76 51127c 5d177f 6a1c81 762181 832681 902a81 9c2e7f aa337d ' +
  'b73779 c43c75 d0416f dc4869 e75263 ef5d5e f56b5c f9795d fc8961 fd9869 fea772 feb67c fec488 fed395 fde2a3 fcf0b2 fcfdbf';
const STOPS: readonly Rgb[] = MAGMA.split(' ').map(rgbOf);

/** The colour of `#rrggbb` or `rrggbb`. */
export function rgbOf(hex: string): Rgb {
  const value = Number.parseInt(hex.replace('#', ''), 16);
  return [value >> 16, (value >> 8) & 255, value & 255];
}

export function hexOf(rgb: Rgb): string {
  return `#${rgb.map((part) => Math.round(part).toString(16).padStart(2, '0')).join('')}`;
}

/** The scale at 0 (dark) … 1 (light), straight between its stops; constant outside. */
export function scaleColour(at: number): Rgb {
  const place = Math.min(1, Math.max(0, at)) * (STOPS.length - 1);
  const i = Math.min(STOPS.length - 2, Math.floor(place));
  return mix(STOPS[i]!, STOPS[i + 1]!, place - i);
}

export function mix(a: Rgb, b: Rgb, share: number): Rgb {
  return [a[0] + (b[0] - a[0]) * share, a[1] + (b[1] - a[1]) * share, a[2] + (b[2] - a[2]) * share];
}

/** Winds at the light and at the dark end of the scale, m/s. */
export const WIND_SCALE_MPS = [12, 90] as const;

/** Where a wind stands on the scale: strong is dark. One place for one wind, on every map. */
export function windShare(windMps: number): number {
  const [light, dark] = WIND_SCALE_MPS;
  return 1 - 0.94 * Math.min(1, Math.max(0, (windMps - light) / (dark - light)));
}

/** The colour of a wind. */
export function windColour(windMps: number): Rgb {
  return scaleColour(windShare(windMps));
}

/** Least difference in lightness (CIE L*) between neighbouring levels of one map. */
export const LEAST_STEP = 6;

/**
 * One colour for each of the levels of a map (rising): the wind's own, or, where levels stand so close that neighbours
 * would look alike, spread evenly over the scale by rank.
 */
export function levelColours(levelsMps: readonly number[]): string[] {
  const own = levelsMps.map(windColour);
  const apart = own.every((colour, i) => i === 0 || lightness(own[i - 1]!) - lightness(colour) >= LEAST_STEP);
  if (apart) return own.map(hexOf);
  const last = Math.max(1, levelsMps.length - 1);
  return levelsMps.map((_, i) => hexOf(scaleColour(0.94 - (0.82 * i) / last)));
}

/** Linear light of an sRGB part [IEC61966]. */
function linear(part: number): number {
  const c = part / 255;
  return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
}

/** Relative luminance Y = 0.2126 R + 0.7152 G + 0.0722 B of linear light, 0–1   [WCAG22]. */
export function luminance(rgb: Rgb): number {
  return 0.2126 * linear(rgb[0]) + 0.7152 * linear(rgb[1]) + 0.0722 * linear(rgb[2]);
}

/** Contrast ratio (Y₁ + 0.05)/(Y₂ + 0.05) of the lighter over the darker, 1–21   [WCAG22]. */
export function contrast(a: Rgb, b: Rgb): number {
  const [ya, yb] = [luminance(a), luminance(b)];
  return (Math.max(ya, yb) + 0.05) / (Math.min(ya, yb) + 0.05);
}

/** Lightness L* of the CIE 1976 colour space, 0–100: what a print in grey shows   [CIE15]. */
export function lightness(rgb: Rgb): number {
  const y = luminance(rgb);
  return y > 216 / 24389 ? 116 * Math.cbrt(y) - 16 : (y * 24389) / 27;
}

/** Black or white ink, whichever stands out more on a ground. */
export function inkOn(ground: Rgb): string {
  return contrast(rgbOf(PAPER.ink), ground) >= contrast([255, 255, 255], ground) ? PAPER.ink : '#ffffff';
}

/** Colours of everything on a picture that is not wind. */
export const PAPER = {
  sheet: '#ffffff',
  ink: '#16202b',
  quiet: '#4d5b69',
  sea: '#d5e1e8',
  land: '#f1f0ea',
  shore: '#71808c',
  grid: '#9fb0bc',
  track: '#0b1a2a',
  halo: '#ffffff',
  rule: '#c3cdd5',
  /** lines of a chart, told apart by dash and mark as well */
  lines: ['#1b2f5b', '#b5367a', '#0f7c73', '#b05a00'],
} as const;

/** The colour of one level among the levels of a map (rising): what isotachs of that level are filled with elsewhere. */
export function levelColour(levelsMps: readonly number[], thresholdMps: number): string {
  const i = levelsMps.findIndex((level) => Math.abs(level - thresholdMps) < 1e-9);
  return i < 0 ? hexOf(windColour(thresholdMps)) : levelColours(levelsMps)[i]!;
}
