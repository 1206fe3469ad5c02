import { UserMistake } from '../mistakes.js';
import { nearest } from '../store/nearest.js';

/** The entry of a catalogue with this name.
 *  @param kind with its article, e.g. "a model"
 *  @throws UserMistake with the nearest name and all there are */
export function named<T>(catalogue: ReadonlyMap<string, T>, name: string, where: string, kind: string): T {
  const entry = catalogue.get(name);
  if (entry !== undefined) return entry;
  throw unknownName(name, [...catalogue.keys()], where, kind);
}

/** @throws UserMistake for the first of `names` that is not among `known` */
export function checkNames(
  names: readonly string[],
  known: readonly string[],
  where: string,
  kind: string,
): void {
  for (const name of names) if (!known.includes(name)) throw unknownName(name, known, where, kind);
}

function unknownName(name: string, known: readonly string[], where: string, kind: string): UserMistake {
  const near = nearest(name, known);
  return new UserMistake({
    where,
    expected: `${kind}${known.length === 0 ? ', of which there is none' : `: ${shortList(known)}`}`,
    found: JSON.stringify(name),
    hint: near === undefined ? undefined : `did you mean ${near}?`,
  });
}

const SHOWN = 24;

function shortList(names: readonly string[]): string {
  if (names.length <= SHOWN) return names.join(', ');
  return `${names.slice(0, SHOWN).join(', ')} and ${names.length - SHOWN} more`;
}
