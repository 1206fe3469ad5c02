/** What the physics side promises: what a module is, what a block of points is, what comes back. */

/** Where a number or a formula comes from. */
export interface Source {
  /** Authors, title or short name, year. */
  readonly text: string;
  /** arXiv number, DOI or other stable reference; empty for "common practice, no source" or "from memory". */
  readonly ref: string;
}

/** A named column of numbers with a unit. Names are camelCase; '1' is the unit of a pure number. */
export interface QuantitySpec {
  readonly name: string;
  readonly unit: string;
  /** Small TeX subset for proper type on pages: letters, \greek, _{}, ^{}, \log_{10}, \mathrm{}. */
  readonly symbol: string;
  readonly meaning: string;
  /** What NaN stands for. A quantity without this sentence must be finite, or the point is `failed`. */
  readonly absent?: string;
  /** For a class: the value i means labels[i]. */
  readonly labels?: readonly string[];
  /** A caution shown wherever the number is shown. */
  readonly caution?: string;
  /** True where a logarithmic axis is the natural one. */
  readonly logarithmic?: boolean;
}

export interface InputSpec extends QuantitySpec {
  readonly default: number;
  /** One standard deviation of the measurement or of the theory estimate; null where none applies. */
  readonly uncertainty: number | null;
  /** Values a scan may use at all: [lowest, highest], both included. */
  readonly domain: readonly [number, number];
  /** True for theory errors and the like that default to no effect. */
  readonly nuisance: boolean;
  readonly source: Source;
}

/** Why a point failed; a result, always with the same cause for the same point. Index 0 means it did not. */
export const FAILURES = [
  'none',
  'domain: an input or coupling lies where the formulas are not defined',
  'evaluation-ceiling: the integrator used all its steps',
  'no-convergence: an iteration did not reach its tolerance',
  'not-finite: a quantity that must be a number is not',
] as const;
export type FailureCode = 0 | 1 | 2 | 3 | 4;

/** Points evaluated together, a structure of arrays: every column has `count` entries. */
export interface Block {
  readonly count: number;
  /** Inputs, definitions and, module by module, quantities. */
  readonly columns: Map<string, Float64Array>;
  /** Per point, an index into FAILURES; a module skips points that already failed. */
  readonly failure: Uint8Array;
}

/** A step of the evaluation. The bits of a point never depend on its neighbours in the block. */
export interface Module {
  readonly name: string;
  /** import.meta.url of the file it is written in: with all it imports, what its fingerprint covers. */
  readonly code: string;
  /** Inputs or earlier quantities it reads. */
  readonly needs: readonly string[];
  readonly gives: readonly QuantitySpec[];
  /** Reads and adds columns of the block; sets `failure` where a point cannot be done; never throws for a point. */
  evaluate(block: Block): void;
}

export const OUTCOMES = ['met', 'violated', 'not-applicable'] as const;
export type Outcome = (typeof OUTCOMES)[number];
export const VERDICTS = ['surviving', 'excluded', 'failed', 'unfinished'] as const;
export type Verdict = (typeof VERDICTS)[number];

export type OptionSpec =
  | {
      readonly kind: 'choice';
      readonly values: readonly string[];
      readonly default: string;
      readonly meaning: string;
    }
  | {
      readonly kind: 'number';
      readonly range: readonly [number, number];
      readonly unit: string;
      readonly default: number;
      readonly meaning: string;
    };
export type Options = Readonly<Record<string, string | number>>;

/** Structure of arrays, one entry a point; NaN in logLikelihood where the constraint has none. */
export interface Judgement {
  /** Indices into OUTCOMES. */
  readonly outcome: Uint8Array;
  readonly margin: Float64Array;
  readonly logLikelihood: Float64Array;
}

