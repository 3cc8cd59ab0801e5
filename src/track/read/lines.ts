import { InputError } from '../../errors.js';

/** Longest line of a text table, in characters; JSON may stand on one line and is allowed more. */
export const LONGEST_LINE = 1 << 20;
export const LONGEST_JSON_LINE = 1 << 26;

/** Cuts text that arrives in pieces into lines. */
export interface LineSplitter {
  /** the lines that this piece completes, without their line ends */
  push(piece: string): string[];
  /** the last line when it has no line end */
  end(): string[];
}

/**
 * Cuts at LF, CRLF, or CR alone where a file has no LF near its start, and drops a byte-order mark.
 * @throws InputError `track.binary` (a NUL character), `track.line-length`
 */
export function lineSplitter(source: string): LineSplitter {
  let rest = '';
  let started = false;
  let carriageReturns = false;
  let longest = LONGEST_LINE;
  let count = 0;

  const start = (piece: string): string => {
    started = true;
    const text = piece.charCodeAt(0) === 0xfeff ? piece.slice(1) : piece;
    if (/^\s*[{[]/.test(text)) longest = LONGEST_JSON_LINE;
    carriageReturns = /\r[^\n]/.test(text) && !text.includes('\n');
    return text;
  };
  const tooLong = (): never => {
    throw new InputError(
      'track.line-length',
      `${source}:${count + 1}: the line is longer than ${longest} characters, so this is no track file; give a text file with one row a line`,
      { fields: { source, line: count + 1 } },
    );
  };

  return {
    push(piece) {
      let text = started ? piece : start(piece);
      if (text.includes('\0')) {
        throw new InputError(
          'track.binary',
          `${source}:${count + 1}: has a NUL character, so it is not text; give a text file (HURDAT2, IBTrACS CSV, ATCF deck, CSV or GeoJSON)`,
          { fields: { source, line: count + 1 } },
        );
      }
      if (carriageReturns) text = text.replaceAll('\r', '\n');
      const lines: string[] = [];
      let from = 0;
      let to = text.indexOf('\n');
      while (to !== -1) {
        let line = text.slice(from, text.charCodeAt(to - 1) === 13 && to > from ? to - 1 : to);
        if (rest !== '') {
          line = rest + line;
          if (to === from && line.charCodeAt(line.length - 1) === 13) line = line.slice(0, -1);
          rest = '';
        }
        if (line.length > longest) tooLong();
        lines.push(line);
        count++;
        from = to + 1;
        to = text.indexOf('\n', from);
      }
      rest += text.slice(from);
      if (rest.length > longest) tooLong();
      return lines;
    },
    end() {
      if (rest === '') return [];
      const line = rest.charCodeAt(rest.length - 1) === 13 ? rest.slice(0, -1) : rest;
      rest = '';
      count++;
      return [line];
    },
  };
}
