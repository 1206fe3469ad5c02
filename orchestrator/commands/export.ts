import { open, writeFile } from 'node:fs/promises';
import { Broken, UserMistake } from '../mistakes.js';
import { exportCsv } from '../export/csv.js';
import { writeNewFile } from '../export/new-file.js';
import { exportParquet } from '../export/parquet.js';
import { provenanceFileOf } from '../export/provenance-document.js';
import { exportSqlite } from '../export/sqlite.js';
import { startReader } from '../store/reader-thread.js';
import type { AsyncQuestions, View } from '../store/reading.js';
import { filterMistake } from './check-filter.js';
import { describeExport } from './describe-export.js';
import { findRun } from './find-run.js';
import { checkNames } from './named.js';
import { withReading } from './read-store.js';

export const FORMATS = ['csv', 'parquet', 'sqlite'] as const;
export type Format = (typeof FORMATS)[number];

export interface ExportRequest {
  readonly store: string;
  readonly format: Format;
  readonly surviving?: boolean;
  /** Expression of the filter language. */
  readonly where?: string;
  /** Names separated by commas; all columns where absent. */
  readonly columns?: string;
  /** Absent: CSV to standard output. */
  readonly out?: string;
}

export interface ExportFacts {
  readonly format: 1;
  readonly run: number;
  readonly points: number;
  readonly columns: readonly string[];
  readonly where: string;
  /** Null where CSV went to standard output. */
  readonly file: string | null;
  /** The file beside a CSV that says what its columns are and where they come from. */
  readonly description: string | null;
}

/** Writes the points of a run that pass a filter, in the order of the plan.
 *  @param print takes CSV in pieces where no file is named */
export async function exportRun(
  word: string,
  request: ExportRequest,
  print: (text: string) => Promise<void>,
): Promise<ExportFacts> {
  const { view, columns } = await choice(word, request);
  const questions = startReader(request.store);
  try {
    const { points } = await questions.counts(view);
    const facts = { format: 1 as const, run: view.run, points, columns, where: view.where };
    if (request.out === undefined) {
      for await (const piece of exportCsv(questions, view, columns)) await print(piece);
      return { ...facts, file: null, description: null };
    }
    const description = await writeFormat(request.format, questions, view, columns, request.out);
    return { ...facts, file: request.out, description };
  } finally {
    await questions.close();
  }
}

/** Which points and columns are meant. Everything that can be wrong is said before anything is written. */
function choice(word: string, request: ExportRequest): Promise<{ view: View; columns: string[] }> {
  return withReading(request.store, (reading) => {
    const run = findRun(reading, word);
    const known = reading.columns(run.id).map((column) => column.name);
    const columns = request.columns?.split(',').map((name) => name.trim()) ?? known;
    checkNames(columns, known, '--columns', `a column of run ${run.id}`);
    const where = filterOf(request);
    const mistake = filterMistake(request.where ?? '', known);
    if (mistake) throw new UserMistake({ where: `--where, column ${mistake.position + 1}`, ...mistake });
    checkTarget(request);
    return { view: { run: run.id, where }, columns };
  });
}

function filterOf({ surviving, where = '' }: ExportRequest): string {
  if (!surviving) return where;
  return where.trim() === '' ? 'surviving' : `(${where}) and surviving`;
}

function checkTarget({ format, out }: ExportRequest): void {
  if (out === undefined && format !== 'csv')
    throw new UserMistake({ where: 'export', expected: `--out FILE for ${format}`, found: 'none' });
}

/** Returns the name of the description, if there is one beside the file. */
async function writeFormat(
  format: Format,
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
  out: string,
): Promise<string | null> {
  try {
    if (format === 'csv') return await writeCsv(questions, view, columns, out);
    if (format === 'parquet') await exportParquet(questions, view, columns, out);
    else await exportSqlite(questions, view, columns, out);
    return null;
  } catch (error) {
    throw writeTrouble(out, error);
  }
}

async function writeCsv(
  questions: AsyncQuestions,
  view: View,
  columns: readonly string[],
  out: string,
): Promise<string> {
  const description = provenanceFileOf(out);
  const about = await describeExport(questions, view, columns, out);
  await writeNewFile(description, (temporary) => writeFile(temporary, `${about}\n`));
  await writeNewFile(out, (temporary) => writePieces(temporary, exportCsv(questions, view, columns)));
  return description;
}

async function writePieces(path: string, pieces: AsyncIterable<string>): Promise<void> {
  const file = await open(path, 'w');
  try {
    for await (const piece of pieces) await file.write(piece);
  } finally {
    await file.close();
  }
}

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'there is no such folder',
  EACCES: 'no right to write there',
  EROFS: 'the file system is read-only',
  ENOSPC: 'the disk is full',
  EISDIR: 'it is a folder',
};

function writeTrouble(out: string, error: unknown): unknown {
  const reason = REASONS[(error as NodeJS.ErrnoException).code ?? ''];
  return reason === undefined
    ? error
    : new Broken('cannot-write', `${out} cannot be written: ${reason}`, { cause: error });
}
