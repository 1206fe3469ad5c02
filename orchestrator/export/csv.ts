import type { AsyncQuestions, SliceOfPoints, View } from '../store/reading.js';
import type { ColumnRecord } from '../store/records.js';
import { exportedColumns, slicesOf } from './slices.js';

/** Rows a piece of text: about 40 ms of work on the event loop at forty columns. */
const ROWS = 1024;

/** The points of a view as CSV, a piece at a time: a header of column names, then a row a point. Classes, outcomes
 *  and verdicts are words; an absent value is an empty cell; numbers have the fewest digits that give back the same
 *  float64 (infinities as INF and -INF, as XML Schema writes them). Units are in the provenance file beside it.
 *  @param columns names; none means all
 *  Source: RFC 4180 (lines end in CR LF, quotes doubled); INF: W3C XML Schema part 2, 3.2.5 */
export async function* exportCsv(
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
): AsyncGenerator<string> {
  const records = await exportedColumns(questions, view, columns);
  yield records.map((column) => textCell(column.name)).join(',') + END;
  for await (const slice of slicesOf(questions, view, records, ROWS)) yield rowsOf(records, slice);
}

const END = '\r\n';

function rowsOf(records: readonly ColumnRecord[], slice: SliceOfPoints): string {
  const cells = records.map((column) => cellWriter(column, slice.columns.get(column.name)!));
  let text = '';
  for (let row = 0; row < slice.count; row++) {
    text += cells[0](row);
    for (let c = 1; c < cells.length; c++) text += ',' + cells[c](row);
    text += END;
  }
  return text;
}

function cellWriter(column: ColumnRecord, values: Float64Array): (row: number) => string {
  if (column.labels === undefined) return (row) => numberCell(values[row]);
  const labels = column.labels.map(textCell);
  return (row) => labels[values[row]] ?? '';
}

/** The shortest decimal that reads back as the same number; ECMAScript's, but for -0 and infinities. */
function numberCell(value: number): string {
  if (Number.isNaN(value)) return '';
  if (value === 0) return Object.is(value, -0) ? '-0' : '0';
  if (!Number.isFinite(value)) return value > 0 ? 'INF' : '-INF';
  return String(value);
}

/** Text that a spreadsheet would take for a formula gets an apostrophe in front. */
function textCell(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
