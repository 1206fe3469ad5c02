/** How mistakes speak: what was found, and which valid name is nearest. */

const LONGEST = 60;

/** A value of a scan file in a few words. */
export function describe(value: unknown): string {
  if (value === undefined) return 'nothing';
  if (value === null) return 'an empty value';
  if (typeof value === 'string') return quote(value);
  if (typeof value === 'number') return describeNumber(value);
  if (typeof value === 'boolean') return String(value);
  if (Array.isArray(value)) return describeList(value);
  return Object.keys(value).length > 0 ? `a mapping with ${keys(value)}` : 'an empty mapping';
}

/** Text in quotes, control characters escaped, cut where it is long. */
export function quote(text: string): string {
  const short = text.length > LONGEST ? `${text.slice(0, LONGEST)}...` : text;
  return JSON.stringify(short).replace(/[\u007f-\u009f\u2028-\u202e\u2066-\u2069]/g, escape);
}

function escape(character: string): string {
  return `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`;
}

function describeNumber(value: number): string {
  if (Number.isNaN(value)) return 'not a number';
  return Number.isFinite(value) ? String(value) : `${value < 0 ? 'minus ' : ''}infinity`;
}

/** A number in few digits: 1e20, not 100000000000000000000. */
export function shortNumber(value: number): string {
  return Math.abs(value) < 1e7 ? String(value) : value.toExponential().replace('e+', 'e');
}

function describeList(value: readonly unknown[]): string {
  if (value.length === 0) return 'an empty list';
  const flat =
    value.length <= 4 && value.every((entry) => typeof entry === 'number' || typeof entry === 'string');
  return flat ? `[${value.map(describe).join(', ')}]` : `a list of ${value.length}`;
}

function keys(value: object): string {
  const names = Object.keys(value);
  const shown = names.slice(0, 4).map((name) => (/^[\w-]{1,40}$/.test(name) ? name : quote(name)));
  return shown.join(', ') + (names.length > 4 ? ', ...' : '');
}

/** "a", "a or b", "a, b or c". */
export function oneOf(names: readonly string[]): string {
  if (names.length < 2) return names.join('');
  return `${names.slice(0, -1).join(', ')} or ${names[names.length - 1]}`;
}

/** `did you mean "x"?` for the nearest valid name, or undefined if none is near. */
export function didYouMean(found: string, names: Iterable<string>): string | undefined {
  if (found.length > LONGEST) return undefined;
  let best: string | undefined;
  let least = Math.max(1, Math.floor(found.length / 2.5)) + 1;
  for (const name of names) {
    const d = sameLetters(found, name) ? 0 : distance(found.toLowerCase(), name.toLowerCase());
    if (d < least) [best, least] = [name, d];
  }
  return best === undefined ? undefined : `did you mean "${best}"?`;
}

/** "vacuum_stability", "Vacuum Stability" and "vacuum-stability" differ only in how words are joined. */
function sameLetters(a: string, b: string): boolean {
  const bare = (text: string): string => text.toLowerCase().replace(/[^a-z0-9]/g, '');
  return bare(a) !== '' && bare(a) === bare(b);
}

/** Edits, among them the exchange of neighbours, that turn a into b (optimal string alignment). */
function distance(a: string, b: string): number {
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      row[j] = Math.min(last[j] + 1, row[j - 1] + 1, last[j - 1] + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        row[j] = Math.min(row[j], before[j - 2] + 1);
    }
    [before, last] = [last, row];
  }
  return last[b.length];
}
