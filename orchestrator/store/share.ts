import { VERDICTS } from '../../workers/contract.js';
import type { Connection } from './connect.js';
import type { Extent, Extents } from './extents.js';
import { EVALUATION, JUDGEMENT } from './layout.js';
import type { Kind } from './layout.js';
import type { Segments } from './segments.js';
import { intersectSpans, subtractSpans } from './spans.js';
import type { Span } from './writing.js';

export interface ShareParts {
  readonly db: Connection;
  readonly extents: Extents;
  readonly segments: Segments;
}

/** Makes a child run refer to segments of its parent: nothing is copied.
 *  @param judged with the judgement, and without unfinished points
 *  @returns verdicts of the points the child now has, where judged */
export function shareSpan(
  parts: ShareParts,
  from: number,
  to: number,
  span: Span,
  judged: boolean,
): Uint8Array[] {
  const left = judged ? unfinishedPoints(parts, from, span) : [];
  shareKind(parts, EVALUATION, from, to, span, left);
  if (!judged) {
    copyReasons(parts.db, from, to, span);
    return [];
  }
  const added = shareKind(parts, JUDGEMENT, from, to, span, left);
  return added.map((extent) => verdictsOf(parts.segments, extent));
}

function shareKind(
  { extents }: ShareParts,
  kind: Kind,
  from: number,
  to: number,
  span: Span,
  left: readonly Span[],
): Extent[] {
  const added: Extent[] = [];
  for (const extent of extents.overlapping(from, kind, span)) {
    const part = intersectSpans(extent, span)!;
    for (const piece of subtractSpans(part, [...extents.overlapping(to, kind, part), ...left])) {
      extents.add(to, kind, piece, extent.segment);
      added.push({ ...extent, ...piece, offset: extent.offset + piece.first - extent.first });
    }
  }
  return added;
}

function verdictsOf(segments: Segments, extent: Extent): Uint8Array {
  const verdicts = segments.read(extent.segment, 'verdict') as Uint8Array;
  return verdicts.subarray(extent.offset, extent.offset + extent.count);
}

function unfinishedPoints({ extents, segments }: ShareParts, run: number, span: Span): Span[] {
  const unfinished = VERDICTS.indexOf('unfinished');
  const points: Span[] = [];
  for (const extent of extents.overlapping(run, JUDGEMENT, span)) {
    verdictsOf(segments, extent).forEach((verdict, i) => {
      if (verdict === unfinished) points.push({ stratum: span.stratum, first: extent.first + i, count: 1 });
    });
  }
  return points;
}

function copyReasons(db: Connection, from: number, to: number, span: Span): void {
  db.prepare(
    `INSERT OR IGNORE INTO unfinished (run, stratum, point, reason)
     SELECT ?, stratum, point, reason FROM unfinished
     WHERE run = ? AND stratum = ? AND point >= ? AND point < ?`,
  ).run(to, from, span.stratum, span.first, span.first + span.count);
}
