import type { AsyncQuestions, View } from '../store/reading.js';
import { createWideTable } from '../store/wide-table.js';
import { writeNewFile } from './new-file.js';
import { provenanceDocument } from './provenance-document.js';
import { exportedColumns, slicesOf } from './slices.js';

/** Rows a transaction. */
const ROWS = 1024;

/** The points of a view as a plain wide table for people who want SQL, in a new SQLite file: `points` with a row a
 *  point, `columns` with units and meanings, `provenance` with the document that also lies beside a CSV file.
 *  Absent values are NULL; SQLite itself does not keep the sign of -0.
 *  @returns the number of rows
 *  @throws  UserMistake if the file exists, or for an unknown column or a filter that does not fit */
export async function exportSqlite(
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
  file: string,
): Promise<number> {
  const records = await exportedColumns(questions, view, columns);
  let rows = 0;
  await writeNewFile(file, async (temporary) => {
    const table = createWideTable(temporary, records);
    try {
      for await (const slice of slicesOf(questions, view, records, ROWS)) {
        table.add(slice);
        rows += slice.count;
      }
      const run = await questions.run(view.run);
      table.describe(JSON.stringify(provenanceDocument({ run: run!, view, columns: records, file, rows })));
    } finally {
      table.close();
    }
  });
  return rows;
}
