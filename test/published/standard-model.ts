import { createEvaluator } from '../../workers/evaluate.js';
import { models } from '../../workers/models/catalogue.js';
import { quantitiesOf } from '../../workers/quantities.js';
import type { Task } from '../../workers/contract.js';

/** Inputs of Buttazzo et al., arXiv:1307.3536; what is not named stays at its default. */
export const NEAR_CRITICAL = { Mt: 173.34, Mh: 125.15, alphaS: 0.1184, MW: 80.384, cutoff: 1.2209e19 };

/** Every quantity of one point of the Standard Model, through the evaluation that scans use. */
export function evaluate(
  inputs: Readonly<Record<string, number>>,
  loops: 1 | 2 | 3 = 3,
): Readonly<Record<string, number>> {
  const sm = models.get('sm')!;
  const running = { loops, tolerance: 1e-10 };
  const keep = quantitiesOf(sm, running, {}).map((quantity) => quantity.name);
  const defaults = Object.fromEntries(sm.inputs.map((input) => [input.name, input.default]));
  const task: Task = {
    model: { name: 'sm', options: {} },
    running,
    varied: [],
    fixed: { ...defaults, ...inputs },
    define: [],
    constraints: [],
    deciding: 0,
    keep,
  };
  const result = createEvaluator(task).evaluate({ count: 1, values: new Float64Array(0) });
  if (result.failures[0] !== 0)
    throw new Error(`expected a point that can be done, found failure ${result.failures[0]}`);
  return Object.fromEntries(keep.map((name, i) => [name, result.quantities[i]]));
}

/** Where f changes sign between a and b, to 1e-6 of the interval; f must have different signs there. */
export function border(f: (x: number) => number, a: number, b: number): number {
  const low = f(a) < 0;
  for (let i = 0; i < 22; i++) {
    const middle = (a + b) / 2;
    if (f(middle) < 0 === low) a = middle;
    else b = middle;
  }
  return (a + b) / 2;
}
