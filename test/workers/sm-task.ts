import type { PointsBlock, ResultBlock, RunningSettings, Task } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { models } from '../../workers/models/catalogue.js';
import { quantitiesOf } from '../../workers/quantities.js';

export const sm = models.get('sm')!;
export const SETTINGS: RunningSettings = { loops: 3, tolerance: 1e-9 };

/** A task of the Standard Model that keeps everything and judges by every constraint at its defaults. */
export function smTask(varied: readonly string[], change: Partial<Task> = {}): Task {
  const others = sm.inputs.filter((input) => !varied.includes(input.name));
  const uses = [...constraints.values()].map(({ name, options }) => ({
    name,
    options: Object.fromEntries(Object.entries(options).map(([key, spec]) => [key, spec.default])),
  }));
  return {
    model: { name: 'sm', options: {} },
    running: SETTINGS,
    varied,
    fixed: Object.fromEntries(others.map((input) => [input.name, input.default])),
    define: [],
    constraints: uses,
    deciding: 2,
    keep: quantitiesOf(sm, SETTINGS, {}).map((quantity) => quantity.name),
    ...change,
  };
}

/** Points spread evenly over a box, one range a varied input, by an additive sequence: no randomness. */
export function spread(count: number, ranges: readonly (readonly [number, number])[]): PointsBlock {
  const values = new Float64Array(ranges.length * count);
  ranges.forEach(([low, high], k) => {
    for (let i = 0; i < count; i++) {
      values[k * count + i] = low + (high - low) * (((i + 1) * Math.sqrt(k + 2) * 0.7548776662466927) % 1);
    }
  });
  return { count, values };
}

/** Row i of a result in one array, for comparing bit by bit. */
export function row(result: ResultBlock, i: number): number[] {
  const pick = (values: ArrayLike<number>): number[] =>
    Array.from({ length: values.length / result.count }, (_, k) => values[k * result.count + i]);
  return [
    ...pick(result.quantities),
    ...pick(result.outcomes),
    ...pick(result.margins),
    ...pick(result.logLikelihoods),
    result.failures[i],
    result.verdicts[i],
  ];
}
