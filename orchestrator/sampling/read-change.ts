import { UserMistake } from '../mistakes.js';
import { quote } from '../scan/phrases.js';
import type { Change } from './extend.js';
import type { Wider } from './widening.js';

const NUMBER = /^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i;

/** A change from the words of a command line.
 *  @param points words after --points: one number (the new total), or NAME=N of strata
 *  @param vary   words after --vary: NAME=FROM:TO, for grids NAME=FROM:TO:STEPS, for lists NAME=A,B,C
 *  @throws UserMistake */
export function readChange(points: readonly string[], vary: readonly string[]): Change {
  return {
    ...(points.length > 0 ? { points: readPoints(points) } : {}),
    ...(vary.length > 0 ? { vary: named('--vary', vary, 'NAME=FROM:TO', readWider) } : {}),
  };
}

function readPoints(words: readonly string[]): Change['points'] {
  const whole = (text: string, word: string): number => {
    if (/^\d{1,15}$/.test(text)) return Number(text);
    throw new UserMistake({ where: '--points', expected: 'a whole number or NAME=N', found: quote(word) });
  };
  if (words.length === 1 && !words[0].includes('=')) return whole(words[0], words[0]);
  return named('--points', words, 'NAME=N', whole);
}

function named<T>(
  where: string,
  words: readonly string[],
  form: string,
  read: (text: string, word: string) => T,
): Record<string, T> {
  const found = new Map<string, T>();
  for (const word of words) {
    const cut = word.indexOf('=');
    const name = word.slice(0, Math.max(cut, 0));
    if (name === '' || found.has(name)) {
      throw new UserMistake({ where, expected: `${form}, every name once`, found: quote(word) });
    }
    found.set(name, read(word.slice(cut + 1), word));
  }
  return Object.fromEntries(found);
}

function readWider(text: string, word: string): Wider {
  const isList = !text.includes(':');
  const parts = text.split(isList ? ',' : ':');
  const [from, to, steps] = parts;
  if (parts.every((part) => NUMBER.test(part)) && (isList || parts.length <= 3)) {
    if (isList) return { list: parts.map(Number) };
    return { range: [Number(from), Number(to)], ...(steps === undefined ? {} : { steps: Number(steps) }) };
  }
  const expected = 'NAME=FROM:TO, NAME=FROM:TO:STEPS or NAME=A,B,C';
  throw new UserMistake({ where: '--vary', expected, found: quote(word) });
}
