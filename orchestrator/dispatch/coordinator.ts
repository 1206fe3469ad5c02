import { createHash } from 'node:crypto';
import { performance } from 'node:perf_hooks';
import type { Task } from '../../workers/contract.js';
import type { Progress } from '../commands/commands.js';
import { Broken } from '../mistakes.js';
import { samplerOf, type Sampler } from '../sampling/sampler.js';
import type { Plan } from '../scan/plan.js';
import { taskOf } from '../scan/task.js';
import type { Counts, RunRecord, RunState } from '../store/records.js';
import { subtractSpans } from '../store/spans.js';
import type { ChunkResult, Writing } from '../store/writing.js';
import { Bell } from './bell.js';
import { ChunkSize } from './chunk-size.js';
import type { ChunkReport, Dispatcher, OpenDispatcher } from './dispatcher.js';
import { Outbox } from './outbox.js';
import { ProgressReport } from './progress-report.js';
import { WorkLeft, type Portion } from './work-left.js';

/** What it takes to work on a run. */
export interface Drive {
  readonly store: Writing;
  readonly run: number;
  readonly plan: Plan;
  readonly open: OpenDispatcher;
  /** Called about four times a second at most, and at the end. */
  onProgress(progress: Progress): void;
  /** Aborted: stop, with everything that was computed stored. */
  readonly signal: AbortSignal;
}

export interface Coordinated {
  readonly state: RunState;
  readonly counts: Counts;
  /** Null if the work is not finished. */
  readonly digest: string | null;
}

/** Works on a run until every point is committed or the signal says stop: the one loop that dispatches and writes.
 *  What is left is read from the store, so it does not matter how an earlier attempt ended.
 *  @throws Broken | NotHeld what ended the work early; everything committed until then is kept */
export async function coordinate(drive: Drive): Promise<Coordinated> {
  const record = drive.store.run(drive.run);
  if (!record) throw new Broken('no-such-run', `run ${drive.run} is not in the store`);
  drive.store.setState(drive.run, 'running', record.seconds);
  const work = new Coordination(drive, record);
  try {
    await work.run();
    return work.conclude();
  } catch (error) {
    work.leave();
    throw error;
  }
}

interface InFlight {
  readonly portion: Portion;
  readonly inputs: Float64Array;
}

const TICK_MILLISECONDS = 250;
const BEAT_MILLISECONDS = 3000;
/** How long a stop waits for chunks in work. */
const STOP_MILLISECONDS = 4000;

class Coordination {
  readonly #task: Task;
  readonly #samplers: readonly Sampler[];
  readonly #left: WorkLeft;
  readonly #size = new ChunkSize();
  readonly #outbox = new Outbox();
  readonly #inFlight = new Map<string, InFlight>();
  readonly #reports: ChunkReport[] = [];
  readonly #bell = new Bell();
  readonly #progress: ProgressReport;
  readonly #began = performance.now();
  #lastBeat = this.#began;
  #stopBy = Infinity;
  #broken: Error | undefined;

  constructor(
    private readonly drive: Drive,
    private readonly record: RunRecord,
  ) {
    const { store, run, plan } = drive;
    this.#task = taskOf(plan);
    this.#samplers = plan.strata.map((_, stratum) => samplerOf(plan, stratum));
    const committed = store.committed(run);
    const open = plan.strata.flatMap(({ points }, stratum) =>
      subtractSpans({ stratum, first: 0, count: points }, committed),
    );
    this.#left = new WorkLeft(open, store.attempted(run));
    this.#progress = new ProgressReport(record, (progress) => drive.onProgress(progress));
  }

