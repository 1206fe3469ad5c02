import { FAILURES, VERDICTS } from '../../workers/contract.js';
import { batchFrom, checkColumns } from './batches.js';
import type { BatchSource } from './batches.js';
import { chunkStatistics } from './chunk-statistics.js';
import { cachedColumns } from './column-cache.js';
import type { Connection } from './connect.js';
import { extentsIn } from './extents.js';
import { hasLiveCoordinator } from './lease.js';
import type { Position, Reading } from './reading.js';
import type { Batch } from './records.js';
import { runsIn } from './runs.js';
import { segmentsIn } from './segments.js';
import { onStore } from './sqlite-trouble.js';
import { verifyRun } from './verify-integrity.js';

/** Bytes of columns kept in memory: sixteen columns of a million points. */
const CACHE = 128 * 1024 * 1024;

/** The read side over an open connection. */
export function readingOf(path: string, db: Connection): Reading {
  const runs = runsIn(db);
  const extents = extentsIn(db);
  const stored = segmentsIn(db);
  const segments = { read: cachedColumns(stored.read, CACHE) };
  const snapshot = <T>(ask: () => T): T =>
    onStore(path, () => (db.inTransaction ? ask() : db.transaction(ask)()));
  const source = (run: number): BatchSource => ({ run, layout: runs.layout(run), extents, segments });
  const next = (run: number, names: readonly string[], at: Position): Batch | undefined =>
    snapshot(() => batchFrom(source(run), names, at.stratum, at.index));
  return {
    runs: () => onStore(path, () => runs.all()),
    isWorkedOn: () => onStore(path, () => hasLiveCoordinator(db)),
    run: (id) => onStore(path, () => runs.get(id)),
    columns: (run) => onStore(path, () => runs.columns(run)),
    constraints: (run) => onStore(path, () => runs.constraints(run)),
    chunks: (run) => snapshot(() => chunkStatistics(db, run)),
    snapshot,
    *batches(run, columns, start = { stratum: 0, index: 0 }) {
      checkColumns(
        onStore(path, () => runs.columns(run)),
        columns,
        `columns of run ${run}`,
      );
      let at = start;
      for (let batch = next(run, columns, at); batch !== undefined; batch = next(run, columns, at)) {
        yield batch;
        at = { stratum: batch.stratum, index: batch.first + batch.count };
      }
    },
    reason: (run, stratum, index) => snapshot(() => reasonOf(db, next, run, { stratum, index })),
    verifyIntegrity: (run) =>
      // The file is read, not the cache.
      snapshot(() => verifyRun(db, { ...source(run), segments: stored }, runs.get(run)?.digest ?? null)),
    close: () => void db.close(),
  };
}

function reasonOf(
  db: Connection,
  next: (run: number, names: readonly string[], at: Position) => Batch | undefined,
  run: number,
  at: Position,
): string | null {
  const batch = next(run, ['verdict', 'failure'], at);
  if (batch === undefined || batch.stratum !== at.stratum || batch.first !== at.index) return null;
  const verdict = VERDICTS[batch.columns.get('verdict')![0]];
  if (verdict === 'failed') return FAILURES[batch.columns.get('failure')![0]];
  if (verdict !== 'unfinished') return null;
  const find = db.prepare<[number, number, number], string>(
    'SELECT reason FROM unfinished WHERE run = ? AND stratum = ? AND point = ?',
  );
  return find.pluck().get(run, at.stratum, at.index) ?? null;
}
