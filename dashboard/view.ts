import type { ColumnRecord } from '../orchestrator/store/records.js';
import type { ConditionGroup } from './conditions.js';

/** Everything a run page shows, as its address says it: the filter, the figure, the table. */
export interface RunView {
  /** Text in the language of expressions. */
  readonly where: string;
  /** Ready-made conditions, each an expression that the list of conditions offers. */
  readonly only: readonly string[];
  readonly ranges: readonly Range[];
  readonly x: string;
  readonly y: string;
  readonly xScale: ScaleChoice;
  readonly yScale: ScaleChoice;
  /** Ends of the axes as they were typed; both empty for what the data ask for. */
  readonly xRange: readonly [string, string];
  readonly yRange: readonly [string, string];
  /** A column, or empty for the number of points. */
  readonly colour: string;
  readonly drawing: DrawingChoice;
  /** Columns of the table. */
  readonly columns: readonly string[];
  readonly page: number;
}

/** What is shown where the address says nothing. */
export type UsualView = Pick<RunView, 'x' | 'y' | 'colour' | 'columns'>;

export interface Range {
  readonly quantity: string;
  readonly from: string;
  readonly to: string;
}

export const SCALES = ['auto', 'linear', 'log'] as const;
export type ScaleChoice = (typeof SCALES)[number];
export const DRAWINGS = ['auto', 'points', 'cells'] as const;
export type DrawingChoice = (typeof DRAWINGS)[number];

/** A field whose content cannot be used, to be said beside it. */
export interface FieldMistake {
  readonly field: keyof RunView | 'address';
  readonly expected: string;
  readonly found: string;
  /** Where in the text, for the filter. */
  readonly position?: number;
  readonly hint?: string;
}

/** Reads the address of a run page. What cannot be used is reported: a choice is left at its default, a text is kept
 *  as it was typed, so that it can be mended. */
export function readView(
  query: URLSearchParams,
  columns: readonly ColumnRecord[],
  usual: UsualView,
  offered: readonly ConditionGroup[],
): { readonly view: RunView; readonly mistakes: readonly FieldMistake[] } {
  const mistakes: FieldMistake[] = [];
  const names = new Map(columns.map((column) => [column.name, column]));
  const report = (mistake: FieldMistake): void => void mistakes.push(mistake);
  const strange = [...query.keys()].find((name) => !PARTS.has(name));
  if (strange !== undefined) {
    report({ field: 'address', expected: `only the parts ${[...PARTS].join(', ')}`, found: quoted(strange) });
  }

  const column = (field: 'x' | 'y' | 'colour', fallback: string): string => {
    const asked = query.get(field);
    if (asked === null || names.has(asked) || (field === 'colour' && asked === '')) return asked ?? fallback;
    report({ field, expected: 'the name of a column of this run', found: quoted(asked) });
    return fallback;
  };
  const choice = <T extends string>(field: keyof RunView, allowed: readonly T[]): T => {
    const asked = query.get(field) ?? allowed[0];
    const found = allowed.find((one) => one === asked);
    if (found === undefined)
      report({ field, expected: `one of ${allowed.join(', ')}`, found: quoted(asked) });
    return found ?? allowed[0];
  };

  const view: RunView = {
    where: (query.get('where') ?? '').trim(),
    only: readOnly(query, offered, report),
    ranges: readRanges(query, names, report),
    x: column('x', usual.x),
    y: column('y', usual.y),
    xScale: choice('xScale', SCALES),
    yScale: choice('yScale', SCALES),
    xRange: readAxisRange(query, 'x', report),
    yRange: readAxisRange(query, 'y', report),
    colour: column('colour', usual.colour),
    drawing: choice('drawing', DRAWINGS),
    columns: readColumns(query, names, usual.columns, report),
    page: readPage(query, report),
  };
  return { view, mistakes };
}

/** All that an address of a view may hold; `size` is for figures alone. */
const PARTS = new Set(
  'where only quantity from to x y xScale yScale xFrom xTo yFrom yTo colour drawing column page size'.split(
    ' ',
  ),
);

/** The ends of an axis as numbers; null where they are not given or cannot be used. */
export function axisEnds([from, to]: readonly [string, string]): readonly [number, number] | null {
  const usable = isNumber(from) && isNumber(to) && Number(from) < Number(to);
  return usable ? [Number(from), Number(to)] : null;
}

/** The whole filter as one expression; empty for all points. Only for a view without mistakes in it. */
export function wholeFilter(view: RunView): string {
  const parts = [...view.only, ...view.ranges.map(rangeExpression), view.where].filter((part) => part !== '');
  return parts.length === 1 ? parts[0] : parts.map((part) => `(${part})`).join(' and ');
}

