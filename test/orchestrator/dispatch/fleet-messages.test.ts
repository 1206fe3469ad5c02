import { expect, test } from 'vitest';
import { resultBytes, resultOf } from '../../../orchestrator/dispatch/fleet-messages.js';
import { wrongShape } from '../../../orchestrator/dispatch/result-shape.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import type { ResultBlock } from '../../../workers/contract.js';
import { linePlan } from './line-run.js';

const task = taskOf(linePlan([2]));

/** Two points, two quantities, one constraint. */
function result(codes: Partial<Pick<ResultBlock, 'outcomes' | 'failures' | 'verdicts'>> = {}): ResultBlock {
  return {
    count: 2,
    quantities: Float64Array.of(1, -0, NaN, 1e300),
    margins: Float64Array.of(0.5, NaN),
    logLikelihoods: Float64Array.of(NaN, -1),
    outcomes: Uint8Array.of(0, 2),
    failures: Uint8Array.of(0, 4),
    verdicts: Uint8Array.of(0, 2),
    ...codes,
  };
}

test('a result is the same after the journey', () => {
  expect(resultOf(task, 2, resultBytes(result()))).toEqual(result());
});

test('bytes of another number of points are refused', () => {
  expect(() => resultOf(task, 3, resultBytes(result()))).toThrow('expected 105 bytes, found 70');
});

test.each([
  ['outcomes', Uint8Array.of(0, 3), 'expected outcomes below 3, found 3'],
  ['failures', Uint8Array.of(5, 0), 'expected failures below 5, found 5'],
  ['verdicts', Uint8Array.of(0, 3), 'expected verdicts below 3, found 3'],
])(
  'a code that stands for nothing among the %s is refused, from thread and fleet alike',
  (part, codes, words) => {
    const strange = result({ [part]: codes });
    expect(wrongShape(task, 2, strange)).toBe(words);
    expect(() => resultOf(task, 2, resultBytes(strange))).toThrow(words);
  },
);
