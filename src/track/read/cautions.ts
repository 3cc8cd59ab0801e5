/**
 * What was odd in a storm's rows. Each kind is told once, with the line of its first case and how many more there are:
 * a storm with a hundred such rows gives one caution, not a hundred.
 */
export interface Cautions {
  /** @param line 1-based line of the case, or 0 for what concerns the whole storm */
  add(kind: string, line: number, text: string): void;
  /** the cautions so far; the list starts anew */
  take(): readonly string[];
}

const NONE: readonly string[] = Object.freeze([]);

export function collectCautions(record: 'line' | 'feature' = 'line'): Cautions {
  let cases = new Map<string, { text: string; more: number }>();
  return {
    add(kind, line, text) {
      const known = cases.get(kind);
      if (known) known.more++;
      else cases.set(kind, { text: line > 0 ? `${record} ${line}: ${text}` : text, more: 0 });
    },
    take() {
      if (cases.size === 0) return NONE;
      const told = [...cases.values()].map(({ text, more }) => (more > 0 ? `${text} (and ${more} more such)` : text));
      cases = new Map();
      return told;
    },
  };
}
