import { Broken } from '../mistakes.js';
import { evaluationPiece, judgementPiece, unfinishedChunk } from './chunk-pieces.js';
import { chunkLogIn } from './chunk-log.js';
import type { Connection } from './connect.js';
import { digestOf } from './digest.js';
import { extentsIn } from './extents.js';
import { EVALUATION, JUDGEMENT } from './layout.js';
import type { Kind } from './layout.js';
import type { Lease } from './lease.js';
import { compactShelf, place } from './place.js';
import type { Shelf } from './place.js';
import { readingOf } from './read.js';
import type { RunRecord } from './records.js';
import { runsIn } from './runs.js';
import { segmentsIn } from './segments.js';
import { shareSpan } from './share.js';
import { mergeSpans, subtractSpans } from './spans.js';
import { onStore } from './sqlite-trouble.js';
import type { ChunkResult, JudgedSpan, Span, Writing } from './writing.js';

/** The write side over an open connection whose lease is ours. */
export function writingOf(path: string, db: Connection, lease: Lease): Writing {
  const reading = readingOf(path, db);
  const parts = {
    db,
    runs: runsIn(db),
    extents: extentsIn(db),
    segments: segmentsIn(db),
    log: chunkLogIn(db),
  };
  const { runs, extents, segments, log } = parts;
  const shelf = (run: number, kind: Kind): Shelf => ({
    run,
    kind,
    layout: runs.layout(run),
    segments,
    extents,
  });
  const write = <T>(action: () => T): T =>
    onStore(path, () => {
      const checked = db.transaction(() => {
        lease.check();
        return action();
      });
      return checked.immediate();
    });
  /** Survives a crash of the process but perhaps not a power cut: a hundred times cheaper than a full commit. */
  const writeLightly = <T>(action: () => T): T => {
    db.pragma('synchronous = NORMAL');
    try {
      return write(action);
    } finally {
      db.pragma('synchronous = FULL');
    }
  };

  const store = (run: number, chunks: readonly ChunkResult[]) => {
    const layout = runs.layout(run);
    const evaluated = chunks.map((chunk) => evaluationPiece(layout, chunk));
    const judged = chunks.map((chunk) => judgementPiece(layout, { ...chunk, ...chunk.result }));
    place(shelf(run, EVALUATION), evaluated);
    return place(shelf(run, JUDGEMENT), judged);
  };
  const count = (run: number, fresh: ReturnType<typeof place>) =>
    runs.count(
      run,
      fresh.map((piece) => piece.columns.get('verdict') as Uint8Array),
    );
  const judge = (run: number, spans: readonly JudgedSpan[]) => {
    const layout = runs.layout(run);
    for (const span of spans) {
      const missing = subtractSpans(span, extents.overlapping(run, EVALUATION, span));
      if (missing.length > 0) throw notEvaluated(run, missing[0].stratum, missing[0].first);
    }
    return count(
      run,
      place(
        shelf(run, JUDGEMENT),
        spans.map((span) => judgementPiece(layout, span)),
      ),
    );
  };
  const isOpen = (run: number, span: Span) =>
    subtractSpans(span, extents.overlapping(run, JUDGEMENT, span)).length > 0;
  const compact = (run: number) => {
    for (const kind of [EVALUATION, JUDGEMENT] as const) compactShelf(shelf(run, kind));
  };

  return {
    ...reading,
    createRun: (run) => write(() => runs.create(run)),
    committed: (run) => onStore(path, () => mergeSpans(extents.spans(run, JUDGEMENT))),
    recordAttempt: (run, span) => writeLightly(() => log.attempt(run, span)),
    withdrawAttempt: (run, span) => writeLightly(() => log.withdraw(run, span)),
    attempts: (run, span) => onStore(path, () => log.attempts(run, span)),
    attempted: (run) => onStore(path, () => log.attempted(run).filter((span) => isOpen(run, span))),
    commit: (run, results) =>
      write(() => {
        const counts = count(run, store(run, results));
        for (const result of results) log.done(run, result);
        return counts;
      }),
    recordUnfinished: (run, stratum, index, inputs, reason) =>
      write(() => {
        const at = { stratum, first: index, count: 1 };
        const fresh = store(run, [unfinishedChunk(runs.layout(run), at, inputs)]);
        if (fresh.length > 0) log.unfinished(run, stratum, index, reason);
        count(run, fresh);
      }),
    share: (from, to, span, judged) =>
      write(() => {
        const fresh = shareSpan(parts, from, to, span, judged);
        if (judged) runs.count(to, fresh);
      }),
    judge: (run, spans) => write(() => judge(run, spans)),
    compact: (run) => write(() => compact(run)),
    setState: (run, state, seconds) => write(() => runs.setState(run, state, seconds)),
    seal: (run, state, seconds) => {
      write(() => compact(run));
      return write(() => {
        checkComplete(reading.run(run), run);
        const digest = digestOf({ run, layout: runs.layout(run), segments, extents }, () => lease.check());
        runs.setDigest(run, digest);
        runs.setState(run, state, seconds);
        return digest;
      });
    },
    beat: () => writeLightly(() => undefined),
    close: () => closeCleanly(path, db, lease),
  };
}

function checkComplete(run: RunRecord | undefined, id: number): void {
  if (run !== undefined && run.counts.points === run.wanted) return;
  const state = run ? `${run.counts.points} of ${run.wanted} points are committed` : 'there is no such run';
  throw new Broken('not-complete', `run ${id} cannot be sealed: ${state}`);
}

function notEvaluated(run: number, stratum: number, index: number): Broken {
  return new Broken(
    'not-evaluated',
    `point ${stratum}.${index} of run ${run} cannot be judged: it has no stored quantities`,
  );
}

/** Without its write-ahead log the store is one file that can be read anywhere, a read-only place included. */
function closeCleanly(path: string, db: Connection, lease: Lease): void {
  if (!db.open) return;
  try {
    onStore(path, () => db.transaction(() => lease.release()).immediate());
    onStore(path, () => db.pragma('journal_mode = DELETE'));
  } catch (error) {
    // Readers keep the log, a full disk keeps the lease until it is stale: nothing is lost in either case.
    if (!(error instanceof Broken) || !['store-busy', 'disk-full', 'store-io'].includes(error.code))
      throw error;
  } finally {
    db.close();
  }
}
