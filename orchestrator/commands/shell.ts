/** A word as a POSIX shell reads it back. */
export function quoted(word: string): string {
  return /^[A-Za-z0-9_./:=,+-]+$/.test(word) ? word : `'${word.replaceAll("'", `'\\''`)}'`;
}
