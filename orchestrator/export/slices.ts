import { UserMistake } from '../mistakes.js';
import type { AsyncQuestions, Position, SliceOfPoints, View } from '../store/reading.js';
import type { ColumnRecord } from '../store/records.js';

/** What every exported row begins with. */
const ALWAYS = ['stratum', 'index', 'verdict'];

/** The columns of an export: stratum, index and verdict, then the asked ones; without any, all of the run.
 *  @throws UserMistake for a name that is no column of the run */
export async function exportedColumns(
  questions: AsyncQuestions,
  view: View,
  asked: readonly string[],
): Promise<ColumnRecord[]> {
  const known = new Map((await questions.columns(view.run)).map((column) => [column.name, column]));
  const names = new Set([...ALWAYS, ...(asked.length > 0 ? asked : known.keys())]);
  return [...names].map((name) => {
    const column = known.get(name);
    if (column !== undefined) return column;
    const where = `columns of run ${view.run}`;
    throw new UserMistake({ where, expected: 'the name of a column of the run', found: name });
  });
}

/** The points of a view in (stratum, index) order, some at a time. The points are fetched from another thread:
 *  between two slices the event loop is free. */
export async function* slicesOf(
  questions: AsyncQuestions,
  view: View,
  columns: readonly ColumnRecord[],
  size: number,
): AsyncGenerator<SliceOfPoints> {
  const names = columns.map((column) => column.name);
  let at: Position | null = { stratum: 0, index: 0 };
  while (at !== null) {
    const slice: SliceOfPoints = await questions.slice(view, names, at, size);
    if (slice.count > 0) yield slice;
    at = slice.next;
  }
}
