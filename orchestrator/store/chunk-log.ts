import type { Connection } from './connect.js';
import type { ChunkResult, Span } from './writing.js';

/** What happened to chunks: attempts, who finished them, which points nobody could do. No result depends on it. */
export interface ChunkLog {
  /** Records one more attempt and returns how many there were. */
  attempt(run: number, span: Span): number;
  withdraw(run: number, span: Span): void;
  attempts(run: number, span: Span): number;
  /** In order of points. */
  attempted(run: number): (Span & { readonly attempts: number })[];
  done(run: number, chunk: Pick<ChunkResult, keyof Span | 'worker' | 'milliseconds'>): void;
  unfinished(run: number, stratum: number, index: number, reason: string): void;
}

export function chunkLogIn(db: Connection): ChunkLog {
  const place = 'run = ? AND stratum = ? AND first = ? AND count = ?';
  type Key = [number, number, number, number];
  const attempt = db
    .prepare<Key, number>(
      `INSERT INTO attempts (run, stratum, first, count, attempts) VALUES (?, ?, ?, ?, 1)
       ON CONFLICT DO UPDATE SET attempts = attempts + 1 RETURNING attempts`,
    )
    .pluck();
  const withdraw = db.prepare<Key>(
    `UPDATE attempts SET attempts = attempts - 1
     WHERE ${place} AND attempts > 0`,
  );
  const attempts = db.prepare<Key, number>(`SELECT attempts FROM attempts WHERE ${place}`).pluck();
  const attempted = db.prepare<[number], Span & { attempts: number }>(
    'SELECT stratum, first, count, attempts FROM attempts WHERE run = ? AND attempts > 0 ORDER BY stratum, first, count',
  );
  const done = db.prepare(
    `INSERT OR IGNORE INTO chunks (run, stratum, first, count, worker, milliseconds) VALUES (?, ?, ?, ?, ?, ?)`,
  );
  const unfinished = db.prepare(
    'INSERT OR IGNORE INTO unfinished (run, stratum, point, reason) VALUES (?, ?, ?, ?)',
  );
  return {
    attempt: (run, span) => attempt.get(run, span.stratum, span.first, span.count)!,
    withdraw: (run, span) => void withdraw.run(run, span.stratum, span.first, span.count),
    attempts: (run, span) => attempts.get(run, span.stratum, span.first, span.count) ?? 0,
    attempted: (run) => attempted.all(run),
    done: (run, chunk) =>
      void done.run(run, chunk.stratum, chunk.first, chunk.count, chunk.worker, chunk.milliseconds),
    unfinished: (run, stratum, index, reason) => void unfinished.run(run, stratum, index, reason),
  };
}
