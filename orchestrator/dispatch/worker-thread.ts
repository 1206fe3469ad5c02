import { Worker } from 'node:worker_threads';
import type { ResultBlock, Task } from '../../workers/contract.js';
import type { ChunkJob, LossReason } from './dispatcher.js';
import { wrongShape } from './result-shape.js';

export interface ThreadLimits {
  /** File of the worker thread. */
  readonly program: string;
  /** Longest time one chunk may take, in seconds. */
  readonly chunkSeconds: number;
  /** Heap of the thread, in megabytes. */
  readonly heapMegabytes: number;
}

/** What a thread says to the dispatcher that started it. */
export interface ThreadEvents {
  ready(): void;
  done(job: WorkInHand, result: ResultBlock, milliseconds: number): void;
  /** Said once, last: what the thread was working on, what it had not begun, why it ended. */
  ended(end: ThreadEnd): void;
}

export interface WorkInHand {
  readonly id: string;
  readonly count: number;
}

export interface ThreadEnd {
  readonly working: WorkInHand | undefined;
  readonly waiting: readonly WorkInHand[];
  readonly reason: LossReason;
  readonly detail: string;
  /** False if it ended before it could take any work: its program or the task is broken. */
  readonly wasReady: boolean;
}

type Answer =
  | { readonly id: string; readonly result: ResultBlock; readonly milliseconds: number }
  | { readonly id: string; readonly error: string };

const HELLO: ChunkJob = { id: 'hello', points: { count: 0, values: new Float64Array(0) } };

/** One worker thread. It answers chunks in the order they came; whatever goes wrong ends it, and a fresh one takes
 *  its place. It is ready once it has answered an empty chunk, so a program that cannot start never costs a chunk. */
export class WorkerThread {
  readonly #worker: Worker;
  readonly #hand: WorkInHand[] = [];
  #ready = false;
  #over = false;
  #clock: NodeJS.Timeout | undefined;

  constructor(
    private readonly task: Task,
    private readonly limits: ThreadLimits,
    private readonly events: ThreadEvents,
  ) {
    this.#worker = new Worker(limits.program, {
      workerData: { task },
      execArgv: [],
      resourceLimits: { maxOldGenerationSizeMb: limits.heapMegabytes },
    });
    this.#worker.on('message', (answer: Answer) => this.#answered(answer));
    this.#worker.on('error', (error: NodeJS.ErrnoException) => this.#threw(error));
    this.#worker.on('exit', (status) => this.#end('worker-died', `the thread ended with status ${status}`));
    this.post(HELLO);
  }

  /** Chunks it holds: the one it works on and those that wait behind it. */
  get load(): number {
    return this.#ready ? this.#hand.length : Infinity;
  }

  post(job: ChunkJob): void {
    this.#hand.push({ id: job.id, count: job.points.count });
    this.#worker.postMessage({ id: job.id, points: job.points }, transferable(job));
    if (this.#hand.length === 1) this.#watch();
  }

  /** Ends the thread without a word. */
  async stop(): Promise<void> {
    this.#over = true;
    clearTimeout(this.#clock);
    await this.#worker.terminate();
  }

  #answered(answer: Answer): void {
    // A second answer to the same chunk is nobody's: only the chunk in hand counts.
    if (this.#over || answer.id !== this.#hand[0]?.id) return;
    if ('error' in answer) return this.#end('worker-error', answer.error);
    const job = this.#hand[0];
    const wrong = wrongShape(this.task, job.count, answer.result);
    if (wrong) return this.#end('worker-error', `the answer has the wrong shape: ${wrong}`);
    this.#hand.shift();
    this.#watch();
    if (this.#ready) return this.events.done(job, answer.result, answer.milliseconds);
    this.#ready = true;
    this.events.ready();
  }

  #threw(error: NodeJS.ErrnoException): void {
    if (error.code === 'ERR_WORKER_OUT_OF_MEMORY') this.#end('out-of-memory', heapLimit(this.limits));
    else this.#end('worker-error', error instanceof Error ? error.message : String(error));
  }

  #watch(): void {
    clearTimeout(this.#clock);
    if (this.#hand.length === 0) return;
    const limit = this.limits.chunkSeconds;
    this.#clock = setTimeout(() => this.#end('time-out', `no answer in ${limit} s`), limit * 1000);
  }

  #end(reason: LossReason, detail: string): void {
    if (this.#over) return;
    void this.stop();
    const [working, ...waiting] = this.#ready ? this.#hand : [];
    this.events.ended({ working, waiting, reason, detail, wasReady: this.#ready });
  }
}

function transferable(job: ChunkJob): ArrayBuffer[] {
  return job.points.count > 0 ? [job.points.values.buffer as ArrayBuffer] : [];
}

function heapLimit(limits: ThreadLimits): string {
  return `the thread passed its heap limit of ${limits.heapMegabytes} MB`;
}
