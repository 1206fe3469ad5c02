import { fileURLToPath } from 'node:url';
import { afterEach, describe, expect, test } from 'vitest';
import type { ChunkReport, Dispatcher, OpenDispatcher } from '../../orchestrator/dispatch/dispatcher.js';
import type { Task } from '../../workers/contract.js';

/** What every dispatcher promises, whatever its workers are: run against each implementation with tiny real worker
 *  programs that hang, throw, exit and run out of memory. */

export const PROGRAM = fileURLToPath(new URL('programs/worker.mjs', import.meta.url));

export interface Limits {
  readonly threads: number;
  readonly chunkSeconds: number;
  readonly heapMegabytes: number;
}

export interface Setup {
  readonly open: OpenDispatcher;
  stop(): Promise<void>;
}

export const TASK: Task = {
  model: { name: 'test', options: {} },
  running: { loops: 1, tolerance: 1e-6 },
  varied: ['x'],
  fixed: {},
  define: [],
  constraints: [{ name: 'always', options: {} }],
  deciding: 1,
  keep: ['successor', 'square'],
};

const ORDERS = {
  hang: -1,
  throw: -2,
  exit: -3,
  outOfMemory: -4,
  answerTwice: -5,
  answerSlowly: -6,
  answerError: -7,
  wrongShape: -8,
};

