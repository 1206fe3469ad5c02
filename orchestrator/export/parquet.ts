import { fileWriter, ParquetWriter, schemaFromColumnData } from 'hyparquet-writer';
import type { ColumnSource } from 'hyparquet-writer';
import type { AsyncQuestions, SliceOfPoints, View } from '../store/reading.js';
import type { ColumnRecord } from '../store/records.js';
import { writeNewFile } from './new-file.js';
import { provenanceDocument } from './provenance-document.js';
import { exportedColumns, slicesOf } from './slices.js';

/** Rows a row group: some 20 MB at forty columns, which bounds the memory an export takes. */
const ROWS = 65_536;

/** The points of a view as an Apache Parquet file: float64 columns (null where absent), words for classes, outcomes
 *  and verdicts. The key-value metadata has `units` (column name -> unit, as JSON) and `provenance` (the document
 *  that also lies beside a CSV file).
 *  @returns the number of rows
 *  @throws  UserMistake if the file exists, or for an unknown column or a filter that does not fit */
export async function exportParquet(
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
  file: string,
): Promise<number> {
  const records = await exportedColumns(questions, view, columns);
  let rows = 0;
  await writeNewFile(file, async (temporary) => {
    const kvMetadata = [{ key: 'units', value: unitsOf(records) }];
    const schema = schemaFromColumnData({ columnData: records.map((record) => source(record, undefined)) });
    const writer = new ParquetWriter({
      writer: fileWriter(temporary),
      schema,
      kvMetadata,
      createdBy: 'trigpoint',
    });
    for await (const slice of slicesOf(questions, view, records, ROWS)) {
      await writer.write({ columnData: records.map((record) => source(record, slice)), rowGroupSize: ROWS });
      rows += slice.count;
    }
    const run = await questions.run(view.run);
    // The footer, which holds the metadata, is written last: only now is the number of rows known.
    const document = provenanceDocument({ run: run!, view, columns: records, file, rows });
    kvMetadata.push({ key: 'provenance', value: JSON.stringify(document) });
    await writer.finish();
  });
  return rows;
}

function source(column: ColumnRecord, slice: SliceOfPoints | undefined): ColumnSource {
  const values = slice?.columns.get(column.name) ?? new Float64Array(0);
  const { name, labels } = column;
  if (name === 'stratum' || name === 'index') {
    return { name, type: 'INT64', nullable: false, data: BigInt64Array.from(values, BigInt) };
  }
  if (labels !== undefined) {
    return { name, type: 'STRING', data: Array.from(values, (value) => labels[value] ?? null) };
  }
  // A dictionary, which the writer would otherwise choose for few values, makes 0 and -0 one.
  const data = Array.from(values, (value) => (Number.isNaN(value) ? null : value));
  return { name, type: 'DOUBLE', encoding: 'PLAIN', data };
}

function unitsOf(columns: readonly ColumnRecord[]): string {
  return JSON.stringify(Object.fromEntries(columns.map((column) => [column.name, column.unit])));
}
