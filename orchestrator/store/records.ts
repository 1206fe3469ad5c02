import type { Options } from '../../workers/contract.js';

/** What a run remembers about how it came about; canonical JSON in the store. */
export interface Fingerprints {
  readonly plan: string;
  readonly task: string;
  readonly model: string;
  /** Module name -> fingerprint of its code and all it imports. */
  readonly modules: Readonly<Record<string, string>>;
  /** Constraint name -> fingerprint of its code, data and all it imports. */
  readonly constraints: Readonly<Record<string, string>>;
  /** Code that turns a plan into points. */
  readonly sampling: string;
}

export interface Environment {
  readonly trigpoint: string;
  readonly commit: string;
  readonly lockFile: string;
  readonly node: string;
  readonly v8: string;
  readonly os: string;
  readonly processor: string;
  readonly cores: number;
}

export const RELATIONS = ['launch', 'rerun', 'extend', 'rejudge'] as const;
export type Relation = (typeof RELATIONS)[number];
/** `incomplete`: finished, but with points that no worker could do. */
export const STATES = ['running', 'paused', 'cancelled', 'complete', 'incomplete'] as const;
export type RunState = (typeof STATES)[number];

export interface Counts {
  readonly points: number;
  readonly surviving: number;
  readonly excluded: number;
  readonly failed: number;
  readonly unfinished: number;
}

export interface RunRecord {
  readonly id: number;
  readonly parent: number | null;
  readonly relation: Relation;
  readonly state: RunState;
  readonly title: string;
  /** Canonical JSON of the plan, and the text the user wrote (empty where there was none). */
  readonly plan: string;
  readonly scanFile: { readonly name: string; readonly text: string };
  readonly fingerprints: Fingerprints;
  readonly environment: Environment;
  /** Points the plan asks for; `counts.points` says how many are committed. */
  readonly wanted: number;
  readonly counts: Counts;
  /** ISO 8601 UTC; for people, never part of a result. */
  readonly started: string;
  readonly finished: string | null;
  readonly seconds: number;
  /** "sha256:..." once complete or incomplete. */
  readonly digest: string | null;
}

export type ColumnKind = 'input' | 'definition' | 'quantity' | 'outcome' | 'margin' | 'likelihood' | 'point';

/** One column of a run. Names in expressions: inputs, definitions and quantities by their own name;
 *  outcome, margin and likelihood columns as outcome(NAME), margin(NAME), likelihood(NAME) of a constraint;
 *  point columns are `stratum`, `index`, `verdict`, `failure`. */
export interface ColumnRecord {
  readonly name: string;
  readonly kind: ColumnKind;
  readonly unit: string;
  readonly symbol: string;
  readonly meaning: string;
  readonly absent?: string;
  readonly labels?: readonly string[];
  readonly caution?: string;
  readonly logarithmic?: boolean;
  /** The constraint of an outcome, margin or likelihood column. */
  readonly constraint?: string;
}

/** A batch of consecutive points of a run in (stratum, index) order; every array has `count` entries. */
export interface Batch {
  readonly stratum: number;
  readonly first: number;
  readonly count: number;
  /** Column name -> values as float64 (classes, outcomes and verdicts as their index). */
  readonly columns: ReadonlyMap<string, Float64Array>;
}

export interface ConstraintRecord {
  readonly name: string;
  readonly options: Options;
  readonly deciding: boolean;
}
