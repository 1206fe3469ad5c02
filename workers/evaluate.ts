import { constraints } from './constraints/catalogue.js';
import type { Evaluator, PointsBlock, ResultBlock, Task } from './contract.js';
import { models } from './models/catalogue.js';
import { createPipeline } from './pipeline.js';

/** Points evaluated together: their trajectories fit the second-level cache, and a point's bits do not depend on it. */
const BLOCK = 64;

/** Builds everything a task needs once; `evaluate` then works through any number of points.
 *  @throws Error if the task names a model or a constraint that is not there, or an expression does not compile */
export function createEvaluator(task: Task, block = BLOCK): Evaluator {
  const model = models.get(task.model.name);
  if (!model)
    throw new Error(`expected a model of ${[...models.keys()].join(' ')}, found ${task.model.name}`);
  const uses = task.constraints.map(({ name, options }) => {
    const constraint = constraints.get(name);
    if (!constraint)
      throw new Error(`expected a constraint of ${[...constraints.keys()].join(' ')}, found ${name}`);
    return { constraint, options };
  });
  const pipeline = createPipeline(task, model, uses);
  return {
    evaluate(points: PointsBlock): ResultBlock {
      const result = emptyResult(task, points.count);
      for (let first = 0; first < points.count; first += block) {
        pipeline(points, first, Math.min(block, points.count - first), result);
      }
      return result;
    },
  };
}

function emptyResult(task: Task, count: number): ResultBlock {
  const judged = task.constraints.length * count;
  return {
    count,
    quantities: new Float64Array(task.keep.length * count),
    outcomes: new Uint8Array(judged),
    margins: new Float64Array(judged),
    logLikelihoods: new Float64Array(judged),
    failures: new Uint8Array(count),
    verdicts: new Uint8Array(count),
  };
}
