import { readFileSync } from 'node:fs';

/** Beta functions of a golden file as polynomials: "b1[gY]" -> evaluator over named couplings. */
export type Polynomial = (values: Readonly<Record<string, number>>) => number;

interface Term {
  readonly coefficient: number;
  readonly factors: readonly (readonly [string, number])[];
}

/** Reads `NAME.txt` beside this file; its head says which conventions and how it was made. */
export function goldenBetas(name: string): ReadonlyMap<string, Polynomial> {
  const text = readFileSync(new URL(`${name}.txt`, import.meta.url), 'utf8');
  const found = new Map<string, Polynomial>();
  for (const [, key, sum] of text.matchAll(/^(b[12]\[\w+\]) = (.+)$/gm)) {
    const terms = sum.split(/(?=[+-] )/).map(readTerm);
    found.set(key, (values) => terms.reduce((total, term) => total + evaluate(term, values), 0));
  }
  return found;
}

function readTerm(text: string): Term {
  const sign = text.startsWith('-') ? -1 : 1;
  let coefficient = sign;
  const factors: [string, number][] = [];
  for (const piece of text.slice(1).trim().split('*')) {
    const number = /^(\d+)(?:\/(\d+))?$/.exec(piece);
    if (number) coefficient *= Number(number[1]) / Number(number[2] ?? 1);
    else {
      const [coupling, power] = piece.split('^');
      factors.push([coupling, Number(power ?? 1)]);
    }
  }
  return { coefficient, factors };
}

function evaluate(term: Term, values: Readonly<Record<string, number>>): number {
  return term.factors.reduce(
    (product, [coupling, power]) => product * values[coupling] ** power,
    term.coefficient,
  );
}
