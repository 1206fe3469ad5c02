import { join } from 'node:path';
import { afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { linePlan, temporaryStore } from '../orchestrator/dispatch/line-run.js';
import { committed, resultOf, startWork, undisturbedDigest } from './line-work.js';
import { endPrograms } from './processes.js';

/** Coordinators with worker threads, in processes of their own that are really killed: a launch afterwards gives the
 *  digest of an undisturbed run. */

const POINTS = [8000, 300];
const SLOW = { microseconds: 1000 };

let undisturbed: string;
let store: ReturnType<typeof temporaryStore>;
beforeAll(async () => {
  undisturbed = await undisturbedDigest(POINTS);
});
beforeEach(() => {
  store = temporaryStore();
});
afterEach(async () => {
  await endPrograms();
  store.remove();
});

describe('a coordinator that is stopped', () => {
  test('by Ctrl-C stores what it has and is resumed', async () => {
    const plan = linePlan(POINTS, SLOW);
    const first = startWork(store.path, plan, { threads: 2 });
    await committed(first, 0);
    first.signal('SIGINT');
    const paused = await resultOf(first);
    expect(paused.state).toBe('paused');
    expect(paused.counts.points).toBeGreaterThan(0);
    const second = await resultOf(startWork(store.path, plan, { threads: 2 }));
    expect(second).toMatchObject({ state: 'complete', digest: undisturbed });
  });

  test('by kill -9, again and again, is resumed', async () => {
    const plan = linePlan(POINTS, SLOW);
    let before = 0;
    for (let kill = 0; kill < 3; kill += 1) {
      const work = startWork(store.path, plan, { threads: 2 });
      await committed(work, before);
      work.signal('SIGKILL');
      expect(await work.exit).toBe('SIGKILL');
      const reading = store.open();
      // What was said to be committed is there.
      expect(reading.run(1)?.counts.points).toBeGreaterThan(before);
      before = reading.run(1)?.counts.points ?? 0;
      reading.close();
    }
    expect(await resultOf(startWork(store.path, plan, { threads: 2 }))).toMatchObject({
      state: 'complete',
      digest: undisturbed,
    });
  });

  test('while another is at work is refused, and the other is not disturbed', async () => {
    // Held up by a worker that hangs once, for as long as the second takes on a busy machine.
    const plan = linePlan(POINTS, { hangAt: 7999, once: join(store.folder, 'happened') });
    const first = startWork(store.path, plan, { threads: 2, chunkSeconds: 60 });
    await committed(first, 0);
    const second = startWork(store.path, plan, { threads: 2 });
    expect(await second.exit).toBe(3);
    expect(second.err()).toContain(`process ${first.pid} `);
    expect(second.err()).toContain('Nothing was changed');
    first.signal('SIGINT');
    expect(await resultOf(first)).toMatchObject({ state: 'paused' });
    const third = await resultOf(startWork(store.path, plan, { threads: 2 }));
    expect(third).toMatchObject({ state: 'complete', digest: undisturbed });
  });
});

describe('a worker thread', () => {
  test.each([
    ['is terminated', 'exitAt'],
    ['throws', 'throwAt'],
    ['runs out of memory', 'outOfMemoryAt'],
    ['hangs', 'hangAt'],
  ])('that %s once costs nothing but time', async (_, where) => {
    const plan = linePlan(POINTS, { [where]: 4321, once: join(store.folder, 'happened') });
    const work = startWork(store.path, plan, { threads: 2, heapMegabytes: 64, chunkSeconds: 2 });
    expect(await resultOf(work)).toMatchObject({ state: 'complete', digest: undisturbed });
    const reading = store.open();
    expect(reading.chunks(1).retried).toBe(1);
    reading.close();
  });

  test('that takes the whole program with it does not make launches loop: the point is found', async () => {
    const plan = linePlan([400], { killAt: 123 });
    let launches = 1;
    let work = startWork(store.path, plan, { threads: 2 });
    for (; (await work.exit) === 'SIGKILL'; launches += 1) {
      expect(launches).toBeLessThan(20);
      work = startWork(store.path, plan, { threads: 2 });
    }
    const done = await resultOf(work);
    expect(done).toMatchObject({
      state: 'incomplete',
      counts: { points: 400, unfinished: 1, excluded: 199 },
    });
  });
});
