/** A word for a shell: quoted so that nothing in it is taken for more than itself. */
export function quoted(word: string): string {
  return `'${word.replaceAll("'", `'\\''`)}'`;
}
