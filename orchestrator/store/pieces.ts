import { endOf } from './spans.js';
import type { Span } from './writing.js';

/** float64, or a byte a point. */
export type Column = Float64Array | Uint8Array;

/** Consecutive points in memory; every column has `count` entries. */
export interface Piece extends Span {
  readonly columns: ReadonlyMap<string, Column>;
}

/** The part of a piece that lies in `span`, without copying. */
export function slicePiece(piece: Piece, span: Span): Piece {
  const from = span.first - piece.first;
  const columns = new Map<string, Column>();
  for (const [name, values] of piece.columns) columns.set(name, values.subarray(from, from + span.count));
  return { stratum: span.stratum, first: span.first, count: span.count, columns };
}

/** One piece of pieces that follow each other without a gap and have the same columns. */
export function joinPieces(pieces: readonly Piece[]): Piece {
  if (pieces.length === 1) return pieces[0];
  const count = pieces.reduce((sum, piece) => sum + piece.count, 0);
  const columns = new Map<string, Column>();
  for (const [name, sample] of pieces[0].columns) {
    const joined = sample instanceof Uint8Array ? new Uint8Array(count) : new Float64Array(count);
    for (const piece of pieces) joined.set(piece.columns.get(name)!, piece.first - pieces[0].first);
    columns.set(name, joined);
  }
  return { stratum: pieces[0].stratum, first: pieces[0].first, count, columns };
}

/** Joins what is adjacent and leaves gaps; the order is that of the points. */
export function joinAdjacent(pieces: readonly Piece[]): Piece[] {
  const sorted = [...pieces].sort((a, b) => a.stratum - b.stratum || a.first - b.first);
  const groups: Piece[][] = [];
  for (const piece of sorted) {
    const last = groups.at(-1)?.at(-1);
    if (last !== undefined && last.stratum === piece.stratum && endOf(last) === piece.first) {
      groups.at(-1)!.push(piece);
    } else {
      groups.push([piece]);
    }
  }
  return groups.map(joinPieces);
}
