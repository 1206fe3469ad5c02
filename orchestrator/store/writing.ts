import type { ResultBlock } from '../../workers/contract.js';
import type { Plan } from '../scan/plan.js';
import type { ColumnRecord, Counts, Environment, Fingerprints, Relation, RunState } from './records.js';
import type { Reading } from './reading.js';

export interface NewRun {
  readonly parent: number | null;
  readonly relation: Relation;
  readonly plan: Plan;
  readonly scanFile: { readonly name: string; readonly text: string };
  readonly fingerprints: Fingerprints;
  readonly environment: Environment;
  readonly columns: readonly ColumnRecord[];
  readonly wanted: number;
}

/** Where a chunk stands: consecutive points of one stratum. */
export interface Span {
  readonly stratum: number;
  readonly first: number;
  readonly count: number;
}

export interface ChunkResult extends Span {
  /** Per-point inputs as dispatched: column-major, varied inputs x count. */
  readonly inputs: Float64Array;
  readonly result: ResultBlock;
  readonly worker: string;
  readonly milliseconds: number;
}

/** Outcomes of points whose evaluation is already stored: what rejudging writes. Column-major, as ResultBlock. */
export interface JudgedSpan extends Span {
  readonly outcomes: Uint8Array;
  readonly margins: Float64Array;
  readonly logLikelihoods: Float64Array;
  readonly verdicts: Uint8Array;
}

/** The write side. One coordinator at a time: every call checks that the lease is still ours. */
export interface Writing extends Reading {
  createRun(run: NewRun): number;
  /** Spans already committed, merged, in order. What is left is what must be computed. */
  committed(run: number): readonly Span[];
  /** Records an attempt before the chunk is dispatched, so that a restart cannot loop. Returns attempts so far. */
  recordAttempt(run: number, span: Span): number;
  /** Takes back the last attempt: the chunk was never worked on. */
  withdrawAttempt(run: number, span: Span): void;
  attempts(run: number, span: Span): number;
  /** Spans with attempts on record that are not wholly committed, in order: what a coordinator was working on when
   *  it died. */
  attempted(run: number): readonly (Span & { readonly attempts: number })[];
  /** One transaction. Spans already committed are left as they are (a result delivered twice is stored once). */
  commit(run: number, results: readonly ChunkResult[]): Counts;
  /** A point that no worker could do. */
  recordUnfinished(run: number, stratum: number, index: number, inputs: Float64Array, reason: string): void;
  /** Gives a child run what is committed of these points of its parent: with `judged` evaluation and judgement,
   *  but not of unfinished points, which the child then tries again; without, the evaluation only, to be judged by
   *  `judge` (unfinished points stay unfinished: give them verdict 3 again). */
  share(from: number, to: number, span: Span, judged: boolean): void;
  /** Judgement of shared points; they count as committed from now on. One transaction; safe to repeat. */
  judge(run: number, spans: readonly JudgedSpan[]): Counts;
  /** Replaces small segments by full ones where a whole aligned range is committed. */
  compact(run: number): void;
  setState(run: number, state: RunState, seconds: number): void;
  /** Computes, stores and returns the digest of everything committed. */
  seal(run: number, state: 'complete' | 'incomplete', seconds: number): string;
  /** Marks the lease alive; call every few seconds. */
  beat(): void;
}
