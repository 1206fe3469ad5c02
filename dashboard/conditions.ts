import type { ColumnRecord, RunRecord } from '../orchestrator/store/records.js';
import { isClass } from './columns.js';
import { inPart, partsOf } from './parts.js';

export interface Condition {
  readonly expression: string;
  readonly title: string;
}

export interface ConditionGroup {
  readonly title: string;
  readonly conditions: readonly Condition[];
}

/** Conditions that a newcomer can choose from a list: parts of the plan, then class after class. */
export function conditionsOf(
  run: Pick<RunRecord, 'plan'>,
  columns: readonly ColumnRecord[],
): readonly ConditionGroup[] {
  const classes = columns.filter((column) => isClass(column) && column.name !== 'failure');
  return [...groupsOfParts(run), ...classes.map(groupOf)];
}

function groupsOfParts(run: Pick<RunRecord, 'plan'>): readonly ConditionGroup[] {
  const parts = partsOf(run);
  if (parts.length < 2) return [];
  const conditions = parts.map((part) => ({
    expression: inPart(part),
    title: `of ${part.names.join(', ')}`,
  }));
  return [{ title: 'part of the plan', conditions }];
}

function groupOf(column: ColumnRecord): ConditionGroup {
  const conditions = (column.labels ?? []).map((label, index) => conditionOf(column, label, index));
  return { title: column.constraint ?? column.meaning, conditions };
}

function conditionOf(column: ColumnRecord, label: string, index: number): Condition {
  if (column.name === 'verdict') return { expression: label, title: label };
  if (column.kind !== 'outcome') return { expression: `${column.name} == ${index}`, title: label };
  const title = `${column.constraint ?? column.name}: ${label.replace('-', ' ')}`;
  const simple = label === 'met' || label === 'violated';
  return { expression: simple ? `${label}(${column.constraint})` : `${column.name} == ${index}`, title };
}
