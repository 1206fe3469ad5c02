import { UserMistake } from '../mistakes.js';
import { didYouMean, quote } from '../scan/phrases.js';
import type { Stratum } from '../scan/plan.js';
import { grownName, rootOf } from './family.js';

/** Raises the counts of strata; see extendPlan for the rules.
 *  @param points the new total, or new counts by name of stratum
 *  @param notes receives sentences for the user */
export function growPoints(
  strata: readonly Stratum[],
  points: number | Readonly<Record<string, number>>,
  notes: string[],
): readonly Stratum[] {
  const counts = typeof points === 'number' ? shareOut(strata, points) : byName(strata, points);
  const grown = [...strata];
  strata.forEach((stratum, i) => {
    const more = counts[i] - stratum.points;
    if (more === 0) return;
    if (stratum.method !== 'latin-hypercube') grown[i] = { ...stratum, points: counts[i] };
    else appendHypercube(grown, stratum, more, notes);
  });
  return grown;
}

function shareOut(strata: readonly Stratum[], total: number): readonly number[] {
  requireMore(total, sum(strata), 'the plan has');
  const growing = strata.filter(({ method }) => method !== 'grid');
  if (growing.length === 0) throw gridOnly(strata[0]);
  const shares = proportional(
    growing.map(({ points }) => points),
    total - sum(strata) + sum(growing),
  );
  return strata.map((stratum) =>
    stratum.method === 'grid' ? stratum.points : shares[growing.indexOf(stratum)],
  );
}

function sum(strata: readonly Stratum[]): number {
  return strata.reduce((total, { points }) => total + points, 0);
}

/** `total` in whole parts proportional to `weights`: rounded down, then one more for the largest remainders.
 *  No part is below its weight if the total is not below theirs. */
function proportional(weights: readonly number[], total: number): readonly number[] {
  const all = BigInt(weights.reduce((a, b) => a + b, 0));
  const exact = weights.map((weight) => BigInt(weight) * BigInt(total));
  const parts = exact.map((x) => Number(x / all));
  const left = total - parts.reduce((a, b) => a + b, 0);
  const byRemainder = weights
    .map((_, i) => i)
    .sort((a, b) => Number((exact[b] % all) - (exact[a] % all)) || a - b);
  for (const i of byRemainder.slice(0, left)) parts[i]++;
  return parts;
}

function byName(strata: readonly Stratum[], points: Readonly<Record<string, number>>): readonly number[] {
  const names = strata.map(({ name }) => name);
  for (const name of Object.keys(points)) {
    if (names.includes(name)) continue;
    const hint = didYouMean(name, names);
    const expected = `a stratum of the plan: ${names.join(', ')}`;
    throw new UserMistake({ where: '--points', expected, found: quote(name), ...(hint ? { hint } : {}) });
  }
  return strata.map((stratum) => {
    if (!Object.hasOwn(points, stratum.name)) return stratum.points;
    if (stratum.method === 'grid') throw gridOnly(stratum);
    requireMore(points[stratum.name], stratum.points, `${stratum.name} has`);
    return points[stratum.name];
  });
}

function requireMore(asked: number, present: number, who: string): void {
  if (Number.isSafeInteger(asked) && asked > present) return;
  const hint = 'the number is the new total, not what is added';
  const expected = `a whole number above the ${present} points that ${who}`;
  throw new UserMistake({ where: '--points', expected, found: String(asked), hint });
}

function gridOnly(grid: Stratum): UserMistake {
  const axis = grid.vary.find(({ kind }) => kind === 'range');
  const finer =
    axis?.kind === 'range' && axis.steps
      ? `--vary ${axis.input}=${axis.from}:${axis.to}:${2 * axis.steps - 1} makes it finer`
      : '--vary makes it wider';
  const found = `${grid.name}, a grid, whose points follow from its steps`;
  return new UserMistake({
    where: '--points',
    expected: 'a stratum that can take more points',
    found,
    hint: finer,
  });
}

function appendHypercube(strata: Stratum[], from: Stratum, more: number, notes: string[]): void {
  const root = rootOf(from);
  const name = grownName(root, strata);
  strata.push({ ...from, name, points: more, grownFrom: root });
  notes.push(
    `${from.name} is a latin hypercube, which cannot grow: its ${from.points} points stay as they are, and ${name}, ` +
      `an independent hypercube of ${more} points over the same box, is appended (a sobol stratum would simply continue)`,
  );
}
