import type { Block, Constraint, Judgement, Options, ResultBlock } from './contract.js';

const VIOLATED = 1;
const NOT_APPLICABLE = 2;
const SURVIVING = 0;
const EXCLUDED = 1;
const FAILED = 2;

export interface ConstraintInUse {
  readonly constraint: Constraint;
  readonly options: Options;
}

/** The part of a result that constraints write: rows of `count` points for each constraint. */
export type Judged = Pick<ResultBlock, 'count' | 'outcomes' | 'margins' | 'logLikelihoods' | 'verdicts'>;

/** Judges the points of a block from its columns into the rows from `first` of `into`; the scan and a later judging
 *  of stored quantities share it. Failed points are not judged: not-applicable, margins NaN.
 *  @param deciding how many of `uses`, counted from the first, decide survival */
export function judgeBlock(
  block: Block,
  uses: readonly ConstraintInUse[],
  deciding: number,
  first: number,
  into: Judged,
): void {
  const outcomes = uses.map((use, k) => judge(block, use, k * into.count + first, into));
  const decisive = outcomes.slice(0, deciding);
  for (let i = 0; i < block.count; i++) {
    const excluded = decisive.some((outcome) => outcome[i] === VIOLATED);
    into.verdicts[first + i] = block.failure[i] !== 0 ? FAILED : excluded ? EXCLUDED : SURVIVING;
  }
}

/** One constraint straight into the result's rows; returns its outcomes. */
function judge(
  block: Block,
  { constraint, options }: ConstraintInUse,
  start: number,
  into: Judged,
): Uint8Array {
  const end = start + block.count;
  const judgement: Judgement = {
    outcome: into.outcomes.subarray(start, end),
    margin: into.margins.subarray(start, end),
    logLikelihood: into.logLikelihoods.subarray(start, end),
  };
  constraint.judge(block.columns, options, judgement);
  for (let i = 0; i < block.count; i++) {
    if (block.failure[i] === 0) continue;
    judgement.outcome[i] = NOT_APPLICABLE;
    judgement.margin[i] = NaN;
    judgement.logLikelihood[i] = NaN;
  }
  return judgement.outcome;
}
