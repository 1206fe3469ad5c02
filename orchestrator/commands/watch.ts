import { setTimeout as wait } from 'node:timers/promises';
import { NotHeld } from '../mistakes.js';
import type { Reading } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';
import type { Progress } from './commands.js';
import { findRun } from './find-run.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';
import { mustHave } from './work.js';

const LOOK_EVERY_MS = 500;
/** Times of the last few seconds are what the pace is measured over. */
const LOOKS_REMEMBERED = 20;

export interface WatchFacts extends RunAccount {
  /** The run says `running`, but the process that worked on it is gone. */
  readonly abandoned: boolean;
}

/** Follows a run that any process works on, through the store alone, until nobody works on it any more. */
export async function watch(
  reading: Reading,
  word: string,
  on: { progress(progress: Progress): void; readonly signal: AbortSignal },
): Promise<WatchFacts> {
  const { id } = findRun(reading, word);
  const looks: { at: number; points: number }[] = [];
  for (;;) {
    const run = mustHave(reading, id);
    looks.push({ at: performance.now(), points: run.counts.points });
    if (looks.length > LOOKS_REMEMBERED) looks.shift();
    on.progress(progressOf(run, looks, reading));
    const abandoned = run.state === 'running' && !reading.isWorkedOn();
    if (run.state !== 'running' || abandoned || on.signal.aborted) return { ...accountOf(run), abandoned };
    await wait(LOOK_EVERY_MS, undefined, { signal: on.signal }).catch(() => undefined);
  }
}

/** @throws NotHeld where the process that worked on the run is gone */
export function checkNotAbandoned(facts: WatchFacts): void {
  if (!facts.abandoned) return;
  throw new NotHeld(
    'abandoned',
    `run ${facts.run} stopped at ${facts.points} of ${facts.wanted} points without a word: the same command that made it goes on with it`,
  );
}

function progressOf(
  run: RunRecord,
  looks: readonly { at: number; points: number }[],
  reading: Reading,
): Progress {
  const [first, last] = [looks[0], looks[looks.length - 1]];
  const seconds = (last.at - first.at) / 1000;
  const pointsPerSecond = seconds > 0 ? (last.points - first.points) / seconds : 0;
  const left = run.wanted - run.counts.points;
  const { retried, workers } = reading.chunks(run.id);
  return {
    run: run.id,
    state: run.state,
    wanted: run.wanted,
    counts: run.counts,
    pointsPerSecond,
    secondsLeft: pointsPerSecond > 0 ? left / pointsPerSecond : null,
    retried,
    workers: workers.map(({ worker, chunks, points }) => ({ name: worker, chunks, points })),
  };
}
