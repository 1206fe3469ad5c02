import { coordinate } from '../dispatch/coordinator.js';
import type { OpenDispatcher } from '../dispatch/dispatcher.js';
import { Broken } from '../mistakes.js';
import { openForWriting } from '../store/open.js';
import type { RunRecord } from '../store/records.js';
import type { Reading } from '../store/reading.js';
import type { Writing } from '../store/writing.js';
import type { Progress } from './commands.js';
import { planOf } from './new-run.js';

/** Where and with what a run is worked on, and who wants to know. */
export interface Work {
  readonly store: string;
  readonly open: OpenDispatcher;
  /** Aborted: stop cleanly, with everything computed so far stored. */
  readonly signal: AbortSignal;
  onStart(start: Start): void | Promise<void>;
  onProgress(progress: Progress): void;
}

/** Which run is worked on and why this one. */
export interface Start {
  readonly run: number;
  readonly how: 'new' | 'resumed' | 'finished';
  /** A sentence for the user; empty where nothing needs saying. */
  readonly why: string;
}

/** Opens a store to write for as long as a piece of work takes. */
export async function withWriting<T>(path: string, work: (store: Writing) => Promise<T>): Promise<T> {
  const store = openForWriting(path);
  try {
    return await work(store);
  } finally {
    store.close();
  }
}

/** Works on a run until it is finished or the signal says stop. A finished run is left as it is. */
export async function finish(store: Writing, start: Start, work: Work): Promise<RunRecord> {
  await work.onStart(start);
  if (start.how !== 'finished') {
    const plan = planOf(mustHave(store, start.run));
    const { open, signal } = work;
    await coordinate({ store, run: start.run, plan, open, signal, onProgress: (p) => work.onProgress(p) });
  }
  return mustHave(store, start.run);
}

export function mustHave(reading: Reading, id: number): RunRecord {
  const run = reading.run(id);
  if (run === undefined) throw new Broken('no-such-run', `run ${id} is not in the store any more`);
  return run;
}

export function isFinished(run: RunRecord): boolean {
  return run.state === 'complete' || run.state === 'incomplete';
}
