import type { AsyncQuestions, ChunkStatistics } from '../orchestrator/store/reading.js';
import type { RunRecord } from '../orchestrator/store/records.js';

/** What a watched run looked like at one moment. */
export interface Moment {
  readonly run: RunRecord;
  readonly chunks: ChunkStatistics;
  /** Over the last few seconds; null where the run does not move or was seen only once. */
  readonly pointsPerSecond: number | null;
  readonly secondsLeft: number | null;
  /** How long no point has been added, while the run says it is running. */
  readonly stillSeconds: number;
}

export type Listener = (moment: Moment) => void;

export interface LiveRuns {
  /** Calls the listener at once and then whenever the run changed; returns how to stop. */
  watch(run: number, listener: Listener, onError: (error: unknown) => void): () => void;
  /** Number of listeners of a run. */
  listeners(run: number): number;
  close(): void;
}

/** One look at the store a second for each watched run, however many pages watch it; none for a run that is over
 *  or that nobody watches. */
export function createLiveRuns(questions: AsyncQuestions, everyMilliseconds = 1000): LiveRuns {
  const watches = new Map<number, Watch>();
  return {
    watch(run, listener, onError) {
      const watch = watches.get(run) ?? new Watch(questions, run, everyMilliseconds);
      watches.set(run, watch);
      const stop = watch.add({ listener, onError });
      return () => {
        stop();
        if (watch.size === 0 && watches.get(run) === watch) watches.delete(run);
      };
    },
    listeners: (run) => watches.get(run)?.size ?? 0,
    close: () => watches.forEach((watch) => watch.close()),
  };
}

/** Whether a run can still change without anybody asking for it. */
export function mayMove(run: RunRecord): boolean {
  return run.state === 'running' || run.state === 'paused';
}

interface Ear {
  readonly listener: Listener;
  readonly onError: (error: unknown) => void;
}

/** Samples kept to tell the speed from. */
const SAMPLES = 10;
/** A paused run is looked at less often. */
const PAUSED = 5;

class Watch {
  private readonly ears = new Set<Ear>();
  private readonly samples: { at: number; points: number }[] = [];
  private timer: NodeJS.Timeout | undefined;
  private last: Moment | undefined;
  private lastPoint = performance.now();
  private looking = false;

  constructor(
    private readonly questions: AsyncQuestions,
    private readonly run: number,
    private readonly every: number,
  ) {}

  get size(): number {
    return this.ears.size;
  }

  add(ear: Ear): () => void {
    this.ears.add(ear);
    if (this.last) ear.listener(this.last);
    if (this.timer === undefined && !this.looking) void this.look();
    return () => {
      this.ears.delete(ear);
      if (this.ears.size === 0) this.close();
    };
  }

  close(): void {
    clearTimeout(this.timer);
    this.timer = undefined;
  }

  private async look(): Promise<void> {
    this.looking = true;
    this.timer = undefined;
    try {
      const run = await this.questions.run(this.run);
      if (run) this.tell(this.momentOf(run, await this.questions.chunks(this.run)));
      if (run && mayMove(run)) this.again(run.state === 'paused' ? this.every * PAUSED : this.every);
    } catch (error) {
      for (const ear of this.ears) ear.onError(error);
    } finally {
      this.looking = false;
    }
  }

  private again(after: number): void {
    if (this.ears.size === 0) return;
    this.timer = setTimeout(() => void this.look(), after);
    this.timer.unref();
  }

  private tell(moment: Moment): void {
    const before = this.last;
    this.last = moment;
    const same =
      before !== undefined &&
      before.run.state === moment.run.state &&
      before.run.counts.points === moment.run.counts.points &&
      before.chunks.retried === moment.chunks.retried &&
      Math.floor(before.stillSeconds / 10) === Math.floor(moment.stillSeconds / 10);
    if (!same) for (const ear of this.ears) ear.listener(moment);
  }

  private momentOf(run: RunRecord, chunks: ChunkStatistics): Moment {
    const now = performance.now();
    const points = run.counts.points;
    if (points !== this.samples.at(-1)?.points) this.lastPoint = now;
    this.samples.push({ at: now, points });
    if (this.samples.length > SAMPLES) this.samples.shift();
    const first = this.samples[0];
    const seconds = (now - first.at) / 1000;
    const speed = run.state === 'running' && seconds > 0 ? (points - first.points) / seconds : null;
    const left = speed !== null && speed > 0 ? (run.wanted - points) / speed : null;
    const still = run.state === 'running' ? (now - this.lastPoint) / 1000 : 0;
    return { run, chunks, pointsPerSecond: speed, secondsLeft: left, stillSeconds: still };
  }
}
