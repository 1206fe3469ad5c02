import type { PointsBlock, Task } from '../../workers/contract.js';
import type { ChunkReport, Dispatcher } from './dispatcher.js';
import { openThreads, type ThreadOptions } from './threads.js';

interface Entry {
  readonly opening: Promise<Pool>;
  /** Chunks on their way into the pool or in it: what is wanted is not closed. */
  users: number;
}

/** The threads of a fleet worker, started anew for each task: a thread is built for one. */
export class FleetPools {
  readonly #pools = new Map<string, Entry>();

  constructor(
    private readonly threads: number,
    private readonly options: ThreadOptions,
  ) {}

  /** Evaluates points in a thread.
   *  @throws Broken if the threads do not start with this task */
  async run(hash: string, task: () => Promise<Task>, points: PointsBlock): Promise<ChunkReport> {
    const entry = this.#pools.get(hash) ?? { opening: this.#open(task), users: 0 };
    entry.users += 1;
    // Last used comes last.
    this.#pools.delete(hash);
    this.#pools.set(hash, entry);
    try {
      await this.#closeIdle();
      return await (await entry.opening).run(points);
    } catch (error) {
      if (this.#pools.get(hash) === entry) this.#pools.delete(hash);
      throw error;
    } finally {
      entry.users -= 1;
    }
  }

  async close(): Promise<void> {
    const pools = await Promise.allSettled([...this.#pools.values()].map(({ opening }) => opening));
    this.#pools.clear();
    await Promise.all(pools.map(async (p) => (p.status === 'fulfilled' ? p.value.close() : undefined)));
  }

  async #open(task: () => Promise<Task>): Promise<Pool> {
    return Pool.open(await task(), this.threads, this.options);
  }

  /** Threads of a task that is not worked on make way for another's. */
  async #closeIdle(): Promise<void> {
    const idle = [...this.#pools].filter(([, { users }]) => users === 0);
    for (const [hash] of idle) this.#pools.delete(hash);
    await Promise.all(idle.map(async ([, { opening }]) => (await opening).close()));
  }
}

interface Waiting {
  readonly resolve: (report: ChunkReport) => void;
  readonly reject: (error: Error) => void;
}

class Pool {
  readonly #waiting = new Map<string, Waiting>();
  #next = 0;
  #broken: Error | undefined;

  static async open(task: Task, threads: number, options: ThreadOptions): Promise<Pool> {
    return new Pool(await openThreads(threads, options)(task, ''));
  }

  private constructor(private readonly dispatcher: Dispatcher) {
    dispatcher.onReport((report) => {
      this.#waiting.get(report.id)?.resolve(report);
      this.#waiting.delete(report.id);
    });
    dispatcher.onBroken((error) => {
      this.#broken = error;
      for (const { reject } of this.#waiting.values()) reject(error);
      this.#waiting.clear();
    });
  }

  run(points: PointsBlock): Promise<ChunkReport> {
    // A number of our own: runs that share a task share chunk ids.
    const id = String(this.#next++);
    return new Promise((resolve, reject) => {
      if (this.#broken) return reject(this.#broken);
      this.#waiting.set(id, { resolve, reject });
      this.dispatcher.submit({ id, points });
    });
  }

  close(): Promise<void> {
    return this.dispatcher.close();
  }
}
