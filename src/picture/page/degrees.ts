/** Degrees from `27.9`, `27.9N`, `45,2 W`, `−45.2`; null when it is no angle. `sides`: the positive, then the negative one. */
export function parseDegrees(text: string, sides: 'NS' | 'EW'): number | null {
  const match = /^\s*([+\-−]?)\s*(\d+(?:[.,]\d+)?)\s*°?\s*([A-Za-z]?)\s*$/.exec(text);
  if (!match) return null;
  const [, sign, digits, side] = match;
  const value = Number(digits!.replace(',', '.')) * (sign === '-' || sign === '−' ? -1 : 1);
  if (!side) return value;
  const at = sides.indexOf(side.toUpperCase());
  return at < 0 ? null : at === 0 ? value : -value;
}
