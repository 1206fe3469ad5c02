import Database from 'better-sqlite3';
import { Broken } from '../mistakes.js';

/** Runs an action on a store and turns SQLite's errors into ones that say what happened and what to do. */
export function onStore<T>(path: string, action: () => T): T {
  try {
    return action();
  } catch (error) {
    if (error instanceof Database.SqliteError) throw describe(path, error);
    throw error;
  }
}

function describe(path: string, error: InstanceType<typeof Database.SqliteError>): Broken {
  const known = KNOWN.find(([prefix]) => error.code.startsWith(prefix));
  const [, code, text] = known ?? ['', 'store-error', `SQLite reports ${error.code} (${error.message})`];
  return new Broken(code, `${path}: ${text}`, { cause: error });
}

/** First match wins: the longer code stands before the shorter. */
const KNOWN: readonly (readonly [string, string, string])[] = [
  [
    'SQLITE_FULL',
    'disk-full',
    'the disk is full. Everything committed so far is kept: free some space and launch again',
  ],
  [
    'SQLITE_IOERR_SHM',
    'disk-full',
    'no room for the shared-memory file beside the store. Everything committed so far is kept: free some space and launch again',
  ],
  [
    'SQLITE_IOERR',
    'store-io',
    'the operating system could not read or write the file. Everything committed so far is kept',
  ],
  ['SQLITE_CORRUPT', 'store-corrupt', 'the file is damaged. Nothing was changed: restore it from a copy'],
  ['SQLITE_NOTADB', 'not-a-store', 'this is not a Trigpoint store. Nothing was changed'],
  [
    'SQLITE_READONLY',
    'store-read-only',
    'the store cannot be written here. Nothing was changed: copy it to a place that can be written',
  ],
  [
    'SQLITE_CANTOPEN',
    'store-cannot-open',
    'the store cannot be opened: does the folder exist, and may it be read? Nothing was changed',
  ],
  ['SQLITE_BUSY', 'store-busy', 'another program holds the store. Nothing was changed: try again'],
];
