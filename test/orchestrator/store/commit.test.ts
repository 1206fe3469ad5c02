import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { questionsOf } from '../../../orchestrator/store/questions.js';
import type { Reading } from '../../../orchestrator/store/reading.js';
import {
  chunksOf,
  exampleChunk,
  exampleColumns,
  examplePlan,
  examplePoint,
  exampleRun,
  fillRun,
  newFile,
} from './example.js';

const names = ['stratum', 'index', 'verdict', 'failure', ...exampleColumns().map((column) => column.name)];

/** Every stored point, compared bit by bit with what was committed. */
function expectEveryPoint(store: Reading, run: number, points: readonly number[]): void {
  let seen = 0;
  const next = points.map(() => 0);
  for (const batch of store.batches(run, names)) {
    expect(batch.first).toBe(next[batch.stratum]);
    next[batch.stratum] += batch.count;
    for (let i = 0; i < batch.count; i++) {
      const wanted = examplePoint(batch.stratum, batch.first + i);
      for (const name of names) {
        const value = batch.columns.get(name)![i];
        if (!Object.is(value, wanted.get(name)))
          expect([name, batch.first + i, value]).toEqual(wanted.get(name));
      }
      seen++;
    }
  }
  expect(seen).toBe(points.reduce((a, b) => a + b, 0));
}

