import { readFileSync, readdirSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import { readScan } from '../../../orchestrator/scan/read-scan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { createEvaluator } from '../../../workers/evaluate.js';

const scans = new URL('../../../scans/', import.meta.url);

describe.each(readdirSync(scans).filter((file) => /\.(yaml|json)$/.test(file)))(
  'the shipped scan %s',
  (file) => {
    const plan = readScan(readFileSync(new URL(file, scans)), file).plan;

    test('has no remarks and evaluates without failures', () => {
      expect(plan.remarks).toEqual([]);
      const evaluator = createEvaluator(taskOf(plan));
      plan.strata.forEach((stratum, s) => {
        const result = evaluator.evaluate(samplerOf(plan, s).fill(0, Math.min(64, stratum.points)));
        expect(result.failures.every((code) => code === 0)).toBe(true);
      });
    });
  },
);

test('the electroweak scan shows stable, metastable, unstable and non-perturbative regions (arXiv:1307.3536, figure 3)', () => {
  const plan = readScan(readFileSync(new URL('electroweak-vacuum.yaml', scans)), 'x').plan;
  expect(plan.strata.reduce((sum, { points }) => sum + points, 0)).toBeGreaterThanOrEqual(20_000);
  const task = taskOf(plan);
  const s = plan.strata.findIndex(({ name }) => name === 'plane');
  const n = 512;
  const result = createEvaluator(task).evaluate(samplerOf(plan, s).fill(0, n));
  const at = task.keep.indexOf('vacuumClass') * n;
  const share = [0, 1, 2, 3].map(
    (k) => result.quantities.subarray(at, at + n).filter((c) => c === k).length / n,
  );
  for (const part of share) expect(part).toBeGreaterThan(0.05);
});
