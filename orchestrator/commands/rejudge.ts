import type { Block } from '../../workers/contract.js';
import { VERDICTS } from '../../workers/contract.js';
import { judgeBlock } from '../../workers/judge.js';
import type { ConstraintInUse } from '../../workers/judge.js';
import { UserMistake } from '../mistakes.js';
import type { Plan } from '../scan/plan.js';
import { readRequirements } from '../scan/read-requirements.js';
import type { Batch, RunRecord } from '../store/records.js';
import { subtractSpans } from '../store/spans.js';
import type { JudgedSpan, NewRun, Writing } from '../store/writing.js';
import { constraintNamed } from './constraints.js';
import { findRun } from './find-run.js';
import { newRun, planOf } from './new-run.js';
import { pace } from './pace.js';
import { interruptedChild, mustBeFinished } from './rerun.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';
import { mustHave, withWriting } from './work.js';
import type { Work } from './work.js';

/** A child run with the points of a finished run, judged again from stored quantities: by the constraints of
 *  another file, or by the same ones as they are now. Nothing is computed again and nothing is stored twice. */
export function rejudge(
  word: string,
  file: { bytes: Uint8Array; file: string } | undefined,
  work: Work,
): Promise<RunAccount> {
  return withWriting(work.store, async (store) => {
    const parent = mustBeFinished(findRun(store, word), 'rejudge');
    const plan = file === undefined ? planOf(parent) : otherRequirements(parent, file);
    const wanted = withEvaluationOf(parent, plan);
    const start = interruptedChild(store, wanted) ?? {
      run: store.createRun(wanted),
      how: 'new' as const,
      why: '',
    };
    await work.onStart(start);
    await judgeAll(store, parent, start.run, plan, work);
    return accountOf(mustHave(store, start.run));
  });
}

/** A section that the file does not have stays as it is, without what the other section now names. */
function otherRequirements(parent: RunRecord, { bytes, file }: { bytes: Uint8Array; file: string }): Plan {
  const plan = planOf(parent);
  const asked = readRequirements(bytes, file);
  const without = (uses: Plan['note'], named: Plan['note'] = []) =>
    uses.filter((use) => !named.some((other) => other.name === use.name));
  const require = asked.require ?? without(plan.require, asked.note);
  const note = asked.note ?? without(plan.note, asked.require);
  for (const use of [...require, ...note]) checkStored(plan, use.name, parent.id, file);
  return { ...plan, require, note };
}

function checkStored(plan: Plan, name: string, run: number, file: string): void {
  const stored = new Set([...Object.keys(plan.fix), ...plan.keep, ...inputsOf(plan)]);
  const missing = constraintNamed(name).needs.filter((need) => !stored.has(need));
  if (missing.length === 0) return;
  throw new UserMistake({
    where: file,
    expected: `constraints that read what run ${run} stored`,
    found: `${name}, which reads ${missing.join(', ')}`,
    hint: 'launch a scan file that keeps it',
  });
}

function inputsOf(plan: Plan): string[] {
  return plan.strata.flatMap((stratum) => stratum.vary.map((axis) => axis.input));
}

/** The quantities stay those of the parent, whatever the code has become: only the judgement is new. */
function withEvaluationOf(parent: RunRecord, plan: Plan): NewRun {
  const wanted = newRun(plan, parent.scanFile, { relation: 'rejudge', parent });
  const { model, modules, sampling } = parent.fingerprints;
  return { ...wanted, fingerprints: { ...wanted.fingerprints, model, modules, sampling } };
}

async function judgeAll(
  store: Writing,
  parent: RunRecord,
  run: number,
  plan: Plan,
  work: Work,
): Promise<void> {
  const before = mustHave(store, run);
  const clock = pace(before);
  store.setState(run, 'running', before.seconds);
  for (const span of store.committed(parent.id)) store.share(parent.id, run, span, false);
  const done = store.committed(run);
  const judge = judgeOf(plan);
  for (const batch of store.batches(parent.id, judge.columns)) {
    if (work.signal.aborted) return store.setState(run, 'paused', clock.seconds());
    // A batch is judged and stored whole: it is done or it is not.
    if (subtractSpans(batch, done).length === 0) continue;
    work.onProgress(clock.progress(store.judge(run, [judge.batch(batch)])));
    await new Promise(setImmediate);
  }
  const { counts } = mustHave(store, run);
  store.seal(run, counts.unfinished > 0 ? 'incomplete' : 'complete', clock.seconds());
}

const FAILED = VERDICTS.indexOf('failed');
const UNFINISHED = VERDICTS.indexOf('unfinished');

function judgeOf(plan: Plan) {
  const uses: ConstraintInUse[] = [...plan.require, ...plan.note].map(({ name, options }) => ({
    constraint: constraintNamed(name),
    options,
  }));
  const needs = uses.flatMap((use) => use.constraint.needs);
  return {
    columns: [...new Set([...needs, 'failure', 'verdict'])],
    batch({ stratum, first, count, columns }: Batch): JudgedSpan {
      const rows = uses.length * count;
      const judged = {
        count,
        outcomes: new Uint8Array(rows),
        margins: new Float64Array(rows),
        logLikelihoods: new Float64Array(rows),
        verdicts: new Uint8Array(count),
      };
      const unfinished = Uint8Array.from(columns.get('verdict')!, (verdict) =>
        verdict === UNFINISHED ? 1 : 0,
      );
      const failure = Uint8Array.from(columns.get('failure')!, (code, i) => (unfinished[i] ? 1 : code));
      const block: Block = { count, columns: new Map(columns), failure };
      judgeBlock(block, uses, plan.require.length, 0, judged);
      unfinished.forEach((is, i) => {
        if (is && judged.verdicts[i] === FAILED) judged.verdicts[i] = UNFINISHED;
      });
      return { stratum, first, ...judged };
    },
  };
}
