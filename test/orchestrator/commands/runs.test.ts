import { describe, expect, it } from 'vitest';
import { compare } from '../../../orchestrator/commands/compare.js';
import { extend } from '../../../orchestrator/commands/extend.js';
import { launch } from '../../../orchestrator/commands/launch.js';
import { rejudge } from '../../../orchestrator/commands/rejudge.js';
import { checkSameDigest, rerun } from '../../../orchestrator/commands/rerun.js';
import { show } from '../../../orchestrator/commands/show.js';
import { checkVerified, verify } from '../../../orchestrator/commands/verify.js';
import type { VerifyFacts } from '../../../orchestrator/commands/verify.js';
import { openThreads } from '../../../orchestrator/dispatch/threads.js';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { createEvaluator } from '../../../workers/evaluate.js';
import { newStore, plane, reading, scan, work } from './small-runs.js';

function verified(store: string, run: string, part = 1): Promise<VerifyFacts> {
  const request = {
    part,
    open: openThreads(2),
    signal: new AbortController().signal,
    onProgress: () => undefined,
  };
  return reading(store, (open) => verify(open, run, request));
}

describe('launch', () => {
  it('runs a scan file; launched again, it shows the finished run and computes nothing', async () => {
    const store = newStore();
    const first = work(store);
    const facts = await launch(plane(200), first);
    expect(facts).toMatchObject({
      run: 1,
      state: 'complete',
      points: 200,
      failed: 0,
      unfinished: 0,
      how: 'new',
    });
    expect(facts.surviving + facts.excluded).toBe(200);
    expect(facts.surviving).toBeGreaterThan(0);
    expect(facts.excluded).toBeGreaterThan(0);
    expect(facts.digest).toMatch(/^sha256:[0-9a-f]{64}$/);
    expect(first.computed()).toBe(200);
    const second = work(store);
    const again = await launch(plane(200), second);
    expect(again).toMatchObject({ run: 1, how: 'finished', digest: facts.digest });
    expect(second.computed()).toBe(0);
  });

  it('resumes a run that was stopped, computes the rest only, and gets the digest of an undisturbed run', async () => {
    const store = newStore();
    const stopped = await launch(plane(900), work(store, 300));
    expect(stopped).toMatchObject({ run: 1, state: 'paused', digest: null });
    expect(stopped.points).toBeLessThan(900);
    const rest = work(store);
    const resumed = await launch(plane(900), rest);
    expect(resumed).toMatchObject({ run: 1, how: 'resumed', state: 'complete', points: 900 });
    expect(rest.computed()).toBe(900 - stopped.points);
    const undisturbed = await launch(plane(900), work(newStore()));
    expect(resumed.digest).toBe(undisturbed.digest);
  });

  it('starts a new run where the plan differs, and says in what', async () => {
    const store = newStore();
    await launch(plane(20), work(store));
    const facts = await launch(plane(20, { seed: 'other' }), work(store));
    expect(facts).toMatchObject({ run: 2, how: 'new' });
    expect(facts.why).toBe('the plan is not that of run 1: seed was "commands", is "other"');
  });

  it('starts a new run where the code differs, and says which', async () => {
    const store = newStore();
    await launch(plane(20), work(store));
    const older = newStore();
    const { run, columns } = await reading(store, (open) => ({
      run: open.run(1)!,
      columns: open.columns(1),
    }));
    const modules = { ...run.fingerprints.modules, running: 'sha256:older' };
    const writing = openForWriting(older);
    writing.createRun({
      ...run,
      plan: JSON.parse(run.plan) as Plan,
      columns,
      fingerprints: { ...run.fingerprints, modules },
    });
    writing.close();
    const facts = await launch(plane(20), work(older));
    expect(facts).toMatchObject({ run: 2, how: 'new', points: 20 });
    expect(facts.why).toBe('run 1 has this plan, but the code of module running changed');
  });

  it('takes over the points of a cancelled run', async () => {
    const store = newStore();
    const stopped = await launch(plane(900), work(store, 300));
    const writing = openForWriting(store);
    writing.setState(1, 'cancelled', 1);
    writing.close();
    const rest = work(store);
    const facts = await launch(plane(900), rest);
    expect(facts).toMatchObject({ run: 2, how: 'new', state: 'complete' });
    expect(rest.computed()).toBe(900 - stopped.points);
  });

  it('touches no store where the scan file has mistakes', async () => {
    const store = newStore();
    await expect(launch(plane(20, { model: 'sn' }), work(store))).rejects.toThrow(/did you mean "?sm/);
    await expect(reading(store, () => undefined)).rejects.toThrow(/no file/);
  });
});

describe('rerun', () => {
  it('computes every point again and gets the same digest', async () => {
    const store = newStore();
    const first = await launch(plane(150), work(store));
    const again = work(store);
    const facts = await rerun('latest', again);
    expect(facts).toMatchObject({
      run: 2,
      parent: 1,
      relation: 'rerun',
      sameDigest: true,
      digest: first.digest,
    });
    expect(again.computed()).toBe(150);
    expect(facts.changed).toEqual([]);
    expect(() => checkSameDigest(facts)).not.toThrow();
  });

  it('is resumed after a stop', async () => {
    const store = newStore();
    await launch(plane(900), work(store));
    const stopped = await rerun('1', work(store, 300));
    expect(stopped).toMatchObject({ run: 2, state: 'paused', sameDigest: null });
    const rest = work(store);
    expect(await rerun('1', rest)).toMatchObject({ run: 2, how: 'resumed', sameDigest: true });
    expect(rest.computed()).toBe(900 - stopped.points);
  });

  it('of a run that is not finished is refused', async () => {
    const store = newStore();
    await launch(plane(900), work(store, 300));
    await expect(rerun('1', work(store))).rejects.toThrow(
      /expected a finished run, found run 1, which is paused/,
    );
  });
});

describe('extend', () => {
  it('reuses every earlier point and gets the digest of a launch of the larger plan', async () => {
    const store = newStore();
    await launch(plane(200), work(store));
    const more = work(store);
    const facts = await extend('1', { points: ['350'] }, more);
    expect(facts).toMatchObject({ run: 2, parent: 1, relation: 'extend', points: 350, reused: 200 });
    expect(more.computed()).toBe(150);
    const whole = await launch(plane(350), work(newStore()));
    expect(facts.digest).toBe(whole.digest);
    const shown = await reading(store, (open) => open.run(1));
    expect(shown).toMatchObject({ wanted: 200, state: 'complete' });
  });

  it('asked for again, shows the run it made', async () => {
    const store = newStore();
    await launch(plane(50), work(store));
    const facts = await extend('1', { points: ['80'] }, work(store));
    const again = work(store);
    expect(await extend('1', { points: ['80'] }, again)).toMatchObject({ run: facts.run, how: 'finished' });
    expect(again.computed()).toBe(0);
  });

  it('to a wider range keeps every earlier point and covers what is new', async () => {
    const store = newStore();
    await launch(plane(100), work(store));
    const more = work(store);
    const facts = await extend('1', { vary: ['Mt=165:195'] }, more);
    expect(facts.points).toBe(150);
    expect(more.computed()).toBe(50);
    const same = await reading(store, (open) => compare(open, '1', '2'));
    expect(same.points).toEqual({ same: 100, otherInputs: 0, onlyFirst: 0, onlySecond: 50 });
    expect(same.changed).toBe(0);
  });

  it('to fewer points is the user’s mistake', async () => {
    const store = newStore();
    await launch(plane(50), work(store));
    await expect(extend('1', { points: ['20'] }, work(store))).rejects.toMatchObject({ exit: 2 });
  });
});

describe('rejudge', () => {
  const stricter = scan(
    'require: [perturbativity, vacuum-stability, measured-top-mass]\nnote: []\n',
    'b.yaml',
  );

  it('gives what a launch with those requirements would give, without computing a point', async () => {
    const store = newStore();
    await launch(plane(200), work(store));
    const judged = work(store);
    const facts = await rejudge('1', stricter, judged);
    expect(judged.computed()).toBe(0);
    expect(facts).toMatchObject({ run: 2, parent: 1, relation: 'rejudge', state: 'complete', points: 200 });
    const changes = { require: '[perturbativity, vacuum-stability, measured-top-mass]', note: '[]' };
    const whole = await launch(plane(200, changes), work(newStore()));
    expect(facts.digest).toBe(whole.digest);
    const change = await reading(store, (open) => compare(open, '1', '2'));
    expect(change.points.same).toBe(200);
    expect(change.examples.map(({ verdicts }) => verdicts.join(' to '))).toContain('surviving to excluded');
    expect(change.columns.find(({ name }) => name === 'verdict')).toMatchObject({ largest: null });
    expect(change.explained.map((d) => d.where)).toContain('require[1].options.accept');
  });

  it('with the same requirements gives the same digest', async () => {
    const store = newStore();
    const first = await launch(plane(120), work(store));
    expect(await rejudge('1', undefined, work(store))).toMatchObject({ digest: first.digest });
  });

  it('by a constraint whose quantity was not stored is refused', async () => {
    const store = newStore();
    await launch(plane(20, { require: '[perturbativity]', keep: '[lambdaMin]' }), work(store));
    const file = scan('require: [vacuum-stability]\n', 'c.yaml');
    await expect(rejudge('1', file, work(store))).rejects.toThrow(
      /c\.yaml: expected constraints that read what run 1 stored, found vacuum-stability, which reads/,
    );
  });
});

describe('verify', () => {
  it('finds every bit of a whole run again', async () => {
    const store = newStore();
    await launch(plane(200), work(store));
    const facts = await verified(store, 'latest');
    expect(facts).toMatchObject({ points: 200, recomputed: 200, skipped: 0, differing: 0, changed: [] });
    expect(facts.integrity.bytes).toBeGreaterThan(200 * 8 * 40);
    expect(() => checkVerified(facts)).not.toThrow();
  });

  it('takes the part it was asked for, evenly spread', async () => {
    const store = newStore();
    await launch(plane(200), work(store));
    expect((await verified(store, '1', 0.05)).recomputed).toBe(10);
  });

  it('finds a point whose stored value is one bit off', async () => {
    const store = newStore();
    await launch(plane(60), work(store));
    forgeRun(store);
    const facts = await verified(store, '2');
    expect(facts).toMatchObject({ recomputed: 60, differing: 1, columns: { lambdaMin: 1 } });
    expect(facts.examples).toEqual([{ stratum: 0, index: 17, columns: ['lambdaMin'] }]);
    expect(() => checkVerified(facts)).toThrow(/1 of 60 recomputed points differ/);
    const change = await reading(store, (open) => compare(open, '1', '2'));
    expect(change).toMatchObject({ changed: 1, sameDigest: false, verdicts: {} });
    expect(change.columns.map((column) => column.name)).toEqual(['lambdaMin']);
  });
});

/** Run 2: run 1 as somebody would have it who changed the last bit of one number before it was stored. */
function forgeRun(store: string): void {
  const writing = openForWriting(store);
  const run = writing.run(1)!;
  const plan = JSON.parse(run.plan) as Plan;
  const task = taskOf(plan);
  const points = samplerOf(plan, 0).fill(0, 60);
  const result = createEvaluator(task).evaluate(points);
  const bits = new BigInt64Array(result.quantities.buffer);
  bits[task.keep.indexOf('lambdaMin') * 60 + 17] += 1n;
  const id = writing.createRun({ ...run, plan, columns: writing.columns(1) });
  const span = { stratum: 0, first: 0, count: 60 };
  writing.commit(id, [{ ...span, inputs: points.values, result, worker: 'forger', milliseconds: 1 }]);
  writing.seal(id, 'complete', 1);
  writing.close();
}

describe('show', () => {
  it('has a cut-flow whose last deciding row leaves the surviving points', async () => {
    const store = newStore();
    const { surviving } = await launch(plane(200), work(store));
    const facts = await reading(store, (open) => show(open, 'latest'));
    const deciding = facts.cutFlow.rows.filter((row) => row.deciding);
    expect(deciding.map((row) => row.constraint)).toEqual(['perturbativity', 'vacuum-stability']);
    expect(deciding.at(-1)?.remaining).toBe(surviving);
    expect(facts.scanFile.text).toContain('A plane for tests');
    expect(Object.keys(facts.fingerprints.modules)).toContain('running');
  });
});
