const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
/** What a spreadsheet takes for the start of a formula: the ASCII signs, their full-width twins, tab and carriage return. */
const FORMULA = /^[=+\-@\t\r\uFF1D\uFF0B\uFF0D\uFF20]/;
/** A semicolon or tab separates cells in some locales, so that what follows one would be a cell of its own. */
const NEEDS_QUOTES = /[",;\t\r\n]|^\s|\s$/;

/**
 * One cell of a CSV file by RFC 4180 [RFC4180], safe to open in a spreadsheet: text that would run as a formula
 * (it starts with = + - @ and is not a number) gets an apostrophe before it.
 * @param value null, NaN and the infinities become an empty cell
 */
export function csvCell(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return Number.isFinite(value) ? String(value) : '';
  const safe = FORMULA.test(value) && !NUMBER.test(value) ? `'${value}` : value;
  return NEEDS_QUOTES.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** One line of a CSV file, its line end included. */
export function csvLine(cells: readonly (string | number | null)[]): string {
  return `${cells.map(csvCell).join(',')}\n`;
}
