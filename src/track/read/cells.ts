export type Delimiter = ',' | ';' | '\t';

/**
 * The cells of one record [RFC4180]: a cell may be quoted, a quote inside is doubled, a quoted cell may hold the
 * delimiter and line ends.
 * @returns null when a quoted cell is still open at the end of the text: the record goes on in the next line
 */
export function splitCells(record: string, delimiter: Delimiter): string[] | null {
  if (!record.includes('"')) return record.split(delimiter);
  const cells: string[] = [];
  let at = 0;
  for (;;) {
    let quoteAt = at;
    while (record.charCodeAt(quoteAt) === 32) quoteAt++;
    if (record[quoteAt] === '"') {
      let text = '';
      let from = quoteAt + 1;
      for (;;) {
        const to = record.indexOf('"', from);
        if (to === -1) return null;
        text += record.slice(from, to);
        from = to + 1;
        if (record[from] !== '"') break;
        text += '"';
        from++;
      }
      const end = record.indexOf(delimiter, from);
      // what follows a closing quote belongs to the cell all the same: nothing is dropped silently
      text += record.slice(from, end === -1 ? undefined : end).trimEnd();
      cells.push(text);
      if (end === -1) return cells;
      at = end + 1;
    } else {
      const end = record.indexOf(delimiter, at);
      cells.push(record.slice(at, end === -1 ? undefined : end));
      if (end === -1) return cells;
      at = end + 1;
    }
  }
}

/** The delimiter of a heading line: the commonest of tab, semicolon and comma outside quotes. */
export function delimiterOf(heading: string): Delimiter {
  const bare = heading.replace(/"[^"]*"/g, '');
  const count = (mark: string): number => bare.split(mark).length - 1;
  const marks: Delimiter[] = ['\t', ';', ','];
  return marks.reduce((best, mark) => (count(mark) > count(best) ? mark : best), marks[0] as Delimiter);
}

const GUARDED = /^'+[=+\-@\t\r\uFF1D\uFF0B\uFF0D\uFF20]/;

/** Takes off the apostrophe that keeps a spreadsheet from running a cell as a formula (`'=SUM`, `'@home`). */
export function unguardCell(text: string): string {
  return text.charCodeAt(0) === 39 && GUARDED.test(text) ? text.slice(1) : text;
}

/** Text that comes back from {@link unguardCell} as it was, once the writer has guarded what starts a formula. */
export function keepApostrophe(text: string): string {
  return text.charCodeAt(0) === 39 && GUARDED.test(text) ? `'${text}` : text;
}
