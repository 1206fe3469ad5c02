import { endianness } from 'node:os';
import { existsSync } from 'node:fs';
import Database from 'better-sqlite3';
import { Broken } from '../mistakes.js';
import { inspectFile } from './file-check.js';
import { APPLICATION_ID, FORMAT, MIGRATIONS } from './schema.js';
import { onStore } from './sqlite-trouble.js';

export type Connection = Database.Database;

/** Opens a store to write: creates it where there is none, brings an older format up to date.
 *  @throws Broken, with nothing changed, for a file that is not a sound store of a known format */
export function connectForWriting(path: string): Connection {
  const state = inspectFile(path);
  return opened(path, false, (db) => {
    db.pragma('busy_timeout = 5000');
    if (state === 'missing' || state === 'empty') db.pragma(`application_id = ${APPLICATION_ID}`);
    else checkSound(path, db);
    db.pragma('journal_mode = WAL');
    db.pragma('synchronous = FULL');
    // Blocks of 4096 points come by the megabyte: a checkpoint every 1000 pages would write much twice.
    db.pragma('wal_autocheckpoint = 4000');
    db.pragma('foreign_keys = ON');
    migrate(db);
  });
}

/** Opens a store to read only. */
export function connectForReading(path: string): Connection {
  const state = inspectFile(path);
  if (state === 'missing' || state === 'empty') {
    throw new Broken('no-store', `${path}: there is no store here. Launch a scan file first`);
  }
  return opened(path, true, (db) => {
    db.pragma('busy_timeout = 5000');
    checkSound(path, db);
  });
}

/** Before anything is written: a pragma would already change the file. */
function checkSound(path: string, db: Connection): void {
  checkIdentity(path, db);
  checkTables(path, db);
}

function opened(path: string, readonly: boolean, prepare: (db: Connection) => void): Connection {
  if (endianness() !== 'LE') throw new Broken('endianness', 'stores need a little-endian processor');
  const db = openFile(path, readonly);
  try {
    onStore(path, () => prepare(db));
    return db;
  } catch (error) {
    db.close();
    throw explainReadOnly(path, error);
  }
}

function openFile(path: string, readonly: boolean): Connection {
  try {
    return onStore(path, () => new Database(path, { readonly, fileMustExist: readonly }));
  } catch (error) {
    // The driver itself refuses a missing folder with a TypeError.
    if (error instanceof TypeError) {
      throw new Broken('store-cannot-open', `${path}: the folder of the store does not exist`, {
        cause: error,
      });
    }
    throw explainReadOnly(path, error);
  }
}

/** A store that was not closed cleanly needs its write-ahead log, which a read-only place does not allow. */
function explainReadOnly(path: string, error: unknown): unknown {
  const codes = ['store-cannot-open', 'store-read-only', 'store-io'];
  if (!(error instanceof Broken) || !codes.includes(error.code)) return error;
  if (inspectFile(path) !== 'wal') return error;
  const files = existsSync(`${path}-wal`) ? 'it and the file ending in -wal beside it' : 'it';
  return new Broken(
    'store-left-open',
    `${path}: this store was not closed cleanly and cannot be opened where nothing may be written. Nothing was changed: copy ${files} to a place that can be written and open the copy`,
    { cause: error },
  );
}

function checkIdentity(path: string, db: Connection): void {
  const id = db.pragma('application_id', { simple: true });
  if (id !== APPLICATION_ID) {
    throw new Broken('not-a-store', `${path}: this is a database of another program. Nothing was changed`);
  }
  const format = Number(db.pragma('user_version', { simple: true }));
  if (format > FORMAT) {
    throw new Broken(
      'newer-format',
      `${path}: the store has format ${format}, this version of Trigpoint knows up to ${FORMAT}. Nothing was changed: use a newer Trigpoint`,
    );
  }
  if (format < FORMAT && db.readonly) {
    throw new Broken(
      'older-format',
      `${path}: the store has format ${format}, this version reads ${FORMAT}. Nothing was changed: any command that writes brings it up to date`,
    );
  }
}

function migrate(db: Connection): void {
  const step = db.transaction(() => {
    const format = Number(db.pragma('user_version', { simple: true }));
    MIGRATIONS.slice(format).forEach((sql) => db.exec(sql));
    db.pragma(`user_version = ${FORMAT}`);
  });
  step.immediate();
}

/** Bounded: only the small tables, whatever the number of points; `verifyIntegrity` reads the large one. */
function checkTables(path: string, db: Connection): void {
  const tables = db
    .prepare<[], string>(`SELECT name FROM sqlite_schema WHERE type = 'table' AND name <> 'segment_columns'`)
    .pluck()
    .all();
  for (const table of tables) {
    const finding = db.pragma(`quick_check('${table}')`, { simple: true });
    if (finding !== 'ok') {
      throw new Broken(
        'store-corrupt',
        `${path}: the file is damaged (${String(finding)}). Nothing was changed: restore it from a copy`,
      );
    }
  }
}
