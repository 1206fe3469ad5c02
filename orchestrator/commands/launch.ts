import { basename, isAbsolute } from 'node:path';
import { canonicalJson } from '../provenance/canonical.js';
import { readScan } from '../scan/read-scan.js';
import type { RunRecord } from '../store/records.js';
import type { NewRun, Writing } from '../store/writing.js';
import { differencesOfCode, differencesOfPlans, inWords } from './differences.js';
import { newRun, planOf } from './new-run.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';
import { finish, isFinished, withWriting } from './work.js';
import type { Start, Work } from './work.js';

export interface LaunchFacts extends RunAccount {
  readonly how: Start['how'];
  readonly why: string;
  /** Address of the dashboard on this run, where one was started. */
  readonly dashboard?: string;
}

/** Runs a scan file. A run with the same plan and the same code is resumed, or shown if it is finished.
 *  @throws FileMistakes before the store is touched */
export async function launch(scan: { bytes: Uint8Array; file: string }, work: Work): Promise<LaunchFacts> {
  const { plan, text } = readScan(scan.bytes, scan.file);
  // A run tells nobody where on a machine its file lay.
  const name = isAbsolute(scan.file) ? basename(scan.file) : scan.file;
  const wanted = newRun(plan, { name, text }, { relation: 'launch', parent: null });
  return withWriting(work.store, async (store) => {
    const start = chooseRun(store, wanted);
    const run = await finish(store, start, work);
    return { ...accountOf(run), how: start.how, why: start.why };
  });
}

function chooseRun(store: Writing, wanted: NewRun): Start {
  const launched = [...store.runs()].filter(canStandFor).sort((a, b) => b.id - a.id);
  const same = launched.filter((run) => sameResults(run, wanted));
  const alive = same.find((run) => run.state !== 'cancelled');
  if (alive) return again(alive);
  const id = store.createRun(wanted);
  const cancelled = same[0];
  if (cancelled) return takeOver(store, cancelled.id, id);
  return { run: id, how: 'new', why: whyNew(launched, wanted) };
}

/** A rerun is a test of other runs, never one in its own right; outcomes half judged again are not a run's own. */
function canStandFor(run: RunRecord): boolean {
  return run.relation !== 'rerun' && (run.relation !== 'rejudge' || isFinished(run));
}

/** Plan and all fingerprints agree: every point would come out the same. */
export function sameResults(run: RunRecord, wanted: NewRun): boolean {
  return (
    run.plan === canonicalJson(wanted.plan) &&
    canonicalJson(run.fingerprints) === canonicalJson(wanted.fingerprints)
  );
}

export function again(run: RunRecord): Start {
  if (isFinished(run))
    return {
      run: run.id,
      how: 'finished',
      why: 'it has this plan and this code, so nothing is computed again',
    };
  const { points } = run.counts;
  return { run: run.id, how: 'resumed', why: `${points} of ${run.wanted} points are stored already` };
}

/** A cancelled run is not resumed, but its points need not be computed again. */
function takeOver(store: Writing, cancelled: number, id: number): Start {
  for (const span of store.committed(cancelled)) store.share(cancelled, id, span, true);
  return { run: id, how: 'new', why: `run ${cancelled} with this plan was cancelled; its points are reused` };
}

/** Says what keeps the latest similar run from being resumed. */
function whyNew(launched: readonly RunRecord[], wanted: NewRun): string {
  const samePlan = launched.find((run) => run.plan === canonicalJson(wanted.plan));
  if (samePlan) {
    const changed = inWords(differencesOfCode(samePlan.fingerprints, wanted.fingerprints));
    return `run ${samePlan.id} has this plan, but ${changed || 'its fingerprints differ'}`;
  }
  const sameFile = launched.find((run) => run.scanFile.name === wanted.scanFile.name);
  if (!sameFile) return '';
  return `the plan is not that of run ${sameFile.id}: ${inWords(differencesOfPlans(planOf(sameFile), wanted.plan))}`;
}
