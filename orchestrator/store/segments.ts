import type { Connection } from './connect.js';
import { bytesOf, columnFrom, sha256 } from './bytes.js';
import { isByteColumn } from './layout.js';
import type { Kind } from './layout.js';
import type { Column, Piece } from './pieces.js';
import type { Span } from './writing.js';

/** Columns of points that never change once written, found by the hash of their content. */
export interface Segments {
  /** The id of the segment with this content, written now if there was none. */
  write(kind: Kind, piece: Piece): number;
  /** Undefined if the segment has no such column. Not to be written to. */
  readonly read: (segment: number, name: string) => Column | undefined;
  /** Stored SHA-256 of a column. */
  hash(segment: number, name: string): Buffer | undefined;
  /** Deletes a segment that no run refers to any more. */
  forget(segment: number): void;
}

export interface HashedColumn {
  readonly name: string;
  readonly hash: Buffer;
}

export function segmentsIn(db: Connection): Segments {
  const find = db.prepare<[Buffer], number>('SELECT id FROM segments WHERE hash = ?').pluck();
  const insert = db.prepare(
    'INSERT INTO segments (kind, stratum, first, count, hash) VALUES (?, ?, ?, ?, ?)',
  );
  const insertColumn = db.prepare(
    'INSERT INTO segment_columns (segment, name, hash, data) VALUES (?, ?, ?, ?)',
  );
  const read = db
    .prepare<[number, string], Buffer>('SELECT data FROM segment_columns WHERE segment = ? AND name = ?')
    .pluck();
  const hash = db
    .prepare<[number, string], Buffer>('SELECT hash FROM segment_columns WHERE segment = ? AND name = ?')
    .pluck();
  const forget = db.prepare(
    'DELETE FROM segments WHERE id = ? AND NOT EXISTS (SELECT 1 FROM extents WHERE segment = segments.id)',
  );
  return {
    write(kind, piece) {
      const columns = encode(piece);
      const content = segmentHash(kind, piece, columns);
      const known = find.get(content);
      if (known !== undefined) return known;
      const { lastInsertRowid } = insert.run(kind, piece.stratum, piece.first, piece.count, content);
      const id = Number(lastInsertRowid);
      for (const column of columns) insertColumn.run(id, column.name, column.hash, column.bytes);
      return id;
    },
    read: (segment, name) => {
      const bytes = read.get(segment, name);
      return bytes && columnFrom(bytes, isByteColumn(name));
    },
    hash: (segment, name) => hash.get(segment, name),
    forget: (segment) => void forget.run(segment),
  };
}

/** Content address: kind, place and, sorted by name, every column's name and hash. */
export function segmentHash(kind: Kind, span: Span, columns: readonly HashedColumn[]): Buffer {
  const parts = columns.flatMap((column) => [`${column.name}\n`, column.hash]);
  return sha256(`${kind} ${span.stratum} ${span.first} ${span.count}\n`, ...parts);
}

function encode(piece: Piece): (HashedColumn & { bytes: Buffer })[] {
  const names = [...piece.columns.keys()].sort();
  return names.map((name) => {
    const bytes = bytesOf(piece.columns.get(name)!);
    return { name, bytes, hash: sha256(bytes) };
  });
}
