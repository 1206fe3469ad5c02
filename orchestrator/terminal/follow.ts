import type { Start, Work } from '../commands/work.js';
import { dispatcherFor } from './options.js';
import type { StoreOption, WorkerOptions } from './options.js';
import { progressBar } from './progress-bar.js';
import { remark } from './session.js';
import type { Session } from './session.js';
import { Stopped } from './trouble.js';

/** Works on a run with a progress bar on standard error; Ctrl-C stops it cleanly. */
export async function follow<F>(
  options: StoreOption & WorkerOptions,
  session: Session,
  work: (work: Work) => Promise<F>,
  onStart: (start: Start) => void | Promise<void> = () => undefined,
): Promise<F> {
  const bar = progressBar(session.err);
  try {
    return await work({
      store: options.store,
      open: dispatcherFor(options, session),
      signal: session.stopSignal(),
      async onStart(start) {
        remark(session, startText(start));
        await onStart(start);
      },
      onProgress: (progress) => bar.show(progress),
    });
  } finally {
    bar.end();
  }
}

function startText({ run, how, why }: Start): string {
  const what = { new: 'new', resumed: 'resumed', finished: 'already finished' }[how];
  return `run ${run}, ${what}${why ? `: ${why}` : ''}`;
}

/** Ends with the status of the interruption where a run was stopped before it was finished. */
export function endIfStopped(run: { run: number; state: string }, session: Session): void {
  const signal = session.stopSignal();
  if (!signal.aborted || run.state === 'complete' || run.state === 'incomplete') return;
  remark(session, `run ${run.run} is ${run.state}: the same command again goes on with it`);
  throw new Stopped(Number(signal.reason));
}
