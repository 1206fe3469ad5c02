import type { Batch, ColumnRecord, ConstraintRecord, RunRecord } from './records.js';

/** The read side of a store: synchronous, on its own read-only connection. */
export interface Reading {
  runs(): readonly RunRecord[];
  /** Whether a coordinator holds the store and is alive: a run may say `running` although its process was killed. */
  isWorkedOn(): boolean;
  /** Undefined if there is no such run. */
  run(id: number): RunRecord | undefined;
  columns(run: number): readonly ColumnRecord[];
  constraints(run: number): readonly ConstraintRecord[];
  /** Batches in (stratum, index) order with the asked columns, from a position on. Memory stays at one batch
   *  (and a bounded cache, with which arrays may be shared: they must not be written to).
   *  @throws UserMistake for a name that is no column of the run */
  batches(run: number, columns: readonly string[], from?: Position): Iterable<Batch>;
  chunks(run: number): ChunkStatistics;
  /** Why a point failed or stayed unfinished; null for every other point. */
  reason(run: number, stratum: number, index: number): string | null;
  /** Everything asked inside sees one state of the store. Keep it short: the log cannot shrink meanwhile. */
  snapshot<T>(ask: () => T): T;
  /** Reads every byte of a run and compares it with the hashes taken when it was written; the digest too, where the
   *  run has one. @throws Broken 'store-corrupt' naming the first difference */
  verifyIntegrity(run: number): { readonly segments: number; readonly bytes: number };
  close(): void;
}

/** A point of a run. */
export interface Position {
  readonly stratum: number;
  readonly index: number;
}

export interface ChunkStatistics {
  readonly done: number;
  readonly retried: number;
  readonly workers: readonly {
    readonly worker: string;
    readonly chunks: number;
    readonly points: number;
    readonly milliseconds: number;
  }[];
}

/** A view of a run: what the address of a page or an export says. */
export interface View {
  readonly run: number;
  /** Expression of the filter language; empty for all points. */
  readonly where: string;
}

export interface PageOfPoints {
  readonly total: number;
  readonly offset: number;
  readonly columns: readonly ColumnRecord[];
  /** One row a point: stratum, index, then the asked columns. */
  readonly rows: readonly {
    readonly stratum: number;
    readonly index: number;
    readonly values: readonly number[];
  }[];
}

/** Filtered points in (stratum, index) order, a structure of arrays. */
export interface SliceOfPoints {
  readonly count: number;
  /** Column name -> count values. */
  readonly columns: ReadonlyMap<string, Float64Array>;
  /** Where to go on; null after the last committed point. */
  readonly next: Position | null;
}

/** points: how many pass the filter; surviving, excluded, failed, unfinished among them; total: all committed. */
export interface FilteredCounts {
  readonly total: number;
  readonly points: number;
  readonly surviving: number;
  readonly excluded: number;
  readonly failed: number;
  readonly unfinished: number;
}

export interface AxisRequest {
  readonly column: string;
  readonly scale: 'linear' | 'log';
  /** Chosen range, or null for the range of the filtered data. */
  readonly range: readonly [number, number] | null;
}

/** Counts on an nx x ny grid, row-major from (low x, low y); per verdict or per label of a class column. */
export interface DensityGrid {
  readonly x: {
    readonly low: number;
    readonly high: number;
    readonly scale: 'linear' | 'log';
    readonly bins: number;
  };
  readonly y: {
    readonly low: number;
    readonly high: number;
    readonly scale: 'linear' | 'log';
    readonly bins: number;
  };
  /** All filtered points in a cell. */
  readonly counts: Float64Array;
  /** Mean of the colour column over the finite points of a cell; NaN where none; absent without a colour column. */
  readonly mean?: Float64Array;
  /** For a class-like colour column: counts per class, classes x cells. */
  readonly classes?: { readonly labels: readonly string[]; readonly counts: Float64Array };
  /** Points not drawn because x or y is absent or outside the range. */
  readonly undrawn: number;
}

/** At most `limit` points, chosen evenly by order, never at random. */
export interface ScatterPoints {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly colour: Float64Array | null;
  readonly stratum: Float64Array;
  readonly index: Float64Array;
  readonly total: number;
}

/** How many points each constraint excludes: in total, alone, and in the order of the plan. */
export interface CutFlow {
  readonly points: number;
  readonly failed: number;
  readonly unfinished: number;
  readonly rows: readonly {
    readonly constraint: string;
    readonly deciding: boolean;
    readonly violated: number;
    readonly notApplicable: number;
    /** Violated while every other deciding constraint is not. */
    readonly alone: number;
    /** Left after this and all earlier deciding constraints. */
    readonly remaining: number;
  }[];
}

/** The heavy questions a page asks; answered off the event loop by the reader thread. */
export interface Questions {
  counts(view: View): FilteredCounts;
  page(view: View, columns: readonly string[], offset: number, limit: number): PageOfPoints;
  density(
    view: View,
    x: AxisRequest,
    y: AxisRequest,
    colour: string | null,
    bins: readonly [number, number],
  ): DensityGrid;
  scatter(view: View, x: string, y: string, colour: string | null, limit: number): ScatterPoints;
  cutFlow(view: View): CutFlow;
  /** The next points that pass the filter, at or after a position: for exports that go through all. */
  slice(view: View, columns: readonly string[], from: Position, limit: number): SliceOfPoints;
  /** Every stored column of one point. */
  point(run: number, stratum: number, index: number): ReadonlyMap<string, number> | undefined;
}

/** The same questions asked of a thread: what the dashboard gets. */
export type AsyncQuestions = {
  [K in keyof Questions]: (...args: Parameters<Questions[K]>) => Promise<ReturnType<Questions[K]>>;
} & {
  runs(): Promise<readonly RunRecord[]>;
  run(id: number): Promise<RunRecord | undefined>;
  columns(run: number): Promise<readonly ColumnRecord[]>;
  constraints(run: number): Promise<readonly ConstraintRecord[]>;
  reason(run: number, stratum: number, index: number): Promise<string | null>;
  chunks(run: number): Promise<ChunkStatistics>;
  close(): Promise<void>;
};
