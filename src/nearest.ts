/**
 * Edits that turn one word into the other: insert, delete, replace, or swap two neighbouring letters.
 * Counting stops once more than `limit` are needed; the answer is then `limit + 1`.
 */
export function editDistance(a: string, b: string, limit = Number.POSITIVE_INFINITY): number {
  if (Math.abs(a.length - b.length) > limit) return limit + 1;
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    let least = i;
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      let edits = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) {
        edits = Math.min(edits, beforeLast[j - 2]! + 1);
      }
      row.push(edits);
      if (edits < least) least = edits;
    }
    if (least > limit) return limit + 1;
    beforeLast = last;
    last = row;
  }
  return Math.min(last[b.length]!, limit + 1);
}

/**
 * The candidate that was probably meant, or undefined when none is near: at most one edit in three letters
 * (one edit in a word of two to five), upper and lower case alike. The first of equally near ones is taken.
 */
export function nearest(word: string, candidates: Iterable<string>): string | undefined {
  const asked = word.toLowerCase();
  if (asked.length < 2) return undefined;
  let limit = Math.max(1, Math.floor(asked.length / 3));
  let found: string | undefined;
  for (const candidate of candidates) {
    const edits = editDistance(asked, candidate.toLowerCase(), limit);
    if (edits > limit) continue;
    found = candidate;
    if (edits === 0) break;
    limit = edits - 1;
  }
  return found;
}

/** ` (did you mean X?)`, or nothing when no candidate is near: to be appended to a message. */
export function didYouMean(word: string, candidates: Iterable<string>): string {
  const found = nearest(word, candidates);
  return found === undefined ? '' : ` (did you mean ${found}?)`;
}
