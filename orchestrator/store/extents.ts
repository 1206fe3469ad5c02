import type { Connection } from './connect.js';
import { BLOCK } from './layout.js';
import type { Kind } from './layout.js';
import { endOf } from './spans.js';
import type { Span } from './writing.js';

/** Points of a run that lie in one segment, from point `offset` of the segment on. Never longer than BLOCK. */
export interface Extent extends Span {
  readonly segment: number;
  readonly offset: number;
  /** Points of the whole segment. */
  readonly length: number;
}

/** Which segments, or parts of them, a run is made of. */
export interface Extents {
  /** In order of points; those that share a point with the span. */
  overlapping(run: number, kind: Kind, span: Span): Extent[];
  /** The extent at a point, or else the next one. */
  from(run: number, kind: Kind, stratum: number, index: number): Extent | undefined;
  add(run: number, kind: Kind, span: Span, segment: number): void;
  remove(run: number, kind: Kind, span: Span): void;
  spans(run: number, kind: Kind): Span[];
}

const SELECT = `
  SELECT e.stratum, e.first, e.count, e.segment, e.first - s.first AS offset, s.count AS length
  FROM extents e JOIN segments s ON s.id = e.segment
  WHERE e.run = ? AND e.kind = ?`;

export function extentsIn(db: Connection): Extents {
  const overlapping = db.prepare<[number, Kind, number, number, number, number], Extent>(
    `${SELECT} AND e.stratum = ? AND e.first > ? AND e.first < ? AND e.first + e.count > ? ORDER BY e.first`,
  );
  const upTo = db.prepare<[number, Kind, number, number], Extent>(
    `${SELECT} AND e.stratum = ? AND e.first <= ? ORDER BY e.first DESC LIMIT 1`,
  );
  const after = db.prepare<[number, Kind, number, number], Extent>(
    `${SELECT} AND (e.stratum, e.first) > (?, ?) ORDER BY e.stratum, e.first LIMIT 1`,
  );
  const add = db.prepare(
    'INSERT INTO extents (run, kind, stratum, first, count, segment) VALUES (?, ?, ?, ?, ?, ?)',
  );
  const remove = db.prepare('DELETE FROM extents WHERE run = ? AND kind = ? AND stratum = ? AND first = ?');
  const spans = db.prepare<[number, Kind], Span>(
    'SELECT stratum, first, count FROM extents WHERE run = ? AND kind = ? ORDER BY stratum, first',
  );
  return {
    overlapping: (run, kind, span) =>
      overlapping.all(run, kind, span.stratum, span.first - BLOCK, endOf(span), span.first),
    from(run, kind, stratum, index) {
      const before = upTo.get(run, kind, stratum, index);
      return before !== undefined && endOf(before) > index ? before : after.get(run, kind, stratum, index);
    },
    add: (run, kind, span, segment) => void add.run(run, kind, span.stratum, span.first, span.count, segment),
    remove: (run, kind, span) => void remove.run(run, kind, span.stratum, span.first),
    spans: (run, kind) => spans.all(run, kind),
  };
}