/** Judges points from stored columns only, never from a trajectory, so that it can judge again. */
export interface Constraint {
  readonly name: string;
  /** import.meta.url of the file it is written in. */
  readonly code: string;
  readonly title: string;
  /** Names of the inputs or quantities it reads. */
  readonly needs: readonly string[];
  readonly options: Readonly<Record<string, OptionSpec>>;
  /** What the margin measures, e.g. "standard deviations". */
  readonly marginScale: string;
  /** Formula in the TeX subset of QuantitySpec.symbol. */
  readonly formula: string;
  readonly sources: readonly Source[];
  /** Where it may be used. */
  readonly validity: string;
  /** The honest sentence about what it neglects. */
  readonly neglects: string;
  judge(columns: ReadonlyMap<string, Float64Array>, options: Options, into: Judgement): void;
  /** The outcome of one point in words, from the same columns. */
  explain(values: ReadonlyMap<string, number>, options: Options): string;
}

export interface RunningSettings {
  readonly loops: 1 | 2 | 3;
  /** Wanted global relative error of the couplings, dimensionless. */
  readonly tolerance: number;
}

/** A model as the rest of the program sees it. */
export interface Model {
  readonly name: string;
  /** import.meta.url of the file it is written in. */
  readonly code: string;
  readonly title: string;
  readonly content: string;
  readonly sources: readonly Source[];
  readonly inputs: readonly InputSpec[];
  /** Options of the model with their defaults (none for the Standard Model). */
  readonly options: Readonly<Record<string, OptionSpec>>;
  /** Names, symbols and units of the running couplings in the order of a state vector, g1 included after gY. */
  readonly couplings: readonly QuantitySpec[];
  /** Modules in the order they are evaluated. */
  modules(settings: RunningSettings, options: Options): readonly Module[];
  /** Scale in GeV at which the running of a point starts. */
  startScale(inputs: ReadonlyMap<string, number>): number;
  /** Running couplings of one point at given scales in GeV; an array a scale, NaN beyond where the running stopped. */
  trace(
    settings: RunningSettings,
    options: Options,
    inputs: ReadonlyMap<string, number>,
    scales: readonly number[],
  ): readonly Float64Array[];
  /** d/dlnmu of every coupling of `couplings` at given values (names not given are 0), loop factors included. */
  betas(
    values: Readonly<Record<string, number>>,
  ): Readonly<Record<string, { one_loop: number; two_loop: number; total: number }>>;
}

export interface ConstraintUse {
  readonly name: string;
  readonly options: Options;
}

/** All a worker must know to evaluate points of a plan. Plain data, fit for canonical JSON. */
export interface Task {
  readonly model: { readonly name: string; readonly options: Options };
  readonly running: RunningSettings;
  /** Names of the inputs that arrive per point, in column order. */
  readonly varied: readonly string[];
  /** Values of every other input of the model, except those that a definition sets. */
  readonly fixed: Readonly<Record<string, number>>;
  /** In an order in which each needs only earlier ones; a name of an input sets that input. */
  readonly define: readonly { readonly name: string; readonly expression: string }[];
  readonly constraints: readonly ConstraintUse[];
  /** How many of `constraints`, counted from the first, decide survival. */
  readonly deciding: number;
  /** Names of the quantities and definitions that come back, in column order. */
  readonly keep: readonly string[];
}

/** Points in: column-major, task.varied.length x count. */
export interface PointsBlock {
  readonly count: number;
  readonly values: Float64Array;
}

/** Results out: column-major. Rows of a failed point are NaN except what was known before it failed;
 *  its outcomes are 2 (not-applicable), its margins NaN. */
export interface ResultBlock {
  readonly count: number;
  /** task.keep.length x count */
  readonly quantities: Float64Array;
  /** task.constraints.length x count, indices into OUTCOMES */
  readonly outcomes: Uint8Array;
  /** task.constraints.length x count */
  readonly margins: Float64Array;
  /** task.constraints.length x count */
  readonly logLikelihoods: Float64Array;
  /** count, indices into FAILURES */
  readonly failures: Uint8Array;
  /** count, indices into VERDICTS (never 3 here) */
  readonly verdicts: Uint8Array;
}

/** Evaluates points of one task; built once, used for every block. */
export interface Evaluator {
  evaluate(points: PointsBlock): ResultBlock;
}
