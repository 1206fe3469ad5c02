import { createHash } from 'node:crypto';
import type { Column } from './pieces.js';

/** The bytes of a column as they are stored and hashed: float64 little-endian with one NaN
 *  (0x7ff8000000000000), or a byte a point. -0 and infinities keep their bits. */
export function bytesOf(column: Column): Buffer {
  const own = column.slice();
  if (own instanceof Float64Array) unifyNaN(own);
  return Buffer.from(own.buffer, own.byteOffset, own.byteLength);
}

export function columnFrom(bytes: Buffer, isByte: boolean): Column {
  if (isByte) return new Uint8Array(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  // A float64 view needs an aligned start, which a pooled buffer does not promise.
  const aligned =
    bytes.byteOffset % 8 === 0 ? bytes : Buffer.from(Uint8Array.prototype.slice.call(bytes).buffer);
  return new Float64Array(aligned.buffer, aligned.byteOffset, aligned.byteLength / 8);
}

export function sha256(...parts: readonly (string | Uint8Array)[]): Buffer {
  const hash = createHash('sha256');
  for (const part of parts) hash.update(part);
  return hash.digest();
}

function unifyNaN(values: Float64Array): void {
  let words: Uint32Array | undefined;
  for (let i = 0; i < values.length; i++) {
    if (values[i] === values[i]) continue;
    // Through integers: an engine may keep or change the bits of a NaN that it copies as a number.
    words ??= new Uint32Array(values.buffer, values.byteOffset, values.length * 2);
    words[2 * i] = 0;
    words[2 * i + 1] = 0x7ff80000;
  }
}
