import type { ConstraintUse, Options, RunningSettings } from '../../workers/contract.js';

/** How one input is chosen. `range` is inclusive for a grid and half-open for the other samplers. */
export type Axis =
  | {
      readonly input: string;
      readonly kind: 'range';
      readonly from: number;
      readonly to: number;
      readonly scale: 'linear' | 'log';
      /** Grid only: number of values, both ends included. */
      readonly steps?: number;
    }
  | { readonly input: string; readonly kind: 'gaussian'; readonly mean: number; readonly sigma: number }
  | { readonly input: string; readonly kind: 'list'; readonly values: readonly number[] };

export const METHODS = ['grid', 'uniform', 'latin-hypercube', 'sobol'] as const;
export type Method = (typeof METHODS)[number];

/** Part of a plan with one sampler, box, count and generation. */
export interface Stratum {
  readonly name: string;
  readonly method: Method;
  readonly generation: number;
  readonly points: number;
  /** Name of the stratum that this one, appended by an extension, enlarges or refines. */
  readonly grownFrom?: string;
  /** Sorted by input name: the dimensions of a low-discrepancy sequence. */
  readonly vary: readonly Axis[];
}

/** The scan file with every default filled in: plain data, canonical, fingerprinted. It determines every point. */
export interface Plan {
  readonly format: 1;
  readonly title: string;
  readonly model: { readonly name: string; readonly options: Options };
  readonly seed: string;
  readonly strata: readonly Stratum[];
  /** Every input of the model that is varied in no stratum and set by no definition; also the value of a
   *  varied input in strata that do not vary it. Units are the model's own. */
  readonly fix: Readonly<Record<string, number>>;
  /** Sorted so that each needs only earlier ones. */
  readonly define: readonly { readonly name: string; readonly expression: string }[];
  readonly running: RunningSettings;
  readonly require: readonly ConstraintUse[];
  readonly note: readonly ConstraintUse[];
  /** Names of the quantities and definitions that are stored, sorted; contains what require and note need. */
  readonly keep: readonly string[];
  /** Sentences for the user, e.g. an input that is varied but that nothing depends on. */
  readonly remarks: readonly string[];
}

/** What was expected and what was found instead. */
export interface Complaint {
  readonly expected: string;
  readonly found: string;
  /** The nearest valid name or another hint, if there is one. */
  readonly hint?: string;
}

/** One mistake of the user's: expected, found, where. */
export interface Mistake extends Complaint {
  /** 1-based; 0 where the file as a whole is meant. */
  readonly line: number;
  readonly column: number;
  /** e.g. "vary.Mt.range[1]"; empty for the whole file. */
  readonly path: string;
}
