import { canonicalJson } from '../provenance/canonical.js';
import { extendPlan } from '../sampling/extend.js';
import type { Extended } from '../sampling/extend.js';
import { readChange } from '../sampling/read-change.js';
import type { Fingerprints, RunRecord } from '../store/records.js';
import type { NewRun, Writing } from '../store/writing.js';
import { differencesOfCode, inWords } from './differences.js';
import { findRun } from './find-run.js';
import { again, sameResults } from './launch.js';
import { newRun, planOf } from './new-run.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';
import { finish, withWriting } from './work.js';
import type { Start, Work } from './work.js';

export interface ExtendFacts extends RunAccount {
  readonly how: Start['how'];
  readonly why: string;
  /** Points that came from the parent run. */
  readonly reused: number;
  /** What was done where that is not obvious. */
  readonly notes: readonly string[];
}

/** Words after --points (a total, or STRATUM=N) and --vary (INPUT=FROM:TO and the like). */
export interface ExtendRequest {
  readonly points?: readonly string[];
  readonly vary?: readonly string[];
}

/** A child run with every point of a run and more. What the parent has stored is shared, not computed again,
 *  as long as the code is the same. The same extension asked for again is resumed or shown. */
export async function extend(word: string, request: ExtendRequest, work: Work): Promise<ExtendFacts> {
  const change = readChange(request.points ?? [], request.vary ?? []);
  return withWriting(work.store, async (store) => {
    const parent = findRun(store, word);
    const extended = extendPlan(planOf(parent), change);
    const wanted = newRun(extended.plan, parent.scanFile, { relation: 'extend', parent });
    const start = startOf(store, wanted, parent);
    const reused = start.how === 'finished' ? 0 : share(store, parent, start.run, wanted, extended);
    const run = await finish(store, start, work);
    return { ...accountOf(run), how: start.how, why: start.why, reused, notes: extended.notes };
  });
}

function startOf(store: Writing, wanted: NewRun, parent: RunRecord): Start {
  const child = [...store.runs()].find(
    (run) =>
      run.relation === 'extend' &&
      run.parent === parent.id &&
      run.state !== 'cancelled' &&
      sameResults(run, wanted),
  );
  if (child) return again(child);
  const changed = changedCode(parent, wanted);
  const why = changed && `nothing of run ${parent.id} is reused, because ${changed}`;
  return { run: store.createRun(wanted), how: 'new', why };
}

/** Gives the child what its parent has of the reused points; returns how many points that is. */
function share(
  store: Writing,
  parent: RunRecord,
  child: number,
  wanted: NewRun,
  { reused }: Extended,
): number {
  if (changedCode(parent, wanted)) return 0;
  for (const span of reused) store.share(parent.id, child, span, true);
  const same = store.committed(child).map((span) => {
    const whole = reused.find(({ stratum }) => stratum === span.stratum);
    return Math.max(0, Math.min(span.first + span.count, whole?.count ?? 0) - span.first);
  });
  return same.reduce((sum, n) => sum + n, 0);
}

/** In words; empty where results of the parent are what this code would give. */
function changedCode(parent: RunRecord, wanted: NewRun): string {
  const code = ({ model, modules, constraints, sampling }: Fingerprints) =>
    canonicalJson({ model, modules, constraints, sampling });
  if (code(wanted.fingerprints) === code(parent.fingerprints)) return '';
  return inWords(differencesOfCode(parent.fingerprints, wanted.fingerprints));
}
