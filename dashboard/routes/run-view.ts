import type { Request } from 'express';
import type { FilteredCounts } from '../../orchestrator/store/reading.js';
import type { ColumnRecord, RunRecord } from '../../orchestrator/store/records.js';
import type { DashboardDeps } from '../deps.js';
import { figureOf, type Figure } from '../figure.js';
import { conditionsOf, type ConditionGroup } from '../conditions.js';
import { usualView } from '../usual-view.js';
import { readView, wholeFilter, type FieldMistake, type RunView } from '../view.js';
import { queryOf, runOf } from './request.js';

/** What an address says about a run, checked against that run. */
export interface Asked {
  readonly run: RunRecord;
  readonly columns: readonly ColumnRecord[];
  readonly view: RunView;
  readonly conditions: readonly ConditionGroup[];
  /** The whole filter; empty where any part of it is mistaken, since half a filter is another filter. */
  readonly where: string;
  readonly mistakes: readonly FieldMistake[];
}

export async function askedOf(request: Request, { questions, commands }: DashboardDeps): Promise<Asked> {
  const run = await runOf(request, questions);
  const columns = await questions.columns(run.id);
  const conditions = conditionsOf(run, columns);
  const { view, mistakes } = readView(queryOf(request), columns, usualView(run, columns), conditions);
  const parts = mistakes.some(({ field }) => field === 'only' || field === 'ranges');
  const wrong = parts ? undefined : await filterMistake(run.id, view, commands);
  const where = parts || wrong ? '' : wholeFilter(view);
  return { run, columns, view, conditions, where, mistakes: wrong ? [...mistakes, wrong] : mistakes };
}

/** The text first, so that the place of a mistake is a place in the text; then all conditions together. */
async function filterMistake(
  run: number,
  view: RunView,
  commands: DashboardDeps['commands'],
): Promise<FieldMistake | undefined> {
  const text = view.where === '' ? null : await commands.checkFilter(run, view.where);
  if (text) return { field: 'where', ...text };
  const whole = wholeFilter(view);
  const together = whole === '' || whole === view.where ? null : await commands.checkFilter(run, whole);
  if (!together) return undefined;
  const { expected, found } = together;
  return { field: 'where', expected: `${expected} in all conditions together`, found };
}

export async function figureFor(
  { run, columns, view, where }: Asked,
  counts: FilteredCounts,
  { questions }: DashboardDeps,
): Promise<Figure | undefined> {
  return figureOf(questions, { run, where, view, columns, counts });
}