export function dispatcherContract(setUp: (limits: Limits) => Promise<Setup>): void {
  const undo: (() => Promise<void>)[] = [];
  afterEach(async () => {
    for (const step of undo.splice(0).reverse()) await step();
  });

  /** Each test has its own: what a killed worker had in hand would come back to the next. */
  let scopes = 0;

  async function start(limits: Partial<Limits> = {}, task = TASK) {
    const setup = await setUp({ threads: 2, chunkSeconds: 20, heapMegabytes: 64, ...limits });
    undo.push(() => setup.stop());
    const dispatcher = await setup.open(task, `scope-${(scopes += 1)}`);
    undo.push(() => dispatcher.close());
    return { ...listen(dispatcher), setup };
  }

  describe('answers', () => {
    test('a chunk comes back with its own results, bit for bit', async () => {
      const { submit, report } = await start();
      submit('0.0.5', [0, -0, 1e300, Number.MIN_VALUE, NaN]);
      const done = expectDone(await report('0.0.5'));
      expect([...done.result.quantities]).toEqual([1, 1, 1e300, 1, NaN, 0, 0, Infinity, 0, NaN]);
      expect(done.result.count).toBe(5);
      expect([...done.result.margins]).toEqual([0.5, 0.5, 0.5, 0.5, 0.5]);
      expect([...done.result.logLikelihoods]).toEqual([NaN, NaN, NaN, NaN, NaN]);
      expect([...done.result.outcomes, ...done.result.failures, ...done.result.verdicts]).toEqual(
        new Array(15).fill(0),
      );
      expect(done.worker).not.toBe('');
    });

    test('every one of many chunks is reported once, whatever its size', async () => {
      const { submit, report, reports } = await start();
      const sizes = Array.from({ length: 120 }, (_, i) => 1 + ((i * 37) % 300));
      sizes.forEach((size, i) => submit(`0.${i}.${size}`, new Array<number>(size).fill(i)));
      for (const [i, size] of sizes.entries()) {
        const done = expectDone(await report(`0.${i}.${size}`));
        expect([done.result.count, done.result.quantities[0]]).toEqual([size, i + 1]);
      }
      expect(reports).toHaveLength(120);
    });

    test('a chunk that is answered twice is reported once', async () => {
      const { submit, report, reports } = await start({ threads: 1 });
      submit('0.0.1', [ORDERS.answerTwice]);
      submit('0.1.1', [1]);
      await report('0.1.1');
      expect(reports.map((r) => r.id)).toEqual(['0.0.1', '0.1.1']);
    });

    test('a slow chunk does not hold up the others', async () => {
      const { submit, report, reports } = await start();
      submit('0.0.1', [ORDERS.answerSlowly]);
      for (let i = 1; i <= 6; i += 1) submit(`0.${i}.1`, [i]);
      await report('0.0.1');
      expect(reports.filter((r) => r.kind === 'done').length).toBeGreaterThanOrEqual(5);
    });

    test('the account of the workers adds up', async () => {
      const { dispatcher, submit, report } = await start();
      for (let i = 0; i < 10; i += 1) submit(`0.${i}.3`, [i, i, i]);
      for (let i = 0; i < 10; i += 1) await report(`0.${i}.3`);
      const workers = dispatcher.workers();
      expect(sum(workers.map((w) => w.chunks))).toBe(10);
      expect(sum(workers.map((w) => w.points))).toBe(30);
      expect(dispatcher.capacity()).toBeGreaterThanOrEqual(2);
    });
  });

  describe('losses', () => {
    test.each([
      ['throws', ORDERS.throw, 'worker-error', 'thrown by the test program'],
      ['exits', ORDERS.exit, 'worker-died', 'status 3'],
      ['runs out of memory', ORDERS.outOfMemory, 'out-of-memory', 'heap limit of 64 MB'],
      ['refuses a chunk', ORDERS.answerError, 'worker-error', 'refused by the test program'],
      ['answers in another shape', ORDERS.wrongShape, 'worker-error', 'expected 2 margins, found 1'],
    ])('a worker that %s loses its chunk, and the next one is done', async (_, order, reason, detail) => {
      const { submit, report } = await start({ threads: 1 });
      submit('0.0.1', [0]);
      await report('0.0.1');
      submit('0.1.2', [order, 0]);
      expect(await report('0.1.2')).toMatchObject({ kind: 'lost', reason });
      expect((await report('0.1.2')) as { detail: string }).toMatchObject({
        detail: expect.stringContaining(detail) as string,
      });
      submit('0.3.1', [3]);
      expectDone(await report('0.3.1'));
    });

    test('a worker that hangs is ended by the time-out', async () => {
      const { submit, report } = await start({ threads: 1, chunkSeconds: 1 });
      submit('0.0.1', [ORDERS.hang]);
      expect(await report('0.0.1')).toMatchObject({ kind: 'lost', reason: 'time-out' });
      submit('0.1.1', [1]);
      expectDone(await report('0.1.1'));
    });

    test('a lost chunk may be submitted again under the same id', async () => {
      const { submit, report, reports } = await start();
      submit('0.0.1', [ORDERS.exit]);
      expect(await report('0.0.1')).toMatchObject({ kind: 'lost', reason: 'worker-died' });
      reports.length = 0;
      submit('0.0.1', [5]);
      expect(expectDone(await report('0.0.1')).result.quantities[0]).toBe(6);
    });

    test('a chunk behind a lost one is not lost: it is done or returned', async () => {
      const { submit, report } = await start({ threads: 1 });
      submit('0.0.1', [ORDERS.exit]);
      for (let i = 1; i <= 4; i += 1) submit(`0.${i}.1`, [i]);
      expect((await report('0.0.1')).kind).toBe('lost');
      for (let i = 1; i <= 4; i += 1) expect(await report(`0.${i}.1`)).not.toMatchObject({ kind: 'lost' });
    });
  });

  describe('ends', () => {
    test('a task that no worker can load breaks the dispatcher, with the words of the worker', async () => {
      const task = { ...TASK, model: { name: 'does-not-load', options: {} } };
      const broken = start({}, task).then(({ dispatcher, submit }) => {
        submit('0.0.1', [1]);
        return new Promise((_, reject) => dispatcher.onBroken(reject));
      });
      await expect(broken).rejects.toThrow('no such model: does-not-load');
    });

    test('closing gives up what is in flight, at once and without a word, and may be done twice', async () => {
      const { dispatcher, submit, reports } = await start();
      for (let i = 0; i < 6; i += 1) submit(`0.${i}.1`, [ORDERS.hang]);
      await dispatcher.close();
      await dispatcher.close();
      expect(reports).toEqual([]);
    });
  });
}

/** Collects reports; `report(id)` waits for the report on one chunk. */
export function listen(dispatcher: Dispatcher) {
  const reports: ChunkReport[] = [];
  const waiting: (() => void)[] = [];
  const failure: Error[] = [];
  const wake = () => waiting.splice(0).forEach((go) => go());
  dispatcher.onReport((r) => {
    reports.push(r);
    wake();
  });
  dispatcher.onBroken((error) => {
    failure.push(error);
    wake();
  });
  async function report(id: string): Promise<ChunkReport> {
    for (;;) {
      const found = reports.find((r) => r.id === id);
      if (found) return found;
      if (failure[0]) throw failure[0];
      await new Promise<void>((go) => waiting.push(go));
    }
  }
  function submit(id: string, x: readonly number[]): void {
    dispatcher.submit({ id, points: { count: x.length, values: Float64Array.from(x) } });
  }
  return { dispatcher, reports, report, submit };
}

export function expectDone(report: ChunkReport) {
  if (report.kind !== 'done') throw new Error(`expected an answer, found ${JSON.stringify(report)}`);
  return report;
}

function sum(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0);
}