describe('committing points', () => {
  it.each([1000, 512, 4096, 333, 10000])('gives every bit back when chunks have %i points', (size) => {
    const store = openForWriting(newFile());
    const { run } = fillRun(store, examplePlan(), size);
    expectEveryPoint(store, run, [5000, 700]);
    store.close();
  });

  it('has one digest, whatever the order, the size and the repetition of chunks', () => {
    const store = openForWriting(newFile());
    const plan = examplePlan([5000, 700]);
    const { digest } = fillRun(store, plan, 4096);
    fc.assert(
      fc.property(fc.integer({ min: 200, max: 6000 }), fc.nat(), (size, seed) => {
        let state = seed;
        // The generator of Lehmer, Park and Miller: enough to shuffle with.
        const random = () => (state = ((state + 1) * 16807) % 2147483647);
        const run = store.createRun(exampleRun(plan));
        const keyed = chunksOf(plan, size).map((span) => ({ span, key: random() }));
        const shuffled = keyed.sort((a, b) => a.key - b.key).map(({ span }) => span);
        // Some chunks come twice, some cut in two and then whole.
        for (const span of shuffled) {
          const half = Math.ceil(span.count / 2);
          const cut = random() % 3;
          if (cut === 0) store.commit(run, [exampleChunk({ ...span, count: half })]);
          if (cut === 1) store.commit(run, [exampleChunk(span), exampleChunk(span)]);
          store.commit(run, [exampleChunk(span)]);
        }
        expect(store.seal(run, 'complete', 1)).toBe(digest);
        expectEveryPoint(store, run, [5000, 700]);
      }),
      { numRuns: 12, seed: 7 },
    );
    store.close();
  });

  it('stores nothing twice: a rerun with the same results adds no segment', () => {
    const store = openForWriting(newFile());
    const first = fillRun(store, examplePlan(), 1000);
    const second = fillRun(store, examplePlan(), 300);
    expect(second.digest).toBe(first.digest);
    expect(store.verifyIntegrity(second.run)).toEqual(store.verifyIntegrity(first.run));
    store.close();
  });

  it('counts points by verdict in the transaction that stores them', () => {
    const store = openForWriting(newFile());
    const run = store.createRun(exampleRun());
    const counts = store.commit(run, [exampleChunk({ stratum: 0, first: 100, count: 1000 })]);
    const tally = [0, 0, 0, 0];
    for (let i = 100; i < 1100; i++) tally[examplePoint(0, i).get('verdict')!]++;
    const [surviving, excluded, failed, unfinished] = tally;
    expect(counts).toEqual({ points: 1000, surviving, excluded, failed, unfinished });
    expect(store.commit(run, [exampleChunk({ stratum: 0, first: 100, count: 1000 })])).toEqual(counts);
    expect(store.run(run)?.counts).toEqual(counts);
    expect(store.committed(run)).toEqual([{ stratum: 0, first: 100, count: 1000 }]);
    store.close();
  });

  it('refuses results of the wrong shape and stores nothing of them', () => {
    const store = openForWriting(newFile());
    const run = store.createRun(exampleRun());
    const good = exampleChunk({ stratum: 0, first: 0, count: 10 });
    const short = { ...good, result: { ...good.result, margins: good.result.margins.subarray(1) } };
    const strange = { ...good, result: { ...good.result, verdicts: good.result.verdicts.map(() => 9) } };
    const outside = exampleChunk({ stratum: 1, first: 695, count: 10 });
    for (const bad of [short, strange, outside]) {
      expect(() => store.commit(run, [good, bad])).toThrow(expect.objectContaining({ code: 'result-shape' }));
    }
    expect(store.committed(run)).toEqual([]);
    store.close();
  });

  it('records attempts, workers and points that nobody could do', () => {
    const store = openForWriting(newFile());
    const run = store.createRun(exampleRun());
    const span = { stratum: 0, first: 0, count: 3 };
    expect(store.attempts(run, span)).toBe(0);
    expect(store.recordAttempt(run, span)).toBe(1);
    expect(store.recordAttempt(run, span)).toBe(2);
    expect(store.attempted(run)).toEqual([{ ...span, attempts: 2 }]);
    expect(store.recordAttempt(run, span)).toBe(3);
    store.withdrawAttempt(run, span);
    expect(store.attempts(run, span)).toBe(2);
    const unused = { stratum: 1, first: 0, count: 3 };
    store.recordAttempt(run, unused);
    store.withdrawAttempt(run, unused);
    expect(store.attempted(run)).toHaveLength(1);
    store.recordUnfinished(run, 0, 1, Float64Array.of(125.25, 171), 'out-of-memory after 3 attempts');
    store.recordUnfinished(run, 0, 1, Float64Array.of(125.25, 171), 'again');
    expect(store.reason(run, 0, 1)).toBe('out-of-memory after 3 attempts');
    expect(store.reason(run, 0, 0)).toBeNull();
    const counts = store.commit(run, [exampleChunk(span, 'thread 2')]);
    expect(counts).toMatchObject({ points: 3, unfinished: 1 });
    expect(store.attempted(run)).toEqual([]);
    expect(store.chunks(run)).toEqual({
      done: 1,
      retried: 1,
      workers: [{ worker: 'thread 2', chunks: 1, points: 3, milliseconds: 5 }],
    });
    const point = questionsOf(store).point(run, 0, 1)!;
    expect([point.get('Mt'), point.get('verdict'), point.get('lambdaMin')]).toEqual([171, 3, NaN]);
    store.close();
  });

  it('says why a point failed', () => {
    const store = openForWriting(newFile());
    const { run } = fillRun(store);
    expect(store.reason(run, 0, 7)).toMatch(/^not-finite/);
    expect(store.reason(run, 0, 18)).toMatch(/^no-convergence/);
    store.close();
  });

  it('keeps the bits of any number, and one NaN', () => {
    const store = openForWriting(newFile());
    fc.assert(
      fc.property(fc.float64Array({ minLength: 3, maxLength: 30 }), (numbers) => {
        const count = Math.floor(numbers.length / 3);
        const plan = examplePlan([count, 1]);
        const run = store.createRun(exampleRun(plan));
        const chunk = exampleChunk({ stratum: 0, first: 0, count });
        const quantities = numbers.subarray(0, 3 * count);
        store.commit(run, [{ ...chunk, result: { ...chunk.result, quantities } }]);
        const [batch] = store.batches(run, plan.keep);
        plan.keep.forEach((name, q) => {
          const wanted = quantities.slice(q * count, (q + 1) * count);
          const bits = new BigUint64Array(batch.columns.get(name)!.slice().buffer);
          const wantedBits = new BigUint64Array(wanted.buffer);
          wanted.forEach((value, i) => {
            expect(bits[i]).toBe(Number.isNaN(value) ? 0x7ff8000000000000n : wantedBits[i]);
          });
        });
      }),
      { numRuns: 100, seed: 3 },
    );
    store.close();
  });
});
