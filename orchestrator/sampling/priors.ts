import { exp } from '../../workers/numerics/exp.js';
import { log } from '../../workers/numerics/log.js';
import { normalQuantile } from '../../workers/numerics/normal-quantile.js';
import type { Axis } from '../scan/plan.js';

/** Turns numbers of the open unit interval, in place, into values of an axis. */
export type Prior = (column: Float64Array) => void;

/** The prior of an axis for samplers that draw: uniform in the value or its logarithm on [from, to), Gaussian,
 *  or every entry of a list with the same weight. */
export function priorOf(axis: Axis): Prior {
  switch (axis.kind) {
    case 'range':
      return axis.scale === 'log' ? logarithmic(axis.from, axis.to) : linear(axis.from, axis.to);
    case 'gaussian':
      return gaussian(axis.mean, axis.sigma);
    case 'list':
      return oneOf(axis.values);
  }
}

function linear(from: number, to: number): Prior {
  const width = to - from;
  const last = below(to);
  return (column) => {
    for (let i = 0; i < column.length; i++) column[i] = Math.min(from + width * column[i], last);
  };
}

function logarithmic(from: number, to: number): Prior {
  const start = log(from);
  const width = log(to) - start;
  const last = below(to);
  return (column) => {
    for (let i = 0; i < column.length; i++) {
      column[i] = Math.min(Math.max(exp(start + width * column[i]), from), last);
    }
  };
}

function gaussian(mean: number, sigma: number): Prior {
  return (column) => {
    for (let i = 0; i < column.length; i++) column[i] = mean + sigma * normalQuantile(column[i]);
  };
}

function oneOf(values: readonly number[]): Prior {
  return (column) => {
    for (let i = 0; i < column.length; i++) {
      column[i] = values[Math.min(Math.floor(column[i] * values.length), values.length - 1)];
    }
  };
}

/** The largest double smaller than x: the upper end of a range itself is never drawn. */
function below(x: number): number {
  const view = new DataView(new ArrayBuffer(8));
  if (x === 0) return -Number.MIN_VALUE;
  view.setFloat64(0, x);
  view.setBigInt64(0, view.getBigInt64(0) + (x > 0 ? -1n : 1n));
  return view.getFloat64(0);
}
