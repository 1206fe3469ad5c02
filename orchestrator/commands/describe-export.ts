import { UserMistake } from '../mistakes.js';
import { provenanceDocument } from '../export/provenance-document.js';
import { exportedColumns } from '../export/slices.js';
import type { AsyncQuestions, View } from '../store/reading.js';

/** The document that lies beside an export, as JSON text: names, units, meanings and provenance.
 *  @param file name of the exported file
 *  @throws UserMistake if there is no such run */
export async function describeExport(
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
  file: string,
): Promise<string> {
  const run = await questions.run(view.run);
  if (run === undefined)
    throw new UserMistake({ where: 'run', expected: 'a run of the store', found: String(view.run) });
  const records = await exportedColumns(questions, view, columns);
  const { points: rows } = await questions.counts(view);
  return JSON.stringify(provenanceDocument({ run, view, columns: records, file, rows }), null, 2);
}
