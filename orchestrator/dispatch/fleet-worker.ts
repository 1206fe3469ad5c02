import { hostname } from 'node:os';
import { Worker } from 'bullmq';
import type { Redis } from 'ioredis';
import type { Task } from '../../workers/contract.js';
import { Broken, NotHeld } from '../mistakes.js';
import type { ChunkReport } from './dispatcher.js';
import { sendAnswer } from './fleet-answers.js';
import { fleetCode } from './fleet-code.js';
import { pointsOf, resultBytes, type Answer, type ChunkMessage } from './fleet-messages.js';
import { FleetPools } from './fleet-pools.js';
import { QUEUE, WORKING } from './fleet-queue.js';
import { BEAT_MILLISECONDS, enroll, leave } from './fleet-roll.js';
import { connectRedis, watchRedis, within, withoutPassword } from './redis-link.js';
import { fetchTask } from './task-document.js';
import type { ThreadOptions } from './threads.js';
import { workerProgram } from './worker-program.js';

export interface FleetWorkerOptions extends ThreadOptions {
  readonly threads: number;
  /** Aborted: finish what is in hand or give it back, then end. */
  readonly signal: AbortSignal;
  /** Tells a person what happens. */
  say(line: string): void;
  /** Default: the fingerprint of the worker program. */
  readonly code?: string;
  /** Give up when the server has been away for so long; default 5. */
  readonly lostMinutes?: number;
}

/** A worker of a fleet: takes chunks from the queue until it is told to stop. The event loop stays free: the physics
 *  runs in threads.
 *  @throws Broken 'redis-unreachable', or 'other-version' after refusing a chunk; NotHeld 'redis-lost' */
export async function runFleetWorker(url: string, options: FleetWorkerOptions): Promise<void> {
  const program = options.program ?? workerProgram();
  const code = options.code ?? fleetCode(program);
  const redis = await connectRedis(url, 10);
  const worker = new FleetWorker(redis, code, { ...options, program });
  const link = watchRedis(redis, options.lostMinutes ?? 5, () =>
    worker.stop(new NotHeld('redis-lost', `Redis at ${withoutPassword(url)} stayed away: the worker ends`)),
  );
  try {
    options.say(
      `worker ${worker.name} with ${options.threads} threads takes chunks from ${withoutPassword(url)}`,
    );
    await worker.run();
  } finally {
    link.stop();
    redis.disconnect();
  }
}

/** How long a worker that is told to stop may go on with what it has in hand. */
const FINISH_MILLISECONDS = 10_000;
const CLOSING_MILLISECONDS = 2000;
const TASK_TRIES = 10;
const TASK_WAIT_MILLISECONDS = 500;

class FleetWorker {
  readonly name = `${hostname()}-${process.pid}`.replaceAll(/[^A-Za-z0-9.-]/g, '-');
  readonly #pools: FleetPools;
  readonly #hand = new Set<ChunkMessage>();
  readonly #ended: Promise<void>;
  #end: (trouble: Error | undefined) => void = () => undefined;

  constructor(
    private readonly redis: Redis,
    private readonly code: string,
    private readonly options: FleetWorkerOptions,
  ) {
    this.#pools = new FleetPools(options.threads, options);
    this.#ended = new Promise((resolve, reject) => {
      this.#end = (trouble) => (trouble ? reject(trouble) : resolve());
    });
  }

  /** Ends the worker, with an error if something is wrong. */
  stop(trouble?: Error): void {
    this.#end(trouble);
  }

  async run(): Promise<void> {
    const beat = setInterval(() => void this.#beat(), BEAT_MILLISECONDS);
    const queue = this.#takeChunks();
    const onAbort = () => this.stop();
    this.options.signal.addEventListener('abort', onAbort);
    if (this.options.signal.aborted) onAbort();
    try {
      void this.#beat();
      await this.#ended;
    } finally {
      clearInterval(beat);
      this.options.signal.removeEventListener('abort', onAbort);
      await this.#close(queue);
    }
  }

  #takeChunks(): Worker<ChunkMessage> {
    const queue = new Worker<ChunkMessage>(QUEUE, (job) => this.#take(job.data), {
      connection: this.redis,
      // One in work and one behind it a thread.
      concurrency: 2 * this.options.threads,
      ...WORKING,
    });
    // Trouble with the connection is noticed by its watch; a lock that was lost, by the coordinator.
    queue.on('error', () => undefined);
    return queue;
  }

  async #take(message: ChunkMessage): Promise<void> {
    if (message.code !== this.code) return this.#refuse(message);
    this.#hand.add(message);
    const answer = await this.#work(message);
    // Not there any more: it was given back.
    if (this.#hand.delete(message)) await sendAnswer(this.redis, message.scope, answer);
  }

  async #refuse(message: ChunkMessage): Promise<void> {
    const detail = 'this worker runs another version of the code than the coordinator';
    await sendAnswer(this.redis, message.scope, { ...this.#about(message), kind: 'returned', detail });
    this.stop(new Broken('other-version', `${detail}: install the same version on both; the worker ends`));
  }

  #about({ id, key }: ChunkMessage): About {
    return { id, key, worker: this.name };
  }

  async #work(message: ChunkMessage): Promise<Answer> {
    const about = this.#about(message);
    try {
      const task = () => this.#task(message.task);
      return answerTo(about, await this.#pools.run(message.task, task, pointsOf(message)));
    } catch (error) {
      const detail = (error as Error).message;
      return { ...about, kind: error instanceof NoTask ? 'returned' : 'broken', detail };
    }
  }

  /** A server that was emptied gets the task again from its coordinator: wait for it. */
  async #task(hash: string): Promise<Task> {
    for (let tries = 0; tries < TASK_TRIES; tries += 1) {
      const task = await fetchTask(this.redis, hash);
      if (task) return task;
      await new Promise((resolve) => setTimeout(resolve, TASK_WAIT_MILLISECONDS));
    }
    throw new NoTask('the server does not have the task');
  }

  async #beat(): Promise<void> {
    // A beat that fails is a beat missed: the connection has its own watch.
    if (this.redis.status !== 'ready') return;
    await enroll(this.redis, { name: this.name, threads: this.options.threads }).catch(() => undefined);
  }

  /** Finishes what is in hand, or gives it back; without a server there is nobody to give it to. */
  async #close(queue: Worker): Promise<void> {
    const isThere = this.redis.status === 'ready';
    const closing = queue.close(!isThere);
    if (isThere) {
      await within(FINISH_MILLISECONDS, closing);
      await within(CLOSING_MILLISECONDS, this.#giveBack());
      await within(CLOSING_MILLISECONDS, leave(this.redis, this.name));
    }
    await within(CLOSING_MILLISECONDS, queue.disconnect());
    await this.#pools.close();
  }

  async #giveBack(): Promise<void> {
    const left = [...this.#hand];
    this.#hand.clear();
    const detail = 'the worker was told to stop';
    const answers = left.map((message) =>
      sendAnswer(this.redis, message.scope, { ...this.#about(message), kind: 'returned', detail }),
    );
    await Promise.all(answers);
  }
}

type About = Pick<Answer, 'id' | 'key' | 'worker'>;

class NoTask extends Error {}

function answerTo(about: About, report: ChunkReport): Answer {
  switch (report.kind) {
    case 'done':
      return { ...about, kind: 'done', milliseconds: report.milliseconds, body: resultBytes(report.result) };
    case 'lost':
      return { ...about, kind: 'lost', reason: report.reason, detail: `${report.worker}: ${report.detail}` };
    case 'returned':
      return { ...about, kind: 'returned', detail: report.reason };
  }
}
