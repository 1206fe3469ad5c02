import type { Progress } from '../commands/commands.js';
import type { Counts, RunRecord } from '../store/records.js';
import type { WorkerInfo } from './dispatcher.js';

/** Tells how a run goes on: at most a few times a second, however much happens. */

const LEAST_MILLISECONDS = 250;
const WINDOW_MILLISECONDS = 10_000;

export class ProgressReport {
  retried = 0;
  workers: readonly WorkerInfo[] = [];
  #counts: Counts;
  /** Points committed, over the last seconds. */
  readonly #marks: { readonly at: number; readonly points: number }[] = [];
  #last = -Infinity;

  constructor(
    private readonly record: RunRecord,
    private readonly tell: (progress: Progress) => void,
  ) {
    this.#counts = record.counts;
  }

  get counts(): Counts {
    return this.#counts;
  }

  committed(counts: Counts): void {
    this.#counts = counts;
  }

  /** @param now milliseconds of a clock that never goes back */
  tick(now: number): void {
    if (now - this.#last < LEAST_MILLISECONDS) return;
    this.#last = now;
    this.#marks.push({ at: now, points: this.#counts.points });
    while (this.#marks.length > 2 && this.#marks[1].at < now - WINDOW_MILLISECONDS) this.#marks.shift();
    this.say('running');
  }

  say(state: string): void {
    const rate = this.#rate();
    const left = this.record.wanted - this.#counts.points;
    this.tell({
      run: this.record.id,
      state,
      wanted: this.record.wanted,
      counts: this.#counts,
      pointsPerSecond: rate,
      secondsLeft: rate > 0 ? left / rate : null,
      retried: this.retried,
      workers: this.workers.map(({ name, chunks, points }) => ({ name, chunks, points })),
    });
  }

  #rate(): number {
    const first = this.#marks[0];
    const last = this.#marks.at(-1);
    if (!first || !last || last.at === first.at) return 0;
    return (1000 * (last.points - first.points)) / (last.at - first.at);
  }
}
