import type { Redis } from 'ioredis';
import type { Task } from '../../workers/contract.js';
import { Broken, NotHeld } from '../mistakes.js';
import type { ChunkJob, ChunkReport, Dispatcher, OpenDispatcher, WorkerInfo } from './dispatcher.js';
import { AnswerReader } from './fleet-answers.js';
import { fleetCode } from './fleet-code.js';
import { chunkMessage, resultOf, type Answer, type ChunkMessage } from './fleet-messages.js';
import { FleetQueue } from './fleet-queue.js';
import { liveWorkers, type Enrolled } from './fleet-roll.js';
import { connectRedis, watchRedis, within, withoutPassword } from './redis-link.js';
import { publishTask, taskDocument, type TaskDocument } from './task-document.js';
import { workerProgram } from './worker-program.js';

export interface RedisOptions {
  /** Give up when the server has been away for so long; default 5. */
  readonly lostMinutes?: number;
  /** Give up when no server answers at first for so long; default 10. */
  readonly reachSeconds?: number;
  /** What a worker must run to take a chunk; default: the worker program of this package. */
  readonly code?: string;
}

/** Workers of a fleet, reached through a BullMQ queue on Redis. Redis holds only what is in flight: it may be
 *  restarted or emptied at any time.
 *  @throws Broken 'redis-unreachable' */
export function openRedis(url: string, options: RedisOptions = {}): OpenDispatcher {
  return async (task, scope) => {
    const code = options.code ?? fleetCode(workerProgram());
    const redis = await connectRedis(url, options.reachSeconds ?? 10);
    const fleet = new Fleet(redis, task, scope.replaceAll(/[^A-Za-z0-9.-]/g, '-'), code);
    fleet.watch(options.lostMinutes ?? 5, withoutPassword(url));
    try {
      await fleet.start();
    } catch (error) {
      await fleet.close();
      throw fleet.trouble ?? error;
    }
    return fleet;
  };
}

const SWEEP_MILLISECONDS = 1000;
/** Sweeps in a row that must miss a job: its answer may be on the way. */
const MISSED = 3;
/** Chunks worth having in the queue before the first worker comes. */
const LEAST_CAPACITY = 4;
const CLOSING_MILLISECONDS = 2000;

/** A chunk in flight. */
interface Flight {
  readonly jobId: string;
  readonly count: number;
  readonly message: ChunkMessage;
  /** Known to have reached the server. */
  sent: boolean;
  sending: boolean;
  missed: number;
}

class Fleet implements Dispatcher {
  /** What broke it. */
  trouble: Error | undefined;
  readonly #queue: FleetQueue;
  readonly #answers: AnswerReader;
  readonly #document: TaskDocument;
  readonly #flights = new Map<string, Flight>();
  /** How often a chunk that came back was submitted before: a job id is used once. */
  readonly #returns = new Map<string, number>();
  readonly #account = new Map<string, { chunks: number; points: number }>();
  #live: readonly Enrolled[] = [];
  #sweeper: NodeJS.Timeout | undefined;
  #link: { stop(): void } | undefined;
  #onReport: (report: ChunkReport) => void = () => undefined;
  #onBroken: (error: Error) => void = () => undefined;
  #closing: Promise<void> | undefined;

