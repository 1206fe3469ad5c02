import type { PointsBlock, Task } from '../../workers/contract.js';
import type { ChunkReport, Dispatcher } from './dispatcher.js';
import { openThreads, type ThreadOptions } from './threads.js';

/** The threads of a fleet worker, started anew for each task: a thread is built for one. */
export class FleetPools {
  readonly #pools = new Map<string, Promise<Pool>>();

  constructor(
    private readonly threads: number,
    private readonly options: ThreadOptions,
  ) {}

  /** Evaluates points in a thread.
   *  @throws Broken if the threads do not start with this task */
  async run(hash: string, task: () => Promise<Task>, points: PointsBlock): Promise<ChunkReport> {
    const known = this.#pools.get(hash);
    const opening = known ?? task().then((t) => Pool.open(t, this.threads, this.options));
    // Last used comes last.
    this.#pools.delete(hash);
    this.#pools.set(hash, opening);
    await this.#closeIdle();
    try {
      return await (await opening).run(points);
    } catch (error) {
      this.#pools.delete(hash);
      throw error;
    }
  }

  async close(): Promise<void> {
    const pools = await Promise.allSettled(this.#pools.values());
    this.#pools.clear();
    await Promise.all(pools.map(async (p) => (p.status === 'fulfilled' ? p.value.close() : undefined)));
  }

  /** Threads of a task that is not worked on make way for another's. */
  async #closeIdle(): Promise<void> {
    for (const [hash, opening] of [...this.#pools].slice(0, -1)) {
      const pool = await opening.catch(() => undefined);
      if (!pool || pool.busy) continue;
      this.#pools.delete(hash);
      await pool.close();
    }
  }
}

interface Waiting {
  readonly resolve: (report: ChunkReport) => void;
  readonly reject: (error: Error) => void;
}

class Pool {
  readonly #waiting = new Map<string, Waiting>();
  #next = 0;

  static async open(task: Task, threads: number, options: ThreadOptions): Promise<Pool> {
    return new Pool(await openThreads(threads, options)(task, ''));
  }

  private constructor(private readonly dispatcher: Dispatcher) {
    dispatcher.onReport((report) => {
      this.#waiting.get(report.id)?.resolve(report);
      this.#waiting.delete(report.id);
    });
    dispatcher.onBroken((error) => {
      for (const { reject } of this.#waiting.values()) reject(error);
      this.#waiting.clear();
    });
  }

  get busy(): boolean {
    return this.#waiting.size > 0;
  }

  run(points: PointsBlock): Promise<ChunkReport> {
    // A number of our own: runs that share a task share chunk ids.
    const id = String(this.#next++);
    return new Promise((resolve, reject) => {
      this.#waiting.set(id, { resolve, reject });
      this.dispatcher.submit({ id, points });
    });
  }

  close(): Promise<void> {
    return this.dispatcher.close();
  }
}
