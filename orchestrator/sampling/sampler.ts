import type { PointsBlock } from '../../workers/contract.js';
import type { Plan, Stratum } from '../scan/plan.js';
import { taskOf } from '../scan/task.js';
import { gridColumn } from './grid.js';
import type { Fractions } from './fractions.js';
import { latinHypercube } from './latin-hypercube.js';
import { priorOf } from './priors.js';
import { sobol } from './sobol.js';
import { uniform } from './uniform.js';

export interface Sampler {
  /** Points first .. first + count - 1, column-major, columns in the order of taskOf(plan).varied, values in the
   *  units of the model.
   *  @throws RangeError outside the stratum */
  fill(first: number, count: number): PointsBlock;
}

type Column = (first: number, count: number, out: Float64Array) => void;

/** The points of one stratum. A point is a pure function of the plan's seed, the stratum's position, generation
 *  and axes, and the point's index: of the plan's total or of other strata it knows nothing (a latin hypercube
 *  alone also depends on its own number of points). Inputs that the stratum does not vary have their fixed value.
 *  @param stratum position in plan.strata */
export function samplerOf(plan: Plan, stratum: number): Sampler {
  const part = plan.strata[stratum];
  const columns = taskOf(plan).varied.map((input) => columnOf(plan, part, stratum, input));
  return {
    fill(first, count) {
      requireInside(part, first, count);
      const values = new Float64Array(columns.length * count);
      columns.forEach((fill, c) => fill(first, count, values.subarray(c * count, (c + 1) * count)));
      return { count, values };
    },
  };
}

function columnOf(plan: Plan, part: Stratum, stratum: number, input: string): Column {
  const dimension = part.vary.findIndex((axis) => axis.input === input);
  if (dimension < 0) return (_first, _count, out) => out.fill(plan.fix[input]);
  if (part.method === 'grid') return gridColumn(part.vary, dimension);
  const place = { seed: plan.seed, stratum, generation: part.generation, input };
  return drawn(fractionsOf(part, dimension, place), priorOf(part.vary[dimension]));
}

function fractionsOf(part: Stratum, dimension: number, place: Parameters<typeof uniform>[0]): Fractions {
  if (part.method === 'sobol') return sobol(dimension, place);
  return part.method === 'latin-hypercube' ? latinHypercube(part.points, place) : uniform(place);
}

function drawn(fractions: Fractions, prior: (column: Float64Array) => void): Column {
  return (first, count, out) => {
    fractions(first, count, out);
    prior(out);
  };
}

function requireInside(part: Stratum, first: number, count: number): void {
  if (first >= 0 && count >= 0 && first + count <= part.points) return;
  throw new RangeError(`points ${first} to ${first + count - 1} are not in ${part.name} of ${part.points}`);
}
