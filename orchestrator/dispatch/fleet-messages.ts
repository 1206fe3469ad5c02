import { createHash } from 'node:crypto';
import type { PointsBlock, ResultBlock, Task } from '../../workers/contract.js';
import { LOSS_REASONS, type ChunkJob, type LossReason } from './dispatcher.js';
import { lengthOf, PARTS, wrongShape, type Part } from './result-shape.js';

/** What travels between a coordinator and the workers of its fleet. Numbers travel as little-endian bytes. */

export interface ChunkMessage {
  readonly scope: string;
  readonly id: string;
  /** Says what is to be computed, and comes back with the answer: an answer to anything else, left over from another
   *  coordinator, is not taken for it. */
  readonly key: string;
  /** Hash of the task document. */
  readonly task: string;
  /** What a worker must run to take the chunk. */
  readonly code: string;
  readonly count: number;
  /** Base64: a job of the queue is JSON. */
  readonly values: string;
}

/** What a worker says of a chunk, as a stream entry; `broken` is about the task, not the chunk. */
export type Answer = { readonly id: string; readonly key: string; readonly worker: string } & (
  | { readonly kind: 'done'; readonly milliseconds: number; readonly body: Buffer }
  | { readonly kind: 'lost'; readonly reason: LossReason; readonly detail: string }
  | { readonly kind: 'returned' | 'broken'; readonly detail: string }
);

export function chunkMessage(
  job: ChunkJob,
  common: Pick<ChunkMessage, 'scope' | 'task' | 'code'>,
): ChunkMessage {
  const count = job.points.count;
  const values = bytesOf(job.points.values).toString('base64');
  const key = createHash('sha256').update(`${common.task} ${common.code} ${count} ${values}`).digest('hex');
  return { ...common, id: job.id, key, count, values };
}

export function pointsOf(message: ChunkMessage): PointsBlock {
  const bytes = Buffer.from(message.values, 'base64');
  return { count: message.count, values: new Float64Array(copyOf(bytes)) };
}

/** The arrays of a result, one after the other. */
export function resultBytes(result: ResultBlock): Buffer {
  return Buffer.concat(PARTS.map((part) => bytesOf(result[part])));
}

/** @throws Error if the bytes are not those of a result of `count` points of this task */
export function resultOf(task: Task, count: number, bytes: Buffer): ResultBlock {
  const expected = PARTS.reduce((sum, part) => sum + lengthOf(part, task, count) * widthOf(part), 0);
  if (bytes.length !== expected) throw new Error(`expected ${expected} bytes, found ${bytes.length}`);
  const memory = copyOf(bytes);
  let at = 0;
  const arrays = PARTS.map((part) => {
    const length = lengthOf(part, task, count);
    const array =
      widthOf(part) === 8 ? new Float64Array(memory, at, length) : new Uint8Array(memory, at, length);
    at += array.byteLength;
    return [part, array] as const;
  });
  const result = { count, ...Object.fromEntries(arrays) } as unknown as ResultBlock;
  const wrong = wrongShape(task, count, result);
  if (wrong) throw new Error(wrong);
  return result;
}

export function answerFields(answer: Answer): (string | Buffer)[] {
  return Object.entries(answer).flatMap(([name, value]: [string, string | number | Buffer]) => [
    name,
    typeof value === 'number' ? String(value) : value,
  ]);
}

/** Undefined for an entry that is not one of ours. */
export function answerOf(fields: readonly Buffer[]): Answer | undefined {
  const found = new Map<string, Buffer>();
  for (let i = 0; i + 1 < fields.length; i += 2) found.set(fields[i].toString(), fields[i + 1]);
  const text = (name: string) => found.get(name)?.toString() ?? '';
  const about = { id: text('id'), key: text('key'), worker: text('worker') };
  const [kind, detail] = [text('kind'), text('detail')];
  const reason = LOSS_REASONS.find((r) => r === text('reason'));
  const body = found.get('body');
  if (kind === 'done' && body) return { ...about, kind, milliseconds: Number(text('milliseconds')), body };
  if (kind === 'lost' && reason) return { ...about, kind, reason, detail };
  if (kind === 'returned' || kind === 'broken') return { ...about, kind, detail };
  return undefined;
}

function widthOf(part: Part): 1 | 8 {
  return part === 'quantities' || part === 'margins' || part === 'logLikelihoods' ? 8 : 1;
}

function bytesOf(array: Float64Array | Uint8Array): Buffer {
  return Buffer.from(array.buffer, array.byteOffset, array.byteLength);
}

/** Bytes in memory of their own, aligned for any typed array. */
function copyOf(bytes: Buffer): ArrayBuffer {
  return new Uint8Array(bytes).buffer;
}
