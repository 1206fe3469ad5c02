import { OUTCOMES, VERDICTS } from '../../../workers/contract.js';
import type { CutFlow, Reading, View } from '../reading.js';
import { visit } from './visit.js';
import type { Marked } from './visit.js';

type Row = { -readonly [K in keyof CutFlow['rows'][number]]: CutFlow['rows'][number][K] };

/** How many of the points that pass each constraint excludes. Failed and unfinished points were never judged:
 *  they are counted apart, and no row counts them. */
export function cutFlowOf(reading: Reading, view: View): CutFlow {
  const rows = reading.constraints(view.run).map(({ name, deciding }): Row => {
    return { constraint: name, deciding, violated: 0, notApplicable: 0, alone: 0, remaining: 0 };
  });
  const apart = { points: 0, failed: 0, unfinished: 0 };
  for (const batch of visit(reading, view, ['verdict', ...rows.map((row) => outcomeOf(row))])) {
    countBatch(batch, rows, apart);
  }
  return { ...apart, rows: rows };
}

const outcomeOf = (row: Row) => `outcome(${row.constraint})`;
const [FAILED, UNFINISHED] = [VERDICTS.indexOf('failed'), VERDICTS.indexOf('unfinished')];
const [VIOLATED, NOT_APPLICABLE] = [OUTCOMES.indexOf('violated'), OUTCOMES.indexOf('not-applicable')];

function countBatch(
  batch: Marked,
  rows: readonly Row[],
  apart: { points: number; failed: number; unfinished: number },
): void {
  const verdict = batch.columns.get('verdict')!;
  const outcomes = rows.map((row) => batch.columns.get(outcomeOf(row))!);
  for (let i = 0; i < batch.count; i++) {
    if (batch.passes[i] === 0) continue;
    apart.points++;
    if (verdict[i] === FAILED) apart.failed++;
    else if (verdict[i] === UNFINISHED) apart.unfinished++;
    else countPoint(rows, outcomes, i);
  }
}

function countPoint(rows: readonly Row[], outcomes: readonly Float64Array[], i: number): void {
  let cuts = 0;
  rows.forEach((row, r) => {
    if (row.deciding && outcomes[r][i] === VIOLATED) cuts++;
  });
  let left = true;
  rows.forEach((row, r) => {
    const violated = outcomes[r][i] === VIOLATED;
    if (violated) row.violated++;
    if (outcomes[r][i] === NOT_APPLICABLE) row.notApplicable++;
    if (violated && cuts === (row.deciding ? 1 : 0)) row.alone++;
    if (violated && row.deciding) left = false;
    if (left) row.remaining++;
  });
}
