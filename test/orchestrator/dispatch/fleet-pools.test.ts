import { afterEach, beforeEach, expect, test } from 'vitest';
import { FleetPools } from '../../../orchestrator/dispatch/fleet-pools.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { LINE_WORKER, linePlan } from './line-run.js';

/** A worker of a fleet serves several runs at once: threads of one task never close under a chunk of it. */

const LIMITS = { program: LINE_WORKER, chunkSeconds: 20, heapMegabytes: 64 };
const task = () => Promise.resolve(taskOf(linePlan([10])));
const points = () => ({ count: 2, values: Float64Array.of(4, 7) });

let pools: FleetPools;
beforeEach(() => {
  pools = new FleetPools(1, LIMITS);
});
afterEach(() => pools.close());

test('a chunk of a known task is answered although another task comes while idle threads are closed', async () => {
  // A chunk that takes its time keeps the threads of `first` while `second` gets its own.
  const slow = () => Promise.resolve(taskOf(linePlan([10], { microseconds: 200_000 })));
  await pools.run('first', slow, { count: 0, values: new Float64Array(0) });
  await Promise.all([pools.run('first', slow, points()), pools.run('second', task, points())]);
  // `first` is idle and makes way; until it has, the chunk of `second` is not in its threads yet.
  const waiting = pools.run('second', task, points());
  await new Promise(setImmediate);
  const answers = await Promise.all([waiting, pools.run('third', task, points())]);
  expect(answers.map(({ kind }) => kind)).toEqual(['done', 'done']);
});

test('a task that cannot be had is asked for again by the next chunk', async () => {
  const missing = () => Promise.reject(new Error('not there'));
  await expect(pools.run('first', missing, points())).rejects.toThrow('not there');
  await expect(pools.run('first', task, points())).resolves.toMatchObject({ kind: 'done' });
});

test('threads that cannot start say so to every chunk', async () => {
  const broken = new FleetPools(1, { ...LIMITS, program: '/no/such/program.mjs' });
  for (let i = 0; i < 2; i++) {
    await expect(broken.run('first', task, points())).rejects.toThrow('do not start');
  }
  await broken.close();
});
