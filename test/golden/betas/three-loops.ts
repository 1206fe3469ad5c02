import { readFileSync } from 'node:fs';
import type { Polynomial } from './polynomials.js';

/** Reads `sm-three-loops.txt` beside this file: "a" -> d(a)/dt2 without kappa^3, a function of a, b, c, y and l. */
export function goldenThreeLoops(): ReadonlyMap<string, Polynomial> {
  const text = readFileSync(new URL('sm-three-loops.txt', import.meta.url), 'utf8').replace(/^#.*$/gm, '');
  const found = new Map<string, Polynomial>();
  for (const [, name, body] of text.matchAll(/d\((\w)\)\/dt2:([^:]*?)(?=d\(\w\)\/dt2|$(?![^]))/g)) {
    const tokens = body.match(/\d+(?:\.\d+)?|[a-z]|[-+/^()[\]]/g) ?? [];
    found.set(name, (values) => new Reader(tokens, values).sum());
  }
  return found;
}

/** Sums of products in which a missing sign between two factors is a multiplication. */
class Reader {
  private at = 0;

  constructor(
    private readonly tokens: readonly string[],
    private readonly values: Readonly<Record<string, number>>,
  ) {}

  sum(): number {
    let total = 0;
    let sign = this.take('-') ? -1 : 1;
    for (;;) {
      total += sign * this.product();
      if (this.take('+')) sign = 1;
      else if (this.take('-')) sign = -1;
      else return total;
    }
  }

  private product(): number {
    let result = this.power();
    for (;;) {
      const next = this.tokens[this.at];
      if (next === '/') {
        this.at++;
        result /= this.power();
      } else if (next !== undefined && /^[\d[(a-z]/.test(next)) result *= this.power();
      else return result;
    }
  }

  private power(): number {
    const base = this.atom();
    return this.take('^') ? base ** Number(this.tokens[this.at++]) : base;
  }

  private atom(): number {
    const token = this.tokens[this.at++];
    if (token === '(' || token === '[') {
      const inner = this.sum();
      this.at++;
      return inner;
    }
    return /^\d/.test(token) ? Number(token) : this.values[token];
  }

  private take(token: string): boolean {
    if (this.tokens[this.at] !== token) return false;
    this.at++;
    return true;
  }
}
