import { setTimeout as wait } from 'node:timers/promises';
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

/** Follows a run that any process works on, through the store alone, until it is not running any more. */
export async function watch(
  reading: Reading,
  word: string,
  on: { progress(progress: Progress): void; readonly signal: AbortSignal },
): Promise<RunAccount> {
  const { id } = findRun(reading, word);
  const looks: { at: number; points: number }[] = [];
  for (;;) {
    const run = mustHave(reading, id);
    looks.push({ at: performance.now(), points: run.counts.points });
    if (looks.length > LOOKS_REMEMBERED) looks.shift();
    on.progress(progressOf(run, looks, reading));
    if (run.state !== 'running' || on.signal.aborted) return accountOf(run);
    await wait(LOOK_EVERY_MS, undefined, { signal: on.signal }).catch(() => undefined);
  }
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
