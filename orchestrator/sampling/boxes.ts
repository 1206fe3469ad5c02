import { log } from '../../workers/numerics/log.js';
import { UserMistake } from '../mistakes.js';
import type { Axis } from '../scan/plan.js';
import type { Family, Wider, Widening } from './widening.js';

export interface Piece {
  readonly vary: readonly Axis[];
  readonly points: number;
}

/** What a wider box has beyond the box of a family, cut into disjoint boxes with the same density of points per
 *  volume in the sampling measure, at least one point each. */
export function newBoxes(family: Family, wider: Widening): readonly Piece[] {
  const before = family[0].vary.map((_, d) => hull(family.map(({ vary }) => vary[d])));
  const after = before.map((axis) => (wider[axis.input] ? widened(axis, wider[axis.input]) : axis));
  const density = family.reduce((sum, { points }) => sum + points, 0) / measure(before);
  return before.flatMap((axis, d) =>
    newParts(axis, after[d]).map((part) => {
      const vary = [...before.slice(0, d), part, ...after.slice(d + 1)];
      return { vary, points: Math.max(1, Math.floor(density * measure(vary) + 0.5)) };
    }),
  );
}

/** The smallest axis that holds all of some: pieces of one box differ in range or list only. */
function hull(axes: readonly Axis[]): Axis {
  return axes.reduce((all, axis) => {
    if (all.kind === 'range' && axis.kind === 'range') {
      return { ...all, from: Math.min(all.from, axis.from), to: Math.max(all.to, axis.to) };
    }
    if (all.kind === 'list' && axis.kind === 'list')
      return { ...all, values: union(all.values, axis.values) };
    return all;
  });
}

export function union(a: readonly number[], b: readonly number[]): readonly number[] {
  return [...new Set([...a, ...b])].sort((x, y) => x - y);
}

function widened(axis: Axis, { range, steps, list }: Wider): Axis {
  const where = `--vary ${axis.input}`;
  if (steps !== undefined) {
    throw new UserMistake({
      where,
      expected: 'steps only for a grid',
      found: `${steps} steps for another sampler`,
    });
  }
  if (axis.kind === 'range' && range && !list) {
    if (range[0] <= axis.from && range[1] >= axis.to) return { ...axis, from: range[0], to: range[1] };
    const expected = `a range that contains ${axis.from}:${axis.to}`;
    throw new UserMistake({
      where,
      expected,
      found: range.join(':'),
      hint: 'a run keeps every point it has',
    });
  }
  if (axis.kind === 'list' && list && !range) return { ...axis, values: longer(axis.values, list, where) };
  const expected = axis.kind === 'list' ? 'a list, e.g. 0.117,0.118,0.119' : 'a range, e.g. 160:185';
  throw new UserMistake({ where, expected, found: list ? 'a list' : 'a range' });
}

/** A list that must contain another.
 *  @throws UserMistake if it does not */
export function longer(old: readonly number[], list: readonly number[], where: string): readonly number[] {
  const has = new Set(list);
  const lost = old.filter((x) => !has.has(x));
  if (lost.length === 0) return union(old, list);
  const expected = `a list that contains ${old.join(',')}`;
  throw new UserMistake({
    where,
    expected,
    found: `one without ${lost.join(',')}`,
    hint: 'a run keeps every point it has',
  });
}

/** What an axis has beyond an earlier one. */
function newParts(before: Axis, after: Axis): readonly Axis[] {
  if (before.kind === 'range' && after.kind === 'range') {
    const below = after.from < before.from ? [{ ...after, to: before.from }] : [];
    return after.to > before.to ? [...below, { ...after, from: before.to }] : below;
  }
  if (before.kind === 'list' && after.kind === 'list') {
    const had = new Set(before.values);
    const added = after.values.filter((x) => !had.has(x));
    return added.length > 0 ? [{ ...after, values: added }] : [];
  }
  return [];
}

/** Volume in the sampling measure. A gaussian counts 1: pieces of one box never differ in it. */
function measure(axes: readonly Axis[]): number {
  return axes.reduce((volume, axis) => volume * lengthOf(axis), 1);
}

function lengthOf(axis: Axis): number {
  if (axis.kind === 'list') return axis.values.length;
  if (axis.kind === 'gaussian') return 1;
  return axis.scale === 'log' ? log(axis.to) - log(axis.from) : axis.to - axis.from;
}
