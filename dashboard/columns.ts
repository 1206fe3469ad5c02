import type { ColumnRecord } from '../orchestrator/store/records.js';

/** Columns that have one of a few named values. */
export function isClass(column: ColumnRecord): boolean {
  return column.labels !== undefined && column.labels.length > 0;
}

/** Colours of the classes of a column, as indices into CLASS_COLOURS: the same verdict or outcome looks the same
 *  everywhere. */
export function classColours(column: ColumnRecord): readonly number[] {
  if (column.name === 'verdict') return [0, 5, 4, 3];
  if (column.kind === 'outcome') return [0, 5, 3];
  return (column.labels ?? []).map((_, index) => index);
}

/** "Mt — pole mass of the top quark, in GeV": a column in a list. */
export function columnTitle(column: ColumnRecord): string {
  const unit = column.unit === '1' || column.unit === '' ? '' : `, in ${column.unit}`;
  return `${column.name} — ${column.meaning}${unit}`;
}

export interface ColumnGroup {
  readonly title: string;
  readonly columns: readonly ColumnRecord[];
}

/** Columns as a reader looks for them, without empty groups. */
export function grouped(columns: readonly ColumnRecord[]): readonly ColumnGroup[] {
  return GROUPS.map(([title, kinds]) => ({
    title,
    columns: columns.filter((column) => kinds.includes(column.kind)),
  })).filter((group) => group.columns.length > 0);
}

const GROUPS: readonly (readonly [string, readonly ColumnRecord['kind'][]])[] = [
  ['Inputs', ['input']],
  ['Definitions', ['definition']],
  ['Quantities', ['quantity']],
  ['Outcomes', ['outcome']],
  ['Margins', ['margin']],
  ['Log-likelihoods', ['likelihood']],
  ['The point itself', ['point']],
];
