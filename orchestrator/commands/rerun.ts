import { NotHeld, UserMistake } from '../mistakes.js';
import type { RunRecord } from '../store/records.js';
import type { NewRun, Writing } from '../store/writing.js';
import { differencesOfCode, differencesOfEnvironments } from './differences.js';
import type { Difference } from './differences.js';
import { findRun } from './find-run.js';
import { again, sameResults } from './launch.js';
import { newRun, planOf } from './new-run.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';
import { finish, isFinished, withWriting } from './work.js';
import type { Start, Work } from './work.js';

export interface RerunFacts extends RunAccount {
  readonly how: Start['how'];
  readonly parentDigest: string;
  /** Null while the rerun is not finished. */
  readonly sameDigest: boolean | null;
  /** Code and environment that are not those of the first time. */
  readonly changed: readonly Difference[];
}

/** Executes the plan of a finished run again, every point of it, and compares the digests.
 *  An interrupted rerun is resumed; a finished one is never shown in place of a new one. */
export function rerun(word: string, work: Work): Promise<RerunFacts> {
  return withWriting(work.store, async (store) => {
    const parent = mustBeFinished(findRun(store, word), 'rerun');
    const wanted = newRun(planOf(parent), parent.scanFile, { relation: 'rerun', parent });
    const start = interruptedChild(store, wanted) ?? { run: store.createRun(wanted), how: 'new', why: '' };
    const run = await finish(store, start, work);
    return {
      ...accountOf(run),
      how: start.how,
      parentDigest: parent.digest ?? '',
      sameDigest: run.digest === null ? null : run.digest === parent.digest,
      changed: [
        ...differencesOfCode(parent.fingerprints, run.fingerprints),
        ...differencesOfEnvironments(parent.environment, run.environment),
      ],
    };
  });
}

/** @throws NotHeld where the results of the two runs differ */
export function checkSameDigest(facts: RerunFacts): void {
  if (facts.sameDigest !== false) return;
  throw new NotHeld(
    'digest-differs',
    `run ${facts.run} has another digest than run ${facts.parent}: trigpoint compare ${facts.parent} ${facts.run} shows where`,
  );
}

/** A child run of the same parent, kind, plan and code that was stopped before it was finished. */
export function interruptedChild(store: Writing, wanted: NewRun): Start | undefined {
  const child = [...store.runs()].find(
    (run) =>
      run.parent === wanted.parent &&
      run.relation === wanted.relation &&
      !isFinished(run) &&
      run.state !== 'cancelled' &&
      sameResults(run, wanted),
  );
  return child && again(child);
}

export function mustBeFinished(run: RunRecord, command: string): RunRecord {
  if (isFinished(run)) return run;
  throw new UserMistake({
    where: command,
    expected: 'a finished run',
    found: `run ${run.id}, which is ${run.state} at ${run.counts.points} of ${run.wanted} points`,
    hint: 'launching its scan file again resumes it',
  });
}
