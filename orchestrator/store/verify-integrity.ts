import { Broken } from '../mistakes.js';
import { bytesOf, sha256 } from './bytes.js';
import type { Connection } from './connect.js';
import { digestOf } from './digest.js';
import type { DigestSource } from './digest.js';
import { segmentHash } from './segments.js';
import type { Kind } from './layout.js';
import type { Span } from './writing.js';

interface SegmentRow extends Span {
  readonly id: number;
  readonly kind: Kind;
  readonly hash: Buffer;
}

/** Reads every segment of a run and compares its bytes with the hashes taken when they were written, and the
 *  digest with what the hashes say now.
 *  @throws Broken 'store-corrupt' naming the first difference */
export function verifyRun(
  db: Connection,
  source: DigestSource,
  digest: string | null,
): { segments: number; bytes: number } {
  const segments = db.prepare<[number, number], SegmentRow>(
    `SELECT id, kind, stratum, first, count, hash FROM segments
     WHERE id IN (SELECT segment FROM extents WHERE run = ?) AND id > ? ORDER BY id LIMIT 1`,
  );
  const total = { segments: 0, bytes: 0 };
  for (let row = segments.get(source.run, 0); row; row = segments.get(source.run, row.id)) {
    total.segments++;
    total.bytes += verifySegment(db, source, row);
  }
  if (digest !== null && digestOf(source, () => undefined) !== digest) {
    throw corrupt(`run ${source.run} does not have the digest that was recorded when it ended`);
  }
  return total;
}

function verifySegment(db: Connection, source: DigestSource, row: SegmentRow): number {
  const stored = db
    .prepare<[number], { name: string; hash: Buffer }>(
      'SELECT name, hash FROM segment_columns WHERE segment = ? ORDER BY name',
    )
    .all(row.id);
  // SQLite orders text by bytes; the hash was taken in the order of UTF-16 code units.
  stored.sort((a, b) => (a.name < b.name ? -1 : 1));
  let bytes = 0;
  for (const column of stored) {
    const data = bytesOf(source.segments.read(row.id, column.name)!);
    if (!sha256(data).equals(column.hash)) {
      throw corrupt(
        `column ${column.name} of points ${row.first} to ${row.first + row.count - 1} of stratum ${row.stratum} has changed since it was written`,
      );
    }
    bytes += data.length;
  }
  if (!segmentHash(row.kind, row, stored).equals(row.hash)) {
    throw corrupt(`segment ${row.id} does not hold the columns it was written with`);
  }
  return bytes;
}

function corrupt(what: string): Broken {
  return new Broken('store-corrupt', `${what}. Nothing was changed: restore the store from a copy`);
}
