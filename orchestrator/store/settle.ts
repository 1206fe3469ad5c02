import { accessSync, constants } from 'node:fs';
import Database from 'better-sqlite3';
import { inspectFile } from './file-check.js';

/** What the last reader does when it leaves a store that nobody writes to: folds the write-ahead log back, so that
 *  the store is one file again, which can be read on a read-only place. A courtesy: where it cannot be done, the
 *  log stays and nothing is lost. */
export function settle(path: string): void {
  if (inspectFile(path) !== 'wal' || !isWritable(path)) return;
  try {
    const db = new Database(path, { fileMustExist: true, timeout: 0 });
    try {
      const coordinators = db.prepare('SELECT COUNT(*) FROM lease').pluck().get();
      if (coordinators === 0) db.pragma('journal_mode = DELETE');
    } finally {
      db.close();
    }
  } catch (error) {
    // Somebody else has it open, or the place is full or read-only.
    if (!(error instanceof Database.SqliteError)) throw error;
  }
}

function isWritable(path: string): boolean {
  try {
    accessSync(path, constants.W_OK);
    return true;
  } catch {
    return false;
  }
}
