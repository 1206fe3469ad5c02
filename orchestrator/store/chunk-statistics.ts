import type { Connection } from './connect.js';
import type { ChunkStatistics } from './reading.js';

/** Who computed a run: chunks done, spans that needed more than one attempt, and the share of every worker. */
export function chunkStatistics(db: Connection, run: number): ChunkStatistics {
  const workers = db
    .prepare<[number], ChunkStatistics['workers'][number]>(
      `SELECT worker, COUNT(*) AS chunks, SUM(count) AS points, SUM(milliseconds) AS milliseconds
       FROM chunks WHERE run = ? GROUP BY worker ORDER BY worker`,
    )
    .all(run);
  const retried = db
    .prepare<[number], number>('SELECT COUNT(*) FROM attempts WHERE run = ? AND attempts > 1')
    .pluck()
    .get(run);
  return { done: workers.reduce((sum, worker) => sum + worker.chunks, 0), retried: retried ?? 0, workers };
}
