import { createHash } from 'node:crypto';
import type { Redis } from 'ioredis';
import type { Task } from '../../workers/contract.js';
import { canonicalJson } from '../provenance/canonical.js';

/** A task travels once, under the hash of its content; chunks name the hash. */
export interface TaskDocument {
  readonly hash: string;
  readonly text: string;
}

const KEPT_SECONDS = 24 * 3600;

export function taskDocument(task: Task): TaskDocument {
  const text = canonicalJson(task);
  return { hash: hashOf(text), text };
}

export async function publishTask(redis: Redis, document: TaskDocument): Promise<void> {
  await redis.set(keyOf(document.hash), document.text, 'EX', KEPT_SECONDS);
}

/** Undefined if the server does not have it or has something else under that name. */
export async function fetchTask(redis: Redis, hash: string): Promise<Task | undefined> {
  const text = await redis.get(keyOf(hash));
  return text !== null && hashOf(text) === hash ? (JSON.parse(text) as Task) : undefined;
}

function hashOf(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}

function keyOf(hash: string): string {
  return `trigpoint-task:${hash}`;
}
