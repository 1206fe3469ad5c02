import { performance } from 'node:perf_hooks';
import type { Counts, RunRecord } from '../store/records.js';
import type { Progress } from './commands.js';

/** Time and progress of work on a run that this process does by itself. */
export function pace(run: RunRecord) {
  const began = performance.now();
  const elapsed = () => (performance.now() - began) / 1000;
  return {
    /** All the time that was ever spent on the run. */
    seconds: () => run.seconds + elapsed(),
    progress(counts: Counts): Progress {
      const pointsPerSecond = (counts.points - run.counts.points) / Math.max(elapsed(), 1e-3);
      const left = run.wanted - counts.points;
      const secondsLeft = pointsPerSecond > 0 ? left / pointsPerSecond : null;
      return {
        run: run.id,
        state: 'running',
        wanted: run.wanted,
        counts,
        pointsPerSecond,
        secondsLeft,
        retried: 0,
        workers: [],
      };
    },
  };
}
