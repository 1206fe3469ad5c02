import { afterEach, expect, test } from 'vitest';
import { linePlan, temporaryStore } from '../orchestrator/dispatch/line-run.js';
import { resultOf, startWork } from './line-work.js';
import { endPrograms } from './processes.js';

afterEach(endPrograms);

const KEPT = Array.from({ length: 20 }, (_, i) => `q${String(i).padStart(2, '0')}`);

/** Peak resident memory of a whole run in a process of its own, in megabytes. */
async function peakOf(points: number): Promise<number> {
  const store = temporaryStore();
  try {
    const done = await resultOf(startWork(store.path, { ...linePlan([points]), keep: KEPT }, { threads: 2 }));
    expect(done.counts.points).toBe(points);
    return (done as unknown as { peakMegabytes: number }).peakMegabytes;
  } finally {
    store.remove();
  }
}

test('memory does not grow with the number of points', async () => {
  // Small enough to be quick, large enough for the memory of dead buffers to have reached its level.
  const few = await peakOf(200_000);
  const many = await peakOf(1_200_000);
  // A million points more, each of 20 quantities, an input, a margin and a likelihood of 8 bytes: what it would cost
  // to keep them.
  const all = (1e6 * 23 * 8) / 2 ** 20;
  expect(many - few).toBeLessThan(all / 3);
});
