import type { ResultBlock, Task } from '../../workers/contract.js';
import { Broken } from '../mistakes.js';
import type { ChunkJob, ChunkReport, Dispatcher, OpenDispatcher, WorkerInfo } from './dispatcher.js';
import { workerProgram } from './worker-program.js';
import { WorkerThread, type ThreadEnd, type ThreadLimits, type WorkInHand } from './worker-thread.js';

export type ThreadOptions = Partial<ThreadLimits>;

/** Worker threads of this process: the dispatcher that needs no server.
 *  @throws Broken if the worker program cannot start or refuses the task */
export function openThreads(count: number, options: ThreadOptions = {}): OpenDispatcher {
  return async (task) => {
    const threads = new Threads(task, count, {
      program: options.program ?? workerProgram(),
      chunkSeconds: options.chunkSeconds ?? 60,
      heapMegabytes: options.heapMegabytes ?? 512,
    });
    await threads.started;
    return threads;
  };
}

/** Where a thread works. It outlives its threads, and so do its name and its account. */
interface Place {
  readonly name: string;
  thread: WorkerThread | undefined;
  chunks: number;
  points: number;
  /** Threads in a row that ended before they were ready. */
  falseStarts: number;
}

/** The chunk in work and one behind it, so that a thread never waits for the event loop. */
const IN_HAND = 2;
const FALSE_STARTS = 3;

class Threads implements Dispatcher {
  /** Settles once the first thread is ready, or none can be. */
  readonly started: Promise<void>;
  readonly #places: readonly Place[];
  readonly #pending: ChunkJob[] = [];
  #onStarted: () => void = () => undefined;
  #onReport: (report: ChunkReport) => void = () => undefined;
  #onBroken: (error: Error) => void = () => undefined;
  #closed = false;

  constructor(
    private readonly task: Task,
    count: number,
    private readonly limits: ThreadLimits,
  ) {
    this.started = new Promise((resolve, reject) => {
      this.#onStarted = resolve;
      this.#onBroken = reject;
    });
    this.#places = Array.from({ length: count }, (_, i) => emptyPlace(`thread-${i + 1}`));
    for (const place of this.#places) this.#fill(place);
  }

  capacity(): number {
    return this.#places.length * IN_HAND;
  }

  submit(job: ChunkJob): void {
    this.#pending.push(job);
    this.#feed();
  }

  onReport(listener: (report: ChunkReport) => void): void {
    this.#onReport = listener;
  }

  onBroken(listener: (error: Error) => void): void {
    this.#onBroken = listener;
  }

  workers(): readonly WorkerInfo[] {
    return this.#places.map(({ name, chunks, points }) => ({ name, kind: 'thread', chunks, points }));
  }

  async close(): Promise<void> {
    this.#closed = true;
    this.#pending.length = 0;
    await Promise.all(this.#places.map(async (place) => place.thread?.stop()));
  }

  #fill(place: Place): void {
    if (this.#closed) return;
    place.thread = new WorkerThread(this.task, this.limits, {
      ready: () => this.#ready(place),
      done: (work, result, milliseconds) => this.#done(place, work, result, milliseconds),
      ended: (end) => this.#ended(place, end),
    });
  }

  #ready(place: Place): void {
    place.falseStarts = 0;
    this.#onStarted();
    this.#feed();
  }

  #done(place: Place, work: WorkInHand, result: ResultBlock, milliseconds: number): void {
    place.chunks += 1;
    place.points += work.count;
    this.#feed();
    this.#onReport({ kind: 'done', id: work.id, result, worker: place.name, milliseconds });
  }

  #ended(place: Place, end: ThreadEnd): void {
    place.falseStarts = end.wasReady ? 0 : place.falseStarts + 1;
    if (place.falseStarts >= FALSE_STARTS) return this.#giveUp(end);
    this.#fill(place);
    const { working, waiting, reason, detail } = end;
    for (const { id } of waiting)
      this.#onReport({ kind: 'returned', id, reason: `${place.name} ended before its turn` });
    if (working) this.#onReport({ kind: 'lost', id: working.id, worker: place.name, reason, detail });
  }

  #giveUp({ reason, detail }: ThreadEnd): void {
    const broken = new Broken('worker-start', `the worker threads do not start (${reason}): ${detail}`);
    void this.close().then(() => this.#onBroken(broken));
  }

  /** Gives waiting chunks to the least loaded threads. */
  #feed(): void {
    while (this.#pending.length > 0) {
      const least = this.#places.reduce((a, b) => (load(b) < load(a) ? b : a));
      if (load(least) >= IN_HAND) return;
      least.thread?.post(this.#pending.shift()!);
    }
  }
}

function emptyPlace(name: string): Place {
  return { name, thread: undefined, chunks: 0, points: 0, falseStarts: 0 };
}

function load(place: Place): number {
  return place.thread?.load ?? Infinity;
}