  async run(): Promise<void> {
    this.#recordGivenUp();
    if (this.#left.points === 0) return;
    const dispatcher = await this.drive.open(this.#task, scopeOf(this.record));
    const onAbort = () => this.#bell.ring();
    this.drive.signal.addEventListener('abort', onAbort);
    try {
      this.#listen(dispatcher);
      while (!this.#isOver()) await this.#round(dispatcher);
    } finally {
      this.drive.signal.removeEventListener('abort', onAbort);
      await dispatcher.close();
    }
  }

  /** Seals a finished run; pauses one that was stopped. */
  conclude(): Coordinated {
    const { store, run } = this.drive;
    this.#commit(this.#outbox.takeAll());
    const finished = this.#left.points === 0 && this.#inFlight.size === 0;
    if (!finished) this.leave();
    const state = !finished ? 'paused' : this.#progress.counts.unfinished > 0 ? 'incomplete' : 'complete';
    const digest = state === 'paused' ? null : store.seal(run, state, this.#seconds());
    this.#progress.say(state);
    return { state, counts: this.#progress.counts, digest };
  }

  /** Leaves the run so that it can be resumed: keeps what was computed, takes back attempts that had no end. */
  leave(): void {
    const { store, run } = this.drive;
    try {
      this.#commit(this.#outbox.takeAll());
      for (const { portion } of this.#inFlight.values()) store.withdrawAttempt(run, portion);
      store.setState(run, 'paused', this.#seconds());
    } catch (error) {
      // A store that cannot be written is what ended the work; that was said already.
      if (!(error instanceof Broken)) throw error;
    }
  }

  #listen(dispatcher: Dispatcher): void {
    dispatcher.onReport((report) => {
      this.#reports.push(report);
      this.#bell.ring();
    });
    dispatcher.onBroken((error) => {
      this.#broken = error;
      this.#bell.ring();
    });
  }

  #isOver(): boolean {
    if (this.#inFlight.size === 0) return this.#left.points === 0 || this.drive.signal.aborted;
    return performance.now() > this.#stopBy;
  }

  async #round(dispatcher: Dispatcher): Promise<void> {
    this.#dispatch(dispatcher);
    await this.#bell.wait(TICK_MILLISECONDS);
    for (const report of this.#reports.splice(0)) this.#take(report);
    this.#recordGivenUp();
    if (this.#broken) throw this.#broken;
    const now = performance.now();
    this.#commit(this.#outbox.takeRipe(now));
    this.#beat(now);
    this.#progress.workers = dispatcher.workers();
    this.#progress.tick(now);
  }

  #dispatch(dispatcher: Dispatcher): void {
    if (this.drive.signal.aborted) {
      this.#stopBy = Math.min(this.#stopBy, performance.now() + STOP_MILLISECONDS);
      return;
    }
    const capacity = dispatcher.capacity();
    while (this.#inFlight.size < capacity && this.#mayGo()) {
      const portion = this.#left.take(this.#size.next(this.#left.points, capacity));
      if (!portion) return;
      this.#submit(dispatcher, portion);
    }
  }

  /** A portion that must be alone waits for the others, and they for it. */
  #mayGo(): boolean {
    if (this.#inFlight.size === 0) return true;
    const someoneIsAlone = [...this.#inFlight.values()].some(({ portion }) => portion.alone);
    return !someoneIsAlone && !this.#left.nextIsAlone;
  }

  #submit(dispatcher: Dispatcher, portion: Portion): void {
    const { stratum, first, count } = portion;
    const points = this.#samplers[stratum].fill(first, count);
    const id = `${stratum}.${first}.${count}`;
    if (portion.alone) this.#commit(this.#outbox.takeAll());
    this.drive.store.recordAttempt(this.drive.run, { stratum, first, count });
    // The dispatcher may give the buffer away.
    this.#inFlight.set(id, { portion, inputs: points.values.slice() });
    dispatcher.submit({ id, points });
  }

  #take(report: ChunkReport): void {
    const flight = this.#inFlight.get(report.id);
    // Not in flight any more: somebody else was faster.
    if (!flight) return;
    this.#inFlight.delete(report.id);
    const { portion } = flight;
    if (report.kind === 'done') {
      this.#done(flight, report);
      // Nothing else has an attempt without an end while a portion is alone: not even a result on its way.
      if (portion.alone) this.#commit(this.#outbox.takeAll());
      return;
    }
    if (report.kind === 'lost') {
      this.#progress.retried += 1;
      return this.#left.lost(portion, report.reason, report.detail);
    }
    this.drive.store.withdrawAttempt(this.drive.run, portion);
    this.#left.returned(portion);
  }

  #done({ portion, inputs }: InFlight, report: ChunkReport & { kind: 'done' }): void {
    const { stratum, first, count } = portion;
    const { result, worker, milliseconds } = report;
    this.#size.learn(count, milliseconds);
    this.#outbox.put({ stratum, first, count, inputs, result, worker, milliseconds }, performance.now());
  }

  #recordGivenUp(): void {
    const { store, run } = this.drive;
    const points = this.#left.takeGivenUp();
    for (const { stratum, index, reason } of points) {
      const inputs = this.#samplers[stratum].fill(index, 1).values;
      store.recordUnfinished(run, stratum, index, inputs, reason);
    }
    const record = points.length > 0 ? store.run(run) : undefined;
    if (record) this.#progress.committed(record.counts);
  }

  #commit(results: readonly ChunkResult[]): void {
    if (results.length > 0) this.#progress.committed(this.drive.store.commit(this.drive.run, results));
  }

  #beat(now: number): void {
    if (now - this.#lastBeat < BEAT_MILLISECONDS) return;
    this.drive.store.beat();
    this.#lastBeat = now;
  }

  #seconds(): number {
    return this.record.seconds + (performance.now() - this.#began) / 1000;
  }
}

/** The same after a restart, and different for runs of different stores on one queue server. */
function scopeOf({ id, started, fingerprints }: RunRecord): string {
  const text = `${id} ${started} ${fingerprints.plan}`;
  return `run-${id}-${createHash('sha256').update(text).digest('hex').slice(0, 16)}`;
}
