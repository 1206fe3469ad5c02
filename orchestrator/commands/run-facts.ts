import { NotHeld } from '../mistakes.js';
import type { RunRecord } from '../store/records.js';
import type { RunFacts } from './commands.js';

/** The short account of a run, with what tells it from others. */
export interface RunAccount extends RunFacts {
  /** Version of this shape. */
  readonly format: 1;
  readonly title: string;
  readonly relation: string;
  readonly parent: number | null;
  /** Points that the plan asks for; `points` are done. */
  readonly wanted: number;
  readonly seconds: number;
  readonly started: string;
  readonly finished: string | null;
}

export function accountOf(run: RunRecord): RunAccount {
  const { id, state, title, relation, parent, wanted, counts, digest, seconds, started, finished } = run;
  return {
    format: 1,
    run: id,
    state,
    title,
    relation,
    parent,
    wanted,
    ...counts,
    digest,
    seconds,
    started,
    finished,
  };
}

/** @throws NotHeld where a finished run has points that no worker could do */
export function checkComplete(run: RunAccount): void {
  if (run.state !== 'incomplete') return;
  throw new NotHeld(
    'incomplete',
    `run ${run.run} is incomplete: ${run.unfinished} of ${run.wanted} points stayed unfinished (trigpoint show ${run.run} says why)`,
  );
}
