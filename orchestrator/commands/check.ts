import { performance } from 'node:perf_hooks';
import type { PointsBlock, Task } from '../../workers/contract.js';
import { createEvaluator } from '../../workers/evaluate.js';
import { fingerprint } from '../provenance/canonical.js';
import { samplerOf } from '../sampling/sampler.js';
import type { Plan } from '../scan/plan.js';
import { readScan } from '../scan/read-scan.js';
import { taskOf } from '../scan/task.js';
import type { CheckFacts } from './commands.js';

const MOST_MEASURED = 1024;
const ENOUGH_MS = 700;

/** Validates a scan file, and estimates what it costs by evaluating a few of its own points. Writes nothing.
 *  @param workers the number of workers that the time is for
 *  @throws FileMistakes with every mistake of the file */
export function check(
  scan: { bytes: Uint8Array; file: string },
  workers: number,
): CheckFacts & { format: 1 } {
  const { plan } = readScan(scan.bytes, scan.file);
  const task = taskOf(plan);
  const points = plan.strata.reduce((sum, stratum) => sum + stratum.points, 0);
  const { seconds, measured } = secondsPerPoint(plan, task, points);
  return {
    format: 1,
    plan,
    fingerprint: fingerprint(plan),
    points,
    estimate: {
      seconds: (points * seconds) / workers,
      bytes: points * bytesPerPoint(task),
      basis: `${measured} of its points measured here at ${(1000 * seconds).toPrecision(2)} ms each, ${workers} workers`,
    },
  };
}

/** Blocks twice as large each time, until enough time went by. Only the last one counts: by then the engine has
 *  compiled what is worth it. */
function secondsPerPoint(plan: Plan, task: Task, points: number): { seconds: number; measured: number } {
  const evaluator = createEvaluator(task);
  const start = performance.now();
  for (let count = Math.min(8, points); ; count = Math.min(2 * count, points)) {
    const block = spread(plan, count);
    const began = performance.now();
    evaluator.evaluate(block);
    const now = performance.now();
    const enough = now - start > ENOUGH_MS || count === points || count >= MOST_MEASURED;
    if (enough) return { seconds: (now - began) / 1000 / count, measured: count };
  }
}

/** Points of the plan, evenly spread over all of them. */
function spread(plan: Plan, count: number): PointsBlock {
  const samplers = plan.strata.map((_, stratum) => samplerOf(plan, stratum));
  const total = plan.strata.reduce((sum, stratum) => sum + stratum.points, 0);
  const one = Array.from({ length: count }, (_, i) => {
    let index = Math.floor(((i + 0.5) * total) / count);
    let stratum = 0;
    for (; index >= plan.strata[stratum].points; stratum += 1) index -= plan.strata[stratum].points;
    return samplers[stratum].fill(index, 1).values;
  });
  const width = one[0].length;
  const values = new Float64Array(width * count);
  one.forEach((inputs, i) => inputs.forEach((input, k) => (values[k * count + i] = input)));
  return { count, values };
}

/** Eight bytes for every number and one for every class; the rest of the store is small beside it. */
function bytesPerPoint(task: Task): number {
  const numbers = task.varied.length + task.keep.length + 2 * task.constraints.length;
  const classes = task.constraints.length + 2;
  return 8 * numbers + classes;
}
