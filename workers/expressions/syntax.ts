/** The syntax tree: nothing that is not listed here can be computed. */

export const FUNCTIONS = ['sqrt', 'exp', 'log', 'log10', 'abs', 'min', 'max'] as const;
export type FunctionName = (typeof FUNCTIONS)[number];

export const COMPARISONS = ['<', '<=', '>', '>=', '==', '!='] as const;
export type Comparison = (typeof COMPARISONS)[number];

export type BinaryOperator = '+' | '-' | '*' | '/' | '^' | 'and' | 'or';

export type Expression =
  | { readonly kind: 'number'; readonly value: number }
  /** A column by its key, e.g. `Mt` or `margin(perturbativity)`; `position` is where the text names it. */
  | { readonly kind: 'column'; readonly key: string; readonly position: number }
  | { readonly kind: 'unary'; readonly operator: '-' | 'not'; readonly operand: Expression }
  | {
      readonly kind: 'binary';
      readonly operator: BinaryOperator;
      readonly left: Expression;
      readonly right: Expression;
    }
  /** a < b <= c ...: one operator fewer than operands. */
  | {
      readonly kind: 'chain';
      readonly operators: readonly Comparison[];
      readonly operands: readonly Expression[];
    }
  | { readonly kind: 'call'; readonly name: FunctionName; readonly arguments: readonly Expression[] };

/** Followed by (NAME of a constraint): columns of its outcome, margin, log-likelihood. */
export const CONSTRAINT_COLUMNS = ['outcome', 'margin', 'likelihood'] as const;
/** Followed by (NAME of a constraint): index of the outcome that is asked for. */
export const OUTCOME_TESTS: ReadonlyMap<string, number> = new Map([
  ['met', 0],
  ['violated', 1],
]);
/** Alone: index of the verdict that is asked for. */
export const VERDICT_TESTS: ReadonlyMap<string, number> = new Map([
  ['surviving', 0],
  ['excluded', 1],
  ['failed', 2],
  ['unfinished', 3],
]);

/** Words with a meaning of their own; no input, quantity or definition may bear one of these names. */
export const RESERVED: ReadonlySet<string> = new Set([
  ...FUNCTIONS,
  ...CONSTRAINT_COLUMNS,
  ...OUTCOME_TESTS.keys(),
  ...VERDICT_TESTS.keys(),
  'and',
  'or',
  'not',
  'pi',
]);
