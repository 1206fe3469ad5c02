import { Queue, QueueEvents, Worker } from 'bullmq';
import type { Redis } from 'ioredis';
import { within } from './redis-link.js';
import type { ChunkMessage } from './fleet-messages.js';

/** One queue for every run: workers need to know no more than the server. */
export const QUEUE = 'trigpoint';

/** A job whose worker does not renew its lock for so long is stalled; looked for every STALLED_MILLISECONDS.
 *  Together they bound how long a killed worker keeps a chunk: below 15 s. */
const LOCK_MILLISECONDS = 5000;
const STALLED_MILLISECONDS = 3000;

/** What every BullMQ worker of ours agrees on: a stalled job fails, nobody repeats it behind our back. */
export const WORKING = {
  lockDuration: LOCK_MILLISECONDS,
  stalledInterval: STALLED_MILLISECONDS,
  maxStalledCount: 0,
} as const;

/** One attempt a job, and nothing is kept of it. */
const JOB = { attempts: 1, removeOnComplete: true, removeOnFail: true } as const;
const CLOSING_MILLISECONDS = 2000;

/** The coordinator's side of the queue: adds and removes jobs, and hears of those whose worker is gone. */
export class FleetQueue {
  readonly #queue: Queue<ChunkMessage>;
  readonly #events: QueueEvents;
  /** Takes no jobs: it looks for stalled ones, also when no worker is left to do so. */
  readonly #watch: Worker;

  constructor(redis: Redis, stalled: (jobId: string) => void, failed: (jobId: string, why: string) => void) {
    const connection = redis;
    this.#queue = new Queue(QUEUE, { connection });
    this.#events = new QueueEvents(QUEUE, { connection });
    this.#watch = new Worker(QUEUE, null, { connection, autorun: false, ...WORKING });
    // Trouble with the connection is noticed where the connection is watched.
    const ignore = () => undefined;
    this.#queue.on('error', ignore);
    this.#events.on('error', ignore);
    this.#watch.on('error', ignore);
    this.#events.on('stalled', ({ jobId }) => stalled(jobId));
    this.#events.on('failed', ({ jobId, failedReason }) => failed(jobId, failedReason));
  }

  async start(): Promise<void> {
    await this.#events.waitUntilReady();
    await this.#watch.startStalledCheckTimer();
  }

  /** Does nothing if there is such a job. */
  async add(jobId: string, message: ChunkMessage): Promise<void> {
    await this.#queue.add('chunk', message, { ...JOB, jobId });
  }

  /** Does nothing if there is no such job or a worker holds it. */
  async remove(jobId: string): Promise<void> {
    await this.#queue.remove(jobId);
  }

  async knows(jobId: string): Promise<boolean> {
    return (await this.#queue.getJobState(jobId)) !== 'unknown';
  }

  /** Takes back what an earlier coordinator of this scope left waiting. */
  async clear(prefix: string): Promise<void> {
    const waiting = await this.#queue.getJobs(['waiting']);
    await Promise.all(
      waiting.map(async (job) => (job.id?.startsWith(prefix) ? this.remove(job.id) : undefined)),
    );
  }

  async close(): Promise<void> {
    const parts = [this.#watch.close(true), this.#events.close(), this.#queue.close()];
    await within(CLOSING_MILLISECONDS, Promise.allSettled(parts));
  }
}
