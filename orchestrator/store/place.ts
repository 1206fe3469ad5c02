import type { Extent, Extents } from './extents.js';
import { BLOCK, columnsOf } from './layout.js';
import type { Kind, Layout } from './layout.js';
import { joinAdjacent, joinPieces, slicePiece } from './pieces.js';
import type { Column, Piece } from './pieces.js';
import type { Segments } from './segments.js';
import { splitSpan, subtractSpans } from './spans.js';
import type { Span } from './writing.js';
import { Broken } from '../mistakes.js';

/** Where the points of one run and kind go. */
export interface Shelf {
  readonly run: number;
  readonly layout: Layout;
  readonly kind: Kind;
  readonly segments: Segments;
  readonly extents: Extents;
}

/** Stores the points that are not stored yet and returns them. A block whose last points arrive becomes one
 *  full segment; until then its points lie in small ones. */
export function place(shelf: Shelf, pieces: readonly Piece[]): Piece[] {
  const fresh = newPoints(shelf, pieces);
  const blocks = new Map<string, Piece[]>();
  for (const piece of fresh) {
    const key = `${piece.stratum} ${Math.floor(piece.first / BLOCK)}`;
    blocks.set(key, [...(blocks.get(key) ?? []), piece]);
  }
  for (const group of blocks.values()) placeInBlock(shelf, group);
  return fresh;
}

/** Makes one segment of every block that is complete but scattered. */
export function compactShelf(shelf: Shelf): void {
  const scattered = new Map<string, Span>();
  for (const span of shelf.extents.spans(shelf.run, shelf.kind)) {
    const block = blockAround(shelf.layout, span);
    if (span.count < block.count) scattered.set(`${block.stratum} ${block.first}`, block);
  }
  for (const block of scattered.values()) placeInBlock(shelf, [], block);
}

/** The block of the digest that a span lies in, cut at the end of the stratum. */
function blockAround(layout: Layout, span: Span): Span {
  const first = Math.floor(span.first / BLOCK) * BLOCK;
  return { stratum: span.stratum, first, count: Math.min(BLOCK, layout.strata[span.stratum] - first) };
}

function newPoints(shelf: Shelf, pieces: readonly Piece[]): Piece[] {
  const fresh: Piece[] = [];
  for (const piece of pieces) {
    const taken = shelf.extents.overlapping(shelf.run, shelf.kind, piece);
    for (const gap of subtractSpans(piece, [...taken, ...fresh])) {
      for (const part of splitSpan(gap, BLOCK)) fresh.push(slicePiece(piece, part));
    }
  }
  return fresh;
}

function placeInBlock(
  shelf: Shelf,
  fresh: readonly Piece[],
  block = blockAround(shelf.layout, fresh[0]),
): void {
  const { run, kind, extents, segments } = shelf;
  const stored = extents.overlapping(run, kind, block);
  const count = [...stored, ...fresh].reduce((sum, span) => sum + span.count, 0);
  if (count < block.count) {
    for (const piece of joinAdjacent(fresh)) extents.add(run, kind, piece, segments.write(kind, piece));
    return;
  }
  const old = stored.map((extent) => pieceOf(shelf, extent));
  const full = joinPieces([...old, ...fresh].sort((a, b) => a.first - b.first));
  const segment = segments.write(kind, full);
  for (const extent of stored) extents.remove(run, kind, extent);
  extents.add(run, kind, block, segment);
  for (const extent of stored) segments.forget(extent.segment);
}

export function pieceOf(shelf: Shelf, extent: Extent): Piece {
  const columns = new Map<string, Column>();
  for (const name of columnsOf(shelf.layout, shelf.kind)) {
    columns.set(name, storedColumn(shelf.segments, shelf.layout, extent, name));
  }
  return { stratum: extent.stratum, first: extent.first, count: extent.count, columns };
}

/** A column of an extent. An input that the run which wrote the segment did not vary is a constant of the plan.
 *  @throws Broken 'store-corrupt' where a column is missing or too short */
export function storedColumn(
  segments: Pick<Segments, 'read'>,
  layout: Layout,
  extent: Extent,
  name: string,
): Column {
  const whole = segments.read(extent.segment, name);
  if (whole === undefined && name in layout.fixed) {
    return new Float64Array(extent.count).fill(layout.fixed[name]);
  }
  if (whole === undefined || whole.length < extent.offset + extent.count) {
    throw new Broken(
      'store-corrupt',
      `segment ${extent.segment} of the store lacks points of column ${name}`,
    );
  }
  return whole.subarray(extent.offset, extent.offset + extent.count);
}
