import type { PointsBlock, ResultBlock, Task } from '../../workers/contract.js';

/** Points dispatched together. The id is unique within a run and says which points: "stratum.first.count". */
export interface ChunkJob {
  readonly id: string;
  readonly points: PointsBlock;
}

/** What became of a chunk. A dispatcher never retries by itself: the coordinator decides. */
export type ChunkReport =
  | {
      readonly kind: 'done';
      readonly id: string;
      readonly result: ResultBlock;
      readonly worker: string;
      /** Wall time the worker spent, for display only. */
      readonly milliseconds: number;
    }
  | {
      readonly kind: 'lost';
      readonly id: string;
      readonly worker: string;
      readonly reason: LossReason;
      /** For people: exit status, message of the error, limit that was passed. */
      readonly detail: string;
    }
  /** The chunk was never worked on (queue emptied, worker of another version): dispatch again, no attempt used. */
  | { readonly kind: 'returned'; readonly id: string; readonly reason: string };

/** `worker-died` alone may be another chunk's fault: a fleet worker dies with all it was working on.
 *  The other reasons are about this chunk. */
export const LOSS_REASONS = ['worker-died', 'out-of-memory', 'time-out', 'worker-error'] as const;
export type LossReason = (typeof LOSS_REASONS)[number];

export interface WorkerInfo {
  readonly name: string;
  readonly kind: 'thread' | 'fleet';
  readonly chunks: number;
  readonly points: number;
}

/** Spreads chunks over workers. Implementations pass test/contracts/dispatcher.test.ts. */
export interface Dispatcher {
  /** How many chunks are worth having in flight. May change as workers come and go. */
  capacity(): number;
  /** Hands one chunk to the workers; returns at once. The values buffer may be transferred: it is given away. */
  submit(job: ChunkJob): void;
  /** Every submission is reported once. An answer to a chunk that is not in flight (a second worker finished it
   *  too) is dropped. */
  onReport(listener: (report: ChunkReport) => void): void;
  /** Trouble that ends the run, e.g. Redis lost for good. */
  onBroken(listener: (error: Error) => void): void;
  workers(): readonly WorkerInfo[];
  /** Gives up what is in flight and releases every resource; safe to call twice. */
  close(): Promise<void>;
}

/** Opens a dispatcher for one task. `scope` separates runs that share a queue server. */
export type OpenDispatcher = (task: Task, scope: string) => Promise<Dispatcher>;
