import type { Task } from '../../workers/contract.js';
import type { Plan } from './plan.js';

/** What a worker must know to evaluate points of a plan: the plan without how its points are chosen. */
export function taskOf(plan: Plan): Task {
  const varied = [...new Set(plan.strata.flatMap((s) => s.vary.map((axis) => axis.input)))].sort();
  const fixed = Object.entries(plan.fix).filter(([name]) => !varied.includes(name));
  return {
    model: plan.model,
    running: plan.running,
    varied,
    fixed: Object.fromEntries(fixed),
    define: plan.define,
    constraints: [...plan.require, ...plan.note],
    deciding: plan.require.length,
    keep: plan.keep,
  };
}
