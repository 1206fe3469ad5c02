import type { Redis } from 'ioredis';

/** Who is in the fleet: a worker renews a key that vanishes when the worker does. */

export interface Enrolled {
  readonly name: string;
  readonly threads: number;
}

const ROLL = 'trigpoint-workers';
const ALIVE_SECONDS = 10;
export const BEAT_MILLISECONDS = 2000;

export async function enroll(redis: Redis, worker: Enrolled): Promise<void> {
  await redis
    .multi()
    .sadd(ROLL, worker.name)
    .set(keyOf(worker.name), String(worker.threads), 'EX', ALIVE_SECONDS)
    .exec();
}

export async function leave(redis: Redis, name: string): Promise<void> {
  await redis.multi().srem(ROLL, name).del(keyOf(name)).exec();
}

/** Workers that gave a sign of life lately; strikes the others off the roll. */
export async function liveWorkers(redis: Redis): Promise<Enrolled[]> {
  const names = (await redis.smembers(ROLL)).sort();
  if (names.length === 0) return [];
  const threads = await redis.mget(names.map(keyOf));
  const gone = names.filter((_, i) => threads[i] === null);
  if (gone.length > 0) await redis.srem(ROLL, gone);
  return names.flatMap((name, i) => (threads[i] === null ? [] : [{ name, threads: Number(threads[i]) }]));
}

function keyOf(name: string): string {
  return `trigpoint-worker:${name}`;
}