/** The address of a view below a run; what is at its default stays out of it. */
export function viewQuery(view: RunView, change: Partial<RunView> = {}): string {
  const next = { ...view, ...change };
  const query = new URLSearchParams();
  if (next.where) query.set('where', next.where);
  for (const only of next.only) query.append('only', only);
  for (const range of next.ranges) {
    query.append('quantity', range.quantity);
    query.append('from', range.from);
    query.append('to', range.to);
  }
  query.set('x', next.x);
  query.set('y', next.y);
  query.set('colour', next.colour);
  for (const name of ['xScale', 'yScale', 'drawing'] as const)
    if (next[name] !== 'auto') query.set(name, next[name]);
  for (const axis of ['x', 'y'] as const) {
    const [from, to] = next[`${axis}Range`];
    if (from !== '') query.set(`${axis}From`, from);
    if (to !== '') query.set(`${axis}To`, to);
  }
  for (const column of next.columns) query.append('column', column);
  if (next.page > 1) query.set('page', String(next.page));
  return `?${query.toString()}`;
}

function rangeExpression({ quantity, from, to }: Range): string {
  return `${from === '' ? '' : `${from} <= `}${quantity}${to === '' ? '' : ` <= ${to}`}`;
}

type Report = (mistake: FieldMistake) => void;

function readOnly(query: URLSearchParams, groups: readonly ConditionGroup[], report: Report): string[] {
  const offered = new Set(groups.flatMap((group) => group.conditions.map((one) => one.expression)));
  return query
    .getAll('only')
    .filter((only) => only !== '')
    .filter((only, index, all) => all.indexOf(only) === index)
    .filter((only) => {
      if (offered.has(only)) return true;
      report({ field: 'only', expected: 'one of the conditions in the list', found: quoted(only) });
      return false;
    });
}

function readRanges(
  query: URLSearchParams,
  names: ReadonlyMap<string, ColumnRecord>,
  report: Report,
): Range[] {
  const [from, to] = [query.getAll('from'), query.getAll('to')];
  const rows = query.getAll('quantity').map((quantity, index) => ({
    quantity,
    from: (from[index] ?? '').trim(),
    to: (to[index] ?? '').trim(),
  }));
  return rows
    .filter((row) => row.from !== '' || row.to !== '')
    .map((row) => {
      const odd = [row.from, row.to].find((limit) => limit !== '' && !isNumber(limit));
      if (!names.has(row.quantity)) {
        report({
          field: 'ranges',
          expected: 'a quantity to go with its limits',
          found: quoted(row.quantity),
        });
      } else if (odd !== undefined) {
        report({ field: 'ranges', expected: `a number as a limit of ${row.quantity}`, found: quoted(odd) });
      }
      return row;
    });
}

function readAxisRange(query: URLSearchParams, axis: 'x' | 'y', report: Report): readonly [string, string] {
  const [from, to] = [(query.get(`${axis}From`) ?? '').trim(), (query.get(`${axis}To`) ?? '').trim()];
  if (from === '' && to === '') return ['', ''];
  if (axisEnds([from, to])) return [from, to];
  report({
    field: `${axis}Range`,
    expected: 'two numbers, the lower one first, or nothing',
    found: `${quoted(from)} and ${quoted(to)}`,
  });
  return [from, to];
}

function readColumns(
  query: URLSearchParams,
  names: ReadonlyMap<string, ColumnRecord>,
  usual: readonly string[],
  report: Report,
): readonly string[] {
  const asked = query.getAll('column');
  if (asked.length === 0) return usual;
  const unknown = asked.find((name) => !names.has(name));
  if (unknown !== undefined) {
    report({ field: 'columns', expected: 'names of columns of this run', found: quoted(unknown) });
  }
  return asked.filter((name, index) => names.has(name) && asked.indexOf(name) === index);
}

function readPage(query: URLSearchParams, report: Report): number {
  const asked = query.get('page') ?? '1';
  if (/^[1-9]\d{0,8}$/.test(asked)) return Number(asked);
  report({ field: 'page', expected: 'a page number from 1', found: quoted(asked) });
  return 1;
}

function isNumber(text: string): boolean {
  return /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d{1,3})?$/.test(text) && Number.isFinite(Number(text));
}

function quoted(text: string): string {
  return text === '' ? 'nothing' : `“${text.length > 60 ? `${text.slice(0, 60)}…` : text}”`;
}
