/** The candidate that needs the fewest edits to become `word`, if that is few enough to be a slip of the pen. */
export function nearest(word: string, candidates: readonly string[]): string | undefined {
  let best: string | undefined;
  let least = Math.max(2, Math.ceil(word.length / 3)) + 1;
  for (const candidate of candidates) {
    const edits = distance(word.toLowerCase(), candidate.toLowerCase());
    if (edits < least) [best, least] = [candidate, edits];
  }
  return best;
}

/** Edit distance of Levenshtein, a row at a time. */
function distance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const next = [i];
    for (let j = 1; j <= b.length; j++) {
      const changed = row[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1);
      next.push(Math.min(changed, row[j] + 1, next[j - 1] + 1));
    }
    row = next;
  }
  return row[b.length];
}
