import { describe, expect, it } from 'vitest';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { questionsOf } from '../../../orchestrator/store/questions.js';
import {
  chunksOf,
  exampleChunk,
  examplePlan,
  examplePoint,
  exampleRun,
  fillRun,
  newFile,
} from './example.js';

describe('sharing points with a child run', () => {
  it('gives an extended run the digest of a run made at once, and computes only what is new', () => {
    const store = openForWriting(newFile());
    const parent = fillRun(store, examplePlan([5000, 700]), 1000);
    const larger = examplePlan([9000, 700]);
    const child = store.createRun(exampleRun(larger, { parent: parent.run, relation: 'extend' }));
    for (const span of store.committed(parent.run)) store.share(parent.run, child, span, true);
    for (const span of store.committed(parent.run)) store.share(parent.run, child, span, true);
    expect(store.committed(child)).toEqual(store.committed(parent.run));
    expect(store.run(child)?.counts).toEqual(store.run(parent.run)?.counts);
    for (const first of [5000, 6500, 8000]) {
      store.commit(child, [exampleChunk({ stratum: 0, first, count: Math.min(1500, 9000 - first) })]);
    }
    const digest = store.seal(child, 'complete', 1);
    expect(digest).toBe(fillRun(store, larger, 4096).digest);
    expect(digest).not.toBe(parent.digest);
    // The parent still has all its own.
    expect(store.verifyIntegrity(parent.run).segments).toBe(6);
    expect(questionsOf(store).point(parent.run, 0, 4999)).toEqual(examplePoint(0, 4999));
    store.close();
  });

  it('shares evaluations alone, to be judged again', () => {
    const store = openForWriting(newFile());
    const parent = fillRun(store);
    const child = store.createRun(exampleRun(examplePlan(), { parent: parent.run, relation: 'rejudge' }));
    for (const span of chunksOf(examplePlan(), 1500)) {
      store.share(parent.run, child, span, false);
      expect(
        store.committed(child).some((done) => done.stratum === span.stratum && done.first === span.first),
      ).toBe(false);
      const { result } = exampleChunk(span);
      const judged = {
        ...span,
        ...result,
        verdicts: result.verdicts.map((verdict) => (verdict === 2 ? 2 : 0)),
      };
      store.judge(child, [judged]);
      store.judge(child, [judged]);
    }
    const failed = store.run(parent.run)!.counts.failed;
    store.seal(child, 'complete', 1);
    expect(store.run(child)?.counts).toEqual({
      points: 5700,
      surviving: 5700 - failed,
      excluded: 0,
      failed,
      unfinished: 0,
    });
    expect(questionsOf(store).point(child, 0, 5)).toEqual(examplePoint(0, 5).set('verdict', 0));
    store.close();
  });

  it('refuses to judge what was never evaluated', () => {
    const store = openForWriting(newFile());
    const run = store.createRun(exampleRun());
    const span = { stratum: 1, first: 10, count: 5 };
    expect(() => store.judge(run, [{ ...span, ...exampleChunk(span).result }])).toThrow(
      /point 1\.10 of run 1/,
    );
    store.close();
  });

  it('lets a child try unfinished points again, but keeps them through a new judgement', () => {
    const store = openForWriting(newFile());
    const plan = examplePlan([100, 1]);
    const parent = store.createRun(exampleRun(plan));
    store.recordUnfinished(
      parent,
      0,
      40,
      exampleChunk({ stratum: 0, first: 40, count: 1 }).inputs,
      'time-out',
    );
    for (const span of chunksOf(plan, 64)) store.commit(parent, [exampleChunk(span)]);
    store.seal(parent, 'incomplete', 1);
    const extended = store.createRun(exampleRun(plan, { parent, relation: 'extend' }));
    const rejudged = store.createRun(exampleRun(plan, { parent, relation: 'rejudge' }));
    for (const span of store.committed(parent)) {
      store.share(parent, extended, span, true);
      store.share(parent, rejudged, span, false);
      const { result } = exampleChunk(span);
      store.judge(rejudged, [
        {
          ...span,
          ...result,
          verdicts: result.verdicts.map((v, i) => (span.stratum === 0 && i === 40 ? 3 : v)),
        },
      ]);
    }
    expect(store.committed(extended)).toEqual([
      { stratum: 0, first: 0, count: 40 },
      { stratum: 0, first: 41, count: 59 },
      { stratum: 1, first: 0, count: 1 },
    ]);
    store.commit(extended, [exampleChunk({ stratum: 0, first: 0, count: 100 })]);
    expect(store.seal(extended, 'complete', 1)).toBe(fillRun(store, plan).digest);
    expect(store.reason(rejudged, 0, 40)).toBe('time-out');
    expect(store.run(rejudged)?.counts.unfinished).toBe(1);
    store.close();
  });

  it('supplies an input that only the child varies from the plan', () => {
    const store = openForWriting(newFile());
    const onlyTop = examplePlan([5000]);
    const parent = store.createRun(exampleRun(onlyTop));
    for (const span of chunksOf(onlyTop, 5000)) {
      const chunk = exampleChunk(span);
      store.commit(parent, [{ ...chunk, inputs: chunk.inputs.slice(span.count) }]);
    }
    store.seal(parent, 'complete', 1);
    const both = examplePlan([6000, 700]);
    const child = store.createRun(exampleRun(both, { parent, relation: 'extend' }));
    store.share(parent, child, { stratum: 0, first: 0, count: 5000 }, true);
    store.commit(child, [exampleChunk({ stratum: 0, first: 5000, count: 1000 })]);
    store.commit(child, [exampleChunk({ stratum: 1, first: 0, count: 700 })]);
    expect(store.seal(child, 'complete', 1)).toBe(fillRun(store, both).digest);
    expect(questionsOf(store).point(child, 0, 3)).toEqual(examplePoint(0, 3));
    store.close();
  });
});
