import Database from 'better-sqlite3';
import { UserMistake } from '../mistakes.js';
import type { SliceOfPoints } from './reading.js';
import type { ColumnRecord } from './records.js';
import { onStore } from './sqlite-trouble.js';

/** A file of its own with a row a point, for people who want SQL. Not a store: it keeps no segments and no run. */
export interface WideTable {
  /** One transaction. */
  add(slice: SliceOfPoints): void;
  /** Records how the table came about, a JSON document. */
  describe(provenance: string): void;
  close(): void;
}

/** @throws UserMistake for more columns than SQLite allows in a table */
export function createWideTable(file: string, columns: readonly ColumnRecord[]): WideTable {
  checkWidth(columns);
  const db = onStore(file, () => new Database(file));
  onStore(file, () => createTables(db, columns));
  const places = columns.map(() => '?').join(', ');
  const insert = db.prepare(`INSERT INTO points VALUES (${places})`);
  const add = db.transaction((slice: SliceOfPoints) => {
    const cells = columns.map((column) => cellReader(column, slice.columns.get(column.name)!));
    for (let row = 0; row < slice.count; row++) insert.run(cells.map((cell) => cell(row)));
  });
  return {
    add: (slice) => onStore(file, () => add(slice)),
    describe: (provenance) =>
      void onStore(file, () => db.prepare('INSERT INTO provenance (document) VALUES (?)').run(provenance)),
    close: () => void db.close(),
  };
}

/** Default limit of columns in a table (sqlite.org/limits.html, item 2). */
const MOST_COLUMNS = 2000;

function checkWidth(columns: readonly ColumnRecord[]): void {
  if (columns.length <= MOST_COLUMNS) return;
  throw new UserMistake({
    where: 'columns of the export',
    expected: `at most ${MOST_COLUMNS}, which is what SQLite allows in a table`,
    found: String(columns.length),
  });
}

function createTables(db: Database.Database, columns: readonly ColumnRecord[]): void {
  // The file is made once and under a temporary name: nothing is lost if it is cut off.
  db.pragma('journal_mode = OFF');
  db.pragma('synchronous = OFF');
  const declared = columns.map((column) => `${quoted(column.name)} ${typeOf(column)}`);
  db.exec(`
    CREATE TABLE points (${declared.join(', ')}, PRIMARY KEY (stratum, "index"));
    CREATE TABLE columns (name TEXT PRIMARY KEY, kind TEXT, unit TEXT, meaning TEXT, absent TEXT, caution TEXT);
    CREATE TABLE provenance (document TEXT)`);
  const insert = db.prepare('INSERT INTO columns VALUES (?, ?, ?, ?, ?, ?)');
  for (const { name, kind, unit, meaning, absent, caution } of columns) {
    insert.run(name, kind, unit, meaning, absent ?? null, caution ?? null);
  }
}

function quoted(name: string): string {
  return `"${name.replaceAll('"', '""')}"`;
}

function typeOf(column: ColumnRecord): string {
  if (column.labels !== undefined) return 'TEXT';
  return column.name === 'stratum' || column.name === 'index' ? 'INTEGER' : 'REAL';
}

function cellReader(column: ColumnRecord, values: Float64Array): (row: number) => number | string | null {
  const { labels } = column;
  if (labels !== undefined) return (row) => labels[values[row]] ?? null;
  return (row) => (Number.isNaN(values[row]) ? null : values[row]);
}
