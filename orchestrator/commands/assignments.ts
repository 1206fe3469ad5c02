import { UserMistake } from '../mistakes.js';

/** Reads `name=value` words, e.g. those after --set.
 *  @param where the option they follow, for the message
 *  @throws UserMistake for a word of another form or a name given twice */
export function assignments(words: readonly string[], where: string): Record<string, string> {
  const found: Record<string, string> = Object.create(null) as Record<string, string>;
  for (const word of words) {
    const cut = word.indexOf('=');
    if (cut < 1 || cut === word.length - 1)
      throw new UserMistake({ where, expected: 'name=value', found: JSON.stringify(word) });
    const name = word.slice(0, cut).trim();
    if (name in found) throw new UserMistake({ where, expected: 'every name once', found: `${name} twice` });
    found[name] = word.slice(cut + 1).trim();
  }
  return found;
}

/** The same with numbers for values: decimal, with or without exponent. */
export function numberAssignments(words: readonly string[], where: string): Record<string, number> {
  const entries = Object.entries(assignments(words, where));
  return Object.fromEntries(entries.map(([name, text]) => [name, finiteNumber(text, `${where} ${name}`)]));
}

export function finiteNumber(text: string, where: string): number {
  const number = /^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i.test(text) ? Number(text) : NaN;
  if (!Number.isFinite(number))
    throw new UserMistake({
      where,
      expected: 'a finite number such as 173.34 or 1.22e19',
      found: JSON.stringify(text),
    });
  return number;
}

export function wholeNumber(text: string, where: string, least: number, most: number): number {
  const number = /^\d+$/.test(text) ? Number(text) : NaN;
  if (!(number >= least && number <= most))
    throw new UserMistake({
      where,
      expected: `a whole number from ${least} to ${most}`,
      found: JSON.stringify(text),
    });
  return number;
}
