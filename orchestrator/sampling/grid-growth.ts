import { log } from '../../workers/numerics/log.js';
import { UserMistake } from '../mistakes.js';
import type { Axis } from '../scan/plan.js';
import { MOST_VALUES } from '../scan/shape.js';
import { longer, union, type Piece } from './boxes.js';
import { gridSize, gridValues } from './grid.js';
import type { Family, Wider, Widening } from './widening.js';

/** Two grids share a value if it differs by less than this part of a step. */
const SAME = 1e-6;

/** What a wider or finer grid has beyond the grid of a family, cut into disjoint grids. Values that both have keep
 *  their bits. */
export function newGrids(family: Family, wider: Widening): readonly Piece[] {
  const root = family[0].vary;
  const before = root.map((_, d) => family.map(({ vary }) => gridValues(vary[d])).reduce(union));
  const after = root.map((axis, d) => grown(axis, before[d], wider[axis.input]));
  const pieces = root.flatMap((axis, d): Axis[][] => {
    const had = new Set(before[d]);
    const added = after[d].filter((x) => !had.has(x));
    if (added.length === 0) return [];
    const rest = root.map((other, e) => axisOf(other, e < d ? before[e] : after[e]));
    return [rest.map((other, e) => (e === d ? { input: axis.input, kind: 'list', values: added } : other))];
  });
  return pieces.map((vary) => ({ vary, points: gridSize(vary) }));
}

/** The axis of the first grid where it still has just these values, else a list. */
function axisOf(axis: Axis, values: readonly number[]): Axis {
  const own = gridValues(axis);
  const same = own.length === values.length && own.every((x, i) => x === values[i]);
  return same ? axis : { input: axis.input, kind: 'list', values };
}

function grown(axis: Axis, old: readonly number[], change: Wider | undefined): readonly number[] {
  if (!change) return old;
  const where = `--vary ${axis.input}`;
  if (axis.kind === 'list') {
    if (change.list && !change.range && change.steps === undefined) return longer(old, change.list, where);
    throw new UserMistake({ where, expected: 'a list, e.g. 0.117,0.118,0.119', found: 'a range' });
  }
  if (axis.kind === 'gaussian' || change.list) {
    throw new UserMistake({ where, expected: 'a range with steps, e.g. 165:180:121', found: 'a list' });
  }
  const [from, to] = change.range ?? [old[0], old[old.length - 1]];
  const steps = change.steps ?? sameSpacing(axis, old, from, to);
  const values = gridValues({ input: axis.input, kind: 'range', scale: axis.scale, from, to, steps });
  return keepOld(values, old, coordinateOf(axis), where);
}

type Coordinate = (x: number) => number;

function coordinateOf({ scale }: Axis & { kind: 'range' }): Coordinate {
  return scale === 'log' ? log : (x) => x;
}

/** The number of values that keeps the spacing of the old ones on another range. */
function sameSpacing(
  axis: Axis & { kind: 'range' },
  old: readonly number[],
  from: number,
  to: number,
): number {
  const at = coordinateOf(axis);
  const spacing = (at(old[old.length - 1]) - at(old[0])) / (old.length - 1);
  return Math.min(Math.max(2, Math.floor((at(to) - at(from)) / spacing + 0.5) + 1), MOST_VALUES);
}

/** New values, with those that the old grid has too replaced by its own.
 *  @throws UserMistake if an old value is not among the new ones */
function keepOld(
  values: readonly number[],
  old: readonly number[],
  at: Coordinate,
  where: string,
): readonly number[] {
  const near = SAME * ((at(values[values.length - 1]) - at(values[0])) / (values.length - 1));
  let k = 0;
  const kept = values.map((x) => (k < old.length && Math.abs(at(x) - at(old[k])) <= near ? old[k++] : x));
  if (k === old.length) return kept;
  const steps = 2 * old.length - 1;
  throw new UserMistake({
    where,
    expected: `a grid that contains the old one of ${old.length} values from ${old[0]} to ${old[old.length - 1]}`,
    found: `${values.length} values from ${values[0]} to ${values[values.length - 1]} without ${old[k]}`,
    hint: `${old[0]}:${old[old.length - 1]}:${steps} would halve every step`,
  });
}