  constructor(
    private readonly redis: Redis,
    private readonly task: Task,
    private readonly scope: string,
    private readonly code: string,
  ) {
    this.#document = taskDocument(task);
    this.#queue = new FleetQueue(
      redis,
      (jobId) => this.#workerGone(jobId, 'the worker stopped renewing its lock'),
      (jobId, why) => this.#workerGone(jobId, why),
    );
    this.#answers = new AnswerReader(redis, scope, (answer) => this.#answered(answer));
  }

  async start(): Promise<void> {
    await publishTask(this.redis, this.#document);
    await this.#queue.clear(`${this.scope}_`);
    await this.#queue.start();
    await this.#answers.start();
    this.#live = await liveWorkers(this.redis);
    this.#nextSweep();
  }

  /** Breaks when the server stays away. */
  watch(minutes: number, address: string): void {
    this.#link = watchRedis(this.redis, minutes, () => {
      const words = `Redis at ${address} has been away for ${minutes} min; launch again to go on`;
      this.#break(new NotHeld('redis-lost', words));
    });
  }

  /** Two chunks a thread, so that none waits for the network. */
  capacity(): number {
    return Math.max(LEAST_CAPACITY, 2 * this.#live.reduce((sum, worker) => sum + worker.threads, 0));
  }

  submit(job: ChunkJob): void {
    const common = { scope: this.scope, task: this.#document.hash, code: this.code };
    const message = chunkMessage(job, common);
    const turn = this.#returns.get(job.id) ?? 0;
    const flight = {
      // Always the same for the same question, so that adding it again after a doubt does nothing.
      jobId: `${this.scope}_${job.id}_${message.key.slice(0, 12)}_${turn}`,
      count: job.points.count,
      message,
      sent: false,
      sending: false,
      missed: 0,
    };
    this.#flights.set(job.id, flight);
    void this.#send(flight);
  }

  onReport(listener: (report: ChunkReport) => void): void {
    this.#onReport = listener;
  }

  onBroken(listener: (error: Error) => void): void {
    this.#onBroken = listener;
  }

  workers(): readonly WorkerInfo[] {
    const names = new Set([...this.#live.map((worker) => worker.name), ...this.#account.keys()]);
    const nothing = { chunks: 0, points: 0 };
    return [...names]
      .sort()
      .map((name) => ({ name, kind: 'fleet', ...(this.#account.get(name) ?? nothing) }));
  }

  close(): Promise<void> {
    this.#closing ??= this.#close();
    return this.#closing;
  }

  async #close(): Promise<void> {
    clearTimeout(this.#sweeper);
    this.#link?.stop();
    this.#answers.stop();
    const given = [...this.#flights.values()].map(({ jobId }) => this.#queue.remove(jobId));
    this.#flights.clear();
    if (this.redis.status === 'ready') await within(CLOSING_MILLISECONDS, Promise.allSettled(given));
    await this.#queue.close();
    this.redis.disconnect();
  }

  async #send(flight: Flight): Promise<void> {
    flight.sending = true;
    try {
      await this.#queue.add(flight.jobId, flight.message);
      flight.sent = true;
    } catch {
      // The server refuses for now (loading, out of memory): the next sweep tries again.
    } finally {
      flight.sending = false;
    }
  }

  #answered(answer: Answer): void {
    if (answer.kind === 'broken')
      return this.#break(new Broken('worker-start', `${answer.worker}: ${answer.detail}`));
    const flight = this.#flights.get(answer.id);
    // Nobody waits for it: a second worker finished the chunk too, or it is somebody else's.
    if (flight?.message.key !== answer.key) return;
    if (answer.kind === 'done') return this.#done(flight, answer);
    this.#end(answer.id);
    const { id, worker, kind, detail } = answer;
    if (kind === 'lost') return this.#onReport({ kind, id, worker, reason: answer.reason, detail });
    this.#onReport({ kind: 'returned', id, reason: `${worker}: ${detail}` });
  }

  #done(flight: Flight, answer: Answer & { kind: 'done' }): void {
    const { id, worker, milliseconds } = answer;
    this.#flights.delete(id);
    try {
      const result = resultOf(this.task, flight.count, answer.body);
      const account = this.#account.get(worker) ?? { chunks: 0, points: 0 };
      this.#account.set(worker, { chunks: account.chunks + 1, points: account.points + flight.count });
      this.#onReport({ kind: 'done', id, result, worker, milliseconds });
    } catch (error) {
      const detail = `the answer cannot be read: ${(error as Error).message}`;
      this.#onReport({ kind: 'lost', id, worker, reason: 'worker-error', detail });
    }
  }

  #workerGone(jobId: string, detail: string): void {
    for (const [id, flight] of this.#flights) {
      if (flight.jobId !== jobId) continue;
      this.#end(id);
      this.#onReport({ kind: 'lost', id, worker: 'unknown', reason: 'worker-died', detail });
    }
  }

  /** The submission is over; what is left of its job is removed, and its id not used again. */
  #end(id: string): void {
    const flight = this.#flights.get(id);
    if (!flight) return;
    this.#flights.delete(id);
    this.#returns.set(id, (this.#returns.get(id) ?? 0) + 1);
    void this.#queue.remove(flight.jobId).catch(() => undefined);
  }

  #break(error: Error): void {
    this.trouble = error;
    void this.close().then(() => this.#onBroken(error));
  }

  #nextSweep(): void {
    this.#sweeper = setTimeout(() => {
      void this.#sweep()
        .catch(() => undefined)
        .finally(() => {
          if (!this.#closing) this.#nextSweep();
        });
    }, SWEEP_MILLISECONDS);
  }

  /** The server may have been emptied behind our back: compare what is in flight with what it knows. */
  async #sweep(): Promise<void> {
    if (this.redis.status !== 'ready') return;
    await publishTask(this.redis, this.#document);
    this.#live = await liveWorkers(this.redis);
    await Promise.all([...this.#flights].map(([id, flight]) => this.#check(id, flight)));
  }

  async #check(id: string, flight: Flight): Promise<void> {
    if (flight.sending) return;
    if (!flight.sent) return this.#send(flight);
    flight.missed = (await this.#queue.knows(flight.jobId)) ? 0 : flight.missed + 1;
    if (flight.missed < MISSED || this.#flights.get(id) !== flight) return;
    this.#end(id);
    this.#onReport({ kind: 'returned', id, reason: 'the queue no longer has it' });
  }
}
