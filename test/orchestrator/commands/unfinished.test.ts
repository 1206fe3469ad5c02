import { beforeAll, describe, expect, it } from 'vitest';
import { extend } from '../../../orchestrator/commands/extend.js';
import { launch } from '../../../orchestrator/commands/launch.js';
import { rejudge } from '../../../orchestrator/commands/rejudge.js';
import { checkComplete } from '../../../orchestrator/commands/run-facts.js';
import { show } from '../../../orchestrator/commands/show.js';
import { storedPoint } from '../../../orchestrator/commands/stored-point.js';
import { verify } from '../../../orchestrator/commands/verify.js';
import { openThreads } from '../../../orchestrator/dispatch/threads.js';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { startReader } from '../../../orchestrator/store/reader-thread.js';
import { createEvaluator } from '../../../workers/evaluate.js';
import { newStore, plane, reading, work } from './small-runs.js';

/** A run with a point that no worker could do, as a coordinator leaves it. */

const POINTS = 30;
const UNDONE = 5;
let store: string;

beforeAll(async () => {
  store = newStore();
  await launch(plane(POINTS), work(store, 1));
  const writing = openForWriting(store);
  const run = writing.run(1)!;
  const plan = JSON.parse(run.plan) as Plan;
  const sampler = samplerOf(plan, 0);
  const evaluator = createEvaluator(taskOf(plan));
  const id = writing.createRun({ ...run, plan, columns: writing.columns(1) });
  for (const [first, count] of [
    [0, UNDONE],
    [UNDONE + 1, POINTS - UNDONE - 1],
  ]) {
    const points = sampler.fill(first, count);
    const result = evaluator.evaluate(points);
    const at = { stratum: 0, first, count, worker: 'test', milliseconds: 1 };
    writing.commit(id, [{ ...at, inputs: points.values, result }]);
  }
  writing.recordUnfinished(id, 0, UNDONE, sampler.fill(UNDONE, 1).values, 'time-out after 3 attempts');
  writing.seal(id, 'incomplete', 1);
  writing.setState(1, 'cancelled', 1);
  writing.close();
});

describe('a run with an unfinished point', () => {
  it('is incomplete: a promise that did not hold, status 1', async () => {
    const again = work(store);
    const facts = await launch(plane(POINTS), again);
    expect(facts).toMatchObject({
      run: 2,
      state: 'incomplete',
      points: POINTS,
      unfinished: 1,
      how: 'finished',
    });
    expect(again.computed()).toBe(0);
    expect(() => checkComplete(facts)).toThrow(
      expect.objectContaining({
        exit: 1,
        message: expect.stringContaining('1 of 30 points') as string,
      }) as Error,
    );
  });

  it('says which point and why', async () => {
    const facts = await reading(store, (open) => show(open, '2'));
    expect(facts.unfinishedPoints).toEqual([
      { stratum: 0, index: UNDONE, reason: expect.stringContaining('time-out') as string },
    ]);
  });

  it('is verified without the point', async () => {
    const request = { part: 1, signal: new AbortController().signal, onProgress: () => undefined };
    const facts = await reading(store, (open) => verify(open, '2', { ...request, open: openThreads(1) }));
    expect(facts).toMatchObject({ recomputed: POINTS - 1, skipped: 1, differing: 0 });
  });

  it('stays incomplete when it is judged again', async () => {
    const facts = await rejudge('2', undefined, work(store));
    expect(facts).toMatchObject({ state: 'incomplete', unfinished: 1, points: POINTS });
    const shown = await reading(store, (open) => show(open, String(facts.run)));
    expect(shown.unfinishedPoints).toMatchObject([{ index: UNDONE }]);
  });

  it('has its point tried again when it is extended', async () => {
    const more = work(store);
    const facts = await extend('2', { points: [String(POINTS + 10)] }, more);
    expect(facts).toMatchObject({ state: 'complete', unfinished: 0, reused: POINTS - 1 });
    expect(more.computed()).toBe(11);
  });

  it('shows the point by its inputs, and does not evaluate it where it could end the dashboard', async () => {
    const questions = startReader(store);
    const run = (await questions.run(2))!;
    const point = (await storedPoint(questions, run, 0, UNDONE))!;
    expect(point.facts).toMatchObject({ verdict: 'unfinished', quantities: {}, couplings: [] });
    expect(point.facts.reason).toContain('time-out');
    expect(point.facts.inputs.Mt.value).toBeGreaterThan(165);
    await questions.close();
  });
});
