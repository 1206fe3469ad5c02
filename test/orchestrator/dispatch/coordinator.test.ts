import Database from 'better-sqlite3';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { Progress } from '../../../orchestrator/commands/commands.js';
import { coordinate, type Coordinated } from '../../../orchestrator/dispatch/coordinator.js';
import { openThreads } from '../../../orchestrator/dispatch/threads.js';
import { createLineRun, LINE_WORKER, linePlan, temporaryStore } from './line-run.js';

/** Whole runs over the real threads and the real store; only the physics is a tiny program. */

let store: ReturnType<typeof temporaryStore>;
beforeEach(() => {
  store = temporaryStore();
});
afterEach(() => store.remove());

const threads = (count: number, chunkSeconds = 20) =>
  openThreads(count, { program: LINE_WORKER, chunkSeconds, heapMegabytes: 64 });

interface Way {
  readonly open?: ReturnType<typeof openThreads>;
  readonly signal?: AbortSignal;
  onProgress?(progress: Progress): void;
}

/** Works on run 1 of the store, making it if it is not there. */
async function work(plan: ReturnType<typeof linePlan>, way: Way = {}): Promise<Coordinated> {
  const writing = store.open();
  try {
    const run = writing.run(1)?.id ?? createLineRun(writing, plan);
    const { open = threads(2), signal = new AbortController().signal } = way;
    return await coordinate({
      store: writing,
      run,
      plan,
      open,
      signal,
      onProgress: (p) => way.onProgress?.(p),
    });
  } finally {
    writing.close();
  }
}

async function digestOf(plan: ReturnType<typeof linePlan>, way: Way = {}): Promise<string | null> {
  store.remove();
  store = temporaryStore();
  return (await work(plan, way)).digest;
}

describe('a run', () => {
  test('commits every point, counts the verdicts and seals', async () => {
    const done = await work(linePlan([10_000, 77]));
    expect(done.state).toBe('complete');
    expect(done.counts).toEqual({
      points: 10_077,
      surviving: 5039,
      excluded: 5038,
      failed: 0,
      unfinished: 0,
    });
    expect(done.digest).toMatch(/^sha256:/);
    const reading = store.open();
    let next = 0;
    for (const { stratum, first, count, columns } of reading.batches(1, ['x', 'square'])) {
      if (stratum > 0) continue;
      expect(first).toBe(next);
      for (let i = 0; i < count; i += 1) {
        expect(columns.get('x')?.[i]).toBeCloseTo(first + i, 8);
        // keep is in the order of the plan: the first of the two is x + 1.
        expect(columns.get('square')?.[i]).toBe(first + i + 1);
      }
      next = first + count;
    }
    expect(next).toBe(10_000);
    reading.close();
  });

  test('has the same digest whatever the number of threads and the size of chunks', async () => {
    const digests = [
      await digestOf(linePlan([9000, 500]), { open: threads(1) }),
      await digestOf(linePlan([9000, 500]), { open: threads(3) }),
    ];
    expect(new Set(digests).size).toBe(1);
  });

  test('tells its progress a few times a second, and ends with the final state', async () => {
    const heard: Progress[] = [];
    const began = performance.now();
    await work(linePlan([20_000], { microseconds: 100 }), { onProgress: (p) => heard.push(p) });
    const seconds = (performance.now() - began) / 1000;
    expect(heard.length).toBeLessThanOrEqual(4 * seconds + 2);
    expect(heard.at(-1)).toMatchObject({ state: 'complete', wanted: 20_000, retried: 0 });
    expect(heard.at(-1)?.counts.points).toBe(20_000);
    expect(heard.some((p) => p.counts.points > 0 && p.counts.points < 20_000)).toBe(true);
    expect(heard.at(-1)?.workers.map((w) => w.name)).toEqual(['thread-1', 'thread-2']);
  });
});

describe('a point that no worker can do', () => {
  test.each([
    ['exits', { exitAt: 1234 }, 'worker-died'],
    ['throws', { throwAt: 1234 }, 'worker-error'],
    ['runs out of memory', { outOfMemoryAt: 1234 }, 'out-of-memory'],
    ['hangs', { hangAt: 1234 }, 'time-out'],
  ])('is unfinished, alone of all, if its worker always %s', async (_, options, reason) => {
    const done = await work(linePlan([2000], options), { open: threads(2, 0.5) });
    expect(done.state).toBe('incomplete');
    expect(done.counts).toMatchObject({ points: 2000, unfinished: 1, surviving: 999, excluded: 1000 });
    const reading = store.open();
    const verdicts = [...reading.batches(1, ['verdict'])].flatMap((b) => [
      ...(b.columns.get('verdict') ?? []),
    ]);
    expect(verdicts[1234]).toBe(3);
    reading.close();
    const why = new Database(store.path, { readonly: true }).prepare('SELECT * FROM unfinished').all();
    expect(why).toMatchObject([
      { stratum: 0, point: 1234, reason: expect.stringContaining(reason) as string },
    ]);
  });

  test('leaves the other results as they are: the digest does not depend on how it was found', async () => {
    const one = await digestOf(linePlan([3000], { exitAt: 2500 }), { open: threads(1) });
    const two = await digestOf(linePlan([3000], { exitAt: 2500 }), { open: threads(2) });
    expect(one).toBe(two);
  });
});

describe('a stop', () => {
  test('keeps what was computed, and the next launch computes only the rest', async () => {
    const plan = linePlan([6000], { microseconds: 100 });
    const stop = new AbortController();
    const paused = await work(plan, {
      signal: stop.signal,
      onProgress: (p) => {
        if (p.counts.points > 0) stop.abort();
      },
    });
    expect(paused).toMatchObject({ state: 'paused', digest: null });
    expect(paused.counts.points).toBeGreaterThan(0);
    expect(paused.counts.points).toBeLessThan(6000);
    const reading = store.open();
    expect(reading.attempted(1)).toEqual([]);
    reading.close();

    let first = Infinity;
    const done = await work(plan, { onProgress: (p) => (first = Math.min(first, p.counts.points)) });
    expect(first).toBeGreaterThanOrEqual(paused.counts.points);
    expect(done.state).toBe('complete');
    expect(done.digest).toBe(await digestOf(plan));
  });

  test('before the beginning does nothing', async () => {
    const paused = await work(linePlan([100]), { signal: AbortSignal.abort() });
    expect(paused).toMatchObject({ state: 'paused', counts: { points: 0 } });
  });

  test('does not wait for a worker that hangs', async () => {
    const stop = new AbortController();
    setTimeout(() => stop.abort(), 300);
    const paused = await work(linePlan([10], { hangAt: 3 }), { signal: stop.signal });
    expect(paused.state).toBe('paused');
  });
});
