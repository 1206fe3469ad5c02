import { closeSync, fstatSync, openSync, readSync, statSync } from 'node:fs';
import { Broken } from '../mistakes.js';

/** What the first page of a SQLite file tells before SQLite touches it. */
export type FileState = 'missing' | 'empty' | 'rollback' | 'wal';

/** Looks at a file without changing it.
 *  @throws Broken 'not-a-store' or 'store-truncated'
 *  Source: "Database File Format", sqlite.org/fileformat2.html, section 1.3 (the database header) */
export function inspectFile(path: string): FileState {
  const state = statSync(path, { throwIfNoEntry: false });
  if (state === undefined) return 'missing';
  if (!state.isFile()) throw notAStore(path);
  if (state.size === 0) return 'empty';
  const { header, size } = readHeader(path);
  if (header.toString('latin1', 0, 16) !== 'SQLite format 3\0') throw notAStore(path);
  // With a log beside it the file may well be short: what is missing is in the log, e.g. after a full disk.
  if (!hasLog(path)) checkLength(path, header, size);
  return header[18] === 2 ? 'wal' : 'rollback';
}

function hasLog(path: string): boolean {
  const length = (ending: string) => statSync(path + ending, { throwIfNoEntry: false })?.size ?? 0;
  return length('-wal') > 0 || length('-journal') > 0;
}

function readHeader(path: string): { header: Buffer; size: number } {
  const header = Buffer.alloc(100);
  const file = openSync(path, 'r');
  try {
    readSync(file, header, 0, 100, 0);
    return { header, size: fstatSync(file).size };
  } finally {
    closeSync(file);
  }
}

/** The count of pages at offset 28 holds where offsets 24 and 92 agree; a page size of 1 means 65536. */
function checkLength(path: string, header: Buffer, size: number): void {
  const pageSize = header.readUInt16BE(16) === 1 ? 65536 : header.readUInt16BE(16);
  const pages = header.readUInt32BE(24) === header.readUInt32BE(92) ? header.readUInt32BE(28) : 1;
  if (size >= pages * pageSize) return;
  throw new Broken(
    'store-truncated',
    `${path}: the file is cut off: its header promises ${pages * pageSize} bytes, it has ${size}. Nothing was changed: restore it from a copy`,
  );
}

function notAStore(path: string): Broken {
  return new Broken('not-a-store', `${path}: this is not a Trigpoint store. Nothing was changed`);
}
