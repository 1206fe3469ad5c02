import { exp } from '../../workers/numerics/exp.js';
import { log } from '../../workers/numerics/log.js';
import type { Axis } from '../scan/plan.js';

/** The values of an axis in a grid, both ends exact. A value is a function of the ends and of the fraction
 *  k / (steps - 1) alone, so that a grid of twice as many intervals repeats the old values bit for bit.
 *  @throws RangeError for an axis that no grid can have (a plan that was read never holds one) */
export function gridValues(axis: Axis): readonly number[] {
  if (axis.kind === 'list') return axis.values;
  if (axis.kind === 'gaussian' || axis.steps === undefined)
    throw new RangeError(`${axis.input} has no steps`);
  const { from, to, scale, steps } = axis;
  if (steps === 1) return [from];
  const at = scale === 'log' ? logarithmic(from, to) : (f: number): number => from + (to - from) * f;
  return Array.from({ length: steps }, (_, k) => {
    if (k === 0) return from;
    return k === steps - 1 ? to : at(k / (steps - 1));
  });
}

function logarithmic(from: number, to: number): (f: number) => number {
  const start = log(from);
  const width = log(to) - start;
  return (f) => exp(start + width * f);
}

/** Number of points of the full product of the axes. */
export function gridSize(axes: readonly Axis[]): number {
  return axes.reduce((size, axis) => size * lengthOf(axis), 1);
}

function lengthOf(axis: Axis): number {
  if (axis.kind === 'list') return axis.values.length;
  return axis.kind === 'range' ? (axis.steps ?? 0) : 0;
}

/** One coordinate of a grid in mixed radix: the last axis runs fastest.
 *  @returns a function that fills out[i] with the coordinate of point first + i */
export function gridColumn(
  axes: readonly Axis[],
  which: number,
): (first: number, count: number, out: Float64Array) => void {
  const values = Float64Array.from(gridValues(axes[which]));
  const stride = gridSize(axes.slice(which + 1));
  return (first, count, out) => {
    for (let i = 0; i < count; i++) out[i] = values[Math.floor((first + i) / stride) % values.length];
  };
}
